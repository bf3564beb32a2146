import type { Length } from '../measure/length'
import { GateRefusal } from './gateRefusal'
import { angleOf, checkLeaf, checkLength, checkOpening, radians, type Angle, type Leaf } from './leaf'

/** A spot of ground: along the closed leaf from the hinge, across to the side it opens to, and its height over the ground at the hinge. */
export interface GroundPoint { along: Length, across: Length, height: Length }

/** What comes of a leaf that is swung over single spots; of the ground between them nothing is said. */
export interface PointSwing {
  /** The least gap over a spot, which one (index), and at which angle the leaf stands over it. */
  least: { gap: Length, point: number, angle: Angle }
  /** First angle at which a spot is touched; null when none is. */
  contact: Angle | null
  /** Smallest gap at the hinge that leaves the margin over every spot, and at the hinge. */
  needed: Length
  /** Indices of spots that the leaf never passes over. */
  outside: number[]
}

/**
 * Swings a leaf over scattered spots of ground (a stone, a manhole, a root): gap = g0 + s r - height for each spot within its reach.
 *
 * @param margin - gap asked over every spot
 * @throws {GateRefusal} as a leaf does, and tooFewReadings (none), noPointInSwing when the leaf passes over none of them, angleOutOfRange
 *
 * Method: arithmetic.md 5. The leaf is taken as a line: spots nearer to its edge than its thickness want a look.
 */
export function swingOverPoints(leaf: Leaf, points: readonly GroundPoint[], margin: Length, to: Angle): PointSwing {
  const rake = checkLeaf(leaf)
  checkLength(margin, 'margin')
  checkOpening(to)
  if (points.length === 0) throw new GateRefusal('tooFewReadings', 'points', 'Measure one spot of ground at least.')
  const end = radians(to)
  const met = points.flatMap((point, index) => {
    checkLength(point.along, 'point')
    checkLength(point.across, 'point')
    checkLength(point.height, 'height')
    const [distance, angle] = [Math.hypot(point.along, point.across), Math.atan2(point.across, point.along)]
    // Under the hinge itself every angle passes: it counts from the start.
    const turned = distance === 0 ? 0 : angle
    return distance <= leaf.width && turned >= 0 && turned <= end
      ? [{ index, angle: angleOf(turned), rise: point.height - rake * distance }]
      : []
  })
  if (met.length === 0) throw new GateRefusal('noPointInSwing', 'points', 'The leaf passes over none of these spots: measure within its reach and its opening angle.')
  const worst = met.reduce((best, next) => next.rise > best.rise ? next : best)
  const touched = met.filter(({ rise }) => Math.round(leaf.clearance - rise) <= 0).map(({ angle }) => angle)
  const inside = new Set(met.map(({ index }) => index))
  return {
    least: { gap: Math.round(leaf.clearance - worst.rise), point: worst.index, angle: worst.angle },
    contact: touched.length > 0 ? Math.min(...touched) : null,
    needed: Math.round(margin + Math.max(0, worst.rise)),
    outside: points.flatMap((_, index) => inside.has(index) ? [] : [index]),
  }
}
