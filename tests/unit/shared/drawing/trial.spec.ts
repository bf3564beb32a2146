import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { Drawing, Shape } from '#shared/drawing/displayList'
import { drawDrop, drawFrame } from '#shared/drawing/trial/drawFrame'
import { drawFasteners, evenPositions } from '#shared/drawing/trial/drawFasteners'
import { drawLeaves } from '#shared/drawing/trial/drawLeaves'
import { drawPath } from '#shared/drawing/trial/drawPath'
import { textWidth } from '#shared/drawing/live/textWidth'
import { fewestFasteners, spacingFaults } from '#shared/count/spacing'
import { CountRefused } from '#shared/count/countRefused'
import { GateRefusal } from '#shared/gate/gateRefusal'
import { FOOT, INCH, SYSTEMS } from '#shared/measure/length'
import type { TrialOf } from '#shared/trial/trial'

function points(shape: Shape): [number, number][] {
  if (shape.kind === 'text') {
    const wide = textWidth(shape.text, shape.size, shape.weight)
    const left = shape.x - (shape.anchor === 'start' ? 0 : shape.anchor === 'middle' ? wide / 2 : wide)
    return [[left, shape.y - shape.size * 0.74], [left + wide, shape.y]]
  }
  return [...shape.d.matchAll(/[ML](-?[\d.e+-]+) (-?[\d.e+-]+)/g)].map(match => [Number(match[1]), Number(match[2])])
}
const strays = ({ list, width, height }: Drawing) => list.filter(shape => points(shape).some(([x, y]) => !(x >= -1 && x <= width + 1 && y >= -1 && y <= height + 1)))

const positive = fc.oneof(fc.integer({ min: 1, max: 64 * 200 }).map(n => n * INCH / 64), fc.constantFrom(1, INCH, 1000 * FOOT))
const any = fc.oneof(positive, positive.map(n => 0 - n), fc.constant(0))
const common = { version: 1 as const, system: fc.constantFrom(...SYSTEMS) }
/** Draws, or is refused as a form says it. */
const inside = (draw: () => Drawing) => {
  try { expect(strays(draw())).toEqual([]) }
  catch (error) { if (!(error instanceof GateRefusal || error instanceof CountRefused)) throw error }
}

describe('drawings of trials stay inside their pictures, whatever is tried', () => {
  it('a leaf and what stands about it', () => {
    const pair = fc.tuple(any, any).map(([a, b]) => [Math.min(a, b), Math.max(a, b) + 1] as [number, number])
    const obstacle = fc.oneof(
      fc.record({ kind: fc.constant('post' as const), along: any, across: any, diameter: positive }), fc.record({ kind: fc.constant('facingWall' as const), across: positive }),
      fc.record({ kind: fc.constant('wallBehind' as const), back: positive }), fc.record({ kind: fc.constantFrom('box' as const, 'clearSpace' as const), along: pair, across: pair }))
    fc.assert(fc.property(positive, positive, obstacle, fc.integer({ min: 1, max: 180_000 }), fc.integer({ min: 0, max: 180_000 }), (width, thickness, stands, to, angle) =>
      inside(() => drawPath({ kind: 'path', version: 1, system: 'imperial', leaf: { width, thickness }, obstacle: stands as TrialOf<'path'>['obstacle'], to }, Math.min(angle, to)))), { numRuns: 300 })
  })
  it('a frame and its diagonals', () => {
    fc.assert(fc.property(common.system, positive, positive, positive, positive, (system, width, height, first, second) => inside(() => drawFrame({ kind: 'frame', version: 1, system, width, height, first, second, error: INCH / 16 }))), { numRuns: 300 })
  })
  it('a latch end that drops', () => {
    fc.assert(fc.property(common.system, positive, any, positive, fc.integer({ min: 0, max: 180_000 }), (system, width, out, apart, opened) => inside(() => drawDrop({ kind: 'drop', version: 1, system, width, out, apart, opened }))), { numRuns: 300 })
  })
  it('two leaves that meet', () => {
    fc.assert(fc.property(common.system, positive, positive, fc.integer({ min: 0, max: 64 * 8 }), fc.nat(64 * 40), positive, any, (system, one, other, gap, clearance, thickness, hingeRise) =>
      inside(() => drawLeaves({ kind: 'leaves', version: 1, system, first: { width: one, clearance: clearance * INCH / 64 }, second: { width: other, clearance: INCH }, opening: one + other + gap * INCH / 64, thickness, hingeRise }))), { numRuns: 300 })
  })
  it('ties and bands', () => {
    fc.assert(fc.property(common.system, positive, positive, fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { maxLength: 60 }), (system, length, spacing, shares) =>
      inside(() => drawFasteners({ kind: 'fasteners', version: 1, system, of: 'ties', length, rule: { spacing, start: spacing, end: spacing }, basis: null, positions: shares.map(share => Math.floor(share * length)) }))), { numRuns: 300 })
  })
})

describe('evenPositions', () => {
  it('places the fewest so that the rule finds no fault in them', () => {
    fc.assert(fc.property(fc.integer({ min: 1, max: 40_000 }), fc.integer({ min: 200, max: 4000 }), fc.nat(3000), fc.nat(3000), (length, spacing, start, end) => {
      const rule = { spacing, start, end }
      const positions = evenPositions(fewestFasteners(length, rule), length, rule)
      // Even places are rounded to whole lengths: one of them may stand out by one.
      expect(spacingFaults(positions, length, rule).filter(({ over }) => over > 1)).toEqual([])
    }))
  })
})
