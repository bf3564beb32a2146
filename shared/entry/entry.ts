import { z } from 'zod'
import { DEFICIENCY_CLASSES, FINDING_KINDS } from '../checklist/check'
import { elementSchema, FACES, sideSchema } from '../line/line'
import { SYSTEMS } from '../measure/length'

/** A SHA-256 in lower-case hex. */
export const digestSchema = z.string().regex(/^[0-9a-f]{64}$/)
const uuid = z.string().uuid()
const length = z.number().int().safe()
/** An instant with its offset, as the device's clock had it. (`datetime()` of zod makes its pattern anew for every text.) */
const instant = z.string().regex(z.datetimeRegex({ offset: true })).regex(/^(19[7-9]\d|2[01]\d\d)-.*(Z|[+-](0\d|1[0-4]):?[0-5]\d)$/, 'a year from 1970 to 2199, an offset of at most 14 hours')
const words = z.string().trim().min(1).max(2000)

/**
 * Where on an element. A bay counts from 1 at the start (on a gate: its leaf, counted the same way); a distance is from the element's
 * terminal post at that end; a height is over the ground. Null says nothing: a look without a bay is of the element as a whole.
 */
export const placeSchema = z.object({
  face: z.enum(FACES).nullable(),
  bay: z.number().int().min(1).max(500).nullable(),
  from: z.object({ end: z.enum(['start', 'end']), distance: length.nonnegative() }).strict().nullable(),
  height: length.nullable(),
}).strict()
export type Place = z.infer<typeof placeSchema>

export const ENTRY_KINDS = [
  'walkOpened', 'basisChanged', 'reading', 'setAside', 'note', 'assignment', 'correction', 'cannot', 'dangerNow',
  'deviationOffered', 'deviationAccepted', 'decided', 'referred', 'enteredInError', 'settled', 'disputed', 'lineEdit', 'signature',
] as const
export type EntryKind = (typeof ENTRY_KINDS)[number]

/** The envelope of an entry (contracts.md 2). Its SHA-256 over RFC 8785 JSON is the entry's digest. Names of people never stand here. */
export const envelopeSchema = z.object({
  id: uuid,
  organisation: uuid,
  job: uuid,
  round: uuid,
  walk: uuid.nullable(),
  kind: z.string().min(1).max(40),
  version: z.number().int().min(1),
  /** Account of the author. */
  author: uuid,
  device: uuid,
  madeAt: instant,
  element: uuid.nullable(),
  check: z.string().max(60).nullable(),
  /** Digest of the basis it was made under. */
  basis: digestSchema.nullable(),
  place: placeSchema.nullable(),
  /** Entries that it looked at: a re-reading names the reading and the correction. */
  answers: z.array(uuid).max(200),
  /** Entries of which it is the newer word. */
  replaces: z.array(uuid).max(20),
  payload: digestSchema,
  rules: z.number().int().min(1),
}).strict()
export type Envelope = z.infer<typeof envelopeSchema>

/** 128 random bits in hex, so that a redacted payload cannot be guessed from its digest. */
const salt = z.string().regex(/^[0-9a-f]{32}$/)

/** A photo as an entry names it: by the digest of its final bytes; the file as taken is described beside. */
export const photoRefSchema = z.object({
  digest: digestSchema,
  width: z.number().int().min(1).max(2048),
  height: z.number().int().min(1).max(2048),
  /** The file as the camera or gallery gave it. */
  taken: z.object({ digest: digestSchema, at: instant.nullable(), origin: z.enum(['camera', 'gallery']) }).strict(),
}).strict()
export type PhotoRef = z.infer<typeof photoRefSchema>
const photos = z.array(photoRefSchema).max(20)

