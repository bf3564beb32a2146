import { createHash } from 'node:crypto'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { consistencyProof, inclusionProof, leafHash, MerkleError, rootOf, verifyConsistency, verifyInclusion } from '#shared/log/merkleTree'

const leavesOf = (count: number) => Array.from({ length: count }, (_, at) => leafHash(Uint8Array.of(at & 255, at >> 8)))
/** The root by another road: pair by pair from the bottom, an odd last one carried up (node:crypto, not our hash). */
function rootByLevels(leaves: Uint8Array[]): string {
  let level = leaves.map(leaf => Buffer.from(leaf))
  while (level.length > 1) {
    level = Array.from({ length: Math.ceil(level.length / 2) }, (_, at) => {
      const [left, right] = [level[2 * at]!, level[2 * at + 1]]
      return right ? createHash('sha256').update(Buffer.concat([Buffer.of(1), left, right])).digest() : left
    })
  }
  return level[0]!.toString('hex')
}

describe('the log\'s tree', () => {
  it('has the root that pairing level by level gives, at every size to 70', () => {
    for (let size = 1; size <= 70; size++) expect(Buffer.from(rootOf(leavesOf(size))).toString('hex')).toBe(rootByLevels(leavesOf(size)))
  })
  it('proves every leaf of every size to 34, and for no other place', () => {
    for (let size = 1; size <= 34; size++) {
      const leaves = leavesOf(size)
      const root = rootOf(leaves)
      for (let index = 0; index < size; index++) {
        const proof = inclusionProof(leaves, index)
        verifyInclusion({ leaf: leaves[index]!, index, size, proof, root })
        if (size > 1) expect(() => verifyInclusion({ leaf: leaves[index]!, index: (index + 1) % size, size, proof, root })).toThrow(MerkleError)
      }
    }
  })
  it('proves that every older size is continued, and refuses a history that was changed', () => {
    for (let newSize = 1; newSize <= 34; newSize++) {
      const leaves = leavesOf(newSize)
      for (let oldSize = 1; oldSize <= newSize; oldSize++) {
        const proof = consistencyProof(leaves, oldSize)
        const question = { oldSize, newSize, oldRoot: rootOf(leaves.slice(0, oldSize)), newRoot: rootOf(leaves), proof }
        verifyConsistency(question)
        const changed = [leafHash(Uint8Array.of(9, 9, 9)), ...leaves.slice(1)]
        expect(() => verifyConsistency({ ...question, oldRoot: rootOf(changed.slice(0, oldSize)) })).toThrow(MerkleError)
      }
    }
  })
  it('refuses a proof with any bit flipped', () => {
    fc.assert(fc.property(fc.integer({ min: 2, max: 60 }), fc.nat(), fc.nat(), fc.integer({ min: 0, max: 255 }), (size, i, p, bit) => {
      const leaves = leavesOf(size)
      const index = i % size
      const proof = inclusionProof(leaves, index).map(hash => hash.slice())
      proof[p % proof.length]![bit >> 3]! ^= 1 << (bit & 7)
      expect(() => verifyInclusion({ leaf: leaves[index]!, index, size, proof, root: rootOf(leaves) })).toThrow(MerkleError)
    }))
  })
  it('refuses questions that have no answer', () => {
    const leaves = leavesOf(3)
    expect(() => inclusionProof(leaves, 3)).toThrow(expect.objectContaining({ code: 'notInTree' }))
    expect(() => inclusionProof(leaves, 0.5)).toThrow(expect.objectContaining({ code: 'notASize' }))
    expect(() => consistencyProof(leaves, 0)).toThrow(expect.objectContaining({ code: 'notInTree' }))
    expect(() => consistencyProof(leaves, 4)).toThrow(expect.objectContaining({ code: 'notInTree' }))
    expect(() => rootOf([new Uint8Array(31)])).toThrow(expect.objectContaining({ code: 'hashLength' }))
  })
})
