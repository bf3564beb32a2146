import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { bottomClearanceRange, type ClearanceDemand } from '#shared/gate/bottomClearanceRange'
import type { PlaneGround, Slope } from '#shared/gate/leaf'
import { INCH } from '#shared/measure/length'

const inches = (n: number) => Math.round(n * INCH)
const level: Slope = { rise: 0, over: INCH }
const slope = fc.integer({ min: -16, max: 16 }).map(rise => ({ rise: rise * INCH / 4, over: 48 * INCH }))
const plane: fc.Arbitrary<PlaneGround> = fc.record({ along: slope, across: slope })
const demand: fc.Arbitrary<ClearanceDemand> = fc.record({
  width: fc.integer({ min: 24, max: 144 }).map(inches),
  rake: slope,
  margin: fc.integer({ min: 0, max: 16 }).map(n => n * INCH / 16),
  closedAtMost: fc.integer({ min: 8, max: 96 }).map(n => n * INCH / 16),
  to: fc.integer({ min: 10, max: 180 }).map(n => n * 1000),
})
const ratio = ({ rise, over }: Slope) => rise / over

/** Whether a gap at the hinge works, by stepping through swing and closed leaf; `slack` widens both demands. */
function works(asked: ClearanceDemand, ground: PlaneGround, clearance: number, slack: number, rake = ratio(asked.rake ?? level)): boolean {
  for (let tenth = 0; tenth <= 10; tenth++) {
    const r = asked.width * tenth / 10
    if (clearance + r * (rake - ratio(ground.along)) > asked.closedAtMost + slack) return false
    for (let angle = 0; angle <= asked.to; angle += 100) {
      const t = angle / 180000 * Math.PI
      if (clearance + r * rake - r * Math.cos(t) * ratio(ground.along) - r * Math.sin(t) * ratio(ground.across) < asked.margin - slack) return false
    }
  }
  return true
}
const SLACK = INCH / 500

