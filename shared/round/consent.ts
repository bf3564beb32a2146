import type { Meaning } from '../entry/entry'
import { WORDING } from '../record/wording'

/** What every signer agrees to beside the meaning (E-SIGN, 15 U.S.C. 7001, and UETA: intent to sign, by electronic means). */
const AGREED = {
  en: 'I have read the outcome above. I sign electronically and mean it as my signature. Local code and the authority having jurisdiction come first.',
  es: 'He leído el resultado de arriba. Firmo electrónicamente y vale como mi firma. El código local y la autoridad competente van primero.',
}

/**
 * What a signer reads and agrees to, by meaning and language: the very words of the meaning that the record prints, and the agreement to sign. The sheet
 * keeps the whole text beside the id; changed wording is a new id.
 */
export function consentOf(meaning: Meaning, language: 'en' | 'es'): { id: string, language: 'en' | 'es', text: string } {
  return { id: `consent-${meaning}-1`, language, text: `${WORDING[language].texts.meanings[meaning]} ${AGREED[language]}` }
}
