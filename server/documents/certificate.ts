import { createCipheriv, createDecipheriv, hkdfSync, randomBytes, webcrypto } from 'node:crypto'
import type * as X509 from '@peculiar/x509'
import { DocumentError } from './documentError'

/** A key pair's private half in PKCS #8 and its certificate, both in DER. */
export interface CertifiedKey { key: Uint8Array, certificate: Uint8Array }
/** An organisation's own root, which signs nothing but the seal's certificate, and the seal that signs records. */
export interface OrganisationCertificate { root: CertifiedKey, seal: CertifiedKey }

/** Loaded when it is needed, after the polyfill that it wants first: a bundler drops a bare import of that, or puts it later. */
async function loadX509() {
  await import('reflect-metadata')
  return import('@peculiar/x509')
}

const CURVE = { name: 'ECDSA', namedCurve: 'P-256', hash: 'SHA-256' }

/**
 * Makes the root and the seal certificate of an organisation (or of the installation, as witness): EC P-256, long-lived, since a record must be checked
 * decades later. Each name stands in an RDN of its own. `from` is when they begin to hold.
 */
export async function makeOrganisationCertificate({ organisation, from, years = 40 }: { organisation: string, from: Date, years?: number }): Promise<OrganisationCertificate> {
  const x509 = await loadX509()
  const notAfter = new Date(from)
  notAfter.setUTCFullYear(from.getUTCFullYear() + years)
  const name = (role: string) => new x509.Name([{ O: [organisation.slice(0, 64)] }, { CN: [`${organisation.slice(0, 64 - role.length - 1)} ${role}`] }])
  const keys = async () => webcrypto.subtle.generateKey(CURVE, true, ['sign', 'verify'])
  const [rootKeys, sealKeys] = await Promise.all([keys(), keys()])
  const common = { notBefore: from, notAfter, signingAlgorithm: CURVE }
  const rootCertificate = await x509.X509CertificateGenerator.createSelfSigned({
    ...common, name: name('root').toString(), serialNumber: serialNumber(), keys: rootKeys,
    extensions: [
      new x509.BasicConstraintsExtension(true, 0, true),
      new x509.KeyUsagesExtension(x509.KeyUsageFlags.keyCertSign | x509.KeyUsageFlags.cRLSign, true),
      await x509.SubjectKeyIdentifierExtension.create(rootKeys.publicKey),
    ],
  }, webcrypto as Crypto)
  const sealCertificate = await x509.X509CertificateGenerator.create({
    ...common, subject: name('seal').toString(), issuer: rootCertificate.subject, serialNumber: serialNumber(), publicKey: sealKeys.publicKey, signingKey: rootKeys.privateKey,
    extensions: [
      new x509.BasicConstraintsExtension(false, undefined, true),
      new x509.KeyUsagesExtension(x509.KeyUsageFlags.digitalSignature | x509.KeyUsageFlags.nonRepudiation, true),
      await x509.SubjectKeyIdentifierExtension.create(sealKeys.publicKey),
      await x509.AuthorityKeyIdentifierExtension.create(rootKeys.publicKey),
    ],
  }, webcrypto as Crypto)
  const certified = async (pair: webcrypto.CryptoKeyPair, certificate: X509.X509Certificate): Promise<CertifiedKey> =>
    ({ key: new Uint8Array(await webcrypto.subtle.exportKey('pkcs8', pair.privateKey)), certificate: new Uint8Array(certificate.rawData) })
  return { root: await certified(rootKeys, rootCertificate), seal: await certified(sealKeys, sealCertificate) }
}

/** 16 random bytes as hex; the first bit is off so that it is positive, the second on so that it keeps its length (RFC 5280, 4.1.2.2). */
function serialNumber(): string {
  const bytes = randomBytes(16)
  bytes[0] = (bytes[0]! & 0x7F) | 0x40
  return bytes.toString('hex')
}

const WRAP = 'smoothside-key-1'

/**
 * Encrypts a private key for the store: AES-256-GCM under a key that HKDF-SHA-256 draws from the installation's secret. `owner` (the organisation's id) is
 * bound to it, so that a key moved to another organisation's row does not open.
 */
export function wrapKey(key: Uint8Array, { secret, owner }: { secret: string, owner: string }): string {
  const iv = randomBytes(12)
  const cipher = createCipheriv('aes-256-gcm', wrappingKey(secret), iv).setAAD(Buffer.from(owner, 'utf8'))
  const sealed = Buffer.concat([cipher.update(key), cipher.final()])
  return [WRAP, iv.toString('base64url'), cipher.getAuthTag().toString('base64url'), sealed.toString('base64url')].join('.')
}

/** Opens what {@link wrapKey} closed. Throws {@link DocumentError} `wrongSecret` for another secret or owner, `notAKey` for another text. */
export function unwrapKey(wrapped: string, { secret, owner }: { secret: string, owner: string }): Uint8Array {
  const [version, iv, tag, sealed] = wrapped.split('.')
  if (version !== WRAP || !iv || !tag || !sealed) throw new DocumentError('notAKey', 'This text holds no wrapped key; restore the signing certificate from a backup.')
  try {
    const decipher = createDecipheriv('aes-256-gcm', wrappingKey(secret), Buffer.from(iv, 'base64url'), { authTagLength: 16 }).setAAD(Buffer.from(owner, 'utf8')).setAuthTag(Buffer.from(tag, 'base64url'))
    return new Uint8Array(Buffer.concat([decipher.update(Buffer.from(sealed, 'base64url')), decipher.final()]))
  }
  catch (cause) {
    throw Object.assign(new DocumentError('wrongSecret', 'The signing key does not open with this secret; start with the SMOOTHSIDE_SECRET that it was made under.'), { cause })
  }
}

function wrappingKey(secret: string): Buffer {
  return Buffer.from(hkdfSync('sha256', secret, WRAP, 'aes-256-gcm', 32))
}
