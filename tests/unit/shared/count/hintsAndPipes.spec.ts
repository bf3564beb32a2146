import { describe, expect, it } from 'vitest'
import { PIPE_SIZES, pipeByTradeName, pipesByDiameter } from '#shared/count/pipeSizes'
import { tensionBandHints } from '#shared/count/tensionBandHints'
import { parseLength } from '#shared/measure/parseLength'

const length = (text: string) => parseLength(text).amount

describe('tensionBandHints', () => {
  // COMMON PRACTICE, no source: height in feet less one, one per foot, one per foot and one more; five on a six-foot leaf.
  it.each([['6 ft', 5, 6, 7], ['70 in', 5, 6, 7], ['4 ft', 3, 4, 5], ['1 ft', 1, 1, 2], ['1000 mm', 3, 4, 5]])('%s', (height, less, each, more) => {
    expect(tensionBandHints(length(height))).toEqual([{ rule: 'feetLessOne', bands: less }, { rule: 'onePerFoot', bands: each }, { rule: 'onePerFootAndOne', bands: more }])
  })

  it('refuses a height of nothing', () => {
    expect(() => tensionBandHints(0)).toThrowError(expect.objectContaining({ code: 'length' }))
  })
})

describe('pipe sizes', () => {
  // Names: COMMON PRACTICE; outside diameters: published-limits F50 to F56.
  it.each([
    ['1-3/8', '1.315 in'], ['1-5/8', '1.660 in'], ['1-7/8', '1.900 in'], ['2', '1.900 in'], ['2-3/8', '2.375 in'], ['2-1/2', '2.375 in'], ['2-7/8', '2.875 in'], ['3', '2.875 in'], ['4', '4 in'],
  ])('%s is %s across', (name, diameter) => {
    expect(pipeByTradeName(name)?.outsideDiameter).toBe(length(diameter))
  })

  it('knows what it does not know', () => {
    expect(pipeByTradeName('5')).toBeNull()
    expect(pipesByDiameter(length('3 1/4 in'), length('1/16 in'))).toEqual([])
    expect(pipeByTradeName('')).toBeNull()
  })

  it('finds the size from the caliper, nearest first, and never picks between two', () => {
    expect(pipesByDiameter(length('2 3/8 in'), length('1/32 in')).map(size => size.nps)).toEqual(['2'])
    expect(pipesByDiameter(length('1.7 in'), length('1/4 in')).map(size => size.nps)).toEqual(['1-1/4', '1-1/2'])
    expect(new Set(PIPE_SIZES.flatMap(size => size.trade)).size).toBe(PIPE_SIZES.flatMap(size => size.trade).length)
  })
})