/** What was read, by method. Amounts are integers of the check's unit (shared/limit/limit.ts); `text` is what was typed. */
export const readingValueSchema = z.discriminatedUnion('method', [
  z.object({ method: z.literal('look'), found: z.enum(['clear', 'finding']), finding: z.enum(FINDING_KINDS).optional() }).strict(),
  z.object({
    method: z.literal('measure'), amount: length, text: z.string().min(1).max(64), system: z.enum(SYSTEMS),
    dimension: z.enum(['side', 'diagonal', 'width']).optional(),
    /** Expanded uncertainty (k = 2) of the instrument in the same unit, where guarded acceptance is asked. */
    uncertainty: length.nonnegative().optional(),
    instrument: z.string().max(80).optional(),
  }).strict(),
  z.object({ method: z.literal('count'), amount: z.number().int().min(0).max(100_000) }).strict(),
  z.object({ method: z.literal('trial'), tries: z.array(z.object({ from: z.string().max(40), good: z.number().int().min(0).max(20), of: z.number().int().min(1).max(20) }).strict()).min(1).max(12) }).strict(),
  z.object({ method: z.literal('template'), gauge: z.string().min(1).max(80), went: z.enum(['passed', 'stopped']) }).strict(),
])
export type ReadingValue = z.infer<typeof readingValueSchema>

/** A person as they were named on the day; never in an envelope. */
const personSchema = z.object({ account: uuid.nullable(), name: z.string().trim().min(1).max(120), title: z.string().max(120).optional() }).strict()

/** The four meanings of a signature, printed in full. */
export const MEANINGS = ['present', 'receivedCopy', 'acceptsWork', 'acceptsDeviation'] as const
export type Meaning = (typeof MEANINGS)[number]

/** What an authority having jurisdiction may decide: it lets the work vary from its rule, or takes another way of meeting it. */
export const DECISIONS = ['variance', 'alternative'] as const

/** A stroke of the pen: x and y in 1/100 of the pad's height, from its top left; t in ms since the first point. Integers alone. */
export const strokeSchema = z.array(z.object({ x: z.number().int(), y: z.number().int(), t: z.number().int().min(0) }).strict()).min(1).max(4000)

