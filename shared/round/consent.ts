import type { Meaning } from '../entry/entry'

/** What a signer reads and agrees to, by meaning and language; the id names this wording for ever, a change is a new id. */
const CONSENTS: Record<'en' | 'es', Record<Meaning, string>> = {
  en: {
    present: 'I was present at this inspection. I have read the outcome above and all that is signed. I sign electronically, and mean it as my signature. My signature does not say that the work meets local code.',
    receivedCopy: 'I receive a copy of this record. I have read the outcome above. I sign electronically, and mean it as my signature. I accept nothing by it.',
    acceptsWork: 'I accept the work for the owner as this record describes it. I have read the outcome above and all that is signed. I sign electronically, and mean it as my signature. Local code and the authority having jurisdiction come first.',
    acceptsDeviation: 'I accept this deviation for the owner, on the condition and until the date that stand above. I have read what deviates and by how much. I sign electronically, and mean it as my signature. Local code and the authority having jurisdiction come first.',
  },
  es: {
    present: 'Estuve presente en esta inspección. He leído el resultado de arriba y todo lo que se firma. Firmo electrónicamente y vale como mi firma. Mi firma no dice que la obra cumpla el código local.',
    receivedCopy: 'Recibo una copia de esta acta. He leído el resultado de arriba. Firmo electrónicamente y vale como mi firma. Con ello no acepto nada.',
    acceptsWork: 'Acepto la obra por el propietario tal como la describe esta acta. He leído el resultado de arriba y todo lo que se firma. Firmo electrónicamente y vale como mi firma. El código local y la autoridad competente van primero.',
    acceptsDeviation: 'Acepto esta desviación por el propietario, con la condición y hasta la fecha indicadas arriba. He leído qué se desvía y cuánto. Firmo electrónicamente y vale como mi firma. El código local y la autoridad competente van primero.',
  },
}

/** The consent text of a meaning, with the id that a sign sheet keeps beside it. */
export function consentOf(meaning: Meaning, language: 'en' | 'es'): { id: string, language: 'en' | 'es', text: string } {
  return { id: `consent-${meaning}-1`, language, text: CONSENTS[language][meaning] }
}
