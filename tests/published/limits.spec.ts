import { describe, expect, it } from 'vitest'
import { readBuiltIn, readPublishedFacts } from '#server/services/checklist/readBuiltIn'
import type { Bound, Limit } from '#shared/limit/limit'

/** templates/facts/published-limits.json: what documents say, in our own words, each with document, edition and section. */
const facts = new Map(readPublishedFacts().map(fact => [fact.id, fact]))
const checks = [...new Map(readBuiltIn().flatMap(list => list.checks).map(check => [check.id, check])).values()]
const limits = checks.flatMap(check => check.limits.map(limit => ({ check, limit, fact: facts.get(limit.basis.fact!)! })))

/** Back to the figure as printed, by another way than the code takes: plain division by the integer unit (OWN calculation). */
const printed = (bound: Bound | null) => bound && {
  inches: bound.imperial === undefined ? null : bound.imperial / 8_128_000,
  millimetres: bound.metric === undefined ? null : bound.metric / 320_000,
  plain: bound.plain === undefined ? null : bound.plain,
}
const endsOf = (limit: Limit) => [limit.low, limit.high, limit.avoid?.low ?? null, limit.avoid?.high ?? null].filter(bound => bound !== null)

describe('each built-in limit', () => {
  it('stands in the published statements, which are 215', () => {
    expect(facts.size).toBe(215)
    expect(limits.length).toBeGreaterThan(40)
    expect(limits.filter(({ fact }) => fact === undefined).map(({ limit }) => limit.id)).toEqual([])
  })
  it.each(limits.map(one => [`${one.fact.id} in ${one.check.id}: ${one.fact.source}, ${one.fact.edition}, ${one.fact.section}`, one] as const))('%s', (_, { limit, fact }) => {
    expect(fact.basis).not.toBe('from memory')
    expect(limit.basis).toEqual({ kind: 'builtIn', name: fact.source, citation: fact.section, edition: fact.edition, read: fact.basis, fact: fact.id })

    const list = (figure: number | number[] | null) => figure === null ? [] : [figure].flat()
    const expectedInches = list(fact.inches)
    const expectedMillimetres = fact.millimetres_basis === 'from memory' ? [] : list(fact.millimetres)
    const ends = endsOf(limit).map(printed)
    if (limit.unit === 'length') {
      expect(ends.map(end => end!.inches).filter(figure => figure !== null)).toEqual(expectedInches)
      // A blank is left blank: 48 in is not made into 1219 mm
      expect(ends.map(end => end!.millimetres).filter(figure => figure !== null)).toEqual(expectedMillimetres)
    }
    else {
      const scale = limit.unit === 'count' ? 1 : 1000
      expect(ends.map(end => end!.plain)).toEqual([Number(fact.value) * scale])
    }
    const shape = (bound: Bound | null, name: string) => bound ? [`${name}${bound.inclusive ? '=' : ''}`] : []
    const said = [...shape(limit.low, '>'), ...shape(limit.high, '<'), ...shape(limit.avoid?.low ?? null, 'out from '), ...shape(limit.avoid?.high ?? null, 'out to ')]
    const wanted: Record<string, string[]> = { '>=': ['>='], '>': ['>'], '<=': ['<='], '<': ['<'], 'between_inclusive': ['>=', '<='], 'fail_between_exclusive': ['out from ', 'out to '] }
    expect(said).toEqual(wanted[fact.comparator])
  })
})

describe('figures typed here from the documents', () => {
  // Hand-worked: 1 in = 8,128,000 and 1 mm = 320,000 units
  it.each([
    ['latch-height-leaf', 'A25', 'IBC 2006, 3109.4.1.7', { low: { imperial: 438_912_000, metric: 439_040_000, inclusive: true } }],
    ['latch-height-ground', 'C03', '2010 ADA Standards, 404.2.7', { low: { imperial: 276_352_000, metric: 276_800_000, inclusive: true }, high: { imperial: 390_144_000, metric: 390_400_000, inclusive: true } }],
    ['latch-height-ground', 'C04', '2010 ADA Standards, 404.2.7 exc. 2', { high: { imperial: 438_912_000, metric: 438_400_000, inclusive: true } }],
    ['gap-below', 'A07', 'CPSC Pub. 362, under, soft ground', { high: { imperial: 16_256_000, inclusive: true } }],
    ['gap-below', 'A06', 'CPSC Pub. 362, under, solid ground', { high: { imperial: 32_512_000, inclusive: true } }],
    ['pool-sphere', 'A08', 'CPSC Pub. 362, through: a 4 in sphere must not pass', { high: { imperial: 32_512_000, inclusive: false } }],
    ['head-opening', 'B01', 'CPSC Pub. 325, 3.3.1: over 3.5 and under 9 in', { avoid: { low: { imperial: 28_448_000, inclusive: false }, high: { imperial: 73_152_000, inclusive: false } } }],
    ['fence-height', 'A05', 'CPSC Pub. 362, height', { low: { imperial: 390_144_000, inclusive: true } }],
    ['clear-width', 'C01', '2010 ADA Standards, 404.2.3 (its mm are from memory and left out)', { low: { imperial: 260_096_000, inclusive: true } }],
    ['closing-time-closer', 'C05', '2010 ADA Standards, 404.2.8.1', { low: { plain: 5000, inclusive: true } }],
    ['closing-time-spring', 'C06', '2010 ADA Standards, 404.2.8.2', { low: { plain: 1500, inclusive: true } }],
    ['threshold-height', 'C14', '2010 ADA Standards, 404.2.5', { high: { imperial: 4_064_000, metric: 4_160_000, inclusive: true } }],
    ['slide-openings', 'E07', 'ASTM F2200 per operator manual', { high: { imperial: 18_288_000, metric: 18_240_000, inclusive: false } }],
    ['post-spacing', 'F01', 'ASTM F567-07, 4.1', { high: { imperial: 975_360_000, metric: 976_000_000, inclusive: true } }],
    ['threads-past-nut', 'B03', 'CPSC Pub. 325, 3.2', { high: { plain: 2, inclusive: true } }],
  ])('%s by %s (%s)', (id, fact, _, bounds) => {
    const limit = checks.find(check => check.id === id)!.limits.find(one => one.basis.fact === fact)!
    expect({ low: limit.low, high: limit.high, avoid: limit.avoid }).toEqual({ low: null, high: null, avoid: null, ...bounds })
  })
})

describe('where sources disagree', () => {
  // Texts give several figures, or measure different things: no built-in limit, a reason to read, and the statements named
  it.each([
    ['mesh-size', ['A01', 'A04', 'A48', 'A58']],
    ['tie-spacing-post', ['F05', 'F07', 'F08']],
    ['band-spacing', ['F10', 'F14']],
    ['tie-turns', ['F12', 'F13']],
    ['climbable-near', ['A49', 'A87']],
    ['opening-force', ['C07', 'D07']],
  ])('%s stands empty and says why', (id, sources) => {
    const check = checks.find(one => one.id === id)!
    expect(check.limits).toEqual([])
    expect(check.noLimit?.en.length).toBeGreaterThan(20)
    expect(check.sources).toEqual(expect.arrayContaining(sources))
  })
})
