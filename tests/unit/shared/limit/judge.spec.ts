import { describe, expect, it } from 'vitest'
import fc from 'fast-check'
import type { Bound, Limit } from '#shared/limit/limit'
import type { LimitRefusalCode } from '#shared/limit/limitRefused'
import { judge } from '#shared/limit/judge'
import { LIMIT_REFUSALS, LimitRefused } from '#shared/limit/limitRefused'
import { parseLength } from '#shared/measure/parseLength'

const basis = { kind: 'builtIn', name: 'made up for this test' } as const
const length = (text: string) => parseLength(text).amount
function limit(parts: Partial<Limit>): Limit {
  return { id: 'one', measurand: 'gap', datum: 'ground', unit: 'length', low: null, high: null, avoid: null, basis, ...parts }
}
const at = (imperial: string | null, metric: string | null = null, inclusive = true): Bound => ({
  ...(imperial ? { imperial: length(imperial) } : {}), ...(metric ? { metric: length(metric) } : {}), inclusive,
})
const read = (text: string) => {
  const { amount, system } = parseLength(text)
  return { amount, system }
}
const latch = limit({ id: 'latch', low: at('54 in', '1372 mm') })
const gap = limit({ id: 'gap', high: at('2 in', '51 mm') })
const heads = limit({ id: 'heads', avoid: { low: at('3 1/2 in', null, false), high: at('9 in', null, false) } })

