import { describe, expect, it } from 'vitest'
import { leafHash, MerkleError, nodeHash, rootOf, verifyConsistency, verifyInclusion } from '#shared/log/merkleTree'
import probes from '../fixtures/published/rfc9162/probes.json'

/**
 * Source: transparency-dev/merkle testdata, commit 417fb0c (Apache-2.0), for the tree of RFC 6962 and RFC 9162.
 * One probe that its library accepts has roots of 12 bytes; a SHA-256 has 32, so refusing it is right for us.
 */
const REFUSED_BY_US = new Set(['additional/sizes-are-equal-one-and-proof-is-empty'])
const bytes = (base64: string | null) => new Uint8Array(Buffer.from(base64 ?? '', 'base64'))
const hex = (hash: Uint8Array) => Buffer.from(hash).toString('hex')

function outcome(verify: () => void): 'taken' | 'refused' {
  try {
    verify()
    return 'taken'
  }
  catch (error) {
    if (!(error instanceof MerkleError)) throw error
    return 'refused'
  }
}

describe('the Merkle tree of RFC 9162 against published probes', () => {
  it.each(Object.entries(probes.inclusion))('inclusion %s', (_name, probe) => {
    const proof = (probe.proof ?? []).map(bytes)
    expect(outcome(() => verifyInclusion({ leaf: bytes(probe.leafHash), index: probe.leafIdx, size: probe.treeSize, proof, root: bytes(probe.root) })))
      .toBe(probe.wantErr ? 'refused' : 'taken')
  })
  it.each(Object.entries(probes.consistency))('consistency %s', (name, probe) => {
    const proof = (probe.proof ?? []).map(bytes)
    expect(outcome(() => verifyConsistency({ oldSize: probe.size1, newSize: probe.size2, oldRoot: bytes(probe.root1), newRoot: bytes(probe.root2), proof })))
      .toBe(probe.wantErr || REFUSED_BY_US.has(name) ? 'refused' : 'taken')
  })
  it('builds the roots of those probes from the eight leaves of RFC 6962 testing', () => {
    // Source: the leaves that the same repository's testonly package and the probes' leaf hashes stand for.
    const leaves = ['', '00', '10', '2021', '3031', '40414243', '5051525354555657', '606162636465666768696a6b6c6d6e6f'].map(content => leafHash(new Uint8Array(Buffer.from(content, 'hex'))))
    expect(hex(rootOf(leaves))).toBe(hex(bytes(probes.inclusion['1/happy-path'].root)))
    expect(hex(rootOf(leaves.slice(0, 3)))).toBe(hex(bytes(probes.inclusion['3/happy-path'].root)))
    expect(hex(rootOf(leaves.slice(0, 5)))).toBe(hex(bytes(probes.consistency['3/happy-path'].root2)))
    expect(hex(leaves[0]!)).toBe(hex(bytes(probes.inclusion['1/happy-path'].leafHash)))
  })
  it('hashes nothing to SHA-256 of the empty text (FIPS 180-4 example) and refuses hashes of other lengths', () => {
    expect(hex(rootOf([]))).toBe('e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855')
    expect(() => nodeHash(new Uint8Array(31), new Uint8Array(32))).toThrow(MerkleError)
  })
})
