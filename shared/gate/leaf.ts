import type { Length } from '../measure/length'
import { GateRefusal } from './gateRefusal'

/**
 * Axes of everything in shared/gate: the hinge line is the origin, x runs along the closed leaf, y to the side it opens to, z up.
 * Heights of ground are over the ground at the hinge. The ground between two given heights is straight.
 */

/** An angle, a whole number of 1/1000 degree; 0 is closed. */
export type Angle = number
/** One degree as an {@link Angle}. */
export const DEGREE: Angle = 1000
/** A leaf is followed no further than this. */
export const FURTHEST: Angle = 180 * DEGREE

/** How much something rises (negative: falls) over a run, as a tape and a level give it. */
export interface Slope { rise: Length, over: Length }

/** A leaf as it hangs: its width from hinge line to latch end, the gap under it at the hinge, and the rake of its bottom edge (rising away from the hinge). */
export interface Leaf { width: Length, clearance: Length, rake?: Slope }

/** Ground as a plane: how it rises along the closed leaf, and across, to the side that the leaf opens to. */
export interface PlaneGround { along: Slope, across: Slope }

/** Ground measured under the latch end: its height over the ground at the hinge, at an opening angle. */
export interface ArcHeight { angle: Angle, height: Length }

/** Ground measured under the closed leaf: its height over the ground at the hinge, at a distance from the hinge. */
export interface LineHeight { distance: Length, height: Length }

const STEEPEST = 1

/** Checks that a length is a {@link Length}; throws `notALength`. */
export function checkLength(value: Length, field: string): void {
  if (!Number.isSafeInteger(value)) throw new GateRefusal('notALength', field, `Give ${field} as a length.`)
}

/** Checks that a length is over 0; throws `notALength` or `notPositive`. */
export function checkPositive(value: Length, field: string): void {
  checkLength(value, field)
  if (value <= 0) throw new GateRefusal('notPositive', field, `Give ${field} as a length over 0.`)
}

/** Checks an opening angle that is to be reached; throws `angleOutOfRange`. */
export function checkOpening(to: Angle): void {
  if (!Number.isSafeInteger(to) || to <= 0 || to > FURTHEST) throw new GateRefusal('angleOutOfRange', 'angle', 'Give an opening angle over 0 and up to 180 degrees.')
}

/** Rise over run as a number; level when not given. Throws `noRun`, `tooSteep` (over 1 in 1), `notALength`. */
export function ratioOf(slope: Slope | undefined, field: string): number {
  if (!slope) return 0
  checkLength(slope.rise, field)
  checkLength(slope.over, field)
  if (slope.over <= 0) throw new GateRefusal('noRun', field, `Say over what length ${field} rises.`)
  if (Math.abs(slope.rise) > STEEPEST * slope.over) throw new GateRefusal('tooSteep', field, `${field} is steeper than 1 in 1: check the rise and the length it was taken over.`)
  return slope.rise / slope.over
}

/** Checks a leaf; throws `notPositive` for its width, `negativeClearance` for a leaf hung under the ground. Answers its rake as a number. */
export function checkLeaf(leaf: Leaf): number {
  checkPositive(leaf.width, 'leaf width')
  checkLength(leaf.clearance, 'clearance at the hinge')
  if (leaf.clearance < 0) throw new GateRefusal('negativeClearance', 'clearance at the hinge', 'The gap under the leaf at the hinge cannot be under 0: measure from the ground up.')
  return ratioOf(leaf.rake, 'bottom edge')
}

/** Radians of an {@link Angle}. */
export const radians = (angle: Angle): number => angle / DEGREE / 180 * Math.PI
/** The {@link Angle} nearest to radians. */
export const angleOf = (radian: number): Angle => Math.round(radian * 180 / Math.PI * DEGREE)