describe('judge, simple acceptance', () => {
  it.each([
    [latch, '54 in', 'conforms', 0, 'low'], [latch, '54 1/2 in', 'conforms', length('1/2 in'), 'low'], [latch, '53 63/64 in', 'doesNotConform', -length('1/64 in'), 'low'],
    [gap, '2 in', 'conforms', 0, 'high'], [gap, '2 1/64 in', 'doesNotConform', -length('1/64 in'), 'high'],
    // Over 3 1/2 and under 9 in is to stay out of: the ends themselves conform.
    [heads, '3 1/2 in', 'conforms', 0, 'avoid'], [heads, '3 33/64 in', 'doesNotConform', -length('1/64 in'), 'avoid'], [heads, '9 in', 'conforms', 0, 'avoid'],
    [heads, '8.999 in', 'doesNotConform', -length('0.001 in'), 'avoid'], [heads, '3 in', 'conforms', length('1/2 in'), 'avoid'], [heads, '6 1/4 in', 'doesNotConform', -length('2 3/4 in'), 'avoid'],
    [limit({ low: at('34 in'), high: at('48 in') }), '47 in', 'conforms', length('1 in'), 'high'],
    [limit({ low: at('34 in'), high: at('48 in') }), '35 in', 'conforms', length('1 in'), 'low'],
    [limit({ high: at('4 in', null, false) }), '4 in', 'doesNotConform', 0, 'high'],
    [limit({ avoid: { low: at('3 in', null, true), high: at('9 in', null, true) } }), '9 in', 'doesNotConform', 0, 'avoid'],
  ] as const)('%# %s', (one, text, verdict, margin, end) => {
    expect(judge(read(text), one)).toMatchObject({ verdict, margin, end, limit: one.id, acceptance: 'simple', neverConforms: false })
  })

  it('does not fall to floating point', () => {
    expect(judge({ amount: length('0.1 in') + length('0.2 in'), system: 'imperial' }, limit({ high: at('0.3 in') }))).toMatchObject({ verdict: 'conforms', margin: 0 })
    expect(judge({ amount: length('2.125 in'), system: 'imperial' }, limit({ high: { imperial: length('2 in') + length('1/8 in'), inclusive: true } }))).toMatchObject({ verdict: 'conforms', margin: 0 })
  })

  it('lets the figure of the reading\'s system decide and says when the other would not', () => {
    expect(judge(read('54 in'), latch)).toMatchObject({ verdict: 'conforms', decidedBy: 'imperial', otherSystemDiffers: true })
    expect(judge(read('1372 mm'), latch)).toMatchObject({ verdict: 'conforms', margin: 0, decidedBy: 'metric', otherSystemDiffers: false })
    expect(judge(read('51 mm'), gap)).toMatchObject({ verdict: 'conforms', decidedBy: 'metric', otherSystemDiffers: true })
    expect(judge(read('50 mm'), gap)).toMatchObject({ verdict: 'conforms', decidedBy: 'metric', otherSystemDiffers: false })
    expect(judge(read('100 mm'), heads)).toMatchObject({ verdict: 'doesNotConform', decidedBy: 'imperial', otherSystemDiffers: false })
  })

  it('says so when there is nothing to hold it against', () => {
    expect(judge({ amount: 1 }, {})).toEqual({ verdict: 'noLimit', margin: null, limit: null, end: null, decidedBy: null, otherSystemDiffers: false, acceptance: 'simple', neverConforms: false })
    expect(judge({ amount: 1 }, limit({})).verdict).toBe('noLimit')
    expect(judge(read('1 in'), [limit({}), gap]).limit).toBe('gap')
  })

  it('lets the worst of several govern, by key', () => {
    const limits = { sphere: limit({ high: at('4 in', null, false) }), heads, other: limit({ low: at('20 in'), measurand: 'height' }) }
    expect(judge(read('3 3/4 in'), limits, { keys: ['sphere', 'heads'] })).toMatchObject({ verdict: 'doesNotConform', limit: 'heads' })
    expect(judge(read('10 in'), limits, { keys: ['sphere', 'heads'] })).toMatchObject({ verdict: 'doesNotConform', limit: 'sphere' })
    expect(judge(read('3 in'), limits, { keys: ['sphere', 'heads'] })).toMatchObject({ verdict: 'conforms', limit: 'heads', margin: length('1/2 in') })
    expect(judge(read('3 in'), limits, { keys: [] }).verdict).toBe('noLimit')
    // On an end that does not conform, beside one at the same distance that does.
    expect(judge(read('4 in'), { a: limit({ high: at('4 in') }), b: limit({ high: at('4 in', null, false) }) })).toMatchObject({ verdict: 'doesNotConform', limit: 'b', margin: 0 })
  })

  it('judges counts, times and angles by the plain figure', () => {
    expect(judge({ amount: 4 }, limit({ unit: 'count', low: { plain: 5, inclusive: true } }))).toMatchObject({ verdict: 'doesNotConform', margin: -1, decidedBy: 'plain' })
    expect(judge({ amount: 5000 }, limit({ unit: 'time', low: { plain: 5000, inclusive: true } }))).toMatchObject({ verdict: 'conforms', margin: 0 })
    expect(judge({ amount: 2001, system: 'metric' }, limit({ unit: 'angle', high: { plain: 2000, inclusive: true } }))).toMatchObject({ verdict: 'doesNotConform', margin: -1 })
  })

  it('converts a force exactly where its source prints the other system alone', () => {
    // PUBLISHED: 1 lbf = 4.4482216152605 N (NIST SP 811, B.8): 5 lbf is 22.2411080763025 N.
    const push = limit({ unit: 'force', high: { imperial: 5000, inclusive: true } })
    expect(judge({ amount: 22_241, system: 'metric' }, push)).toMatchObject({ verdict: 'conforms', margin: 0, decidedBy: 'imperial' })
    expect(judge({ amount: 22_242, system: 'metric' }, push)).toMatchObject({ verdict: 'doesNotConform', margin: -1 })
    const pull = limit({ unit: 'force', low: { metric: 22_241, inclusive: false } })
    expect(judge({ amount: 5000, system: 'imperial' }, pull)).toMatchObject({ verdict: 'conforms', margin: 1, decidedBy: 'metric' })
    expect(judge({ amount: 4999, system: 'imperial' }, pull)).toMatchObject({ verdict: 'doesNotConform' })
    const both = limit({ unit: 'force', high: { imperial: 5000, metric: 22_200, inclusive: true } })
    expect(judge({ amount: 5000, system: 'imperial' }, both)).toMatchObject({ verdict: 'conforms', margin: 0, otherSystemDiffers: true })
  })
})

