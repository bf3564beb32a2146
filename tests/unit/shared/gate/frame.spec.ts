import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { doubleLeaves } from '#shared/gate/doubleLeaves'
import { latchEndDrop } from '#shared/gate/latchEndDrop'
import { squareness } from '#shared/gate/squareness'
import { INCH } from '#shared/measure/length'

const inches = (n: number) => Math.round(n * INCH)
const side = fc.integer({ min: 12, max: 192 }).map(inches)

describe('squareness', () => {
  it('finds a 3, 4, 5 frame square', () => {
    expect(squareness({ width: inches(36), height: inches(48), first: inches(60), second: inches(60) }, 0)).toEqual({
      difference: 0, trueDiagonal: inches(60), lean: 0, angle: 0, mismatch: 0, consistent: true,
    })
  })

  it('finds the lean of a frame that was racked by a known amount', () => {
    // Corners of a parallelogram set out by coordinates: top shifted by `lean`, height of the frame measured along its leaning stile.
    fc.assert(fc.property(side, side, fc.integer({ min: -32, max: 32 }), (width, height, sixteenths) => {
      const lean = sixteenths * INCH / 16
      const rise = Math.sqrt(height * height - lean * lean)
      const [first, second] = [Math.round(Math.hypot(width + lean, rise)), Math.round(Math.hypot(width - lean, rise))]
      const found = squareness({ width, height, first, second }, 0)
      expect(Math.abs(found.lean - lean)).toBeLessThan(20)
      expect(found.consistent).toBe(true)
      expect(Math.abs(found.mismatch)).toBeLessThanOrEqual(1)
    }))
  })

  it('turns its sign when the diagonals change places', () => {
    const frame = { width: inches(46), height: inches(70), first: inches(84), second: inches(83.5) }
    const [one, other] = [squareness(frame, INCH), squareness({ ...frame, first: frame.second, second: frame.first }, INCH)]
    expect([other.difference, other.lean, other.angle]).toEqual([-one.difference, -one.lean, -one.angle])
  })

  it('tells when sides and diagonals cannot belong to one frame', () => {
    // A 36 x 48 frame has diagonals of 60; 62 and 60 have a mean square of 61.008: 1 in too long, more than an eighth of tape error explains.
    const found = squareness({ width: inches(36), height: inches(48), first: inches(62), second: inches(60) }, inches(0.125))
    expect(found.consistent).toBe(false)
    expect(found.mismatch / INCH).toBeCloseTo(1.0082, 3)
  })

  it('refuses a diagonal longer than two sides', () => {
    expect(() => squareness({ width: inches(36), height: inches(48), first: inches(84), second: inches(60) }, 0)).toThrow(expect.objectContaining({ code: 'diagonalTooLong' }))
    expect(() => squareness({ width: 0, height: inches(48), first: inches(48), second: inches(48) }, 0)).toThrow(expect.objectContaining({ code: 'notPositive' }))
  })
})

describe('latchEndDrop', () => {
  it('drops by width times the sine of the lean', () => {
    // 5, 12, 13: out 5 over a slope of 12 is sin 5/13 (22.620 degrees).
    expect(latchEndDrop(inches(65), { out: inches(5), apart: inches(12) }, 60_000)).toEqual({ angle: 22_620, closed: inches(25), opened: inches(12.5) })
  })

  it('is the same from the angle as from two hinges', () => {
    fc.assert(fc.property(side, fc.integer({ min: -500, max: 500 }), (width, out) => {
      const byHinges = latchEndDrop(width, { out: out * 127_000, apart: inches(48) }, 0)
      const byAngle = latchEndDrop(width, { angle: byHinges.angle }, 0)
      // An angle to 1/1000 degree holds the drop to 1/57,000 of the width.
      expect(Math.abs(byHinges.closed - byAngle.closed)).toBeLessThan(width / 50_000)
      expect(Math.sign(byHinges.closed)).toBe(Math.sign(out))
    }))
  })

  it('is gone when the leaf stands square to the lean', () => {
    expect(latchEndDrop(inches(48), { angle: 2_000 }, 90_000).opened).toBe(0)
  })

  it('refuses a lean that is no hinge line', () => {
    expect(() => latchEndDrop(inches(48), { angle: 46_000 }, 0)).toThrow(expect.objectContaining({ code: 'lean' }))
    expect(() => latchEndDrop(inches(48), { out: INCH, apart: 0 }, 0)).toThrow(expect.objectContaining({ code: 'notPositive' }))
    expect(() => latchEndDrop(inches(48), { angle: 0 }, -1)).toThrow(expect.objectContaining({ code: 'angleOutOfRange' }))
  })
})

describe('doubleLeaves', () => {
  const gate = (opening: number) => ({ first: { width: inches(72), clearance: inches(2) }, second: { width: inches(60), clearance: inches(3) }, opening: inches(opening), thickness: inches(4), hingeRise: inches(0.5) })

  it('measures gap and step where the leaves meet', () => {
    expect(doubleLeaves(gate(133))).toMatchObject({ closed: INCH, binds: false, step: inches(1.5) })
  })

  it('binds when the corners behind need more than the gap', () => {
    // hypot(72, 2) - 72 = 0.0278 in, hypot(60, 2) - 60 = 0.0333 in: 0.0611 in both.
    expect(doubleLeaves(gate(132.05)).binds).toBe(true)
    expect(doubleLeaves(gate(132.07)).binds).toBe(false)
    expect(doubleLeaves(gate(133)).needed / INCH).toBeCloseTo(0.0611, 4)
  })

  it('agrees with a simulation of both leaves at all pairs of angles', () => {
    fc.assert(fc.property(fc.integer({ min: 12, max: 80 }), fc.integer({ min: 12, max: 80 }), fc.integer({ min: 1, max: 6 }), fc.integer({ min: 2, max: 32 }), (one, other, thick, sixteenths) => {
      const opening = inches(one + other) + sixteenths * INCH / 16
      const found = doubleLeaves({ first: { width: inches(one), clearance: 0 }, second: { width: inches(other), clearance: 0 }, opening, thickness: inches(thick), hingeRise: 0 })
      // How far the end of each leaf reaches at any height between its faces, over fine angles; the second leaf is the first's mirror.
      const reach = (width: number) => {
        let most = 0
        for (let t = 0; t <= 0.6; t += 0.0005) {
          for (const v of [-thick / 2, thick / 2]) most = Math.max(most, width * Math.cos(t) - v * Math.sin(t))
        }
        return most
      }
      expect(Math.abs(found.together / INCH - (opening / INCH - reach(one) - reach(other)))).toBeLessThan(0.001)
      expect(Math.abs(found.firstAlone / INCH - (opening / INCH - reach(one) - other))).toBeLessThan(0.001)
    }), { numRuns: 60 })
  })

  it('refuses leaves that do not fit', () => {
    expect(() => doubleLeaves(gate(131))).toThrow(expect.objectContaining({ code: 'leavesTooWide' }))
  })
})
