import type { Length } from '#shared/measure/length'
import { FOOT, INCH } from '#shared/measure/length'

/** A reading as it grows under the keys of a tape pad. Digits are kept as pressed, so that erasing takes back what was pressed last. */
export interface TapeDraft {
  /** Whole feet, empty where the reading is in inches alone. */
  feet: string
  inches: string
  /** 0 to 15. */
  sixteenths: number
}
export type TapeKey = { digit: number } | { sixteenths: number } | 'feet' | 'erase'

export const EMPTY_DRAFT: TapeDraft = { feet: '', inches: '', sixteenths: 0 }
/** 9999 in is 833 ft: beyond any tape. */
const MOST_DIGITS = 4

/** The draft after one key. A digit after a fraction begins a new reading; the feet key turns what stands into feet, and back. */
export function pressTapeKey(draft: TapeDraft, key: TapeKey): TapeDraft {
  if (key === 'feet') {
    if (draft.feet === '') return draft.inches === '' ? draft : { feet: draft.inches, inches: '', sixteenths: draft.sixteenths }
    return draft.inches === '' ? { feet: '', inches: draft.feet, sixteenths: draft.sixteenths } : draft
  }
  if (key === 'erase') {
    if (draft.sixteenths > 0) return { ...draft, sixteenths: 0 }
    if (draft.inches !== '') return { ...draft, inches: draft.inches.slice(0, -1) }
    return { feet: '', inches: draft.feet, sixteenths: 0 }
  }
  if ('sixteenths' in key) return { ...draft, sixteenths: key.sixteenths, inches: draft.inches === '' && draft.feet === '' && key.sixteenths === 0 ? '0' : draft.inches }
  if (draft.sixteenths > 0) return { feet: '', inches: String(key.digit), sixteenths: 0 }
  const inches = draft.inches === '0' ? String(key.digit) : draft.inches + key.digit
  return inches.length > MOST_DIGITS ? draft : { ...draft, inches }
}

/** A fraction of an inch in lowest terms; '' for none. */
export function sixteenthsText(sixteenths: number): string {
  if (sixteenths === 0) return ''
  let [over, under] = [sixteenths, 16]
  while (over % 2 === 0) [over, under] = [over / 2, under / 2]
  return `${over}/${under}`
}

/** The draft as one would write it: `53 5/8 in`, `5' 4 1/2"`; '' while there is nothing. parseLength reads it back. */
export function writeTapeDraft({ feet, inches, sixteenths }: TapeDraft): string {
  const figure = [inches, sixteenthsText(sixteenths)].filter(Boolean).join(' ')
  if (feet === '') return figure && `${figure} in`
  return figure ? `${feet}' ${figure}"` : `${feet}'`
}

/** The draft that a length would be on the keys; null where it is no whole number of sixteenths or too long for them. */
export function tapeDraftOf(amount: Length, inFeet: boolean): TapeDraft | null {
  const sixteenths = amount / (INCH / 16)
  if (!Number.isSafeInteger(sixteenths) || sixteenths < 0) return null
  const feet = inFeet ? Math.floor(amount / FOOT) : 0
  const inches = Math.floor((amount - feet * FOOT) / INCH)
  if (String(inches).length > MOST_DIGITS) return null
  return { feet: inFeet ? String(feet) : '', inches: String(inches), sixteenths: sixteenths % 16 }
}
