import { createHash, createPrivateKey, sign, webcrypto } from 'node:crypto'
import * as asn1 from 'asn1js'
import * as pkijs from 'pkijs'
import { beforeAll, describe, expect, it } from 'vitest'
import { makeOrganisationCertificate, type OrganisationCertificate } from '#server/documents/certificate'
import { bytesToSign, derLength, readCms, writeCms } from '#server/documents/cms'

/**
 * Our seal is written and read by our own few lines; here it is held against another implementation (pkijs 4.0.0) and against what is printed in
 * RFC 5652 (CMS: section 5, and 11.1, 11.2 for the attributes), RFC 5035 (section 3, signing certificate v2), RFC 5754 (section 3.3, ECDSA with SHA-256)
 * and ETSI EN 319 142-1 (no signing time in the signature).
 */
const CONTENT = new TextEncoder().encode('the smooth side faces the people')
const digest = new Uint8Array(createHash('sha256').update(CONTENT).digest())
let ours: OrganisationCertificate
let cms: Uint8Array
let signature: Uint8Array

const exact = (bytes: Uint8Array) => bytes.slice().buffer as ArrayBuffer
const parsed = () => new pkijs.SignedData({ schema: new pkijs.ContentInfo({ schema: asn1.fromBER(exact(cms)).result }).content })

beforeAll(async () => {
  pkijs.setEngine('node', new pkijs.CryptoEngine({ name: 'node', crypto: webcrypto as unknown as Crypto }))
  ours = await makeOrganisationCertificate({ organisation: 'Tarnbeck Fence & Gate', from: new Date('2026-01-01T00:00:00Z') })
  const key = createPrivateKey({ key: Buffer.from(ours.seal.key), format: 'der', type: 'pkcs8' })
  signature = new Uint8Array(sign('sha256', bytesToSign(digest, ours.seal.certificate), { key, dsaEncoding: 'der' }))
  cms = writeCms({ chain: [ours.seal.certificate, ours.root.certificate], digest, signature, token: null })
})

describe('a seal as CMS', () => {
  it('verifies with pkijs over the detached content, up to the root, and not over other content', async () => {
    const root = pkijs.Certificate.fromBER(exact(ours.root.certificate))
    expect(await parsed().verify({ signer: 0, data: exact(CONTENT), trustedCerts: [root], checkChain: true })).toBe(true)
    expect(await parsed().verify({ signer: 0, data: exact(CONTENT.slice(1)), trustedCerts: [root] }).catch(() => false)).toBe(false)
  })
  it('has the parts and object identifiers that the standards print', () => {
    const signed = parsed()
    expect(signed.version).toBe(1)
    expect(signed.encapContentInfo.eContentType).toBe('1.2.840.113549.1.7.1')
    expect(signed.encapContentInfo.eContent).toBeUndefined()
    expect(signed.digestAlgorithms.map(one => one.algorithmId)).toEqual(['2.16.840.1.101.3.4.2.1'])
    expect(signed.signerInfos).toHaveLength(1)
    const [signer] = signed.signerInfos
    expect(signer!.signatureAlgorithm.algorithmId).toBe('1.2.840.10045.4.3.2')
    const types = signer!.signedAttrs!.attributes.map(attribute => attribute.type)
    expect(types.sort()).toEqual(['1.2.840.113549.1.9.16.2.47', '1.2.840.113549.1.9.3', '1.2.840.113549.1.9.4'])
    expect(types).not.toContain('1.2.840.113549.1.9.5')
    const [essence] = signer!.signedAttrs!.attributes.filter(attribute => attribute.type === '1.2.840.113549.1.9.16.2.47')
    const hash = Buffer.from(createHash('sha256').update(ours.seal.certificate).digest()).toString('hex')
    // SigningCertificateV2 { certs { ESSCertIDv2 { certHash } } }: SHA-256 is the default algorithm and is left out in DER (RFC 5035, 3).
    expect(Buffer.from((essence!.values[0] as asn1.Sequence).toBER()).toString('hex')).toBe(`302630243022${'0420'}${hash}`)
  })
  it('is DER: its set of attributes stands in order, and it ends where its header says', () => {
    expect(derLength(cms)).toBe(cms.length)
    const encoded = parsed().signerInfos[0]!.signedAttrs!.attributes.map(attribute => Buffer.from(attribute.toSchema().toBER()))
    expect([...encoded].sort(Buffer.compare)).toEqual(encoded)
  })
  it('reads back to its parts, and is not read when anything in it differs', () => {
    expect(readCms(cms)).toEqual({ chain: [ours.seal.certificate, ours.root.certificate], digest, signature, token: null })
    expect(readCms(cms.slice(0, -1))).toBeNull()
    expect(readCms(Uint8Array.of(...cms, 0))).toBeNull()
    expect(readCms(new Uint8Array())).toBeNull()
  })
  it('keeps a time stamp beside the signature without touching what is signed', () => {
    const token = new Uint8Array(new asn1.Sequence({ value: [new asn1.Integer({ value: 7 })] }).toBER())
    const stamped = writeCms({ chain: [ours.seal.certificate, ours.root.certificate], digest, signature, token })
    expect(readCms(stamped)).toMatchObject({ digest, signature, token })
    const [signer] = new pkijs.SignedData({ schema: new pkijs.ContentInfo({ schema: asn1.fromBER(exact(stamped)).result }).content }).signerInfos
    expect(signer!.unsignedAttrs!.attributes.map(attribute => attribute.type)).toEqual(['1.2.840.113549.1.9.16.2.14'])
  })
})
