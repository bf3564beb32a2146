import type { Length } from '../measure/length'
import { GateRefusal } from './gateRefusal'
import { checkLeaf, checkLength, checkOpening, type Angle, type ArcHeight, type Leaf } from './leaf'
import type { Swing } from './swing'

/**
 * Checks heights measured under the latch end and cuts them to [0, to], with a height at each end.
 * Throws `tooFewReadings` (under two), `notAscending`, `notCovered` when they do not reach from closed to the wanted angle.
 */
export function heightsTo(heights: readonly ArcHeight[], to: Angle): ArcHeight[] {
  checkOpening(to)
  const [first, last] = [heights[0], heights.at(-1)]
  if (heights.length < 2 || !first || !last) throw new GateRefusal('tooFewReadings', 'heights', 'Measure the ground under the latch end at two angles at least.')
  heights.forEach(({ angle, height }, i) => {
    checkLength(height, 'height')
    const before = heights[i - 1]
    if (!Number.isSafeInteger(angle) || (before && before.angle >= angle)) throw new GateRefusal('notAscending', 'heights', 'Give the heights in the order of the swing, each angle once.')
  })
  if (first.angle > 0 || last.angle < to) throw new GateRefusal('notCovered', 'heights', 'Measure from the closed leaf up to the wanted angle: nothing is known of the ground beyond.')
  const inside = heights.filter(({ angle }) => angle > 0 && angle < to)
  return [{ angle: 0, height: heightAt(heights, 0) }, ...inside, { angle: to, height: heightAt(heights, to) }]
}

/** Height of ground under the latch end at an angle, straight between the readings beside it (in the angle); not rounded. */
export function heightAt(heights: readonly ArcHeight[], angle: Angle): number {
  const next = Math.max(1, heights.findIndex(reading => reading.angle >= angle))
  const [low, high] = [heights[next - 1]!, heights[next]!]
  return low.height + (high.height - low.height) * (angle - low.angle) / (high.angle - low.angle)
}

/** The gap under the latch end at an angle over measured heights; nearest {@link Length}, may be under 0. Throws as {@link swingOverArc}. */
export function latchGapOverArc(leaf: Leaf, heights: readonly ArcHeight[], angle: Angle): Length {
  return Math.round(leaf.clearance + leaf.width * checkLeaf(leaf) - heightAt(heights, angle))
}

/**
 * Swings a leaf over ground that was measured under its latch end: straight between the readings along the arc, and straight from there to the hinge.
 *
 * @param heights - ground under the latch end over the ground at the hinge, by ascending angle, from 0 to `to` or beyond
 * @param margin - gap asked under the leaf all the way
 * @throws {GateRefusal} as a leaf does, and tooFewReadings, notAscending, notCovered, angleOutOfRange
 *
 * Method: arithmetic.md 5.
 */
export function swingOverArc(leaf: Leaf, heights: readonly ArcHeight[], margin: Length, to: Angle): Swing {
  const edge = leaf.clearance + leaf.width * checkLeaf(leaf)
  checkLength(margin, 'margin')
  const knots = heightsTo(heights, to)
  const highest = knots.reduce((best, next) => next.height > best.height ? next : best)
  const latch = Math.round(edge - highest.height)
  const contact = leaf.clearance === 0 ? 0 : (stretchesUnder(knots, edge, 0, true)[0]?.from ?? null)
  return {
    least: latch < leaf.clearance ? { gap: latch, angle: highest.angle, at: 'latch' } : { gap: leaf.clearance, angle: 0, at: 'hinge' },
    contact,
    under: leaf.clearance < margin ? [{ from: 0, to }] : stretchesUnder(knots, edge, margin, false),
    needed: Math.round(margin + Math.max(0, highest.height - (edge - leaf.clearance))),
  }
}

/** Where edge - height is under a gap (or touches it, when `touching`), as whole angles. */
function stretchesUnder(knots: ArcHeight[], edge: number, gap: number, touching: boolean): { from: Angle, to: Angle }[] {
  const found: { from: number, to: number }[] = []
  const within = (value: number) => touching ? value <= gap : value < gap
  for (let i = 1; i < knots.length; i++) {
    const [low, high] = [knots[i - 1]!, knots[i]!]
    const [g0, g1] = [edge - low.height, edge - high.height]
    if (!within(g0) && !within(g1)) continue
    const crossing = low.angle + (high.angle - low.angle) * (g0 - gap) / (g0 - g1)
    const stretch = { from: within(g0) ? low.angle : crossing, to: within(g1) ? high.angle : crossing }
    const before = found.at(-1)
    if (before && before.to === stretch.from) before.to = stretch.to
    else found.push(stretch)
  }
  return found.map(stretch => ({ from: Math.round(stretch.from), to: Math.round(stretch.to) }))
}
