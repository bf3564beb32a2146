import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { GateRefusal } from '#shared/gate/gateRefusal'
import type { ArcHeight, Leaf, PlaneGround } from '#shared/gate/leaf'
import { latchGapOverArc, swingOverArc } from '#shared/gate/swingOverArc'
import { latchGapOverPlane, swingOverPlane } from '#shared/gate/swingOverPlane'
import { swingOverPoints } from '#shared/gate/swingOverPoints'
import { closedGaps } from '#shared/gate/closedGaps'
import { INCH } from '#shared/measure/length'

const level = { rise: 0, over: INCH }
const inches = (n: number) => Math.round(n * INCH)
/** Half a thousandth of an inch: far under any tape, over what a step of 0.05 degree can miss. */
const CLOSE = INCH / 2000
const codeOf = (act: () => unknown): string => {
  try {
    act()
  } catch (error) {
    if (error instanceof GateRefusal) return error.code
    throw error
  }
  return 'no refusal'
}

const slope = fc.integer({ min: -8, max: 8 }).map(rise => ({ rise: rise * INCH / 2, over: 48 * INCH }))
const leaf: fc.Arbitrary<Leaf> = fc.record({
  width: fc.integer({ min: 24, max: 144 }).map(inches),
  clearance: fc.integer({ min: 0, max: 96 }).map(n => n * INCH / 16),
  rake: slope,
})
const plane: fc.Arbitrary<PlaneGround> = fc.record({ along: slope, across: slope })
const opening = fc.integer({ min: 1, max: 180 }).map(degrees => degrees * 1000)
const margin = fc.integer({ min: 0, max: 32 }).map(n => n * INCH / 16)

/** The gap of one spot of one leaf over one plane, straight from the geometry: heights of two surfaces, no trigonometry of the code's. */
function gapOf(gate: Leaf, ground: PlaneGround, distance: number, angle: number): number {
  const turned = angle / 180000 * Math.PI
  const [x, y] = [distance * Math.cos(turned), distance * Math.sin(turned)]
  const bottom = gate.clearance + distance * (gate.rake ? gate.rake.rise / gate.rake.over : 0)
  return bottom - x * ground.along.rise / ground.along.over - y * ground.across.rise / ground.across.over
}

/** Steps through the swing by 1/20 degree and along the leaf by tenths. */
function simulate(gate: Leaf, ground: PlaneGround, to: number) {
  let least = Infinity
  let contact: number | null = null
  for (let angle = 0; angle <= to; angle += 50) {
    for (let tenth = 0; tenth <= 10; tenth++) {
      const gap = gapOf(gate, ground, gate.width * tenth / 10, angle)
      least = Math.min(least, gap)
      if (gap <= 0 && contact === null) contact = angle
    }
  }
  return { least, contact }
}

