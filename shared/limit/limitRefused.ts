/** Why a reading cannot be held against limits, or limits against each other; screens word each code in their own language. */
export const LIMIT_REFUSALS = {
  notWhole: 'An amount here is a whole number of its unit: enter the reading again.',
  tooLarge: 'This amount is too large to be a reading: enter it again.',
  uncertainty: 'The uncertainty of an instrument is zero or more: correct it where the instrument is described.',
  noSystem: 'Say whether the reading is in feet and inches (pounds) or metric.',
  noFigure: 'The limit has no figure in its unit: complete it where it is set.',
  unknownLimit: 'The limit that is named here is not among the limits of the job: take the job along again.',
  unitsDiffer: 'These limits are in different units: hold each against its own reading.',
  measurandsDiffer: 'These limits are on different things: hold each against its own reading.',
  datumsDiffer: 'These limits are measured from different places: bring them to one first.',
  badBand: 'The band to stay out of ends before it begins: correct it where it is set.',
  noLimits: 'There is no limit to combine: set one first.',
} as const
export type LimitRefusalCode = keyof typeof LIMIT_REFUSALS

/** Limits or readings that make no sense together. `code` is stable, `message` says in English what to do, `limit` names the limit at fault. */
export class LimitRefused extends Error {
  override readonly name = 'LimitRefused'
  constructor(readonly code: LimitRefusalCode, readonly limit: string | null = null) {
    super(LIMIT_REFUSALS[code])
  }
}
