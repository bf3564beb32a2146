import type { ZodError } from 'zod'
import { canonicalJson, CanonicalJsonError, parseCanonicalJson, sha256Hex } from '../record/canonicalJson'
import type { AnyEntry, EntryKind, Envelope, UnknownEntry, WireEntry } from './entry'
import { envelopeSchema, isKnownKind, PAYLOADS } from './entry'
import type { EntryRefusal } from './entryRefused'
import { entryRefusal } from './entryRefused'
import { subjectRefusal } from './entryRules'

/** What two texts come to: an entry, an entry of a kind that these rules do not know (keep it), or a refusal. */
export type EntryRead = { state: 'known', entry: AnyEntry } | { state: 'unknown', entry: UnknownEntry } | { state: 'refused', refusal: EntryRefusal }

export interface ReadEntryOptions {
  /** The number that the server gave it; null until then. */
  number?: number | null
  /** True where the text comes from a store or a pull, which may hold an erased payload (the empty text). Never for what a device sends. */
  mayBeErased?: boolean
  /** SHA-256 of a text's UTF-8 in lower-case hex; a server may give its native one, which is several times faster. */
  sha256?: (text: string) => string
}

// \u0000 that is not the tail of an escaped backslash.
const NUL = /(?:^|[^\\])(?:\\\\)*\\u0000/

/**
 * Reads an entry from its wire texts: both must be canonical JSON, the payload the one that the envelope names, each strictly as its version has it.
 * Never throws for what the texts hold. Targets are not looked at here ({@link checkTargets}).
 */
export function readEntry(wire: WireEntry, { number = null, mayBeErased = false, sha256 = sha256Hex }: ReadEntryOptions = {}): EntryRead {
  const refused = (refusal: EntryRefusal): EntryRead => ({ state: 'refused', refusal })
  const raw = readCanonical(wire.envelope, '/envelope')
  if (raw.refusal) return refused(raw.refusal)
  const parsed = envelopeSchema.safeParse(raw.value)
  if (!parsed.success) return refused(entryRefusal('envelope', pointerOf('/envelope', parsed.error), parsed.error.issues[0]?.message))
  const envelope = parsed.data
  const digest = sha256(wire.envelope)

  if (mayBeErased && wire.payload === '') {
    return isKnownKind(envelope)
      ? { state: 'known', entry: { envelope, payload: null, digest, number } as AnyEntry }
      : { state: 'unknown', entry: { envelope, payloadText: '', digest, number } }
  }
  if (sha256(wire.payload) !== envelope.payload) return refused(entryRefusal('payloadDigest', '/envelope/payload'))
  if (!isKnownKind(envelope)) return readUnknown(wire, envelope, digest, number)

  const body = readCanonical(wire.payload, '/payload')
  if (body.refusal) return refused(body.refusal)
  const payload = PAYLOADS[envelope.kind as EntryKind].safeParse(body.value)
  if (!payload.success) return refused(entryRefusal('payload', pointerOf('/payload', payload.error), payload.error.issues[0]?.message))
  const changed = whereChanged(body.value, payload.data, '/payload')
  if (changed !== null) return refused(entryRefusal('payload', changed, 'no white space at either end'))
  const entry = { envelope, payload: payload.data, digest, number } as AnyEntry
  const refusal = subjectRefusal(entry)
  return refusal ? refused(refusal) : { state: 'known', entry }
}

/** Nothing is known of the shape, so the slow strict reader says whether it is canonical at all. */
function readUnknown(wire: WireEntry, envelope: Envelope, digest: string, number: number | null): EntryRead {
  try {
    parseCanonicalJson(wire.payload)
  }
  catch (error) {
    if (error instanceof CanonicalJsonError) return { state: 'refused', refusal: entryRefusal(error.code === 'notJson' ? 'notJson' : 'notCanonical', '/payload', error.message) }
    throw error
  }
  if (NUL.test(wire.payload)) return { state: 'refused', refusal: entryRefusal('nulCharacter', '/payload') }
  return { state: 'unknown', entry: { envelope, payloadText: wire.payload, digest, number } }
}

function readCanonical(text: string, pointer: string): { value: unknown, refusal: EntryRefusal | null } {
  let value: unknown
  try {
    value = JSON.parse(text)
  }
  catch {
    return { value: null, refusal: entryRefusal('notJson', pointer) }
  }
  if (!isCanonical(text, value)) return { value: null, refusal: entryRefusal('notCanonical', pointer) }
  return { value, refusal: text.includes('\\u0000') && NUL.test(text) ? entryRefusal('nulCharacter', pointer) : null }
}

/**
 * Whether a text is the RFC 8785 form of its value. JSON.stringify writes numbers and texts as RFC 8785 does and keeps the order of keys, so an equal
 * text with ordered keys is canonical; only what differs (keys like "1", halves of surrogate pairs, doubled keys) goes the slow way.
 */
function isCanonical(text: string, value: unknown): boolean {
  try {
    if (JSON.stringify(value) === text && keysAscend(value) && !text.includes('\\ud')) return true
    return canonicalJson(value) === text
  }
  catch (error) {
    // Nesting so deep that the engine gives up is no entry of ours either.
    if (error instanceof CanonicalJsonError || error instanceof RangeError) return false
    throw error
  }
}

function keysAscend(value: unknown): boolean {
  if (typeof value !== 'object' || value === null) return true
  if (Array.isArray(value)) return value.every(keysAscend)
  let before: string | null = null
  for (const key in value) {
    if (before !== null && before >= key) return false
    before = key
    if (!keysAscend((value as Record<string, unknown>)[key])) return false
  }
  return true
}

/** Schemas trim words for the forms that share them; in a text that is signed over nothing may change. Returns where it did. */
function whereChanged(before: unknown, after: unknown, pointer: string): string | null {
  if (typeof before !== 'object' || before === null) return before === after ? null : pointer
  for (const key in before) {
    const changed = whereChanged((before as Record<string, unknown>)[key], (after as Record<string, unknown>)[key], `${pointer}/${key}`)
    if (changed !== null) return changed
  }
  return null
}

function pointerOf(start: string, error: ZodError): string {
  const issue = error.issues[0]
  const path = issue ? [...issue.path, ...(issue.code === 'unrecognized_keys' ? issue.keys.slice(0, 1) : [])] : []
  return [start, ...path.map(part => String(part).replaceAll('~', '~0').replaceAll('/', '~1'))].join('/')
}
