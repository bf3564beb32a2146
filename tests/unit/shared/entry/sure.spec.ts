import { readFileSync } from 'node:fs'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import type { EntryKind } from '#shared/entry/entry'
import { ENTRY_KINDS, envelopeSchema, PAYLOADS } from '#shared/entry/entry'
import { sureOf, UNSURE } from '#shared/entry/sure'
import { canonicalJson } from '#shared/record/canonicalJson'

/** Written by another program (Python's json and hashlib). */
const golden = (JSON.parse(readFileSync(new URL('../../../fixtures/contracts/entry-v1.json', import.meta.url), 'utf8')) as { entries: { kind: EntryKind, envelope: string, payload: string }[] }).entries
const texts = golden.flatMap(one => [{ schema: envelopeSchema as z.ZodTypeAny, text: one.envelope }, { schema: PAYLOADS[one.kind] as z.ZodTypeAny, text: one.payload }])
const surely = new Map([envelopeSchema, ...Object.values(PAYLOADS)].map(schema => [schema as z.ZodTypeAny, sureOf(schema)]))

const parsed = (text: string): unknown => {
  try {
    return JSON.parse(text)
  }
  catch {
    return undefined
  }
}
const isSure = (schema: z.ZodTypeAny, text: string) => !UNSURE.test(text) && surely.get(schema)!(parsed(text), text, 0) === text.length
/** What the slow way asks: the canonical text of a value that the schema takes as it is. */
function isRight(schema: z.ZodTypeAny, text: string): boolean {
  const value = parsed(text)
  const read = schema.safeParse(value)
  return read.success && canonicalJson(value) === text && canonicalJson(read.data) === text
}

/** Every place in a value, as the keys that lead there. */
function places(value: unknown, here: string[] = []): string[][] {
  return typeof value !== 'object' || value === null ? [here] : [here, ...Object.entries(value).flatMap(([key, inner]) => places(inner, [...here, key]))]
}
function put(value: unknown, [key, ...rest]: string[], by: (old: unknown) => unknown): unknown {
  if (key === undefined) return by(value)
  const copy = (Array.isArray(value) ? [...value] : { ...value as object }) as Record<string, unknown>
  copy[key] = put(copy[key], rest, by)
  return copy
}

describe('a check that is sure', () => {
  it('is sure of every golden entry, but for an edit of the line with an element in it', () => {
    const unsure = texts.filter(({ schema, text }) => !isSure(schema, text))
    expect(unsure.every(one => one.schema === PAYLOADS.lineEdit || UNSURE.test(one.text))).toBe(true)
    const kinds = golden.filter(one => isSure(PAYLOADS[one.kind], one.payload)).map(one => one.kind)
    expect(ENTRY_KINDS.filter(kind => !kinds.includes(kind) && kind !== 'lineEdit')).toEqual([])
  })

  it('is never sure of a text that was changed by a hand and is not right', () => {
    const piece = fc.oneof(fc.constantFrom(' ', '"', ',', '{', '}', '[', ']', '0', '-', '.0', 'e0', '1e2', '-0', 'null', 'true', '\\n', '\\u0041', '\ud800', 'é', '😀', '\u0000', ',"a":1', '"a":1,', ',"salt":""'), fc.string({ maxLength: 3 }))
    let sure = 0
    fc.assert(fc.property(fc.constantFrom(...texts), fc.nat(), fc.nat(4), piece, fc.nat(), ({ schema, text }, at, gone, more, again) => {
      const from = at % (text.length + 1)
      const [start, end] = [text.slice(0, from), text.slice(from + gone)]
      // A piece of the text itself, put in once more: keys that stand twice.
      const own = text.slice(from, from + again % 60)
      for (const other of [start + more + end, start + own + end, start + own + text.slice(from), start + end]) {
        if (!isSure(schema, other)) continue
        sure++
        expect(isRight(schema, other), other).toBe(true)
      }
    }), { numRuns: 6000 })
    expect(sure).toBeGreaterThan(50)
  })

  it('is never sure of a value that the schema refuses or changes', () => {
    const other = fc.oneof(fc.constantFrom<unknown>(null, true, false, 0, 1, -1, 0.5, 501, 2 ** 53 - 1, '', ' a', 'a ', 'a', 'look', 'x'.repeat(2001), [], {}, 'FFFFFFFF-0000-7000-8000-000000000001', '2026-02-30T00:00:00Z', '2026-11-30T09:00:00-05:00', '2026-11-30T09:00:00-15:00'), fc.integer(), fc.string(), fc.jsonValue())
    let sure = 0
    fc.assert(fc.property(fc.constantFrom(...texts), fc.nat(), other, fc.constantFrom('value', 'key', 'gone', 'twice'), ({ schema, text }, at, value, how) => {
      const whole = parsed(text)
      const all = places(whole)
      const place = all[at % all.length]!
      const changed = put(whole, place, (old) => {
        if (how === 'twice' && Array.isArray(old)) return [...old, ...old, value]
        if (how === 'key' && typeof old === 'object' && old !== null && !Array.isArray(old)) return { ...old, [String(value)]: value }
        if (how === 'gone' && typeof old === 'object' && old !== null && !Array.isArray(old)) return Object.fromEntries(Object.entries(old).slice(1))
        return value
      })
      let canonical: string
      try {
        canonical = canonicalJson(changed)
      }
      catch {
        return
      }
      if (!isSure(schema, canonical)) return
      sure++
      expect(isRight(schema, canonical), canonical).toBe(true)
    }), { numRuns: 6000 })
    expect(sure).toBeGreaterThan(50)
  })

  it('is sure of nothing that it does not understand', () => {
    const text = '"a"'
    for (const schema of [z.string().email(), z.string().refine(() => true), z.any(), z.string().transform(one => one), z.string().regex(/a/g)]) expect(sureOf(schema)('a', text, 0)).toBe(-1)
    expect(sureOf(z.object({ a: z.string() }))({ a: 'a' }, '{"a":"a"}', 0)).toBe(-1)
    expect(sureOf(z.object({ a: z.string() }).strict())({ a: 'a' }, '{"a":"a"}', 0)).toBe(9)
    expect(sureOf(z.number().multipleOf(2))(2, '2', 0)).toBe(-1)
  })
})
