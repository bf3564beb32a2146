import type { Length } from '../measure/length'
import { GateRefusal } from './gateRefusal'
import { angleOf, checkLength, checkPositive, DEGREE, radians, type Angle } from './leaf'

/** How the hinge line leans towards the latch: as an angle from plumb, or as how far the top hinge stands out over the bottom one. */
export type HingeLean = { angle: Angle } | { out: Length, apart: Length }

export interface LatchEndDrop {
  /** The hinge line from plumb. */
  angle: Angle
  /** How far the latch end of the closed leaf hangs lower than a plumb hinge line would have it; negative: higher. */
  closed: Length
  /** The same with the leaf opened to the angle asked. */
  opened: Length
}

/**
 * How far the latch end drops when the hinge line leans (post out of plumb, hinge worn or slipped): W sin(lean) closed, times cos(opening) when opened.
 *
 * @param opening - opening angle at which the drop is asked too, 0 to 180 degrees
 * @throws {GateRefusal} notPositive, notALength, lean (over 45 degrees: no hinge line), angleOutOfRange
 *
 * Method: rotation of the leaf's own plane about the hinge; arithmetic.md 5.
 */
export function latchEndDrop(width: Length, lean: HingeLean, opening: Angle): LatchEndDrop {
  checkPositive(width, 'leaf width')
  if (!Number.isSafeInteger(opening) || opening < 0 || opening > 180 * DEGREE) throw new GateRefusal('angleOutOfRange', 'opening', 'Give an opening angle from 0 to 180 degrees.')
  const turn = 'angle' in lean ? radians(lean.angle) : turnOf(lean)
  if (!(Math.abs(turn) <= Math.PI / 4)) throw new GateRefusal('lean', 'lean', 'A hinge line that leans more than 45 degrees is a slip: measure it again.')
  const closed = width * Math.sin(turn)
  return { angle: angleOf(turn), closed: Math.round(closed), opened: Math.round(closed * Math.cos(radians(opening))) }
}

function turnOf({ out, apart }: { out: Length, apart: Length }): number {
  checkLength(out, 'top hinge out')
  checkPositive(apart, 'distance between hinges')
  return Math.atan2(out, apart)
}
