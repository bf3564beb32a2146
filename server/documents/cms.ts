import { createHash } from 'node:crypto'
import * as asn1 from 'asn1js'

/** The parts of a seal that anybody may read out of it. */
export interface SealParts {
  /** Certificates in DER: the one that signed first, then its chain. */
  chain: Uint8Array[]
  /** SHA-256 over the signed byte ranges. */
  digest: Uint8Array
  /** ECDSA signature in DER. */
  signature: Uint8Array
  /** RFC 3161 time-stamp token in DER, where one was added later. */
  token: Uint8Array | null
}

const OID = {
  data: '1.2.840.113549.1.7.1', signedData: '1.2.840.113549.1.7.2',
  contentType: '1.2.840.113549.1.9.3', messageDigest: '1.2.840.113549.1.9.4', signingCertificateV2: '1.2.840.113549.1.9.16.2.47', timeStampToken: '1.2.840.113549.1.9.16.2.14',
  sha256: '2.16.840.1.101.3.4.2.1', ecdsaWithSha256: '1.2.840.10045.4.3.2',
} as const

const sequence = (...value: asn1.AsnType[]) => new asn1.Sequence({ value })
const set = (...value: asn1.AsnType[]) => new asn1.Set({ value })
const oid = (value: string) => new asn1.ObjectIdentifier({ value })
const octets = (bytes: Uint8Array) => new asn1.OctetString({ valueHex: buffer(bytes) })
const tagged = (tagNumber: number, value: asn1.AsnType[]) => new asn1.Constructed({ idBlock: { tagClass: 3, tagNumber }, value: value as never })
const algorithm = (id: string) => sequence(oid(id))
const attribute = (id: string, value: asn1.AsnType) => sequence(oid(id), set(value))
const buffer = (bytes: Uint8Array): ArrayBuffer => bytes.slice().buffer as ArrayBuffer
const der = (value: asn1.AsnType) => new Uint8Array((value as asn1.BaseBlock).toBER())

/** Reads one DER value that ends where the bytes end. */
export function fromDer(bytes: Uint8Array): asn1.AsnType {
  const { result, offset } = asn1.fromBER(buffer(bytes))
  if (offset !== bytes.length) throw new Error('not one DER value')
  return result
}

/** How long the DER value at the start of these bytes is, by its header; null when there is no plain header. */
export function derLength(bytes: Uint8Array): number | null {
  if (bytes[0] !== 0x30 || bytes[1] === undefined) return null
  if (bytes[1] < 0x80) return 2 + bytes[1]
  const count = bytes[1] - 0x80
  if (count < 1 || count > 3) return null
  let length = 0
  for (let at = 0; at < count; at++) length = length * 256 + (bytes[2 + at] ?? 0)
  return 2 + count + length
}

/**
 * The signed attributes (RFC 5652, 5.3) as they are signed: content type, digest, and the certificate that signs (RFC 5035). No signing time: PAdES
 * keeps it out of the signature (ETSI EN 319 142-1, 5.3), and a clock proves nothing.
 */
function attributesOf(digest: Uint8Array, certificate: Uint8Array): asn1.Sequence[] {
  const certificateHash = new Uint8Array(createHash('sha256').update(certificate).digest())
  // ESSCertIDv2 with its default algorithm, SHA-256, is the hash alone; in DER a default is left out.
  return [attribute(OID.contentType, oid(OID.data)), attribute(OID.messageDigest, octets(digest)), attribute(OID.signingCertificateV2, sequence(sequence(sequence(octets(certificateHash)))))]
    .sort((a, b) => Buffer.compare(der(a), der(b)))
}

/** The bytes that are signed: the attributes as a SET OF (RFC 5652, 5.4). */
export function bytesToSign(digest: Uint8Array, certificate: Uint8Array): Uint8Array {
  return der(set(...attributesOf(digest, certificate)))
}

/**
 * A seal as CMS SignedData in DER, detached. Checking builds it again from its parts and compares, so that nothing else can hide in it:
 * a change of what this writes is a second version beside it, never an edit.
 */
export function writeCms({ chain, digest, signature, token }: SealParts): Uint8Array {
  const certificates = chain.map(fromDer)
  const { issuer, serial } = issuerOf(certificates[0]!)
  return der(sequence(oid(OID.signedData), tagged(0, [sequence(
    new asn1.Integer({ value: 1 }),
    set(algorithm(OID.sha256)),
    sequence(oid(OID.data)),
    tagged(0, certificates),
    set(sequence(
      new asn1.Integer({ value: 1 }),
      sequence(issuer, serial),
      algorithm(OID.sha256),
      tagged(0, attributesOf(digest, chain[0]!)),
      algorithm(OID.ecdsaWithSha256),
      octets(signature),
      ...(token ? [tagged(1, [attribute(OID.timeStampToken, fromDer(token))])] : []),
    )),
  )])))
}

/** The parts of a seal, or null when these bytes are anything but a seal as {@link writeCms} writes it. */
export function readCms(bytes: Uint8Array): SealParts | null {
  try {
    const signedData = children(children(children(fromDer(bytes))[1]!)[0]!)
    const chain = children(signedData[3]!).map(der)
    const signer = children(children(signedData[4]!)[0]!)
    const digestAttribute = children(signer[3]!).map(children).find(([id]) => id instanceof asn1.ObjectIdentifier && id.valueBlock.toString() === OID.messageDigest)!
    const parts: SealParts = {
      chain,
      digest: valueOf(children(digestAttribute[1]!)[0]!),
      signature: valueOf(signer[5]!),
      token: signer[6] ? der(children(children(children(signer[6])[0]!)[1]!)[0]!) : null,
    }
    return Buffer.compare(writeCms(parts), bytes) === 0 ? parts : null
  }
  catch {
    // Whatever cannot be walked through as a seal of ours is none.
    return null
  }
}

function children(value: asn1.AsnType): asn1.AsnType[] {
  return (value as asn1.Constructed).valueBlock.value as asn1.AsnType[]
}

function valueOf(value: asn1.AsnType): Uint8Array {
  return new Uint8Array((value as asn1.OctetString).valueBlock.valueHexView)
}

/** Issuer and serial number of a certificate (RFC 5280, 4.1): they follow the version, which is tagged 0. */
function issuerOf(certificate: asn1.AsnType): { issuer: asn1.AsnType, serial: asn1.AsnType } {
  const fields = children(children(certificate)[0]!)
  return { serial: fields[1]!, issuer: fields[3]! }
}
