import type { Length } from '../measure/length'
import { CountRefused } from './countRefused'

/** How ties, bands or other fasteners must stand along a length: farthest from one to the next, and from each end to the nearest. */
export interface SpacingRule {
  spacing: Length
  start: Length
  end: Length
}

/**
 * The fewest fasteners that hold a length: one if it covers both ends, else ceil((length - start - end) / spacing) + 1. The spacing is the requirement, the count only follows.
 *
 * @throws {CountRefused} length, spacing, endDistance
 */
export function fewestFasteners(length: Length, rule: SpacingRule): number {
  checkRule(length, rule)
  const between = length - rule.start - rule.end
  if (between <= 0) return 1
  const left = between % rule.spacing
  return (between - left) / rule.spacing + (left > 0 ? 1 : 0) + 1
}

/** A stretch that is longer than the rule allows. `from` and `to` are places in the sorted list of positions; null is an end of the length. */
export interface SpacingFault {
  from: number | null
  to: number | null
  start: Length
  gap: Length
  /** What the rule allows here. */
  allowed: Length
  over: Length
}

/**
 * Where fasteners stand too far apart or too far from an end. Without any, the whole length is one fault, against the nearer of both ends.
 *
 * @param positions - from the start of the length, in any order
 * @throws {CountRefused} length, spacing, endDistance, position
 */
export function spacingFaults(positions: readonly Length[], length: Length, rule: SpacingRule): SpacingFault[] {
  checkRule(length, rule)
  for (const [index, position] of positions.entries()) {
    if (!Number.isSafeInteger(position) || position < 0 || position > length) throw new CountRefused('position', index)
  }
  const sorted = [...positions].sort((first, second) => first - second)
  const stretches = sorted.length === 0
    ? [{ from: null, to: null, start: 0, gap: length, allowed: Math.min(rule.start, rule.end) }]
    : [
        { from: null, to: 0, start: 0, gap: sorted[0]!, allowed: rule.start },
        ...sorted.slice(1).map((position, index) => ({ from: index, to: index + 1, start: sorted[index]!, gap: position - sorted[index]!, allowed: rule.spacing })),
        { from: sorted.length - 1, to: null, start: sorted.at(-1)!, gap: length - sorted.at(-1)!, allowed: rule.end },
      ]
  // A length with no fastener at all is held nowhere, however short.
  return stretches.filter(({ gap, allowed }) => gap > allowed || sorted.length === 0).map(stretch => ({ ...stretch, over: Math.max(0, stretch.gap - stretch.allowed) }))
}

function checkRule(length: Length, { spacing, start, end }: SpacingRule): void {
  if (!Number.isSafeInteger(length) || length <= 0) throw new CountRefused('length')
  if (!Number.isSafeInteger(spacing) || spacing <= 0) throw new CountRefused('spacing')
  for (const distance of [start, end]) if (!Number.isSafeInteger(distance) || distance < 0) throw new CountRefused('endDistance')
}
