import { createHash, createPrivateKey, sign } from 'node:crypto'
import { bytesToSign, writeCms } from './cms'
import { DocumentError } from './documentError'
import { OPEN_RANGE, SEAL_BYTES } from './sealPlace'

export interface SignedPdf {
  file: Uint8Array
  /** SHA-256 over the signed byte range, in hex: with the document's own digest the identity of a record. It never moves. */
  rangeDigest: string
}

/**
 * Seals a document that has its place open (leaveSealPlace): fills in the byte range and signs it. `key` is PKCS #8 in DER; `chain` has the seal's
 * certificate first, then its root, in DER. Room is left behind the signature for a time stamp. The bytes given are the ones that are sealed: records
 * with photos are large, and the open document is of no more use. Throws {@link DocumentError}.
 */
export function signPdf(bytes: Uint8Array, key: Uint8Array, chain: Uint8Array[]): SignedPdf {
  const file = Buffer.from(bytes.buffer, bytes.byteOffset, bytes.length)
  const at = file.lastIndexOf(OPEN_RANGE, undefined, 'latin1')
  const gap = file.indexOf('<', file.indexOf('/Contents', at))
  if (at === -1 || gap === -1) throw new DocumentError('noPlaceForSeal', 'The document has no open place for a seal; build it again before it is signed.')
  const resume = gap + SEAL_BYTES * 2 + 2
  const figures = [gap, resume, file.length - resume].map(figure => String(figure).padStart(10, '0'))
  file.write(`/ByteRange [0 ${figures.join(' ')}]`, at, 'latin1')

  const digest = createHash('sha256').update(file.subarray(0, gap)).update(file.subarray(resume)).digest()
  const signature = sign('sha256', bytesToSign(digest, chain[0]!), { key: createPrivateKey({ key: Buffer.from(key), format: 'der', type: 'pkcs8' }), dsaEncoding: 'der' })
  const cms = writeCms({ chain, digest, signature, token: null })
  if (cms.length > SEAL_BYTES) throw new DocumentError('sealTooLong', `The seal takes ${cms.length} bytes and ${SEAL_BYTES} are kept for it; use a certificate with shorter names.`)
  file.write(Buffer.from(cms).toString('hex').padEnd(SEAL_BYTES * 2, '0'), gap + 1, 'latin1')
  return { file: bytes, rangeDigest: digest.toString('hex') }
}
