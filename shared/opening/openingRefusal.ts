/** Why an opening is refused; stable, screens word them by code. */
export const OPENING_REFUSALS = ['notALength', 'notPositive', 'notAnOpening', 'tooWide', 'notATriangle'] as const
export type OpeningRefusalCode = (typeof OPENING_REFUSALS)[number]

/** Thrown on measures that cannot be an opening: a stable code, the measure it is about, and a sentence that says what to do. */
export class OpeningRefusal extends RangeError {
  override readonly name = 'OpeningRefusal'
  constructor(readonly code: OpeningRefusalCode, readonly field: string, sentence: string) {
    super(sentence)
  }
}
