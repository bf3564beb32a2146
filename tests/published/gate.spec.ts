import { describe, expect, it } from 'vitest'
import { bottomClearanceRange } from '#shared/gate/bottomClearanceRange'
import { swingOverPlane } from '#shared/gate/swingOverPlane'
import { INCH } from '#shared/measure/length'

const inches = (n: number) => Math.round(n * INCH)
const level = { rise: 0, over: INCH }

describe('gates as documents and the trade state them', () => {
  it('lets a leaf that is 2 in shorter than the fabric open freely over level hard ground (COMMON PRACTICE, no source)', () => {
    expect(swingOverPlane({ width: inches(48), clearance: inches(2) }, { along: level, across: level }, inches(2), 180_000)).toMatchObject({ least: { gap: inches(2) }, contact: null, under: [] })
  })

  it('keeps the pool gap of 2 in over soft and 4 in over solid ground (CPSC Pub. 362, as summarised) on a slope of 1 in 48, as steep as a level landing may be (2010 ADA 404.2.4.4, FROM MEMORY)', () => {
    // A 48 in leaf meets 1 in of rise when it opens straight uphill, so 1/2 in of margin asks for 1 1/2 in at the hinge.
    const uphill = { along: level, across: { rise: INCH, over: inches(48) } }
    const demand = { width: inches(48), margin: inches(0.5), to: 90_000 }
    expect(bottomClearanceRange({ ...demand, closedAtMost: inches(2) }, { plane: uphill }).window).toEqual({ low: inches(1.5), high: inches(2) })
    expect(bottomClearanceRange({ ...demand, closedAtMost: inches(4) }, { plane: uphill }).window).toEqual({ low: inches(1.5), high: inches(4) })
    // A 12 ft leaf on the same ground meets 3 in: over soft ground it cannot be hung to open all the way.
    expect(bottomClearanceRange({ ...demand, width: inches(144), closedAtMost: inches(2) }, { plane: uphill })).toMatchObject({ window: null, shortBy: inches(1.5), opensTo: 30_000 })
  })
})
