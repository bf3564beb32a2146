import type { ZodError, ZodType, ZodTypeDef } from 'zod'
import { canonicalJson, CanonicalJsonError, parseCanonicalJson, sha256Hex } from '../record/canonicalJson'
import type { AnyEntry, EntryKind, Envelope, UnknownEntry, WireEntry } from './entry'
import { envelopeSchema, isKnownKind, PAYLOADS } from './entry'
import type { EntryRefusal } from './entryRefused'
import { entryRefusal } from './entryRefused'
import { subjectRefusal } from './entryRules'
import type { Sure } from './sure'
import { sureOf, UNSURE } from './sure'

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

const sureEnvelope = sureOf(envelopeSchema)
const surePayload = Object.fromEntries(Object.entries(PAYLOADS).map(([kind, schema]) => [kind, sureOf(schema)])) as Record<EntryKind, Sure>

// \u0000 that is not the tail of an escaped backslash.
const NUL = /(?:^|[^\\])(?:\\\\)*\\u0000/

/**
 * Reads an entry from its wire texts: both must be canonical JSON, the payload the one that the envelope names, each strictly as its version has it.
 * Never throws for what the texts hold. Targets are not looked at here ({@link checkTargets}).
 */
export function readEntry(wire: WireEntry, { number = null, mayBeErased = false, sha256 = sha256Hex }: ReadEntryOptions = {}): EntryRead {
  const refused = (refusal: EntryRefusal): EntryRead => ({ state: 'refused', refusal })
  const raw = readAs(wire.envelope, 'envelope', envelopeSchema, sureEnvelope)
  if (raw.refusal) return refused(raw.refusal)
  const envelope = raw.value
  const digest = sha256(wire.envelope)

  if (mayBeErased && wire.payload === '') {
    return isKnownKind(envelope)
      ? { state: 'known', entry: { envelope, payload: null, digest, number } as AnyEntry }
      : { state: 'unknown', entry: { envelope, payloadText: '', digest, number } }
  }
  if (sha256(wire.payload) !== envelope.payload) return refused(entryRefusal('payloadDigest', '/envelope/payload'))
  if (!isKnownKind(envelope)) return readUnknown(wire, envelope, digest, number)

  const kind = envelope.kind as EntryKind
  const body = readAs<unknown>(wire.payload, 'payload', PAYLOADS[kind], surePayload[kind])
  if (body.refusal) return refused(body.refusal)
  const entry = { envelope, payload: body.value, digest, number } as AnyEntry
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

/** Reads one of the two texts: JSON, canonical, as its schema has it, and nothing that a form's trimming would change. */
function readAs<T>(text: string, part: 'envelope' | 'payload', schema: ZodType<T, ZodTypeDef, unknown>, sure: Sure): { value: T, refusal: null } | { value: null, refusal: EntryRefusal } {
  const refused = (refusal: EntryRefusal) => ({ value: null, refusal })
  const pointer = `/${part}`
  let value: unknown
  try {
    value = JSON.parse(text)
  }
  catch {
    return refused(entryRefusal('notJson', pointer))
  }
  // The way of nearly every entry.
  if (!UNSURE.test(text) && sure(value, text, 0) === text.length) return { value: value as T, refusal: null }
  if (!isCanonical(text, value)) return refused(entryRefusal('notCanonical', pointer))
  if (NUL.test(text)) return refused(entryRefusal('nulCharacter', pointer))
  const parsed = schema.safeParse(value)
  if (!parsed.success) return refused(entryRefusal(part, pointerOf(pointer, parsed.error), parsed.error.issues[0]?.message))
  const changed = whereChanged(value, parsed.data, pointer)
  return changed === null ? { value: parsed.data, refusal: null } : refused(entryRefusal(part, changed, 'no white space at either end'))
}

function isCanonical(text: string, value: unknown): boolean {
  try {
    return canonicalJson(value) === text
  }
  catch (error) {
    // Of a number that is too large the schema says where it stands. Nesting so deep that the engine gives up is no entry of ours either.
    if (error instanceof CanonicalJsonError) return error.code === 'numberTooLarge'
    if (error instanceof RangeError) return false
    throw error
  }
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
