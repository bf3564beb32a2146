import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { swingEnvelope, type LeafPlan, type Obstacle } from '#shared/gate/swingEnvelope'
import { INCH } from '#shared/measure/length'

const inches = (n: number) => Math.round(n * INCH)
const leaf: LeafPlan = { width: inches(48), thickness: inches(2) }

/** Distance between leaf and obstacle at one angle by sampling the rim of both: no event angles, no closed form. */
function sampledDistance({ width, thickness }: LeafPlan, obstacle: Obstacle, angle: number): number {
  const t = angle / 180000 * Math.PI
  // The obstacle's spots seen from the leaf, whose distance to a rectangle is plain.
  const gap = (x: number, y: number) => {
    const [u, v] = [x * Math.cos(t) + y * Math.sin(t), y * Math.cos(t) - x * Math.sin(t)]
    const [du, dv] = [Math.max(-u, u - width, 0), Math.max(Math.abs(v) - thickness / 2, 0)]
    return Math.hypot(du, dv)
  }
  const corners = ([[0, -1], [0, 1], [1, -1], [1, 1]] as const).map(([u, v]) => [u * width * Math.cos(t) - v * thickness / 2 * Math.sin(t), u * width * Math.sin(t) + v * thickness / 2 * Math.cos(t)] as const)
  switch (obstacle.kind) {
    case 'post': return Math.max(0, gap(obstacle.along, obstacle.across) - obstacle.diameter / 2)
    case 'facingWall': return Math.max(0, obstacle.across - Math.max(...corners.map(([, y]) => y)))
    case 'wallBehind': return Math.max(0, obstacle.back + Math.min(...corners.map(([x]) => x)))
    case 'box':
    case 'clearSpace': {
      const [[x1, x2], [y1, y2]] = [obstacle.along, obstacle.across]
      if (corners.some(([x, y]) => x >= x1 && x <= x2 && y >= y1 && y <= y2)) return 0
      // Two rectangles apart are nearest at a corner of one of them; spots along the rim tell when they cross.
      const spots = Array.from({ length: 21 }, (_, i) => i / 20).flatMap(s => [[x1 + s * (x2 - x1), y1], [x1 + s * (x2 - x1), y2], [x1, y1 + s * (y2 - y1)], [x2, y1 + s * (y2 - y1)]] as const)
      const toBox = corners.map(([x, y]) => Math.hypot(Math.max(x1 - x, x - x2, 0), Math.max(y1 - y, y - y2, 0)))
      return Math.min(...spots.map(([x, y]) => gap(x, y)), ...toBox)
    }
  }
}

const spot = fc.integer({ min: -70, max: 70 }).map(inches)
const obstacle: fc.Arbitrary<Obstacle> = fc.oneof(
  fc.record({ kind: fc.constant('post' as const), along: spot, across: spot, diameter: fc.integer({ min: 1, max: 8 }).map(inches) }),
  fc.record({ kind: fc.constant('facingWall' as const), across: fc.integer({ min: 3, max: 60 }).map(inches) }),
  fc.record({ kind: fc.constant('wallBehind' as const), back: fc.integer({ min: 3, max: 60 }).map(inches) }),
  fc.tuple(spot, spot, fc.integer({ min: 1, max: 40 }), fc.integer({ min: 1, max: 40 })).map(([x, y, w, h]) => ({ kind: 'box' as const, along: [x, x + inches(w)] as const, across: [y, y + inches(h)] as const })),
)