/** The payload of each kind, version 1, for ever. Kept in this one table; a change is a version 2 beside it. */
export const PAYLOADS = {
  walkOpened: z.object({ salt, basis: digestSchema, device: z.string().max(120) }).strict(),
  basisChanged: z.object({ salt, basis: digestSchema, why: words }).strict(),
  reading: z.object({
    salt,
    value: readingValueSchema,
    /** Short tag written on flagging tape, given by the device when the finding does not conform: its letter and a running number. */
    tag: z.string().regex(/^[A-Z]{1,2}\d{1,4}$/).optional(),
    class: z.enum(DEFICIENCY_CLASSES).optional(),
    note: z.string().max(2000).optional(),
    photos,
    /** True where the ground stood unfinished when it was read. */
    groundUnfinished: z.boolean().optional(),
    /** Why a reading that does not conform is replaced; required then. */
    reason: z.string().max(2000).optional(),
    /** Set on looks that were confirmed together at the end of a run. */
    group: uuid.optional(),
  }).strict(),
  setAside: z.object({ salt, as: z.enum(['notApplicable', 'notInspected']), why: z.enum(['noAccess', 'notYet', 'outOfScope', 'notHere']), words: words.optional(), photos }).strict(),
  note: z.object({ salt, words, photos }).strict(),
  assignment: z.object({ salt, to: personSchema, due: instant.nullable(), words: words.optional() }).strict(),
  correction: z.object({ salt, words: words.optional(), photos, by: personSchema }).strict(),
  cannot: z.object({ salt, waitsFor: z.string().trim().min(1).max(200), words: words.optional() }).strict(),
  dangerNow: z.object({ salt, done: z.enum(['closed', 'taped', 'removed', 'attended', 'heldOpen', 'sentRound', 'other']), words: words.optional(), told: personSchema, toldAt: instant, photos }).strict(),
  deviationOffered: z.object({ salt, words, condition: words.optional(), until: z.string().regex(/^\d{4}-\d\d-\d\d$/).nullable() }).strict(),
  deviationAccepted: z.object({ salt, by: personSchema, for: z.string().trim().min(1).max(200), accepted: z.boolean(), words: words.optional(), condition: words.optional(), until: z.string().regex(/^\d{4}-\d\d-\d\d$/).nullable() }).strict(),
  decided: z.object({ salt, as: z.enum(DECISIONS), by: personSchema, on: z.string().regex(/^\d{4}-\d\d-\d\d$/), document: z.string().trim().min(1).max(300), words }).strict(),
  referred: z.object({ salt, to: personSchema, on: z.string().regex(/^\d{4}-\d\d-\d\d$/), words }).strict(),
  /** Written by a second person, never by the author of the reading that it names. Voids that one reading. */
  enteredInError: z.object({ salt, reason: words }).strict(),
  /** Of the readings in `answers`, which disagree at one place, the one that stands. Another reading that comes later disagrees again. */
  settled: z.object({ salt, stands: uuid, reason: words }).strict(),
  disputed: z.object({ salt, words }).strict(),
  lineEdit: z.object({
    salt,
    edit: z.discriminatedUnion('kind', [
      /** After that element of the side; null puts it first. */
      z.object({ kind: z.literal('add'), after: uuid.nullable(), side: sideSchema.shape.key, element: elementSchema }).strict(),
      /** The first part keeps the id, so that what was read on it stays; the second has a new one. */
      z.object({ kind: z.literal('split'), element: uuid, into: z.tuple([elementSchema, elementSchema]) }).strict(),
      z.object({ kind: z.literal('rename'), element: uuid, tag: elementSchema.shape.tag, name: z.string().max(80) }).strict(),
      z.object({ kind: z.literal('remeasure'), element: uuid, length: length.positive(), height: length.positive(), rise: length, bays: z.number().int().min(1).max(500) }).strict(),
      z.object({ kind: z.literal('strike'), element: uuid, reason: words }).strict(),
    ]),
  }).strict(),
  signature: z.object({
    salt,
    /** `signed`, or the plain statement that the person was absent, refused, or signs later. */
    state: z.enum(['signed', 'absent', 'refused', 'toFollow']),
    meaning: z.enum(MEANINGS),
    signer: personSchema,
    role: z.string().trim().min(1).max(120),
    known: z.enum(['ownAccount', 'ownLink', 'onDevice']),
    /** In whose presence, when signed on another's device. */
    presence: personSchema.nullable(),
    /** The sign sheet's exact bytes (RFC 8785 text) and their SHA-256 (contracts.md 4); null unless signed. */
    sheet: z.string().max(2_000_000).nullable(),
    sheetDigest: digestSchema.nullable(),
    strokes: z.array(strokeSchema).max(200).nullable(),
    typed: z.string().max(120).nullable(),
    words: words.optional(),
  }).strict(),
} satisfies Record<EntryKind, z.ZodTypeAny>
export type PayloadOf<K extends EntryKind> = z.infer<(typeof PAYLOADS)[K]>

/**
 * An entry on the wire and in every store: the two canonical JSON texts exactly as the device made them.
 * A reader parses them; nobody ever writes them again. An erased payload (contracts.md 2, `redact`) is the empty text.
 */
export const wireEntrySchema = z.object({ envelope: z.string().max(20_000), payload: z.string().max(2_200_000) }).strict()
export type WireEntry = z.infer<typeof wireEntrySchema>

/** An entry as the rules read it. `payload` is null after a redaction; `number` is null until the server accepted it. */
export interface Entry<K extends EntryKind = EntryKind> {
  envelope: Envelope & { kind: K }
  payload: PayloadOf<K> | null
  digest: string
  number: number | null
}
/** An entry of a known kind, discriminated by `envelope.kind`. */
export type AnyEntry = { [K in EntryKind]: Entry<K> }[EntryKind]

/**
 * An entry of a kind or version that these rules do not know: kept as it came, shown so, and nothing is signed over it.
 * `payloadText` is its canonical text.
 */
export interface UnknownEntry {
  envelope: Envelope
  payloadText: string
  digest: string
  number: number | null
}
/** What a store holds: entries that the rules know and such that a newer program wrote. */
export type KeptEntry = AnyEntry | UnknownEntry

/** Whether these rules know that kind in that version. */
export function isKnownKind(envelope: Pick<Envelope, 'kind' | 'version'>): boolean {
  return envelope.version === 1 && Object.hasOwn(PAYLOADS, envelope.kind)
}

/** Whether a kept entry is of a kind that these rules know. */
export function isKnown(entry: KeptEntry): entry is AnyEntry {
  return isKnownKind(entry.envelope)
}