describe('bottomClearanceRange', () => {
  it('finds the window worked by hand', () => {
    // 92 in leaf; ground rises 3/4 in over 92 in along, 1 1/2 in across, opens to 90: steepest rise hypot(0.75, 1.5) = 1.677 in over the leaf.
    const range = bottomClearanceRange(
      { width: inches(92), margin: inches(0.5), closedAtMost: inches(4), to: 90_000 },
      { plane: { along: { rise: inches(0.75), over: inches(92) }, across: { rise: inches(1.5), over: inches(92) } } },
    )
    expect(range.window!.low / INCH).toBeCloseTo(2.17705, 5)
    expect(range.window!.high).toBe(inches(4))
    expect(range).toMatchObject({ shortBy: 0, opensTo: 90_000, waysOut: [] })
  })

  it('tells by how much it is short, how far it would open and the ways out, worked by hand', () => {
    // 100 in leaf over ground that rises 4 in across: the swing asks for 1/2 + 4, the closed gap allows 2 1/2: 2 in short.
    // With 2 1/2 at the hinge the rise may be 2 of 4 in: sin t = 1/2, so 30 degrees. Two leaves of 50 in ask for 1/2 + 2.
    const range = bottomClearanceRange(
      { width: inches(100), margin: inches(0.5), closedAtMost: inches(2.5), to: 90_000 },
      { plane: { along: level, across: { rise: inches(4), over: inches(100) } } },
    )
    expect(range).toMatchObject({ window: null, low: inches(4.5), high: inches(2.5), shortBy: inches(2), opensTo: 30_000 })
    expect(range.waysOut).toEqual([
      { code: 'openOtherSide', window: { low: inches(0.5), high: inches(2.5) } },
      { code: 'twoLeaves', start: { low: inches(2.5), high: inches(2.5) }, end: { low: inches(2.5), high: inches(2.5) } },
      { code: 'threshold', height: inches(2) },
      { code: 'regrade', cut: inches(2) },
      { code: 'stopAt', angle: 30_000 },
    ])
  })

  it('offers a rake where the ground falls away under a level leaf', () => {
    // Ground falls 3 in along 60 in: closed gap 3 in more at the latch end. Raked down by the 1 in that is missing it works, with no play.
    const range = bottomClearanceRange(
      { width: inches(60), margin: inches(0.5), closedAtMost: inches(2.5), to: 90_000 },
      { plane: { along: { rise: inches(-3), over: inches(60) }, across: { rise: inches(-3), over: inches(60) } } },
    )
    expect(range.shortBy).toBe(inches(1))
    expect(range.waysOut.find(({ code }) => code === 'rakeBottom')).toEqual({ code: 'rakeBottom', rise: inches(-1), window: { low: inches(0.5), high: inches(0.5) } })
  })

  it('is the range that a simulation accepts: inside works, outside does not', () => {
    fc.assert(fc.property(demand, plane, fc.double({ min: 0, max: 1, noNaN: true }), (asked, ground, share) => {
      const { window, low, high } = bottomClearanceRange(asked, { plane: ground })
      if (window) {
        expect(works(asked, ground, low + share * (high - low), SLACK)).toBe(true)
      } else {
        expect(works(asked, ground, high + share * (low - high), -SLACK)).toBe(false)
      }
      expect(works(asked, ground, low - 2 * SLACK, 0)).toBe(false)
      expect(works(asked, ground, high + 2 * SLACK, 0)).toBe(false)
    }), { numRuns: 120 })
  })

  it('offers only ways out that a simulation accepts', () => {
    fc.assert(fc.property(demand, plane, (asked, ground) => {
      const range = bottomClearanceRange(asked, { plane: ground })
      const back = (s: Slope) => ({ ...s, rise: -s.rise })
      for (const way of range.waysOut) {
        switch (way.code) {
          case 'hingeOtherEnd':
            expect(works({ ...asked, rake: back(asked.rake!) }, { along: back(ground.along), across: ground.across }, way.window.low, SLACK)).toBe(true)
            break
          case 'openOtherSide':
            expect(works(asked, { along: ground.along, across: back(ground.across) }, way.window.low, SLACK)).toBe(true)
            break
          case 'rakeBottom':
            expect(works(asked, ground, way.window.low, SLACK, way.rise / asked.width)).toBe(true)
            break
          case 'twoLeaves':
            expect(works({ ...asked, width: asked.width / 2 }, ground, way.start.low, SLACK)).toBe(true)
            expect(works({ ...asked, width: asked.width / 2, rake: back(asked.rake!) }, { along: back(ground.along), across: ground.across }, way.end.low, SLACK)).toBe(true)
            break
          case 'stopAt':
            expect(works({ ...asked, to: way.angle }, ground, range.high, SLACK)).toBe(true)
            break
          case 'threshold':
          case 'regrade':
            expect(way.code === 'threshold' ? way.height : way.cut).toBe(range.shortBy)
        }
      }
    }), { numRuns: 200 })
  })

  it('grows with a wider limit and shrinks with a wider swing or margin', () => {
    fc.assert(fc.property(demand, plane, (asked, ground) => {
      const range = bottomClearanceRange(asked, { plane: ground })
      expect(bottomClearanceRange({ ...asked, closedAtMost: asked.closedAtMost + INCH }, { plane: ground }).high).toBe(range.high + INCH)
      expect(bottomClearanceRange({ ...asked, margin: asked.margin + INCH }, { plane: ground }).low).toBe(range.low + INCH)
      expect(bottomClearanceRange({ ...asked, to: Math.ceil(asked.to / 2) }, { plane: ground }).low).toBeLessThanOrEqual(range.low)
    }))
  })

  it('reads measured ground: a hollow under the closed leaf and a crest on the arc', () => {
    // Crest 3 in at 60 degrees, margin 1/2: low 3 1/2. Hollow 1 in deep at mid leaf: high 4 - 1 = 3. Short by 1/2; at 3 in the crest may be 2 1/2: 50 degrees.
    const range = bottomClearanceRange({ width: inches(48), margin: inches(0.5), closedAtMost: inches(4), to: 90_000 }, {
      arc: [{ angle: 0, height: 0 }, { angle: 60_000, height: inches(3) }, { angle: 90_000, height: 0 }],
      line: [{ distance: inches(24), height: inches(-1) }, { distance: inches(48), height: 0 }],
    })
    expect(range).toMatchObject({ window: null, low: inches(3.5), high: inches(3), shortBy: inches(0.5), opensTo: 50_000 })
    expect(range.waysOut.map(({ code }) => code)).not.toContain('openOtherSide')
  })

  it('offers no threshold where the limit itself is under the margin', () => {
    const range = bottomClearanceRange({ width: inches(48), margin: inches(2), closedAtMost: inches(1), to: 90_000 }, { plane: { along: level, across: level } })
    expect(range).toMatchObject({ window: null, shortBy: INCH, opensTo: null, waysOut: [] })
  })
})
