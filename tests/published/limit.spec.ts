import { describe, expect, it } from 'vitest'
import type { Limit } from '#shared/limit/limit'
import { combineLimits } from '#shared/limit/combineLimits'
import { conformanceProbability } from '#shared/limit/conformanceProbability'
import { judge } from '#shared/limit/judge'
import { parseLength } from '#shared/measure/parseLength'

const length = (text: string) => parseLength(text).amount
const limit = (id: string, parts: Partial<Limit>): Limit => ({ id, measurand: 'one', datum: 'ground', unit: 'angle', low: null, high: null, avoid: null, basis: { kind: 'builtIn', name: id }, ...parts })
const end = (plain: number) => ({ plain, inclusive: true })

describe('conformance probability (JCGM 106:2012)', () => {
  it('8.3.2.3: the Zener diode, measured -5.47 V with u = 0.05 V against at most -5.40 V, conforms with 0.919', () => {
    // The result is the published one; y, u and the limit are FROM MEMORY of the example. In thousandths of a volt.
    expect(conformanceProbability({ amount: -5470, uncertainty: 100 }, limit('zener', { high: end(-5400) }))).toBeCloseTo(0.919, 3)
  })

  it('7.3, table 1: how many u inside a single limit give which probability', () => {
    for (const [probability, z] of [[0.8, 84], [0.9, 128], [0.95, 164], [0.99, 233], [0.999, 309]] as const) {
      // FROM MEMORY of the table; z is printed to two decimals, so the probability lies between those of its neighbours.
      const at = (hundredths: number) => conformanceProbability({ amount: 2 * hundredths, uncertainty: 400 }, limit('low', { low: end(0) }))
      expect(at(z - 1)).toBeLessThan(probability)
      expect(at(z + 1)).toBeGreaterThan(probability)
    }
  })
})

describe('acceptance with a guard band (ILAC G8:09/2019)', () => {
  const tolerance = limit('tolerance', { low: end(1000), high: end(2000) })
  const guarded = (amount: number) => judge({ amount, uncertainty: 50 }, tolerance, { acceptance: 'guarded' }).verdict

  it('w = U: conforms within the acceptance limits, does not conform beyond the limit by more than U, else neither', () => {
    expect([949, 950, 1049, 1050, 1950, 1951, 2050, 2051].map(guarded)).toEqual([
      'doesNotConform', 'withinError', 'withinError', 'conforms', 'conforms', 'withinError', 'withinError', 'doesNotConform',
    ])
  })

  it('simple acceptance takes the limit as it stands, U = 0 is simple, and a band narrower than 2 U never conforms', () => {
    expect([999, 1000, 2000, 2001].map(amount => judge({ amount, uncertainty: 50 }, tolerance).verdict)).toEqual(['doesNotConform', 'conforms', 'conforms', 'doesNotConform'])
    expect(judge({ amount: 1000, uncertainty: 0 }, tolerance, { acceptance: 'guarded' })).toMatchObject({ verdict: 'conforms', acceptance: 'simple' })
    expect(judge({ amount: 1500, uncertainty: 500 }, tolerance, { acceptance: 'guarded' })).toMatchObject({ verdict: 'conforms', neverConforms: false })
    expect(judge({ amount: 1500, uncertainty: 501 }, tolerance, { acceptance: 'guarded' })).toMatchObject({ verdict: 'withinError', neverConforms: true })
  })

  it('table 1: the risk of accepting what does not conform stays under the one that is named for each guard band', () => {
    // w as a multiple of U, and the risk (FROM MEMORY of the table): simple under 50 % (50 % on the limit itself), ISO 14253-1 5 %, w = U 2.5 %, three sigma 0.16 %, six sigma one in a million.
    for (const [multiple, risk] of [[0.83, 0.05], [1, 0.025], [1.5, 0.0016], [3, 1e-6]] as const) {
      const probability = conformanceProbability({ amount: 1000 * multiple, uncertainty: 1000 }, limit('low', { low: end(0) }))
      expect(1 - probability).toBeLessThan(risk)
    }
    expect(conformanceProbability({ amount: 0, uncertainty: 1000 }, limit('low', { low: end(0) }))).toBeCloseTo(0.5, 12)
  })
})

describe('limits that stand together (published-limits.json)', () => {
  const at = (inches: string, millimetres?: string) => ({ imperial: length(inches), ...(millimetres ? { metric: length(millimetres) } : {}), inclusive: true })
  const imperial = { datum: 'ground', system: 'imperial' } as const

  it('a pool latch of at least 54 in (A22, 1372 mm) and a reach of 34 to 48 in (C03) clash by 6 in', () => {
    const limits = [limit('A22', { unit: 'length', low: at('54 in', '1372 mm') }), limit('C03', { unit: 'length', low: at('34 in', '865 mm'), high: at('48 in', '1220 mm') })]
    expect(combineLimits(limits, imperial).clashes).toEqual([{ kind: 'apart', low: 'A22', high: 'C03', by: length('6 in') }])
  })

  it('with the exception for pool gates (C04, at most 54 in, 1370 mm) just 54 in is left, in both systems', () => {
    const limits = [limit('A22', { unit: 'length', low: at('54 in', '1372 mm') }), limit('C04', { unit: 'length', high: at('54 in', '1370 mm') })]
    for (const system of ['imperial', 'metric'] as const) {
      const { windows, sameNominal } = combineLimits(limits, { datum: 'ground', system })
      expect(windows.map(({ low, high }) => [low?.amount, high?.amount])).toEqual([[length('54 in'), length('54 in')]])
      expect(sameNominal).toHaveLength(1)
    }
  })

  it('48 in printed as 1219 and 1220 mm is one figure (A30, C15), printed as 1200 mm (A85) it is another', () => {
    const metric = { datum: 'ground', system: 'metric' } as const
    const high = limit('C15', { unit: 'length', high: at('48 in', '1220 mm') })
    expect(combineLimits([limit('A30', { unit: 'length', low: at('48 in', '1219 mm') }), high], metric).sameNominal).toHaveLength(1)
    expect(combineLimits([limit('A85', { unit: 'length', low: at('48 in', '1200 mm') }), high], metric).sameNominal).toHaveLength(0)
  })
})