describe('swingOverPlane', () => {
  it('finds the figures worked by hand for a leaf over ground that rises 1 in 4 ft across', () => {
    // 48 in leaf, 2 in at the hinge, opening to 90: the latch end stands over 1 in of rise, 1 in is left; at 30 degrees half of that rise.
    const gate = { width: inches(48), clearance: inches(2) }
    const ground = { along: level, across: { rise: INCH, over: inches(48) } }
    expect(swingOverPlane(gate, ground, inches(1.5), 90_000)).toEqual({
      least: { gap: INCH, angle: 90_000, at: 'latch' },
      contact: null,
      under: [{ from: 30_000, to: 90_000 }],
      needed: inches(2.5),
    })
    expect(latchGapOverPlane(gate, ground, 30_000)).toBe(inches(1.5))
  })

  it('is tightest where the ground rises straight away from the hinge (a 3, 4, 5 triangle: 53.130 degrees)', () => {
    const swing = swingOverPlane({ width: inches(50), clearance: inches(6) }, { along: { rise: 3, over: 50 }, across: { rise: 4, over: 50 } }, 0, 90_000)
    expect(swing.least).toEqual({ gap: inches(1), angle: 53_130, at: 'latch' })
  })

  it('agrees with a simulation that steps through the swing', () => {
    fc.assert(fc.property(leaf, plane, opening, (gate, ground, to) => {
      const swing = swingOverPlane(gate, ground, 0, to)
      const stepped = simulate(gate, ground, to)
      expect(Math.abs(swing.least.gap - stepped.least)).toBeLessThan(CLOSE)
      // A simulation may miss a touch between its steps, never one that it made.
      if (stepped.contact !== null) {
        expect(swing.contact).not.toBeNull()
        expect(swing.contact!).toBeLessThanOrEqual(stepped.contact + 1)
      }
      if (swing.contact !== null && stepped.contact === null) expect(swing.least.gap).toBeGreaterThan(-CLOSE)
    }), { numRuns: 150 })
  })

  it('touches exactly where its gap has come down to nothing', () => {
    fc.assert(fc.property(leaf, plane, opening, (gate, ground, to) => {
      const { contact } = swingOverPlane(gate, ground, 0, to)
      if (contact === null || contact === 0) return
      expect(Math.abs(gapOf(gate, ground, gate.width, contact))).toBeLessThan(CLOSE)
      expect(latchGapOverPlane(gate, ground, Math.max(0, contact - 200))).toBeGreaterThan(-CLOSE)
    }))
  })

  it('is under the margin inside its stretches and nowhere else', () => {
    fc.assert(fc.property(leaf, plane, opening, margin, (gate, ground, to, asked) => {
      const { under } = swingOverPlane(gate, ground, asked, to)
      for (let angle = 0; angle <= to; angle += 500) {
        const gap = Math.min(gate.clearance, gapOf(gate, ground, gate.width, angle))
        if (Math.abs(gap - asked) < CLOSE) continue
        expect(under.some(stretch => angle >= stretch.from - 1 && angle <= stretch.to + 1)).toBe(gap < asked)
      }
    }), { numRuns: 60 })
  })

  it('leaves exactly the margin when hung at the gap it asks for, and less when hung lower', () => {
    fc.assert(fc.property(leaf, plane, opening, margin, (gate, ground, to, asked) => {
      const { needed } = swingOverPlane(gate, ground, asked, to)
      expect(Math.abs(swingOverPlane({ ...gate, clearance: needed }, ground, asked, to).least.gap - asked)).toBeLessThanOrEqual(1)
    }))
  })

  it('gains as much gap as it is raised, loses none by opening less', () => {
    fc.assert(fc.property(leaf, plane, opening, opening, fc.integer({ min: 0, max: 1000 }), (gate, ground, one, other, raise) => {
      const before = swingOverPlane(gate, ground, 0, one).least.gap
      expect(Math.abs(swingOverPlane({ ...gate, clearance: gate.clearance + raise * 127_000 }, ground, 0, one).least.gap - before - raise * 127_000)).toBeLessThanOrEqual(1)
      const [near, far] = [Math.min(one, other), Math.max(one, other)]
      expect(swingOverPlane(gate, ground, 0, near).least.gap).toBeGreaterThanOrEqual(swingOverPlane(gate, ground, 0, far).least.gap)
    }))
  })

  it('is the same for a half turn seen from its other end', () => {
    // Opened to 180 degrees the leaf lies where a leaf hung the other way starts: along is mirrored.
    fc.assert(fc.property(leaf, plane, (gate, ground) => {
      const mirrored = { along: { rise: -ground.along.rise, over: ground.along.over }, across: ground.across }
      expect(Math.abs(swingOverPlane(gate, ground, 0, 180_000).least.gap - swingOverPlane(gate, mirrored, 0, 180_000).least.gap)).toBeLessThanOrEqual(1)
    }))
  })

  it('refuses what cannot be a gate, with the reason', () => {
    const gate = { width: inches(48), clearance: INCH }
    const flat = { along: level, across: level }
    expect(codeOf(() => swingOverPlane({ ...gate, width: 0 }, flat, 0, 90_000))).toBe('notPositive')
    expect(codeOf(() => swingOverPlane({ ...gate, width: 1.5 }, flat, 0, 90_000))).toBe('notALength')
    expect(codeOf(() => swingOverPlane({ ...gate, clearance: NaN }, flat, 0, 90_000))).toBe('notALength')
    expect(codeOf(() => swingOverPlane({ ...gate, clearance: -1 }, flat, 0, 90_000))).toBe('negativeClearance')
    expect(codeOf(() => swingOverPlane(gate, { ...flat, along: { rise: 1, over: 0 } }, 0, 90_000))).toBe('noRun')
    expect(codeOf(() => swingOverPlane(gate, { ...flat, along: { rise: 3, over: 2 } }, 0, 90_000))).toBe('tooSteep')
    expect(codeOf(() => swingOverPlane(gate, flat, 0, 0))).toBe('angleOutOfRange')
    expect(codeOf(() => swingOverPlane(gate, flat, 0, 180_001))).toBe('angleOutOfRange')
  })
})

