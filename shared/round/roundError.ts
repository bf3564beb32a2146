/** Why a round cannot be folded at all. */
export const ROUND_FAULTS = {
  noBasis: 'No entry says what the walk is held against; open a walk first, or give the basis of the round.',
  unknownBasis: 'The basis that is in force is not among those given; fetch it by its digest.',
} as const
export type RoundFault = keyof typeof ROUND_FAULTS

/** A round that cannot be folded, with its stable code. */
export class RoundError extends Error {
  override readonly name = 'RoundError'
  constructor(readonly code: RoundFault, more = '') {
    super(more ? `${ROUND_FAULTS[code]} (${more})` : ROUND_FAULTS[code])
  }
}
