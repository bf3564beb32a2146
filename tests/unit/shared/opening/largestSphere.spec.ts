import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { largestSphere, type Opening } from '#shared/opening/largestSphere'
import { INCH } from '#shared/measure/length'

const inches = (n: number) => Math.round(n * INCH)
const diameterOf = (opening: Opening) => largestSphere(opening).diameter / INCH

type Corner = readonly [number, number]
/** The largest circle inside a convex polygon by search: the distance to its nearest side is concave, so thirds close in on its top, down each column and over the columns. */
function searched(polygon: readonly Corner[]): number {
  const inside = (x: number, y: number) => Math.min(...polygon.map(([x1, y1], i) => {
    const [x2, y2] = polygon[(i + 1) % polygon.length]!
    return ((x2 - x1) * (y - y1) - (y2 - y1) * (x - x1)) / Math.hypot(x2 - x1, y2 - y1)
  }))
  const top = (from: number, to: number, height: (at: number) => number) => {
    for (let i = 0; i < 60; i++) {
      const third = (to - from) / 3
      if (height(from + third) < height(to - third)) from += third
      else to -= third
    }
    return height((from + to) / 2)
  }
  const [xs, ys] = [polygon.map(([x]) => x), polygon.map(([, y]) => y)]
  return 2 * top(Math.min(...xs), Math.max(...xs), x => top(Math.min(...ys), Math.max(...ys), y => inside(x, y)))
}
const length = fc.integer({ min: 4, max: 640 }).map(n => n * INCH / 16)

describe('largestSphere', () => {
  it('keeps the mesh size, and cuts a diagonal to it', () => {
    expect(largestSphere({ kind: 'mesh', dimension: 'side', measured: inches(2) })).toEqual({ diameter: inches(2), assumesSquare: false })
    expect(largestSphere({ kind: 'mesh', dimension: 'width', measured: inches(2) }).assumesSquare).toBe(true)
    // Side and diagonal of a square: 7 and 10 to one part in a hundred, 12 and 17 to one in six hundred.
    expect(diameterOf({ kind: 'mesh', dimension: 'diagonal', measured: inches(17) })).toBeCloseTo(12.0208, 4)
  })

  it('finds triangles worked by hand', () => {
    expect(diameterOf({ kind: 'rightTriangle', base: inches(3), height: inches(4) })).toBe(2)
    // 13, 14, 15: area 84, half girth 21, inradius 4.
    expect(diameterOf({ kind: 'triangle', sides: [inches(13), inches(14), inches(15)] })).toBe(8)
    expect(diameterOf({ kind: 'triangle', sides: [inches(5), inches(13), inches(12)] })).toBe(4)
  })

  it('finds diamonds worked by hand', () => {
    // Diagonals 6 and 8: side 5, area 24, distance between sides 24 / 5.
    expect(diameterOf({ kind: 'rhombus', width: inches(6), height: inches(8) })).toBeCloseTo(4.8, 6)
    expect(diameterOf({ kind: 'pulledSquare', side: inches(5), width: inches(6) })).toBeCloseTo(4.8, 6)
  })

  it('is the gap under a level rail over level ground', () => {
    expect(diameterOf({ kind: 'underRail', between: inches(96), first: inches(2), second: inches(2) })).toBe(2)
    expect(diameterOf({ kind: 'underRail', between: inches(3), first: inches(5), second: inches(5) })).toBe(3)
  })

  it('is the triangle where the ground comes up to the rail', () => {
    fc.assert(fc.property(length, length, (base, height) => {
      const under = largestSphere({ kind: 'underRail', between: base, first: height, second: 0 }).diameter
      expect(Math.abs(under - largestSphere({ kind: 'rightTriangle', base, height }).diameter)).toBeLessThanOrEqual(2)
    }))
  })

  it('agrees with a search for the largest circle, opening by opening', () => {
    const shapes = fc.oneof(
      fc.tuple(length, length).map(([width, height]): [Opening, Corner[]] => [{ kind: 'rhombus', width, height }, [[-width / 2, 0], [0, -height / 2], [width / 2, 0], [0, height / 2]]]),
      fc.tuple(length, length).map(([base, height]): [Opening, Corner[]] => [{ kind: 'rightTriangle', base, height }, [[0, 0], [base, 0], [0, height]]]),
      fc.tuple(length, length, length).map(([base, x, height]): [Opening, Corner[]] => [
        { kind: 'triangle', sides: [base, Math.round(Math.hypot(x, height)), Math.round(Math.hypot(base - x, height))] },
        [[0, 0], [base, 0], [x, height]],
      ]),
      fc.tuple(length, length, length, fc.integer({ min: -100, max: 100 }).map(n => n * INCH / 16)).map(([between, first, second, railRise]): [Opening, Corner[]] => [
        { kind: 'underRail', between, first, second, railRise },
        [[0, -first], [between, railRise - second], [between, railRise], [0, 0]],
      ]),
    )
    fc.assert(fc.property(shapes, ([opening, corners]) => {
      const [found, expected] = [largestSphere(opening).diameter, searched(corners)]
      expect(Math.abs(found - expected)).toBeLessThan(INCH / 1000)
    }), { numRuns: 120 })
  })

  it('grows with every measure, and does not mind which way round it is taken', () => {
    fc.assert(fc.property(length, length, length, (a, b, more) => {
      const sphere = (opening: Opening) => largestSphere(opening).diameter
      expect(sphere({ kind: 'rhombus', width: a + more, height: b })).toBeGreaterThanOrEqual(sphere({ kind: 'rhombus', width: a, height: b }))
      expect(sphere({ kind: 'rhombus', width: a, height: b })).toBe(sphere({ kind: 'rhombus', width: b, height: a }))
      expect(sphere({ kind: 'underRail', between: more, first: a, second: b })).toBe(sphere({ kind: 'underRail', between: more, first: b, second: a }))
      expect(sphere({ kind: 'rightTriangle', base: a, height: b })).toBe(sphere({ kind: 'rightTriangle', base: b, height: a }))
    }))
  })

  it('keeps the digits of a needle', () => {
    // Sides 100, 100 and 1/64 in: inradius is half the short side times tan of half its angle, 0.0078119... in; worked from r = (b/2) sqrt((2a - b) / (2a + b)).
    const b = 1 / 64
    expect(diameterOf({ kind: 'triangle', sides: [inches(100), inches(100), inches(b)] })).toBeCloseTo(b * Math.sqrt((200 - b) / (200 + b)), 6)
  })

  it('refuses what is no opening, with the reason', () => {
    const refused = (opening: Opening, code: string) => expect(() => largestSphere(opening)).toThrow(expect.objectContaining({ code }))
    refused({ kind: 'bars', gap: 0 }, 'notPositive')
    refused({ kind: 'bars', gap: 0.5 }, 'notALength')
    refused({ kind: 'pulledSquare', side: inches(2), width: inches(4) }, 'tooWide')
    refused({ kind: 'triangle', sides: [inches(1), inches(2), inches(3)] }, 'notATriangle')
    refused({ kind: 'underRail', between: inches(4), first: 0, second: 0 }, 'notAnOpening')
    refused({ kind: 'underRail', between: inches(4), first: -1, second: 2 }, 'notAnOpening')
  })
})
