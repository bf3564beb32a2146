import type { Length, System } from './length'

/**
 * Which of two lengths is longer: -1 when the first is shorter, 0 when they are the same, 1 when it is longer. Exact.
 *
 * @throws {RangeError} when one is not a whole number
 */
export function compareLengths(first: Length, second: Length): -1 | 0 | 1 {
  if (!Number.isSafeInteger(first) || !Number.isSafeInteger(second)) throw new RangeError('A length is a whole number of 1/320,000 mm.')
  return first < second ? -1 : first > second ? 1 : 0
}

/** A figure as its source prints it, in one system or in both; the two are seldom the same length (54 in is 1371.6 mm, printed 1372 mm). */
export interface DualLength { imperial?: Length, metric?: Length }

export interface DualComparison {
  /** As {@link compareLengths} of the reading against the figure that decided. */
  order: -1 | 0 | 1
  /** Whose figure decided: the reading's own system, or the other where the source prints no figure in it. */
  decidedBy: System
  /** How the other figure would have it; the same as `order` where there is no other. */
  otherOrder: -1 | 0 | 1
}

/**
 * Compares a reading with a figure that may be printed in both systems: the figure of the reading's system decides (arithmetic.md 1).
 *
 * @throws {RangeError} when the figure is printed in neither system
 */
export function compareWithDual(reading: { amount: Length, system: System }, figure: DualLength): DualComparison {
  const other: System = reading.system === 'imperial' ? 'metric' : 'imperial'
  const decidedBy = figure[reading.system] !== undefined ? reading.system : other
  const deciding = figure[decidedBy]
  if (deciding === undefined) throw new RangeError('The limit has no figure: give it one in inches or in millimetres.')
  const order = compareLengths(reading.amount, deciding)
  const otherFigure = figure[decidedBy === 'imperial' ? 'metric' : 'imperial']
  return { order, decidedBy, otherOrder: otherFigure === undefined ? order : compareLengths(reading.amount, otherFigure) }
}
