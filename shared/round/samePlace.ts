import type { Place } from '../entry/entry'
import type { Length } from '../measure/length'

/**
 * Whether two readings of one check on one element are of the same place: same face, same bay, distance and height within the check's tolerance. Only such
 * readings can disagree; others add up. A distance from either end is brought to the start by the element's length. What one of them does
 * not say, the other must not say either: a reading without a bay is not of every bay.
 */
export function samePlace(a: Place | null, b: Place | null, tolerance: Length, length: Length): boolean {
  if (a === b) return true
  if ((a?.face ?? null) !== (b?.face ?? null) || (a?.bay ?? null) !== (b?.bay ?? null)) return false
  return near(fromStart(a, length), fromStart(b, length), tolerance) && near(a?.height ?? null, b?.height ?? null, tolerance)
}

function fromStart(place: Place | null, length: Length): Length | null {
  const from = place?.from ?? null
  return from === null ? null : from.end === 'start' ? from.distance : length - from.distance
}

function near(a: Length | null, b: Length | null, tolerance: Length): boolean {
  return a === null || b === null ? a === b : a - b <= tolerance && b - a <= tolerance
}
