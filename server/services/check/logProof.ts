import { createPublicKey, verify, X509Certificate } from 'node:crypto'
import type { LogProof } from '../../../shared/api/check'
import { inclusionProof, leafHash, MerkleError, rootOf, verifyInclusion } from '../../../shared/log/merkleTree'
import { entrance } from '../../database/entrance'

const hex = (bytes: Uint8Array) => Buffer.from(bytes).toString('hex')

function isSigned(text: string, signature: string, certificate: string | null): boolean {
  if (!certificate) return false
  const key = createPublicKey(new X509Certificate(certificate).publicKey.export({ type: 'spki', format: 'pem' }))
  return verify('sha256', Buffer.from(text, 'utf8'), key, Buffer.from(signature, 'base64'))
}

/** Proves that the leaf at a position stands in the log, up to the newest signed head; null where no head reaches that far. `open` gives the leaf's text as well. */
export async function logProof(position: number, open: boolean): Promise<LogProof | null> {
  const head = await entrance.newestLogHead()
  if (!head || Number(head.size) <= position) return null
  const size = Number(head.size)
  const hashes = (await entrance.logHashes(0, size)).map(one => new Uint8Array(Buffer.from(one, 'hex')))
  const [text, { witness_certificate: certificate }] = [await entrance.logLeafText(position), await entrance.installation()]
  const proof = inclusionProof(hashes, position)
  const leaf = hashes[position]!
  return {
    position, size, root: head.root, headAt: (JSON.parse(head.text) as { at: string }).at, headSigned: isSigned(head.text, head.signature, certificate),
    leaf: hex(leaf), leafText: open ? text : null, proof: proof.map(hex),
    // The head says a root of its own, and the text hashes to the leaf: a log that was rewritten under its signed head does not get through.
    verified: hex(rootOf(hashes)) === head.root && text !== null && hex(leafHash(Buffer.from(text, 'utf8'))) === hex(leaf) && leads(leaf, position, size, proof, head.root),
  }
}

function leads(leaf: Uint8Array, index: number, size: number, proof: Uint8Array[], root: string): boolean {
  try {
    verifyInclusion({ leaf, index, size, proof, root: new Uint8Array(Buffer.from(root, 'hex')) })
    return true
  }
  catch (error) {
    if (error instanceof MerkleError) return false
    throw error
  }
}
