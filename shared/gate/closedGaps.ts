import type { Length } from '../measure/length'
import { GateRefusal } from './gateRefusal'
import { checkLeaf, checkLength, type Leaf, type LineHeight } from './leaf'

/** The gaps under a closed leaf: largest and least, with their distance from the hinge. */
export interface ClosedGaps {
  largest: { gap: Length, distance: Length }
  least: { gap: Length, distance: Length }
}

/**
 * Checks heights measured along the closed leaf and cuts them to [0, width]. The hinge itself is the datum and need not be given.
 * Throws `tooFewReadings`, `notAscending`, `notCovered` when they do not reach the latch end.
 */
export function closedLine(heights: readonly LineHeight[], width: Length): LineHeight[] {
  const line = heights[0]?.distance === 0 ? [...heights] : [{ distance: 0, height: 0 }, ...heights]
  if (line.length < 2) throw new GateRefusal('tooFewReadings', 'heights', 'Measure the ground at the latch end at least.')
  line.forEach(({ distance, height }, i) => {
    checkLength(height, 'height')
    checkLength(distance, 'distance')
    const before = line[i - 1]
    if (distance < 0 || (before && before.distance >= distance)) throw new GateRefusal('notAscending', 'heights', 'Give the heights from the hinge outwards, each distance once.')
  })
  const beyond = line.findIndex(({ distance }) => distance >= width)
  if (beyond < 0) throw new GateRefusal('notCovered', 'heights', 'Measure up to the latch end: nothing is known of the ground beyond the last reading.')
  const [low, high] = [line[beyond - 1]!, line[beyond]!]
  const height = low.height + (high.height - low.height) * (width - low.distance) / (high.distance - low.distance)
  return [...line.slice(0, beyond), { distance: width, height }]
}

/**
 * The largest and the least gap under a closed leaf over ground measured along it, straight between readings.
 *
 * @param heights - ground over the ground at the hinge, by ascending distance, up to the latch end or beyond
 * @throws {GateRefusal} as a leaf does, and tooFewReadings, notAscending, notCovered
 *
 * Method: arithmetic.md 5; straight pieces have their extremes at the readings. A gap under 0 means that the leaf cannot be shut there.
 */
export function closedGaps(leaf: Leaf, heights: readonly LineHeight[]): ClosedGaps {
  const rake = checkLeaf(leaf)
  const gaps = closedLine(heights, leaf.width).map(({ distance, height }) => ({ gap: Math.round(leaf.clearance + rake * distance - height), distance }))
  return {
    largest: gaps.reduce((best, next) => next.gap > best.gap ? next : best),
    least: gaps.reduce((best, next) => next.gap < best.gap ? next : best),
  }
}
