import { describe, expect, it } from 'vitest'
import fc from 'fast-check'
import { fewestFasteners, spacingFaults } from '#shared/count/spacing'
import { parseLength } from '#shared/measure/parseLength'

const length = (text: string) => parseLength(text).amount
const rule = (spacing: string, start = '0 in', end = start) => ({ spacing: length(spacing), start: length(start), end: length(end) })

describe('fewestFasteners', () => {
  // OWN: hand-worked.
  it.each([
    ['6 ft', rule('15 in', '6 in'), 5], ['6 ft', rule('12 in'), 7], ['10 ft', rule('24 in', '12 in'), 5], ['10 ft', rule('24 in', '11 63/64 in'), 6],
    ['12 in', rule('15 in', '6 in'), 1], ['12 1/64 in', rule('15 in', '6 in'), 2], ['1 mm', rule('1 m', '1 m'), 1],
  ])('%s', (span, given, count) => {
    expect(fewestFasteners(length(span), given)).toBe(count)
  })

  // OWN: brute force. Placed greedily, each as far along as the rule allows, they are the fewest.
  it('agrees with placing them one by one, and one fewer always leaves a fault', () => {
    fc.assert(fc.property(fc.integer({ min: 1, max: 300 }), fc.integer({ min: 1, max: 60 }), fc.nat(60), fc.nat(60), (span, spacing, start, end) => {
      const given = { spacing, start, end }
      const placed = [Math.min(start, span)]
      while (span - placed.at(-1)! > end) placed.push(Math.min(placed.at(-1)! + spacing, span))
      expect(fewestFasteners(span, given)).toBe(placed.length)
      expect(spacingFaults(placed, span, given)).toEqual([])
      expect(spacingFaults(placed.slice(0, -1), span, given)).not.toEqual([])
    }))
  })

  it('never needs fewer for more length or a closer spacing', () => {
    fc.assert(fc.property(fc.integer({ min: 1, max: 300 }), fc.nat(50), fc.integer({ min: 2, max: 60 }), fc.nat(60), (span, more, spacing, ends) => {
      const fewest = fewestFasteners(span, { spacing, start: ends, end: ends })
      expect(fewestFasteners(span + more, { spacing, start: ends, end: ends })).toBeGreaterThanOrEqual(fewest)
      expect(fewestFasteners(span, { spacing: spacing - 1, start: ends, end: ends })).toBeGreaterThanOrEqual(fewest)
    }))
  })
})

describe('spacingFaults', () => {
  const given = { spacing: 15, start: 4, end: 6 }

  it('names the ends and every gap that is too long, in any order of reading, without touching the list', () => {
    const positions = [20, 5, 36]
    expect(spacingFaults(positions, 43, given)).toEqual([
      { from: null, to: 0, start: 0, gap: 5, allowed: 4, over: 1 },
      { from: 1, to: 2, start: 20, gap: 16, allowed: 15, over: 1 },
      { from: 2, to: null, start: 36, gap: 7, allowed: 6, over: 1 },
    ])
    expect(positions).toEqual([20, 5, 36])
    expect(spacingFaults([4, 19, 34], 40, given)).toEqual([])
  })

  it('finds one fault where there is no fastener, however short the length', () => {
    expect(spacingFaults([], 43, given)).toEqual([{ from: null, to: null, start: 0, gap: 43, allowed: 4, over: 39 }])
    expect(spacingFaults([], 3, given)).toMatchObject([{ gap: 3, over: 0 }])
  })

  it('is symmetric: read from the other end it finds the same', () => {
    fc.assert(fc.property(fc.array(fc.nat(100), { maxLength: 8 }), fc.integer({ min: 1, max: 30 }), fc.nat(30), fc.nat(30), (positions, spacing, start, end) => {
      const there = spacingFaults(positions, 100, { spacing, start, end })
      const back = spacingFaults(positions.map(position => 100 - position), 100, { spacing, start: end, end: start })
      expect(back.map(fault => fault.over).reverse()).toEqual(there.map(fault => fault.over))
    }))
  })

  it.each([
    ['length', () => spacingFaults([], 0, given)], ['length', () => fewestFasteners(0.5, given)], ['spacing', () => fewestFasteners(1, { ...given, spacing: 0 })],
    ['endDistance', () => fewestFasteners(1, { ...given, end: -1 })], ['endDistance', () => fewestFasteners(1, { ...given, start: Number.NaN })],
    ['position', () => spacingFaults([1, 44], 43, given)], ['position', () => spacingFaults([-1], 43, given)],
  ])('refuses with the code %s', (code, act) => {
    expect(act).toThrowError(expect.objectContaining({ name: 'CountRefused', code }))
  })
})
