import { X509Certificate } from 'node:crypto'
import { uuidv7 } from 'uuidv7'
import { entrance } from '../../database/entrance'
import * as keys from '../../database/queries/signingKey'
import { forOrganisation, withSession } from '../../database/withSession'
import { makeOrganisationCertificate, unwrapKey, wrapKey } from '../../documents/certificate'
import { useSettings } from '../../settings'

/** A key that seals, opened, with its chain in DER: the seal's certificate first, then its root. */
export interface OpenKey { key: Uint8Array, chain: Uint8Array[] }

const pem = (der: Uint8Array) => `-----BEGIN CERTIFICATE-----\n${Buffer.from(der).toString('base64').replace(/(.{64})(?=.)/g, '$1\n')}\n-----END CERTIFICATE-----\n`
const der = (text: string) => new Uint8Array(new X509Certificate(text).raw)
const secret = () => useSettings().secret.toString('hex')

/** The organisation's key, made when it first seals. Two at once: the first one's stands. */
export async function organisationKey(organisationId: string): Promise<OpenKey> {
  const session = forOrganisation(organisationId)
  const read = () => withSession(session, keys.newestKey)
  let row = await read()
  if (!row) {
    const { name } = await withSession(session, keys.organisationOf)
    const made = await makeOrganisationCertificate({ organisation: name, from: new Date() })
    await withSession(session, tx => keys.insertFirstKey(tx, { id: uuidv7(), wrappedKey: wrapKey(made.seal.key, { secret: secret(), owner: organisationId }), certificate: pem(made.seal.certificate), root: pem(made.root.certificate) }))
    row = await read()
  }
  return { key: unwrapKey(row!.wrappedKey, { secret: secret(), owner: organisationId }), chain: [der(row!.certificate), der(row!.root)] }
}

/** The roots of every organisation's key, as the check page needs them. */
export const organisationRoot = (organisationId: string) => withSession(forOrganisation(organisationId), keys.newestKey).then(row => row?.root ?? null)

const WITNESS = 'installation'

/** The installation's witness key: signs heads of the log and clients' acceptances. Made once. */
export async function witnessKey(): Promise<OpenKey> {
  let { witness_key: key, witness_certificate: chain } = await entrance.installation()
  if (!key) {
    const made = await makeOrganisationCertificate({ organisation: 'Smoothside witness', from: new Date() })
    await entrance.setWitness(wrapKey(made.seal.key, { secret: secret(), owner: WITNESS }), pem(made.seal.certificate) + pem(made.root.certificate));
    ({ witness_key: key, witness_certificate: chain } = await entrance.installation())
  }
  const [seal, root] = chain!.split(/(?<=-----END CERTIFICATE-----\n)/)
  return { key: unwrapKey(key!, { secret: secret(), owner: WITNESS }), chain: [der(seal!), der(root!)] }
}
