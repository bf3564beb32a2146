import { sha256 } from '@noble/hashes/sha2.js'
import { concatBytes } from '@noble/hashes/utils.js'

/** A SHA-256 as 32 bytes. */
export type Hash = Uint8Array

export const MERKLE_FAULTS = ['hashLength', 'notASize', 'notInTree', 'wrongProof'] as const
export type MerkleFault = (typeof MERKLE_FAULTS)[number]

/** A refusal with its stable code. `wrongProof` is the only one that speaks of the proof and not of the question. */
export class MerkleError extends Error {
  override readonly name = 'MerkleError'
  constructor(readonly code: MerkleFault, sentence: string) {
    super(sentence)
  }
}

/** Hash of a leaf: SHA-256(00 || content) (RFC 9162, 2.1.1). */
export function leafHash(content: Uint8Array): Hash {
  return sha256(concatBytes(Uint8Array.of(0), content))
}

/** Hash of an inner node: SHA-256(01 || left || right) (RFC 9162, 2.1.1). Throws {@link MerkleError} unless both are 32 bytes. */
export function nodeHash(left: Hash, right: Hash): Hash {
  return sha256(concatBytes(Uint8Array.of(1), check(left), check(right)))
}

/** Root over leaf hashes in their order (RFC 9162, 2.1.1); of no leaves it is SHA-256 of nothing. */
export function rootOf(leaves: Hash[]): Hash {
  if (leaves.length === 0) return sha256(new Uint8Array())
  if (leaves.length === 1) return check(leaves[0]!)
  const split = splitOf(leaves.length)
  return nodeHash(rootOf(leaves.slice(0, split)), rootOf(leaves.slice(split)))
}

/** Inclusion proof of the leaf at `index` (from 0) in the tree over all of `leaves` (RFC 9162, 2.1.3.1), nearest sibling first. */
export function inclusionProof(leaves: Hash[], index: number): Hash[] {
  whole(index)
  if (index >= leaves.length) throw new MerkleError('notInTree', `The log holds ${leaves.length} leaves; there is no leaf ${index}.`)
  if (leaves.length === 1) return []
  const split = splitOf(leaves.length)
  const [left, right] = [leaves.slice(0, split), leaves.slice(split)]
  return index < split ? [...inclusionProof(left, index), rootOf(right)] : [...inclusionProof(right, index - split), rootOf(left)]
}

/** Proof that the tree over all of `leaves` only continues the one over its first `oldSize` (RFC 9162, 2.1.4.1). Empty when nothing was added. */
export function consistencyProof(leaves: Hash[], oldSize: number): Hash[] {
  whole(oldSize)
  if (oldSize === 0 || oldSize > leaves.length) throw new MerkleError('notInTree', `Nothing can be proven from size ${oldSize} to size ${leaves.length}; the older size is at least 1 and not past the newer.`)
  return subproof(leaves, oldSize, true)
}

function subproof(leaves: Hash[], oldSize: number, known: boolean): Hash[] {
  if (oldSize === leaves.length) return known ? [] : [rootOf(leaves)]
  const split = splitOf(leaves.length)
  const [left, right] = [leaves.slice(0, split), leaves.slice(split)]
  return oldSize <= split ? [...subproof(left, oldSize, known), rootOf(right)] : [...subproof(right, oldSize - split, false), rootOf(left)]
}

/** Checks an inclusion proof against a root (RFC 9162, 2.1.3.2); returns nothing, throws {@link MerkleError}. */
export function verifyInclusion({ leaf, index, size, proof, root }: { leaf: Hash, index: number, size: number, proof: Hash[], root: Hash }): void {
  whole(index)
  whole(size)
  ;[leaf, root, ...proof].forEach(check)
  if (index >= size) throw new MerkleError('notInTree', `A tree of ${size} leaves has no leaf ${index}.`)
  let [at, last, hash] = [index, size - 1, leaf]
  for (const sibling of proof) {
    if (last === 0) throw wrong()
    if (at % 2 === 1 || at === last) {
      hash = nodeHash(sibling, hash)
      while (at % 2 === 0 && at !== 0) [at, last] = [at / 2, Math.floor(last / 2)]
    }
    else hash = nodeHash(hash, sibling)
    ;[at, last] = [Math.floor(at / 2), Math.floor(last / 2)]
  }
  if (last !== 0 || !same(hash, root)) throw wrong()
}

/** Checks that the tree of `newSize` and `newRoot` only continues the older one (RFC 9162, 2.1.4.2); returns nothing, throws {@link MerkleError}. */
export function verifyConsistency({ oldSize, newSize, oldRoot, newRoot, proof }: { oldSize: number, newSize: number, oldRoot: Hash, newRoot: Hash, proof: Hash[] }): void {
  whole(oldSize)
  whole(newSize)
  ;[oldRoot, newRoot, ...proof].forEach(check)
  if (oldSize === 0 || oldSize > newSize) throw new MerkleError('notInTree', `Nothing can be proven from size ${oldSize} to size ${newSize}; the older size is at least 1 and not past the newer.`)
  if (oldSize === newSize) {
    if (proof.length > 0 || !same(oldRoot, newRoot)) throw wrong()
    return
  }
  // An older tree that is a whole subtree is its own first node, and the proof leaves it out.
  const path = isPowerOfTwo(oldSize) ? [oldRoot, ...proof] : proof
  let [at, last] = [oldSize - 1, newSize - 1]
  while (at % 2 === 1) [at, last] = [Math.floor(at / 2), Math.floor(last / 2)]
  const first = path[0]
  if (!first) throw wrong()
  let [older, newer] = [first, first]
  for (const node of path.slice(1)) {
    if (last === 0) throw wrong()
    if (at % 2 === 1 || at === last) {
      ;[older, newer] = [nodeHash(node, older), nodeHash(node, newer)]
      while (at % 2 === 0 && at !== 0) [at, last] = [at / 2, Math.floor(last / 2)]
    }
    else newer = nodeHash(newer, node)
    ;[at, last] = [Math.floor(at / 2), Math.floor(last / 2)]
  }
  if (last !== 0 || !same(older, oldRoot) || !same(newer, newRoot)) throw wrong()
}

/** The largest power of two that is smaller than `size`: where a tree of more than one leaf is split. */
function splitOf(size: number): number {
  let split = 1
  while (split * 2 < size) split *= 2
  return split
}

function check(hash: Hash): Hash {
  if (hash.length !== 32) throw new MerkleError('hashLength', `A SHA-256 has 32 bytes, this one has ${hash.length}; it was cut or is of another kind.`)
  return hash
}

function whole(size: number): void {
  if (!Number.isSafeInteger(size) || size < 0) throw new MerkleError('notASize', `${size} is no position or size of a log; give a whole number from 0.`)
}

function same(a: Hash, b: Hash): boolean {
  return a.every((byte, at) => byte === b[at])
}

function wrong(): MerkleError {
  return new MerkleError('wrongProof', 'The proof does not lead to this root: the log does not hold what was shown, or the proof was changed.')
}

// By halving, not by log2: floats have no place where digests are made.
function isPowerOfTwo(size: number): boolean {
  while (size % 2 === 0) size /= 2
  return size === 1
}
