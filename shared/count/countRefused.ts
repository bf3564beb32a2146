/** Why a spacing cannot be reckoned; screens word each code in their own language. */
export const COUNT_REFUSALS = {
  length: 'The length to be held must be more than zero: measure it again.',
  spacing: 'The largest spacing must be more than zero: set it where the limit is set.',
  endDistance: 'The largest distance from an end is zero or more: correct it where the limit is set.',
  position: 'This fastener lies outside the length: measure it from the start again.',
} as const
export type CountRefusalCode = keyof typeof COUNT_REFUSALS

/** Lengths or limits that no spacing can be reckoned from. `code` is stable, `message` says in English what to do, `index` is the place in the list at fault. */
export class CountRefused extends Error {
  override readonly name = 'CountRefused'
  constructor(readonly code: CountRefusalCode, readonly index: number | null = null) {
    super(COUNT_REFUSALS[code])
  }
}
