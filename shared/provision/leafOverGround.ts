import type { ClearanceRange } from '../gate/bottomClearanceRange'
import type { Length } from '../measure/length'
import { bottomClearanceRange } from '../gate/bottomClearanceRange'
import { DEGREE } from '../gate/leaf'
import type { LineElement } from '../line/line'

/** What the limits on a leaf's closed gap and on its swing leave for hanging it. */
export interface LeafOverGround {
  /** 0 for the first leaf, 1 for the second of a double gate. */
  leaf: number
  width: Length
  range: ClearanceRange
}

/**
 * The bottom clearance at the hinge that keeps each swing leaf of a gate clear of the ground by `margin` to 90 degrees and under `closedAtMost` when closed, on ground that rises
 * along the line as it was drawn; none for gates that do not swing, or drawn steeper than 1 in 1.
 *
 * How the ground lies across the line is not drawn, so it is taken as level. That is the best case: over a plane the swing asks for at least what the closed leaf
 * asks for (arithmetic.md 5, M >= max(0, a)), so a clash told here is one on any ground, and a range told here may still narrow when the ground is measured.
 *
 * @throws {GateRefusal} notALength, notPositive
 */
export function leafOverGround({ gate, length, rise }: LineElement, margin: Length, closedAtMost: Length): LeafOverGround[] {
  if (!gate || !['singleSwing', 'doubleSwing'].includes(gate.form) || length <= 0 || Math.abs(rise) > length) return []
  return gate.leaves.map((width, leaf) => {
    // The second leaf of a double gate hangs at the other end; from there the ground runs the other way.
    const fromStart = (gate.hinge === 'start') === (leaf === 0)
    const plane = { along: { rise: fromStart ? rise : 0 - rise, over: length }, across: { rise: 0, over: length } }
    return { leaf, width, range: bottomClearanceRange({ width, margin, closedAtMost, to: 90 * DEGREE }, { plane }) }
  })
}
