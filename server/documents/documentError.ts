/** Why a document cannot be made or sealed. */
export const DOCUMENT_FAULTS = ['photoMissing', 'photoChanged', 'photoNotPlain', 'noPlaceForSeal', 'sealTooLong', 'wrongSecret', 'notAKey'] as const
export type DocumentFault = (typeof DOCUMENT_FAULTS)[number]

/** A refusal with its stable code and a sentence that says what to do. */
export class DocumentError extends Error {
  override readonly name = 'DocumentError'
  constructor(readonly code: DocumentFault, sentence: string) {
    super(sentence)
  }
}
