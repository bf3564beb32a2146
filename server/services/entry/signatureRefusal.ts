import type { Entry, KeptEntry } from '../../../shared/entry/entry'
import { isKnown } from '../../../shared/entry/entry'
import type { EntryRefusal } from '../../../shared/entry/entryRefused'
import { entryRefusal } from '../../../shared/entry/entryRefused'
import { parseCanonicalJson, sha256Hex } from '../../../shared/record/canonicalJson'
import type { SignSheet } from '../../../shared/round/signSheet'
import { signSheetSchema } from '../../../shared/round/signSheet'

/** A sign sheet's text read, or null where it is none. */
export function readSheet(text: string | null): SignSheet | null {
  try { return text === null ? null : signSheetSchema.parse(parseCanonicalJson(text)) }
  catch { return null }
}

/** Why a signature cannot be taken in: it was given over what is no sheet of its round, which would show only when the record is sealed. */
export function signatureRefusal(entry: KeptEntry): EntryRefusal | null {
  if (!isKnown(entry) || entry.envelope.kind !== 'signature') return null
  const { envelope, payload } = entry as Entry<'signature'>
  if (payload?.state !== 'signed') return null
  const sheet = readSheet(payload.sheet)
  return sheet && sheet.round === envelope.round && sheet.job === envelope.job && sha256Hex(payload.sheet!) === payload.sheetDigest ? null : entryRefusal('sheet', '/payload/sheet')
}
