import { describe, expect, it } from 'vitest'
import fc from 'fast-check'
import { compareLengths, compareWithDual } from '#shared/measure/compareLengths'
import { parseLength } from '#shared/measure/parseLength'

const amount = (text: string) => parseLength(text).amount

describe('compareLengths', () => {
  it('does not fall to floating point', () => {
    expect(compareLengths(amount('2.125 in'), amount('2 1/8 in'))).toBe(0)
    expect(compareLengths(amount('0.1 in') + amount('0.2 in'), amount('0.3 in'))).toBe(0)
  })

  it('is antisymmetric', () => {
    fc.assert(fc.property(fc.maxSafeInteger(), fc.maxSafeInteger(), (first, second) => {
      expect(compareLengths(first, second) + compareLengths(second, first)).toBe(0)
    }))
  })

  it('refuses what is not a whole number', () => {
    expect(() => compareLengths(0.5, 1)).toThrow(RangeError)
    expect(() => compareLengths(1, Number.NaN)).toThrow(RangeError)
  })
})

describe('compareWithDual', () => {
  const latch = { imperial: amount('54 in'), metric: amount('1372 mm') }
  const gap = { imperial: amount('2 in'), metric: amount('51 mm') }

  it('lets the figure of the reading\'s own system decide and says when the other would not', () => {
    expect(compareWithDual({ amount: amount('54 in'), system: 'imperial' }, latch)).toEqual({ order: 0, decidedBy: 'imperial', otherOrder: -1 })
    expect(compareWithDual({ amount: amount('51 mm'), system: 'metric' }, gap)).toEqual({ order: 0, decidedBy: 'metric', otherOrder: 1 })
    expect(compareWithDual({ amount: amount('50 mm'), system: 'metric' }, gap)).toEqual({ order: -1, decidedBy: 'metric', otherOrder: -1 })
  })

  it('uses the only figure there is', () => {
    expect(compareWithDual({ amount: amount('100 mm'), system: 'metric' }, { imperial: amount('4 in') })).toEqual({ order: -1, decidedBy: 'imperial', otherOrder: -1 })
    expect(() => compareWithDual({ amount: 1, system: 'metric' }, {})).toThrow(RangeError)
  })
})
