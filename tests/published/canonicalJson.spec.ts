import { readFileSync } from 'node:fs'
import canonicalize from 'canonicalize'
import { describe, expect, it } from 'vitest'
import { CanonicalJsonError, canonicalJson, parseStrictJson, sha256Hex } from '#shared/record/canonicalJson'

/** Source: cyberphone/json-canonicalization testdata, commit 19d51d7 (Apache-2.0), the vectors of RFC 8785. */
const read = (kind: string, file: string) => readFileSync(new URL(`../fixtures/published/rfc8785/${kind}/${file}`, import.meta.url), 'utf8')
const outhex = (name: string) => read('outhex', `${name}.txt`).replace(/\s+/g, '')
const utf8Hex = (text: string) => Buffer.from(text, 'utf8').toString('hex')

describe('canonical JSON against the vectors of RFC 8785', () => {
  it.each(['arrays', 'french', 'structures', 'unicode', 'weird'])('%s', (name) => {
    const text = canonicalJson(parseStrictJson(read('input', `${name}.json`)))
    expect(text).toBe(read('output', `${name}.json`))
    expect(utf8Hex(text)).toBe(outhex(name))
  })
  it('values: the package gives the published bytes; ours refuses its one whole number past 2^53 and agrees on the rest', () => {
    const input = read('input', 'values.json')
    expect(utf8Hex(canonicalize(JSON.parse(input))!)).toBe(outhex('values'))
    expect(() => parseStrictJson(input)).toThrow(expect.objectContaining({ code: 'numberTooLarge' }))
    expect(() => canonicalJson(JSON.parse(input))).toThrow(CanonicalJsonError)
    expect(canonicalJson(parseStrictJson(input.replace(' 1E30,', '')))).toBe(read('output', 'values.json').replace('1e+30,', ''))
  })
})

describe('SHA-256 against the examples of FIPS 180-4', () => {
  it.each([
    ['', 'e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855'],
    ['abc', 'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad'],
    ['abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq', '248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1'],
  ])('%j', (text, digest) => expect(sha256Hex(text)).toBe(digest))
})
