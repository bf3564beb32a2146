import type { Length } from '../measure/length'
import { GateRefusal } from './gateRefusal'
import { angleOf, checkLength, checkPositive, type Angle } from './leaf'

/** A frame's sides and its two diagonals, all taken between the same corners. `first` runs from the lower hinge corner to the upper latch corner. */
export interface FrameMeasures { width: Length, height: Length, first: Length, second: Length }

export interface Squareness {
  /** First diagonal less second. */
  difference: Length
  /** What both would be, were the frame square. */
  trueDiagonal: Length
  /** How far the top leans towards the latch over the frame's height; negative: towards the hinge. */
  lean: Length
  /** The same as an angle from square. */
  angle: Angle
  /** Root mean square of the two less the true diagonal: of a frame with straight parallel sides it is 0. */
  mismatch: Length
  /** Whether sides and diagonals can belong to one frame, within the error of the tape. */
  consistent: boolean
}

/**
 * Whether a frame is square, from two diagonals, and whether they can be right at all.
 *
 * @param measures - the two sides and the two diagonals
 * @param error - how far the tape may be out on any of them, 0 or more
 * @throws {GateRefusal} notPositive, notALength, diagonalTooLong when a diagonal is as long as both sides together
 *
 * Method: parallelogram law, d1^2 + d2^2 = 2 (w^2 + h^2) and d1^2 - d2^2 = 4 w h sin(angle).
 */
export function squareness({ width, height, first, second }: FrameMeasures, error: Length): Squareness {
  for (const [field, value] of Object.entries({ width, height, 'first diagonal': first, 'second diagonal': second })) checkPositive(value, field)
  checkLength(error, 'error')
  if (Math.max(first, second) >= width + height) throw new GateRefusal('diagonalTooLong', 'diagonals', 'A diagonal is shorter than width and height together: measure it again.')
  const trueDiagonal = Math.round(Math.hypot(width, height))
  const lean = (first - second) * ((first + second) / (4 * width))
  const mismatch = Math.round(Math.hypot(first, second) / Math.SQRT2 - Math.hypot(width, height))
  // Each side and each diagonal may be out by the error; the true diagonal then by (w + h) / d of it, the mean of the diagonals by all of it.
  const allowed = error * (1 + (width + height) / trueDiagonal)
  return {
    difference: first - second,
    trueDiagonal,
    lean: Math.round(lean),
    angle: angleOf(Math.asin(Math.max(-1, Math.min(1, lean / height)))),
    mismatch,
    consistent: Math.abs(mismatch) <= Math.max(1, allowed) && Math.abs(lean) <= height,
  }
}
