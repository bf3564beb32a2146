import { createHash } from 'node:crypto'
import { readFileSync } from 'node:fs'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { ENTRY_KINDS } from '#shared/entry/entry'
import { readEntry } from '#shared/entry/readEntry'
import { makeEntry } from '#shared/entry/makeEntry'

interface Golden { kind: string, envelope: string, payload: string, digest: string }
/** Written by another program (Python's json and hashlib), so that texts and digests are held against something outside this code. */
const golden = (JSON.parse(readFileSync(new URL('../../../fixtures/contracts/entry-v1.json', import.meta.url), 'utf8')) as { entries: Golden[] }).entries
const sha256 = (text: string) => createHash('sha256').update(text).digest('hex')
const first = golden.find(one => one.kind === 'reading')!

/** The same entry with a changed envelope or payload, its payload digest put right, keys in order. */
function changed(envelope: Record<string, unknown>, payload: Record<string, unknown> = {}, of = first) {
  const ordered = (value: unknown): unknown => typeof value !== 'object' || value === null
    ? value
    : Array.isArray(value) ? value.map(ordered) : Object.fromEntries(Object.entries(value).sort(([a], [b]) => a < b ? -1 : 1).map(([key, inner]) => [key, ordered(inner)]))
  const payloadText = JSON.stringify(ordered({ ...JSON.parse(of.payload), ...payload }))
  return { envelope: JSON.stringify(ordered({ ...JSON.parse(of.envelope), payload: sha256(payloadText), ...envelope })), payload: payloadText }
}
const refusal = (wire: { envelope: string, payload: string }) => {
  const read = readEntry(wire)
  return read.state === 'refused' ? `${read.refusal.code} ${read.refusal.pointer}` : read.state
}

