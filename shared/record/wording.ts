import type { RecordLanguage } from './record'
import { recordTextsSchema } from './recordSentence'
import type { RecordTexts } from './recordSentence'
import en from '../../templates/record/en.json'
import es from '../../templates/record/es.json'

/** The wording of the PDF: a plain catalogue a language in templates/record, alike in their keys. */
export type Wording = Omit<typeof en, 'datums'> & { datums: Record<string, string> }
export const WORDING: Record<RecordLanguage, Wording> = { en, es }

/** The texts that become part of a record when it is built (shared/record/buildRecord). */
export function recordTexts(language: RecordLanguage): RecordTexts {
  return recordTextsSchema.parse(WORDING[language].texts)
}

/** Fills `{name}` places of a text; one without a value is a mistake of ours and stays visible. */
export function fill(text: string, values: Record<string, string | number>): string {
  return text.replace(/\{(\w+)\}/g, (place, name: string) => name in values ? String(values[name]) : place)
}

/** "A", "A and B", "A, B and C". */
export function listed(parts: string[], and: string): string {
  return parts.length < 2 ? parts.join('') : `${parts.slice(0, -1).join(', ')} ${and} ${parts[parts.length - 1]}`
}

/** The first letter as a capital: sentences are put together from clauses. */
export function sentence(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1)
}

/** A digest in groups of four, so that people can compare it. */
export function grouped(digest: string): string {
  return digest.replace(/(.{4})(?!$)/g, '$1 ')
}
