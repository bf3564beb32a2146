import type { Length } from '../measure/length'
import { FOOT } from '../measure/length'
import { CountRefused } from './countRefused'

/** A rule of thumb of the trade for the bands on one side of a leaf or at one terminal post. */
export const TENSION_BAND_RULES = ['feetLessOne', 'onePerFoot', 'onePerFootAndOne'] as const
export interface TensionBandHint { rule: (typeof TENSION_BAND_RULES)[number], bands: number }

/**
 * How many tension bands the trade's rules of thumb come to for a fabric height. They contradict each other, so they are hints beside the spacing, never a limit. Feet that are
 * begun count as full, and one band is the least.
 *
 * COMMON PRACTICE, no source (arithmetic.md 7).
 *
 * @throws {CountRefused} length
 */
export function tensionBandHints(height: Length): TensionBandHint[] {
  if (!Number.isSafeInteger(height) || height <= 0) throw new CountRefused('length')
  const feet = Math.ceil(height / FOOT)
  const bands = { feetLessOne: Math.max(1, feet - 1), onePerFoot: feet, onePerFootAndOne: feet + 1 }
  return TENSION_BAND_RULES.map(rule => ({ rule, bands: bands[rule] }))
}
