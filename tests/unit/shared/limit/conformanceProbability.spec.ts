import { describe, expect, it } from 'vitest'
import fc from 'fast-check'
import jstat from 'jstat'
import type { Limit } from '#shared/limit/limit'
import { conformanceProbability, normalMass } from '#shared/limit/conformanceProbability'

const limit = (parts: Partial<Limit>): Limit => ({ id: 'one', measurand: 'gap', datum: 'ground', unit: 'angle', low: null, high: null, avoid: null, basis: { kind: 'builtIn', name: 'made up' }, ...parts })
const end = (plain: number) => ({ plain, inclusive: true })

describe('conformanceProbability', () => {
  it('agrees with another library over the whole range', () => {
    fc.assert(fc.property(fc.double({ min: -8, max: 8, noNaN: true }), fc.double({ min: -8, max: 8, noNaN: true }), (first, second) => {
      const [from, to] = first < second ? [first, second] : [second, first]
      expect(normalMass(from, to)).toBeCloseTo(jstat.normal.cdf(to, 0, 1) - jstat.normal.cdf(from, 0, 1), 12)
    }))
  })

  it('is 0.5 at a limit and 0.97725 at a guard band of U inside it (arithmetic.md 2; OWN: Phi(2))', () => {
    expect(conformanceProbability({ amount: 1000, uncertainty: 10 }, limit({ low: end(1000) }))).toBeCloseTo(0.5, 12)
    expect(conformanceProbability({ amount: 1010, uncertainty: 10 }, limit({ low: end(1000) }))).toBeCloseTo(0.97725, 5)
    expect(conformanceProbability({ amount: 990, uncertainty: 10 }, limit({ high: end(1000) }))).toBeCloseTo(0.97725, 5)
  })

  it('takes a band away: what is in it and what is beside it make one', () => {
    fc.assert(fc.property(fc.integer({ min: -50, max: 50 }), fc.integer({ min: 1, max: 40 }), fc.integer({ min: -30, max: 0 }), fc.integer({ min: 1, max: 30 }), (amount, uncertainty, low, high) => {
      const inside = conformanceProbability({ amount, uncertainty }, limit({ low: end(low), high: end(high) }))
      const outside = conformanceProbability({ amount, uncertainty }, limit({ avoid: { low: end(low), high: end(high) } }))
      expect(inside + outside).toBeCloseTo(1, 12)
    }))
  })

  it('does not lose small probabilities', () => {
    // PUBLISHED: Abramowitz and Stegun, table 26.2: 1 - Phi(10) = 7.61985 x 10^-24.
    expect(conformanceProbability({ amount: 0, uncertainty: 2 }, limit({ low: end(10) })) / 7.61985e-24).toBeCloseTo(1, 5)
  })

  it('is certainty for an instrument without error, and refuses to do without an uncertainty', () => {
    expect(conformanceProbability({ amount: 5, uncertainty: 0 }, limit({ low: end(5) }))).toBe(1)
    expect(conformanceProbability({ amount: 4, uncertainty: 0 }, limit({ low: end(5) }))).toBe(0)
    expect(() => conformanceProbability({ amount: 4 } as never, limit({ low: end(5) }))).toThrowError(expect.objectContaining({ code: 'uncertainty' }))
    expect(() => conformanceProbability({ amount: 4, uncertainty: -1 }, limit({}))).toThrowError(expect.objectContaining({ code: 'uncertainty' }))
  })
})
