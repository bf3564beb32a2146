import { describe, expect, it } from 'vitest'
import { boundsOf, lengthOfInches, lengthOfMillimetres } from '#shared/checklist/publishedFact'
import type { PublishedFact } from '#shared/checklist/publishedFact'

const fact = (over: Partial<PublishedFact>): PublishedFact => ({
  id: 'A01', topic: 't', statement: 's', inches: null, millimetres: null, comparator: '<=', datum: 'd', source: 'x', edition: 'e', section: '1', kind: 'k', basis: 'read in a copy', ...over,
})

describe('lengthOfInches, lengthOfMillimetres', () => {
  // Hand-worked: 1 in = 8,128,000 units, 1 mm = 320,000 units
  it.each([[54, 438_912_000], [1.25, 10_160_000], [0.0625, 508_000], [0.38, 3_088_640], [0.04, 325_120]])('%s in is %s units', (inches, units) => {
    expect(lengthOfInches(inches)).toBe(units)
  })
  it.each([[1372, 439_040_000], [12.7, 4_064_000], [57.15, 18_288_000]])('%s mm is %s units', (millimetres, units) => {
    expect(lengthOfMillimetres(millimetres)).toBe(units)
  })
  it('refuses more decimals than a source prints', () => {
    expect(() => lengthOfInches(0.12345)).toThrow(RangeError)
    expect(() => lengthOfMillimetres(1 / 3)).toThrow(RangeError)
  })
})

describe('boundsOf', () => {
  it('keeps both figures as printed and leaves a blank one blank', () => {
    expect(boundsOf(fact({ inches: 54, millimetres: 1372, comparator: '>=' }))).toEqual({ unit: 'length', low: { imperial: 438_912_000, metric: 439_040_000, inclusive: true }, high: null, avoid: null })
    expect(boundsOf(fact({ inches: 54, comparator: '>=' }))?.low).toEqual({ imperial: 438_912_000, inclusive: true })
    expect(boundsOf(fact({ millimetres: 100, comparator: '<' }))?.high).toEqual({ metric: 32_000_000, inclusive: false })
  })
  it('leaves out millimetres that stand there from memory', () => {
    expect(boundsOf(fact({ inches: 32, millimetres: 815, millimetres_basis: 'from memory', comparator: '>=' }))?.low).toEqual({ imperial: 260_096_000, inclusive: true })
  })
  it('makes a band to stay out of, whose ends are allowed', () => {
    expect(boundsOf(fact({ inches: [3.5, 9], comparator: 'fail_between_exclusive' }))).toEqual({ unit: 'length', low: null, high: null, avoid: { low: { imperial: 28_448_000, inclusive: false }, high: { imperial: 73_152_000, inclusive: false } } })
  })
  it('brings seconds, degrees, forces and counts to their integer units', () => {
    expect(boundsOf(fact({ value: 1.5, unit: 's', comparator: '>=' }))).toMatchObject({ unit: 'time', low: { plain: 1500 } })
    expect(boundsOf(fact({ value: 55, unit: 'degrees', comparator: '>' }))).toMatchObject({ unit: 'angle', low: { plain: 55_000, inclusive: false } })
    expect(boundsOf(fact({ value: 5, unit: 'lbf' }))).toMatchObject({ unit: 'force', high: { imperial: 5000 } })
    expect(boundsOf(fact({ value: 2, unit: 'threads' }))).toMatchObject({ unit: 'count', high: { plain: 2 } })
  })
  it('makes nothing of a statement from memory, of a yes or no, of a rule by formula', () => {
    expect(boundsOf(fact({ inches: 12, basis: 'from memory' }))).toBeNull()
    expect(boundsOf(fact({ comparator: 'boolean' }))).toBeNull()
    expect(boundsOf(fact({ value: 'height_ft - 1', unit: 'bands' }))).toBeNull()
    expect(boundsOf(fact({ inches: 2, tolerance_in: 0.125, comparator: 'within_tolerance' }))).toBeNull()
  })
})
