import { describe, expect, it } from 'vitest'
import fc from 'fast-check'
import type { CombineOptions } from '#shared/limit/combineLimits'
import type { Bound, Limit } from '#shared/limit/limit'
import { combineLimits } from '#shared/limit/combineLimits'
import { judge } from '#shared/limit/judge'
import { parseLength } from '#shared/measure/parseLength'

const basis = { kind: 'builtIn', name: 'made up for this test' } as const
const length = (text: string) => parseLength(text).amount
const limit = (id: string, parts: Partial<Limit>): Limit => ({ id, measurand: 'latch-release-height', datum: 'ground', unit: 'length', low: null, high: null, avoid: null, basis, ...parts })
const at = (imperial: string | null, metric: string | null = null, inclusive = true): Bound => ({
  ...(imperial ? { imperial: length(imperial) } : {}), ...(metric ? { metric: length(metric) } : {}), inclusive,
})
const onGround = { datum: 'ground', system: 'imperial' } as const

describe('combineLimits', () => {
  it('gives the window and who binds each end', () => {
    const combined = combineLimits([limit('low', { low: at('34 in') }), limit('both', { low: at('30 in'), high: at('48 in') }), limit('too', { high: at('48 in') })], onGround)
    expect(combined).toMatchObject({ clashes: [], leftOut: [], sameNominal: [], unit: 'length', system: 'imperial', datum: 'ground', measurand: 'latch-release-height' })
    expect(combined.windows).toEqual([{ low: { amount: length('34 in'), inclusive: true, limits: ['low'] }, high: { amount: length('48 in'), inclusive: true, limits: ['both', 'too'] } }])
  })

  it('tells the clash of a pool latch with an accessible reach, with both sources and how far they are apart', () => {
    const combined = combineLimits({ pool: limit('p', { low: at('54 in', '1372 mm') }), reach: limit('r', { low: at('34 in', '864 mm'), high: at('48 in', '1219 mm') }) }, onGround)
    expect(combined.windows).toEqual([])
    expect(combined.clashes).toEqual([{ kind: 'apart', low: 'pool', high: 'reach', by: length('6 in') }])
  })

  it('lets the common figure decide where sources differ only by its rounding (54 in as 1370 and as 1372 mm)', () => {
    const limits = { pool: limit('p', { low: at('54 in', '1372 mm') }), reach: limit('r', { high: at('54 in', '1370 mm') }) }
    for (const system of ['imperial', 'metric'] as const) {
      const combined = combineLimits(limits, { datum: 'ground', system })
      expect(combined.clashes).toEqual([])
      expect(combined.windows).toEqual([{ low: { amount: length('54 in'), inclusive: true, limits: ['pool'] }, high: { amount: length('54 in'), inclusive: true, limits: ['reach'] } }])
      expect(combined.sameNominal).toEqual([{ common: { amount: length('54 in'), system: 'imperial' }, printed: [{ limit: 'pool', figure: length('1372 mm') }, { limit: 'reach', figure: length('1370 mm') }] }])
    }
    // The walk comes to the same: 1371.6 mm is 54 in.
    expect(judge({ amount: length('1371.6 mm'), system: 'metric' }, limits)).toMatchObject({ verdict: 'conforms', margin: 0, decidedBy: 'imperial', otherSystemDiffers: true })
    expect(judge({ amount: length('1372 mm'), system: 'metric' }, limits)).toMatchObject({ verdict: 'doesNotConform', limit: 'reach', margin: -length('0.4 mm') })
  })

  it('takes a source without the other figure into the common one, but never a difference that is no rounding', () => {
    const metric = { datum: 'ground', system: 'metric' } as const
    expect(combineLimits([limit('dual', { low: at('54 in', '1372 mm') }), limit('plain', { high: at('54 in') })], metric).clashes).toEqual([])
    expect(combineLimits([limit('a', { low: at('60 in', '1524 mm') }), limit('b', { high: at('60 in', '1500 mm') })], metric)).toMatchObject({
      sameNominal: [], clashes: [{ kind: 'apart', low: 'a', high: 'b', by: length('24 mm') }],
    })
    expect(combineLimits([limit('a', { low: at('54 in', '1372 mm') }), limit('b', { high: at('54 in', '1370 mm'), datum: 'sill' })], { ...metric, offsets: { sill: 0 } }).sameNominal).toEqual([])
  })

  it('brings limits to one datum: a latch above the bottom of the leaf, and the leaf above the ground', () => {
    const limits = [limit('pool', { low: at('54 in'), datum: 'bottom-of-leaf' }), limit('reach', { high: at('54 in') })]
    expect(combineLimits(limits, { ...onGround, offsets: { 'bottom-of-leaf': length('2 in') } }).clashes).toEqual([{ kind: 'apart', low: 'pool', high: 'reach', by: length('2 in') }])
    expect(combineLimits(limits, { datum: 'bottom-of-leaf', system: 'imperial', offsets: { ground: -length('2 in') } }).clashes).toEqual([{ kind: 'apart', low: 'pool', high: 'reach', by: length('2 in') }])
    expect(combineLimits(limits, onGround)).toMatchObject({ clashes: [], leftOut: [{ limit: 'pool', why: 'datumUnknown' }], windows: [{ low: null, high: { limits: ['reach'] } }] })
  })

  it('cuts bands to stay out of from the window: a 4 in sphere against the head-entrapment band', () => {
    const heads = limit('heads', { avoid: { low: at('3 1/2 in', null, false), high: at('9 in', null, false) } })
    const sphere = limit('sphere', { high: at('4 in', null, false) })
    expect(combineLimits([sphere, heads], onGround).windows).toEqual([{ low: null, high: { amount: length('3 1/2 in'), inclusive: true, limits: ['heads'] } }])
    expect(combineLimits([heads], onGround).windows).toHaveLength(2)
    const middle = limit('middle', { low: at('4 in'), high: at('8 in') })
    expect(combineLimits([middle, heads], onGround)).toMatchObject({ windows: [], clashes: [{ kind: 'band', limits: ['middle'], bands: ['heads'] }] })
  })

  it('counts in whole numbers: over 4 and under 5 leaves nothing', () => {
    const count = (id: string, low: number, high: number) => limit(id, { unit: 'count', low: { plain: low, inclusive: false }, high: { plain: high, inclusive: false } })
    expect(combineLimits(count('a', 4, 5), { datum: 'ground' }).clashes).toEqual([{ kind: 'apart', low: 'a', high: 'a', by: 1 }])
    expect(combineLimits(count('a', 4, 6), { datum: 'ground' }).windows).toEqual([{ low: { amount: 5, inclusive: true, limits: ['a'] }, high: { amount: 5, inclusive: true, limits: ['a'] } }])
  })

  it('leaves out a force that is printed in the other system alone, and says so', () => {
    const newtons = limit('n', { unit: 'force', high: { metric: 22_200, inclusive: true } })
    expect(combineLimits(newtons, onGround)).toMatchObject({ leftOut: [{ limit: 'n', why: 'otherSystemOnly' }], windows: [{ low: null, high: null }] })
  })

  it.each<[string, () => unknown]>([
    ['noLimits', () => combineLimits([], onGround)],
    ['noSystem', () => combineLimits(limit('a', { low: at('1 in') }), { datum: 'ground' })],
    ['unitsDiffer', () => combineLimits([limit('a', {}), limit('b', { unit: 'count' })], onGround)],
    ['measurandsDiffer', () => combineLimits([limit('a', {}), limit('b', { measurand: 'gap' })], onGround)],
    ['noFigure', () => combineLimits(limit('a', { low: { plain: 1, inclusive: true } }), onGround)],
    ['notWhole', () => combineLimits(limit('a', { datum: 'sill' }), { ...onGround, offsets: { sill: 0.5 } })],
    ['badBand', () => combineLimits(limit('a', { avoid: { low: at('9 in'), high: at('3 in') } }), onGround)],
    ['unknownLimit', () => combineLimits({}, { ...onGround, keys: ['a'] })],
  ])('refuses with the code %s', (code, act) => {
    expect(act).toThrowError(expect.objectContaining({ name: 'LimitRefused', code }))
  })
})

