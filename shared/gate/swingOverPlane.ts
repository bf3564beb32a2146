import type { Length } from '../measure/length'
import { angleOf, checkLeaf, checkLength, checkOpening, radians, ratioOf, type Angle, type Leaf, type PlaneGround } from './leaf'
import type { Swing } from './swing'

/**
 * The gap under the latch end of a leaf that stands at an opening angle over a plane: g0 + W (s - a cos t - b sin t).
 * Along the leaf the gap is straight, so that this and the gap at the hinge bound all others. Nearest {@link Length}; may be under 0.
 * Throws GateRefusal as {@link swingOverPlane}.
 */
export function latchGapOverPlane(leaf: Leaf, ground: PlaneGround, angle: Angle): Length {
  const rake = checkLeaf(leaf)
  const [a, b] = [ratioOf(ground.along, 'ground along the leaf'), ratioOf(ground.across, 'ground across')]
  return Math.round(leaf.clearance + leaf.width * (rake - a * Math.cos(radians(angle)) - b * Math.sin(radians(angle))))
}

/** Steepest rise that the latch end meets from closed to `to`, and at which angle (radians): the largest a cos t + b sin t. */
export function steepestMet(a: number, b: number, to: number): { slope: number, angle: number } {
  const ends = [{ slope: a, angle: 0 }, { slope: a * Math.cos(to) + b * Math.sin(to), angle: to }]
  const uphill = Math.atan2(b, a)
  if (uphill > 0 && uphill < to) ends.push({ slope: Math.hypot(a, b), angle: uphill })
  return ends.reduce((best, next) => next.slope > best.slope ? next : best)
}

/** Where in [0, to] (radians) the rise met by the latch end is over `level`: the hump of R cos(t - uphill), up to two stretches. */
export function stretchesOver(a: number, b: number, level: number, to: number): { from: number, to: number }[] {
  const steepest = Math.hypot(a, b)
  if (level >= steepest) return []
  if (level < -steepest) return [{ from: 0, to }]
  const half = Math.acos(level / steepest)
  const uphill = Math.atan2(b, a)
  return [uphill, uphill + 2 * Math.PI]
    .map(middle => ({ from: Math.max(0, middle - half), to: Math.min(to, middle + half) }))
    .filter(stretch => stretch.from < stretch.to)
}

/**
 * Swings a leaf over a plane from closed to an angle: least gap, first contact, where the gap is under a margin, and the gap at the hinge that would do.
 *
 * @param margin - gap asked under the leaf all the way; 0 or more
 * @param to - how far it is to open
 * @throws {GateRefusal} notALength, notPositive, negativeClearance, noRun, tooSteep, angleOutOfRange
 *
 * Method: arithmetic.md 5; gap(r, t) = g0 + r (s - a cos t - b sin t) is straight in r, so hinge and latch end bound it.
 * @example
 * // 92 in leaf, ground rising 1 in 48 in across, 1 7/8 in at the hinge: least is at 90 degrees
 * swingOverPlane({ width: 92 * INCH, clearance: 1.875 * INCH }, { along: level, across: { rise: INCH, over: 48 * INCH } }, INCH / 2, 90_000).least.angle // => 90000
 */
export function swingOverPlane(leaf: Leaf, ground: PlaneGround, margin: Length, to: Angle): Swing {
  const rake = checkLeaf(leaf)
  checkLength(margin, 'margin')
  checkOpening(to)
  const [a, b] = [ratioOf(ground.along, 'ground along the leaf'), ratioOf(ground.across, 'ground across')]
  const [width, end] = [leaf.width, radians(to)]
  const met = steepestMet(a, b, end)
  const latch = Math.round(leaf.clearance + width * (rake - met.slope))
  // The rise at which the gap at the latch end comes down to a given height.
  const levelFor = (gap: Length) => rake + (leaf.clearance - gap) / width
  const under = leaf.clearance < margin
    ? [{ from: 0, to }]
    : stretchesOver(a, b, levelFor(margin), end).map(stretch => ({ from: angleOf(stretch.from), to: angleOf(stretch.to) }))
  return {
    least: latch < leaf.clearance ? { gap: latch, angle: angleOf(met.angle), at: 'latch' } : { gap: leaf.clearance, angle: 0, at: 'hinge' },
    contact: leaf.clearance === 0 ? 0 : firstContact(),
    under,
    needed: Math.round(margin + width * Math.max(0, met.slope - rake)),
  }

  function firstContact(): Angle | null {
    if (latch > 0) return null
    if (latch === 0) return angleOf(met.angle)
    return angleOf(stretchesOver(a, b, levelFor(0), end)[0]?.from ?? met.angle)
  }
}
