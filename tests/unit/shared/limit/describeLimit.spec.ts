import { describe, expect, it } from 'vitest'
import type { Limit } from '#shared/limit/limit'
import { describeLimit } from '#shared/limit/describeLimit'

const limit = (parts: Partial<Limit>): Limit => ({ id: 'one', measurand: 'gap', datum: 'ground', unit: 'length', low: null, high: null, avoid: null, basis: { kind: 'builtIn', name: 'made up' }, ...parts })
const inch = 8_128_000

describe('describeLimit', () => {
  it.each([
    ['atLeast', { low: { imperial: 54 * inch, inclusive: true } }], ['over', { low: { imperial: 54 * inch, inclusive: false } }],
    ['atMost', { high: { imperial: 54 * inch, inclusive: true } }], ['under', { high: { imperial: 54 * inch, inclusive: false } }],
    ['exactly', { low: { imperial: 54 * inch, inclusive: true }, high: { imperial: 54 * inch, inclusive: true } }],
  ] as const)('%s', (kind, parts) => {
    expect(describeLimit(limit(parts), 'imperial')).toEqual({ unit: 'length', parts: [{ kind, figure: { amount: 54 * inch, in: 'imperial', other: null } }] })
  })

  it('between two ends, and outside of a band', () => {
    expect(describeLimit(limit({ low: { imperial: 34 * inch, inclusive: true }, high: { imperial: 48 * inch, inclusive: false } }), 'imperial').parts).toMatchObject([{ kind: 'between', low: { amount: 34 * inch }, high: { amount: 48 * inch }, lowIncluded: true, highIncluded: false }])
    expect(describeLimit(limit({ avoid: { low: { imperial: 3.5 * inch, inclusive: false }, high: { imperial: 9 * inch, inclusive: false } } }), 'metric').parts).toMatchObject([{ kind: 'stayOut', low: { amount: 3.5 * inch, in: 'imperial' }, lowIncluded: false, highIncluded: false }])
  })

  it('puts the asked system first and keeps the other\'s printed figure beside it', () => {
    const latch = limit({ low: { imperial: 54 * inch, metric: 1372 * 320_000, inclusive: true } })
    expect(describeLimit(latch, 'metric').parts).toEqual([{ kind: 'atLeast', figure: { amount: 1372 * 320_000, in: 'metric', other: { amount: 54 * inch, in: 'imperial' } } }])
  })

  it('says nothing where no figure is set, and needs no system for counts', () => {
    expect(describeLimit(limit({})).parts).toEqual([])
    expect(describeLimit(limit({ unit: 'count', low: { plain: 5, inclusive: true } })).parts).toEqual([{ kind: 'atLeast', figure: { amount: 5, in: 'plain', other: null } }])
    expect(() => describeLimit(limit({ low: { imperial: 1, inclusive: true } }))).toThrowError(expect.objectContaining({ code: 'noSystem' }))
  })
})