// OWN: exhaustive search. Figures and offsets are even; an odd value stands for the open stretch between two of them.
const even = fc.integer({ min: -8, max: 8 }).map(half => 2 * half)
const bound = fc.record({ plain: even, inclusive: fc.boolean() })
const datum = fc.constantFrom('ground', 'leaf')
const some = fc.oneof(
  fc.record({ low: fc.option(bound), high: fc.option(bound), datum }).map(parts => ({ ...parts, avoid: null })),
  fc.record({ low: even, span: fc.nat(6), lowIn: fc.boolean(), highIn: fc.boolean(), datum }).map(({ low, span, lowIn, highIn, datum }) =>
    ({ low: null, high: null, datum, avoid: { low: { plain: low, inclusive: lowIn }, high: { plain: low + 2 * span, inclusive: highIn } } })),
)
const several = fc.array(some, { minLength: 1, maxLength: 5 })
function meets(value: number, { low, high, avoid }: Pick<Limit, 'low' | 'high' | 'avoid'>): boolean {
  const above = (end: Bound) => value > end.plain! || (end.inclusive && value === end.plain)
  const below = (end: Bound) => value < end.plain! || (end.inclusive && value === end.plain)
  return (!low || above(low)) && (!high || below(high)) && !(avoid && above(avoid.low) && below(avoid.high))
}
const values = Array.from({ length: 101 }, (_, step) => step - 50)

