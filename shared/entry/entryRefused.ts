/** Why a text is no entry, or an entry may not stand. Stable codes; the sentence says what to do. */
export const ENTRY_REFUSALS = {
  notJson: 'This is not JSON; send the entry exactly as the device made it.',
  notCanonical: 'The text is not in its canonical form (RFC 8785), so its digest cannot hold; send it exactly as the device made it.',
  nulCharacter: 'A text holds the character U+0000, which no database keeps; leave it out and write the entry again.',
  envelope: 'The envelope is not as version 1 has it; look at the pointer.',
  payload: 'The payload is not as its kind and version have it; look at the pointer.',
  payloadDigest: 'The payload is not the one that the envelope names by its digest; send both as the device made them.',
  subject: 'The element, check, place or basis does not fit the kind of entry; look at the pointer.',
  sheet: 'What this signature stands under is no sign sheet of this round, or not the one of its digest; sign again on the page of the signatures.',
  target: 'An entry of this kind cannot name that entry; look at the pointer.',
  notYours: 'It belongs to another round, organisation, job or person, or your role may not write this kind; send it signed in as its author.',
  ownReading: 'A reading is entered in error only by a second person: let another account write this.',
} as const
export type EntryRefusalCode = keyof typeof ENTRY_REFUSALS

/** A refusal of an entry. `pointer` is a JSON pointer that begins with /envelope or /payload. */
export interface EntryRefusal { code: EntryRefusalCode, pointer: string, message: string }

/** The refusal of a code at a pointer, with what to do; `more` is added where the place alone does not tell. */
export function entryRefusal(code: EntryRefusalCode, pointer: string, more = ''): EntryRefusal {
  return { code, pointer, message: more ? `${ENTRY_REFUSALS[code]} (${more})` : ENTRY_REFUSALS[code] }
}

/** Thrown where an entry is made of something that no entry may hold. */
export class EntryRefused extends Error implements EntryRefusal {
  override readonly name = 'EntryRefused'
  readonly code: EntryRefusalCode
  readonly pointer: string
  constructor(refusal: EntryRefusal) {
    super(refusal.message)
    this.code = refusal.code
    this.pointer = refusal.pointer
  }
}
