/** Why a sample cannot be reckoned; screens word each code in their own language. */
export const SAMPLING_REFUSALS = {
  lot: 'How many there are in all must be a whole number from 1 to 100,000.',
  sample: 'How many were tried must be a whole number, and no more than there are.',
  bad: 'How many were bad must be a whole number, and no more than were tried.',
  tolerated: 'The tolerated share must be from 0 to under 100 %.',
  confidence: 'The confidence must be over 0 and under 100 %.',
  seed: 'The seed must be a whole number from 1 to 2147483646.',
} as const
export type SamplingRefusalCode = keyof typeof SAMPLING_REFUSALS

/** Numbers that no sample can be reckoned from. `code` is stable, `message` says in English what to do. */
export class SamplingRefused extends Error {
  override readonly name = 'SamplingRefused'
  constructor(readonly code: SamplingRefusalCode) {
    super(SAMPLING_REFUSALS[code])
  }
}

/** Largest lot that is reckoned with exact integers in good time. */
export const LARGEST_LOT = 100_000

/** @throws {SamplingRefused} with `code` unless `value` is a whole number from `least` to `most` */
export function checkWhole(value: number, least: number, most: number, code: SamplingRefusalCode): void {
  if (!Number.isSafeInteger(value) || value < least || value > most) throw new SamplingRefused(code)
}