describe('reading an entry', () => {
  it('knows the golden entries of version 1, all kinds, with the digests that another program computed', () => {
    expect(new Set(golden.map(one => one.kind))).toEqual(new Set(ENTRY_KINDS))
    for (const one of golden) {
      const read = readEntry(one)
      expect(read, one.kind).toMatchObject({ state: 'known', entry: { digest: one.digest, number: null } })
    }
  })

  it('makes from a draft the very texts that another program wrote', () => {
    for (const one of golden) {
      const envelope = JSON.parse(one.envelope)
      const { salt, ...payload } = JSON.parse(one.payload)
      expect(makeEntry({ ...envelope, salt, payload }).wire).toEqual({ envelope: one.envelope, payload: one.payload })
    }
  })

  it('refuses what is not JSON, not canonical, or holds U+0000', () => {
    expect(refusal({ ...first, envelope: '{' })).toBe('notJson /envelope')
    expect(refusal({ ...first, envelope: first.envelope.replace('{', '{ ') })).toBe('notCanonical /envelope')
    expect(refusal({ ...first, envelope: first.envelope.replace('"answers":[],', '"answers":[],"answers":[],') })).toBe('notCanonical /envelope')
    expect(refusal({ ...first, envelope: first.envelope.replace('"rules":1', '"rules":1.0') })).toBe('notCanonical /envelope')
    expect(refusal({ ...first, envelope: `${'['.repeat(9000)}${']'.repeat(9000)}` })).toMatch(/^(notCanonical|envelope) \/envelope/)
    expect(refusal(changed({}, { note: 'a\u0000' }))).toBe('nulCharacter /payload')
    expect(refusal(changed({}, { note: 'a\\u0000' }))).toBe('known')
    expect(refusal(changed({}, { note: 'half \ud800' }))).toBe('notCanonical /payload')
  })

  it('refuses another payload than the one that the envelope names', () => {
    expect(refusal({ ...first, payload: golden[3]!.payload })).toBe('payloadDigest /envelope/payload')
    expect(refusal({ ...first, payload: '' })).toBe('payloadDigest /envelope/payload')
  })

  it('refuses what its kind does not know, with a pointer to the place', () => {
    expect(refusal(changed({ extra: 1 }))).toBe('envelope /envelope/extra')
    expect(refusal(changed({ madeAt: '2026-11-30T09:01:00' }))).toBe('envelope /envelope/madeAt')
    expect(refusal(changed({}, { extra: 1 }))).toBe('payload /payload/extra')
    expect(refusal(changed({}, { value: { method: 'count', amount: -1 } }))).toBe('payload /payload/value/amount')
    expect(refusal(changed({}, { value: { method: 'measure', amount: 2 ** 53, text: '1', system: 'metric' } }))).toBe('payload /payload/value/amount')
    expect(refusal(changed({}, { reason: 5 }))).toBe('payload /payload/reason')
  })

  it('refuses words with white space at their ends instead of changing what was signed over', () => {
    const note = golden.find(one => one.kind === 'note')!
    expect(refusal(changed({}, { words: ' loose ' }, note))).toBe('payload /payload/words')
  })

  it('refuses a subject that does not fit the kind', () => {
    const of = (kind: string) => golden.find(one => one.kind === kind)!
    expect(refusal(changed({ check: null }))).toBe('subject /envelope/check')
    expect(refusal(changed({ basis: null }))).toBe('subject /envelope/basis')
    expect(refusal(changed({ element: null, check: null, place: null }, {}, of('signature')))).toBe('known')
    expect(refusal(changed({ element: JSON.parse(first.envelope).element }, {}, of('signature')))).toBe('subject /envelope/element')
    expect(refusal(changed({ replaces: [JSON.parse(first.envelope).id] }))).toBe('subject /envelope/replaces')
    expect(refusal(changed({}, { value: { method: 'look', found: 'finding' } }))).toBe('subject /payload/value/finding')
    expect(refusal(changed({}, { value: { method: 'trial', tries: [{ from: 'open', good: 4, of: 3 }] } }))).toBe('subject /payload/value/tries')
    expect(refusal(changed({ answers: [] }, {}, of('settled')))).toBe('subject /payload/stands')
    expect(refusal(changed({ basis: 'a'.repeat(64) }, {}, of('walkOpened')))).toBe('subject /envelope/basis')
    expect(refusal(changed({ element: JSON.parse(of('note').envelope).element }, {}, of('lineEdit')))).toBe('subject /envelope/element')
  })

  it('keeps what a newer program wrote, as it came, when its text is canonical', () => {
    expect(readEntry(changed({ version: 2 }, { later: true }))).toMatchObject({ state: 'unknown', entry: { envelope: { kind: 'reading', version: 2 } } })
    expect(readEntry(changed({ kind: 'measuredByDrone' }))).toMatchObject({ state: 'unknown' })
    expect(refusal({ ...changed({ kind: 'toString' }) })).toBe('unknown')
    const odd = '{"amount":9007199254740992}'
    expect(refusal({ envelope: changed({ kind: 'later', payload: sha256(odd) }).envelope, payload: odd })).toBe('notCanonical /payload')
  })

  it('takes an erased payload from a store, never from a device', () => {
    const erased = { envelope: first.envelope, payload: '' }
    expect(readEntry(erased, { mayBeErased: true, number: 7 })).toMatchObject({ state: 'known', entry: { payload: null, digest: first.digest, number: 7 } })
    expect(refusal(erased)).toBe('payloadDigest /envelope/payload')
  })

  it('answers for any two texts, and never throws', () => {
    fc.assert(fc.property(fc.oneof(fc.string({ unit: 'binary' }), fc.json(), fc.constant(first.envelope)), fc.oneof(fc.string({ unit: 'binary' }), fc.json()), (envelope, payload) => {
      expect(readEntry({ envelope, payload }).state).toBe('refused')
    }))
  })

  it('notices any one changed character of either text', () => {
    fc.assert(fc.property(fc.constantFrom(...golden), fc.boolean(), fc.nat(), fc.constantFrom('0', '"', 'z', '}', ' '), (one, inPayload, at, character) => {
      const text = inPayload ? one.payload : one.envelope
      const place = at % text.length
      fc.pre(text[place] !== character)
      const other = text.slice(0, place) + character + text.slice(place + 1)
      const read = readEntry(inPayload ? { ...one, payload: other } : { ...one, envelope: other })
      // Another envelope is another entry, but never one with the same digest.
      expect(read.state === 'refused' || (!inPayload && read.entry.digest !== one.digest)).toBe(true)
    }), { numRuns: 500 })
  })
})

describe('making an entry', () => {
  const draft = () => {
    const envelope = JSON.parse(first.envelope)
    return { ...envelope, salt: '0'.repeat(32), payload: { value: { method: 'count' as const, amount: 1 }, photos: [] } }
  }

  it('writes what it names as a set, in order, once', () => {
    const [a, b] = ['019a0008-0000-7000-8000-0000000000ff', '019a0008-0000-7000-8000-0000000000fe'] as const
    expect(makeEntry({ ...draft(), answers: [a, b, a] }).entry.envelope.answers).toEqual([b, a])
  })

  it('leaves out what a form left undefined, and trims words', () => {
    expect(makeEntry({ ...draft(), payload: { ...draft().payload, note: undefined } }).entry.payload).not.toHaveProperty('note')
    expect(makeEntry({ ...draft(), kind: 'note', payload: { words: ' loose ', photos: [] } }).entry.payload).toMatchObject({ words: 'loose' })
  })

  it('throws with a code and a pointer for what no entry may hold', () => {
    expect(() => makeEntry({ ...draft(), check: null })).toThrow(expect.objectContaining({ name: 'EntryRefused', code: 'subject', pointer: '/envelope/check' }))
    expect(() => makeEntry({ ...draft(), salt: 'short' })).toThrow(expect.objectContaining({ code: 'payload', pointer: '/payload/salt' }))
    expect(() => makeEntry({ ...draft(), payload: { value: { method: 'count', amount: 1.5 }, photos: [] } })).toThrow(expect.objectContaining({ pointer: '/payload/value/amount' }))
  })
})
