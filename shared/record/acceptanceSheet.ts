import { z } from 'zod'
import { digestSchema } from '../entry/entry'
import { consentOf } from '../round/consent'
import { canonicalJson, sha256Hex } from './canonicalJson'

/** What a client may sign about a record that was sent to it. `refusesDeviation` is the plain no to a deviation that was offered. */
export const ACCEPTANCE_MEANINGS = ['receivedCopy', 'acceptsWork', 'acceptsDeviation', 'refusesDeviation'] as const
export type AcceptanceMeaning = (typeof ACCEPTANCE_MEANINGS)[number]

const REFUSAL = {
  en: 'I do not accept this deviation for the owner. I have read what deviates and by how much. I sign electronically, and mean it as my signature. Local code and the authority having jurisdiction come first.',
  es: 'No acepto esta desviación por el propietario. He leído qué se desvía y cuánto. Firmo electrónicamente y vale como mi firma. El código local y la autoridad competente van primero.',
} as const

/** The text that a client reads and agrees to, with the id that names its wording for ever. */
export function acceptanceConsent(meaning: AcceptanceMeaning, language: 'en' | 'es'): { id: string, language: 'en' | 'es', text: string } {
  return meaning === 'refusesDeviation' ? { id: 'consent-refusesDeviation-1', language, text: REFUSAL[language] } : consentOf(meaning, language)
}

/** A client's sign sheet, version 1, for ever: everything that is signed, and nothing of the hand that signs (contracts.md 5). */
export const acceptanceSheetSchema = z.object({
  format: z.literal('smoothside-acceptance-sheet'),
  version: z.literal(1),
  /** The record by both its digests. */
  record: z.object({ id: z.string().uuid(), code: z.string().min(3).max(40), document: digestSchema, range: digestSchema }).strict(),
  meaning: z.enum(ACCEPTANCE_MEANINGS),
  consent: z.object({ id: z.string().min(1).max(80), language: z.enum(['en', 'es']), text: z.string().min(1).max(4000) }).strict(),
  signer: z.object({ account: z.string().uuid(), name: z.string().min(1).max(120), title: z.string().max(120).optional() }).strict(),
  /** For whom the person signs. */
  for: z.string().min(1).max(200),
  /** The deviation by its reading and the very offer that was read; null where the record as a whole is meant. */
  deviation: z.object({ deficiency: z.string().uuid(), offer: z.string().uuid(), tag: z.string(), words: z.string(), condition: z.string().nullable(), until: z.string().nullable(), accepted: z.boolean() }).strict().nullable(),
}).strict()
export type AcceptanceSheet = z.infer<typeof acceptanceSheetSchema>

/** The sheet's canonical text and its SHA-256. Throws a ZodError for what is no sheet. */
export function makeAcceptanceSheet(sheet: AcceptanceSheet): { text: string, digest: string } {
  const text = canonicalJson(acceptanceSheetSchema.parse(sheet))
  return { text, digest: sha256Hex(text) }
}