describe.each(['angle', 'count'] as const)('combineLimits against exhaustive search (%s)', (unit) => {
  const options = (leaf: number): CombineOptions => ({ datum: 'ground', offsets: { leaf } })
  // For counts every whole number is a value; for the rest the odd ones stand for what lies between.
  const named = (parts: Pick<Limit, 'low' | 'high' | 'avoid' | 'datum'>[]) => parts.map((one, index) => limit(`k${index}`, { unit, ...one }))

  it('holds exactly the values that meet every limit, in windows that do not touch', () => {
    fc.assert(fc.property(several, even, (parts, leaf) => {
      const limits = named(parts)
      const { windows, clashes } = combineLimits(limits, options(leaf))
      const ends = windows.map(({ low, high }) => ({ low: low && { plain: low.amount, inclusive: low.inclusive }, high: high && { plain: high.amount, inclusive: high.inclusive }, avoid: null }))
      expect(values.map(value => ends.filter(window => meets(value, window)).length)).toEqual(values.map(value => limits.every(one => meets(one.datum === 'leaf' ? value - leaf : value, one)) ? 1 : 0))
      expect(clashes.length > 0).toBe(windows.length === 0)
      for (const [index, { low }] of windows.entries()) if (index > 0) expect(low!.amount).toBeGreaterThanOrEqual(windows[index - 1]!.high!.amount)
    }), { numRuns: 800 })
  })

  it('names for each end all limits that set it, and no other', () => {
    fc.assert(fc.property(several, even, (parts, leaf) => {
      const limits = named(parts)
      for (const window of combineLimits(limits, options(leaf)).windows) {
        for (const end of [window.low, window.high]) {
          if (!end) continue
          const [inside, beyond] = end === window.low ? [1, -1] : [-1, 1]
          const alone = (one: Limit, step: number) => meets(end.amount + step - (one.datum === 'leaf' ? leaf : 0), one)
          // It binds when it alone changes its answer exactly there: at an end that conforms from it outward, at an excluded end from its inside to it.
          const [inner, outer] = end.inclusive ? [0, beyond] : [inside, 0]
          const binders = limits.filter(one => alone(one, inner) && !alone(one, outer)).map(({ id }) => id)
          expect([...end.limits].sort()).toEqual(binders)
        }
      }
    }), { numRuns: 500 })
  })

  it('does not depend on the order of the limits', () => {
    fc.assert(fc.property(several, even, (parts, leaf) => {
      const limits = named(parts)
      const plain = (windows: ReturnType<typeof combineLimits>['windows']) => windows.map(({ low, high }) => [low, high].map(end => end && { ...end, limits: [...end.limits].sort() }))
      expect(plain(combineLimits([...limits].reverse(), options(leaf)).windows)).toEqual(plain(combineLimits(limits, options(leaf)).windows))
    }), { numRuns: 500 })
  })
})