describe('judge refuses', () => {
  const named = { one: gap }
  const cases: [LimitRefusalCode, () => unknown][] = [
    ['notWhole', () => judge({ amount: 0.5, system: 'imperial' }, gap)],
    ['notWhole', () => judge({ amount: Number.NaN, system: 'imperial' }, gap)],
    ['notWhole', () => judge({ amount: 1, system: 'imperial', uncertainty: 0.5 }, gap, { acceptance: 'guarded' })],
    ['tooLarge', () => judge({ amount: 2 ** 52 + 2, system: 'imperial' }, gap)],
    ['uncertainty', () => judge({ amount: 1, system: 'imperial', uncertainty: -1 }, gap, { acceptance: 'guarded' })],
    ['noSystem', () => judge({ amount: 1 }, gap)],
    ['noFigure', () => judge({ amount: 1, system: 'metric' }, limit({ low: { plain: 1, inclusive: true } }))],
    ['noFigure', () => judge({ amount: 1, system: 'metric' }, limit({ unit: 'count', low: { metric: 1, inclusive: true } }))],
    ['unknownLimit', () => judge({ amount: 1, system: 'metric' }, named, { keys: ['two'] })],
    ['unknownLimit', () => judge({ amount: 1, system: 'metric' }, named, { keys: ['constructor'] })],
    ['unitsDiffer', () => judge({ amount: 1, system: 'metric' }, [gap, limit({ unit: 'count' })])],
    ['measurandsDiffer', () => judge({ amount: 1, system: 'metric' }, [gap, limit({ measurand: 'height' })])],
    ['datumsDiffer', () => judge({ amount: 1, system: 'metric' }, [gap, limit({ datum: 'bottom-of-leaf' })])],
  ]
  it.each(cases)('with the code %s', (code, act) => {
    try {
      act()
    }
    catch (refused) {
      expect(refused).toBeInstanceOf(LimitRefused)
      expect(refused).toMatchObject({ code, message: LIMIT_REFUSALS[code] })
      return
    }
    expect.fail('was not refused')
  })
})

// OWN: brute force. Bounds, readings and uncertainties are even, so that the odd integers stand for the open stretches between them.
const even = fc.integer({ min: -12, max: 12 }).map(half => 2 * half)
const bound = (plain: number, inclusive: boolean): Bound => ({ plain, inclusive })
const counted = fc.oneof(
  fc.record({ low: even, span: fc.integer({ min: 0, max: 12 }), lowIn: fc.boolean(), highIn: fc.boolean(), form: fc.constantFrom('low' as const, 'high' as const, 'both' as const) })
    .map(({ low, span, lowIn, highIn, form }) => limit({ unit: 'angle', low: form === 'high' ? null : bound(low, lowIn), high: form === 'low' ? null : bound(low + 2 * span, highIn) })),
  fc.record({ low: even, span: fc.integer({ min: 1, max: 12 }), lowIn: fc.boolean(), highIn: fc.boolean() })
    .map(({ low, span, lowIn, highIn }) => limit({ unit: 'angle', avoid: { low: bound(low, lowIn), high: bound(low + 2 * span, highIn) } })),
)
function meets(value: number, { low, high, avoid }: Limit): boolean {
  if (low && (low.inclusive ? value < low.plain! : value <= low.plain!)) return false
  if (high && (high.inclusive ? value > high.plain! : value >= high.plain!)) return false
  if (!avoid) return true
  const inBand = (avoid.low.inclusive ? value >= avoid.low.plain! : value > avoid.low.plain!) && (avoid.high.inclusive ? value <= avoid.high.plain! : value < avoid.high.plain!)
  return !inBand
}
const everyOne = (from: number, to: number) => Array.from({ length: to - from + 1 }, (_, step) => from + step)
// A band without any value in it has no verdict to compare.
const canBeMet = (one: Limit) => everyOne(-100, 100).some(value => meets(value, one))

