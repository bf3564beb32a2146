import type { Length } from '../measure/length'
import { GateRefusal } from './gateRefusal'
import { checkLeaf, checkLength, checkPositive, type Leaf } from './leaf'

/** A double gate: two leaves, the distance between their hinge lines, the thickness of the frames, and how much higher the ground is at the second hinge. */
export interface DoubleGate { first: Leaf, second: Leaf, opening: Length, thickness: Length, hingeRise: Length }

export interface DoubleLeaves {
  /** Gap between the closed leaves. */
  closed: Length
  /** Least gap while one leaf opens and the other stays shut (the first, the second): the corner behind swings out past the end of the leaf. */
  firstAlone: Length
  secondAlone: Length
  /** Least gap while both move. */
  together: Length
  /** True when a corner would meet the other leaf. */
  binds: boolean
  /** Gap that lets both move freely with nothing to spare. */
  needed: Length
  /** How much the bottom of the second leaf stands higher than that of the first where they meet. */
  step: Length
}

/**
 * A double gate's leaves against each other: the gap where they meet, closed and while they move, and the step between their bottom edges.
 *
 * @throws {GateRefusal} as a leaf does, and leavesTooWide when the two do not fit between the hinge lines
 *
 * Method: hinge in the middle of the frame's thickness d; the corner behind is at hypot(W, d/2) from the hinge and crosses the closed line, so it needs hypot(W, d/2) - W.
 */
export function doubleLeaves({ first, second, opening, thickness, hingeRise }: DoubleGate): DoubleLeaves {
  const rakes = [checkLeaf(first), checkLeaf(second)] as const
  checkPositive(opening, 'opening')
  checkPositive(thickness, 'frame thickness')
  checkLength(hingeRise, 'rise between the hinges')
  const closed = opening - first.width - second.width
  if (closed < 0) throw new GateRefusal('leavesTooWide', 'opening', 'The two leaves are wider than the opening between their hinges: measure them again.')
  const swell = (leaf: Leaf) => Math.hypot(leaf.width, thickness / 2) - leaf.width
  const gapLess = (needed: number) => Math.round(closed - needed)
  const together = gapLess(swell(first) + swell(second))
  return {
    closed,
    firstAlone: gapLess(swell(first)),
    secondAlone: gapLess(swell(second)),
    together,
    binds: together < 0,
    needed: closed - together,
    step: Math.round(hingeRise + second.clearance + second.width * rakes[1] - first.clearance - first.width * rakes[0]),
  }
}
