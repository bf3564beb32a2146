import type { Length } from '../measure/length'
import { GateRefusal } from './gateRefusal'
import { angleOf, checkLength, checkOpening, checkPositive, radians, type Angle } from './leaf'
import { distanceTo, eventsOnCircle, leafSides, turn, within, type Point, type Segment } from './planGeometry'

/** A leaf in plan: from the hinge line to its latch end, with the hinge line in the middle of its thickness. */
export interface LeafPlan { width: Length, thickness: Length }

/** What stands about a gate, in plan (x along the closed leaf from the hinge, y to the side it opens to). */
export type Obstacle =
  /** A round post by its centre. */
  | { kind: 'post', along: Length, across: Length, diameter: Length }
  /** A wall in front, parallel to the closed leaf. */
  | { kind: 'facingWall', across: Length }
  /** A wall behind the hinge, square to the closed leaf, so far back; it keeps a leaf from opening past square. */
  | { kind: 'wallBehind', back: Length }
  /** A box (a bin, a step, a machine), its sides along the axes. */
  | { kind: 'box', along: readonly [Length, Length], across: readonly [Length, Length] }
  /** A floor space that must stay free of the leaf. It stops nothing. */
  | { kind: 'clearSpace', along: readonly [Length, Length], across: readonly [Length, Length] }

export interface Envelope {
  /** First angle at which the leaf touches it or enters it; null when it never does. */
  contact: Angle | null
  /** How far the leaf opens: to the contact, or to the wanted angle (always, for a clear space). */
  opens: Angle
  /** Least distance between leaf and obstacle on the way; 0 when they touch. */
  clearance: Length
}

/** Within this of touching counts as touching: far finer than any tape, far coarser than the floats. About 0.00005 mm. */
const TOUCH = 16

/**
 * The path of a swinging leaf, thickness and all, against one thing that stands about it.
 *
 * @throws {GateRefusal} notPositive, notALength, angleOutOfRange, obstacleInLeaf when it stands in the closed leaf
 *
 * Method: every nearest and every touching position of a turning rectangle lies at an angle known in closed form (a corner against a side, a side against a corner);
 * all of them are tried. Walls are taken as long as they matter.
 */
export function swingEnvelope(leaf: LeafPlan, obstacle: Obstacle, to: Angle): Envelope {
  checkPositive(leaf.width, 'leaf width')
  checkPositive(leaf.thickness, 'frame thickness')
  checkOpening(to)
  const { sides, points, offset } = outlineOf(obstacle, leaf)
  const [end, half] = [radians(to), leaf.thickness / 2]
  const shell = leafSides(leaf.width, half)
  const corners = shell.map(([corner]) => corner)

  const distanceAt = (angle: number): number => {
    const seen = points.map(point => turn(point, -angle))
    if (seen.some(([x, y]) => x >= 0 && x <= leaf.width && Math.abs(y) <= half)) return 0
    // A box round a whole end of the leaf has no corner inside it.
    if (points.length > 1 && corners.some(corner => covers(points, turn(corner, angle)))) return 0
    const fromPoints = seen.flatMap(point => shell.map(side => distanceTo(point, side)))
    const fromCorners = corners.flatMap(corner => sides.map(side => distanceTo(turn(corner, angle), side)))
    return Math.max(0, Math.min(...fromPoints, ...fromCorners) - offset)
  }
  const angles = within([
    // An outside point turns backwards in the leaf's own frame.
    ...points.flatMap(([x, y]) => shell.flatMap(side => eventsOnCircle(Math.hypot(x, y), side, offset).map(angle => Math.atan2(y, x) - angle))),
    ...corners.flatMap(([x, y]) => sides.flatMap(side => eventsOnCircle(Math.hypot(x, y), side, offset).map(angle => angle - Math.atan2(y, x)))),
  ], end)
  if (distanceAt(0) <= 0 && obstacle.kind !== 'clearSpace') throw new GateRefusal('obstacleInLeaf', 'obstacle', 'This stands where the closed leaf is: measure its place again.')
  const contact = angles.find(angle => distanceAt(angle) <= TOUCH)
  return {
    contact: contact === undefined ? null : angleOf(contact),
    opens: contact === undefined || obstacle.kind === 'clearSpace' ? to : angleOf(contact),
    clearance: contact === undefined ? Math.round(Math.min(...angles.map(distanceAt))) : 0,
  }
}

/** An obstacle as segments and points with a thickness round them. */
function outlineOf(obstacle: Obstacle, leaf: LeafPlan): { sides: Segment[], points: Point[], offset: number } {
  const far = 4 * (leaf.width + leaf.thickness)
  switch (obstacle.kind) {
    case 'post':
      checkLength(obstacle.along, 'post along')
      checkLength(obstacle.across, 'post across')
      checkPositive(obstacle.diameter, 'post diameter')
      return { sides: [], points: [[obstacle.along, obstacle.across]], offset: obstacle.diameter / 2 }
    case 'facingWall':
      checkPositive(obstacle.across, 'distance of the wall')
      return wall([-far, obstacle.across], [far, obstacle.across])
    case 'wallBehind':
      checkPositive(obstacle.back, 'distance of the wall')
      return wall([-obstacle.back, -far], [-obstacle.back, far])
    case 'box':
    case 'clearSpace': {
      const [[x1, x2], [y1, y2]] = [obstacle.along, obstacle.across]
      for (const value of [x1, x2, y1, y2]) checkLength(value, 'box')
      if (x1 >= x2 || y1 >= y2) throw new GateRefusal('notPositive', 'box', 'Give the nearer and then the farther side of the box.')
      const points: Point[] = [[x1, y1], [x2, y1], [x2, y2], [x1, y2]]
      return { sides: points.map((point, i) => [point, points[(i + 1) % 4]!]), points, offset: 0 }
    }
  }
}

function wall(from: Point, to: Point): { sides: Segment[], points: Point[], offset: number } {
  return { sides: [[from, to]], points: [], offset: 0 }
}

/** Whether a box, its corners from the nearest to the farthest and back, covers a point. */
function covers([near, , far]: readonly Point[], [x, y]: Point): boolean {
  return !!near && !!far && x >= near[0] && x <= far[0] && y >= near[1] && y <= far[1]
}