describe('swingOverArc', () => {
  const gate = { width: inches(48), clearance: inches(2) }
  const heights: ArcHeight[] = [{ angle: 0, height: 0 }, { angle: 30_000, height: INCH }, { angle: 60_000, height: inches(3) }, { angle: 90_000, height: INCH }]

  it('finds the figures worked by hand', () => {
    // Straight from 1 in at 30 to 3 in at 60 degrees: 2 in is met at 45, 1 1/2 in (margin 1/2) at 37.5, and again at 82.5.
    expect(swingOverArc(gate, heights, inches(0.5), 90_000)).toEqual({
      least: { gap: -INCH, angle: 60_000, at: 'latch' },
      contact: 45_000,
      under: [{ from: 37_500, to: 82_500 }],
      needed: inches(3.5),
    })
  })

  it('looks no further than the wanted angle', () => {
    expect(swingOverArc(gate, heights, 0, 40_000)).toMatchObject({ contact: null, least: { angle: 40_000 } })
  })

  it('comes to what a plane does when the readings are taken from that plane', () => {
    fc.assert(fc.property(leaf, plane, opening, margin, (hung, ground, to, asked) => {
      // A reading a degree: what a straight line between them can miss is W R (1 - cos 0.5 degree), under 1/1000 in here.
      const readings = Array.from({ length: 181 }, (_, degree) => ({ angle: degree * 1000, height: Math.round(hung.width * (hung.rake!.rise / hung.rake!.over) + hung.clearance - gapOf(hung, ground, hung.width, degree * 1000)) }))
      const [measured, computed] = [swingOverArc(hung, readings, asked, to), swingOverPlane(hung, ground, asked, to)]
      expect(Math.abs(measured.least.gap - computed.least.gap)).toBeLessThan(inches(0.002))
      expect(Math.abs(measured.needed - computed.needed)).toBeLessThan(inches(0.002))
      expect(Math.abs(latchGapOverArc(hung, readings, to) - latchGapOverPlane(hung, ground, to))).toBeLessThanOrEqual(2)
    }), { numRuns: 60 })
  })

  it('refuses readings that leave part of the swing unknown', () => {
    expect(codeOf(() => swingOverArc(gate, heights.slice(0, 1), 0, 90_000))).toBe('tooFewReadings')
    expect(codeOf(() => swingOverArc(gate, heights.slice(1), 0, 90_000))).toBe('notCovered')
    expect(codeOf(() => swingOverArc(gate, heights, 0, 91_000))).toBe('notCovered')
    expect(codeOf(() => swingOverArc(gate, [...heights].reverse(), 0, 90_000))).toBe('notAscending')
    expect(codeOf(() => swingOverArc(gate, [heights[0]!, heights[0]!], 0, 90_000))).toBe('notAscending')
  })
})