describe('judge against brute force', () => {
  it('simple: what the limits say of the value itself', () => {
    fc.assert(fc.property(fc.integer({ min: -30, max: 60 }), fc.array(counted, { minLength: 1, maxLength: 4 }), (amount, limits) => {
      expect(judge({ amount }, limits).verdict).toBe(limits.every(one => meets(amount, one)) ? 'conforms' : 'doesNotConform')
    }), { numRuns: 2000 })
  })

  it('guarded: whether all, some or none of the values within the uncertainty meet the limit', () => {
    fc.assert(fc.property(even, even.map(Math.abs), counted.filter(canBeMet), (amount, uncertainty, one) => {
      const met = everyOne(amount - uncertainty, amount + uncertainty).map(value => meets(value, one))
      expect(judge({ amount, uncertainty }, one, { acceptance: 'guarded' }).verdict).toBe(met.every(Boolean) ? 'conforms' : met.some(Boolean) ? 'withinError' : 'doesNotConform')
    }), { numRuns: 3000 })
  })

  it('guarded: never conforms exactly when no reading does', () => {
    fc.assert(fc.property(even, fc.integer({ min: 1, max: 12 }), fc.array(counted, { minLength: 1, maxLength: 3 }), (amount, uncertainty, limits) => {
      const guarded = (value: number) => judge({ amount: value, uncertainty }, limits, { acceptance: 'guarded' })
      const some = everyOne(-80, 90).some(value => guarded(value).verdict === 'conforms')
      expect(guarded(amount).neverConforms).toBe(!some)
    }), { numRuns: 500 })
  })

  it('margin: the distance to the nearest end, positive exactly inside', () => {
    fc.assert(fc.property(fc.integer({ min: -30, max: 60 }), counted, (amount, one) => {
      const { margin, verdict } = judge({ amount }, one)
      if (margin !== 0) expect(margin! > 0).toBe(verdict === 'conforms')
      const ends = [one.low, one.high, one.avoid?.low, one.avoid?.high].flatMap(end => end ? [Math.abs(amount - end.plain!)] : [])
      if (verdict === 'conforms') expect(margin).toBe(Math.min(...ends))
      else expect(ends).toContain(Math.abs(margin!))
    }), { numRuns: 1000 })
  })

  it('is symmetric: everything mirrored comes to the same', () => {
    const mirrored = (end: Bound | null | undefined) => end ? bound(0 - end.plain!, end.inclusive) : null
    fc.assert(fc.property(even, fc.nat(10), counted, (amount, uncertainty, one) => {
      const mirror = limit({ unit: 'angle', low: mirrored(one.high), high: mirrored(one.low), avoid: one.avoid && { low: mirrored(one.avoid.high)!, high: mirrored(one.avoid.low)! } })
      const [first, second] = [judge({ amount, uncertainty }, one, { acceptance: 'guarded' }), judge({ amount: 0 - amount, uncertainty }, mirror, { acceptance: 'guarded' })]
      expect([second.verdict, second.margin]).toEqual([first.verdict, first.margin])
    }))
  })

  it('is monotone: against a low end a larger reading never comes to less', () => {
    const order = ['doesNotConform', 'withinError', 'conforms']
    fc.assert(fc.property(even, fc.nat(20), fc.nat(10), even, fc.boolean(), (amount, more, uncertainty, low, inclusive) => {
      const one = limit({ unit: 'angle', low: bound(low, inclusive) })
      const rank = (value: number) => order.indexOf(judge({ amount: value, uncertainty }, one, { acceptance: 'guarded' }).verdict)
      expect(rank(amount + more)).toBeGreaterThanOrEqual(rank(amount))
    }))
  })

  it('does not depend on the order in which limits are given', () => {
    fc.assert(fc.property(even, fc.array(counted, { minLength: 2, maxLength: 4 }), (amount, limits) => {
      const keyed = limits.map((one, index) => [`k${index}`, one] as const)
      expect(judge({ amount }, Object.fromEntries([...keyed].reverse()))).toEqual(judge({ amount }, Object.fromEntries(keyed)))
    }))
  })
})