describe('swingEnvelope', () => {
  it('meets a wall in front where the latch corner reaches it, by closed form', () => {
    // W sin t + (d/2) cos t = D: with W 48, d/2 1, D 24: t = asin(24 / hypot(48, 1)) - atan(1/48) = 28.7989 degrees, worked with a pocket calculator's functions.
    const expected = (Math.asin(24 / Math.hypot(48, 1)) - Math.atan(1 / 48)) * 180 / Math.PI * 1000
    const met = swingEnvelope(leaf, { kind: 'facingWall', across: inches(24) }, 90_000)
    expect(Math.abs(met.contact! - expected)).toBeLessThanOrEqual(1)
    expect(met).toMatchObject({ opens: met.contact, clearance: 0 })
  })

  it('clears a wall in front by what is left beyond its farthest corner', () => {
    // The corner's circle has radius hypot(48, 1) = 48.0104 in.
    const { contact, clearance } = swingEnvelope(leaf, { kind: 'facingWall', across: inches(50) }, 90_000)
    expect(contact).toBeNull()
    expect(clearance / INCH).toBeCloseTo(50 - Math.hypot(48, 1), 5)
  })

  it('opens past square until the wall behind the hinge, by closed form', () => {
    // W cos t - (d/2) sin t = -D, D = 6 in.
    const expected = (Math.acos(-6 / Math.hypot(48, 1)) - Math.atan(1 / 48)) * 180 / Math.PI * 1000
    expect(Math.abs(swingEnvelope(leaf, { kind: 'wallBehind', back: inches(6) }, 180_000).opens - expected)).toBeLessThanOrEqual(1)
  })

  it('meets a round post when its face is half the diameter away, by closed form', () => {
    // Post centre at 90 degrees, 30 in out, 4 in thick: asin((2 + 1) / 30) before it.
    const expected = 90_000 - Math.asin(3 / 30) * 180 / Math.PI * 1000
    expect(Math.abs(swingEnvelope(leaf, { kind: 'post', along: 0, across: inches(30), diameter: inches(4) }, 180_000).contact! - expected)).toBeLessThanOrEqual(1)
  })

  it('tells when it enters a clear space, but is not stopped by it', () => {
    const space = { kind: 'clearSpace', along: [inches(0), inches(48)], across: [inches(40), inches(90)] } as const
    const met = swingEnvelope(leaf, space, 90_000)
    expect(met.opens).toBe(90_000)
    expect(met.contact).toBe(swingEnvelope(leaf, { ...space, kind: 'box' }, 90_000).contact)
    expect(swingEnvelope(leaf, { ...space, across: [INCH, inches(48)] }, 90_000).contact).toBe(0)
  })

  it('agrees with a simulation that steps through the swing and samples the rims', () => {
    fc.assert(fc.property(obstacle, fc.integer({ min: 20, max: 180 }).map(n => n * 1000), (stands, to) => {
      fc.pre(sampledDistance(leaf, stands, 0) > inches(0.2))
      const met = swingEnvelope(leaf, stands, to)
      let [least, contact] = [Infinity, null as number | null]
      for (let angle = 0; angle <= to && contact === null; angle += 250) {
        const distance = sampledDistance(leaf, stands, angle)
        least = Math.min(least, distance)
        if (distance === 0) contact = angle
      }
      // A step of 1/4 degree moves the latch end by 0.21 in.
      if (contact !== null) {
        expect(met.contact).not.toBeNull()
        expect(met.contact!).toBeLessThanOrEqual(contact + 1)
        expect(sampledDistance(leaf, stands, met.contact!)).toBeLessThan(inches(0.001))
      } else if (met.contact !== null) {
        expect(least).toBeLessThan(inches(0.22))
      } else {
        expect(Math.abs(met.clearance - least)).toBeLessThan(inches(0.22))
      }
    }), { numRuns: 250 })
  })

  it('refuses what stands in the closed leaf, and boxes turned inside out', () => {
    expect(() => swingEnvelope(leaf, { kind: 'post', along: inches(20), across: 0, diameter: INCH }, 90_000)).toThrow(expect.objectContaining({ code: 'obstacleInLeaf' }))
    expect(() => swingEnvelope(leaf, { kind: 'box', along: [inches(-1), inches(90)], across: [inches(-5), inches(5)] }, 90_000)).toThrow(expect.objectContaining({ code: 'obstacleInLeaf' }))
    expect(() => swingEnvelope(leaf, { kind: 'box', along: [inches(9), inches(3)], across: [inches(5), inches(6)] }, 90_000)).toThrow(expect.objectContaining({ code: 'notPositive' }))
    expect(() => swingEnvelope({ ...leaf, thickness: 0 }, { kind: 'facingWall', across: INCH }, 90_000)).toThrow(expect.objectContaining({ code: 'notPositive' }))
  })
})