describe('swingOverPoints', () => {
  const gate = { width: inches(48), clearance: inches(2) }

  it('finds the spot that the leaf meets, by a 3, 4, 5 triangle', () => {
    const points = [
      { along: inches(24), across: 0, height: INCH },
      { along: inches(18), across: inches(24), height: inches(2.5) },
      { along: inches(40), across: inches(40), height: inches(9) },
    ]
    expect(swingOverPoints(gate, points, inches(0.5), 90_000)).toEqual({ least: { gap: inches(-0.5), point: 1, angle: 53_130 }, contact: 53_130, needed: inches(3), outside: [2] })
  })

  it('agrees with the plane that its spots lie on', () => {
    fc.assert(fc.property(leaf, plane, opening, (hung, ground, to) => {
      const at = (angle: number, share: number) => ({ x: share * hung.width * Math.cos(angle / 180000 * Math.PI), y: share * hung.width * Math.sin(angle / 180000 * Math.PI) })
      const points = Array.from({ length: 61 }, (_, i) => at(to * i / 60, 0.999)).map(({ x, y }) => ({
        along: Math.round(x), across: Math.round(y), height: Math.round(x * ground.along.rise / ground.along.over + y * ground.across.rise / ground.across.over),
      }))
      const met = swingOverPoints(hung, points, 0, to)
      const whole = Math.min(...points.map((_, i) => gapOf(hung, ground, hung.width * 0.999, to * i / 60)).filter((_, i) => !met.outside.includes(i)))
      expect(Math.abs(met.least.gap - whole)).toBeLessThan(CLOSE)
      expect(met.outside.length).toBeLessThanOrEqual(2)
    }), { numRuns: 60 })
  })

  it('refuses when nothing is known of the ground in the swing', () => {
    expect(codeOf(() => swingOverPoints(gate, [], 0, 90_000))).toBe('tooFewReadings')
    expect(codeOf(() => swingOverPoints(gate, [{ along: inches(60), across: 0, height: 0 }], 0, 90_000))).toBe('noPointInSwing')
    expect(codeOf(() => swingOverPoints(gate, [{ along: inches(10), across: -INCH, height: 0 }], 0, 90_000))).toBe('noPointInSwing')
  })
})

describe('closedGaps', () => {
  it('finds hollow and crest, worked by hand, cut at the latch end', () => {
    // Between 40 in (-1) and 56 in (1) the latch end at 48 stands over 0.
    const heights = [{ distance: inches(20), height: INCH }, { distance: inches(40), height: -INCH }, { distance: inches(56), height: INCH }]
    expect(closedGaps({ width: inches(48), clearance: inches(2) }, heights)).toEqual({
      largest: { gap: inches(3), distance: inches(40) }, least: { gap: INCH, distance: inches(20) },
    })
  })

  it('bounds every gap along the leaf', () => {
    const line = fc.uniqueArray(fc.integer({ min: 1, max: 160 }), { minLength: 1, maxLength: 6 })
      .chain(places => fc.tuple(fc.constant([...places, 200].sort((a, b) => a - b)), fc.array(fc.integer({ min: -48, max: 48 }), { minLength: 8, maxLength: 8 })))
      .map(([places, heights]) => places.map((place, i) => ({ distance: inches(place), height: heights[i]! * INCH / 16 })))
    fc.assert(fc.property(leaf, line, fc.double({ min: 0, max: 1, noNaN: true }), (gate, heights, share) => {
      const gaps = closedGaps(gate, heights)
      const distance = share * gate.width
      const all = [{ distance: 0, height: 0 }, ...heights]
      const next = Math.max(1, all.findIndex(reading => reading.distance >= distance))
      const [low, high] = [all[next - 1]!, all[next]!]
      const height = low.height + (high.height - low.height) * (distance - low.distance) / (high.distance - low.distance)
      const gap = gate.clearance + distance * gate.rake!.rise / gate.rake!.over - height
      expect(gap).toBeLessThanOrEqual(gaps.largest.gap + 1)
      expect(gap).toBeGreaterThanOrEqual(gaps.least.gap - 1)
    }))
  })

  it('refuses readings that stop short of the latch end, or run back', () => {
    const gate = { width: inches(48), clearance: INCH }
    expect(codeOf(() => closedGaps(gate, [{ distance: inches(40), height: 0 }]))).toBe('notCovered')
    expect(codeOf(() => closedGaps(gate, []))).toBe('tooFewReadings')
    expect(codeOf(() => closedGaps(gate, [{ distance: inches(50), height: 0 }, { distance: inches(20), height: 0 }]))).toBe('notAscending')
  })
})
