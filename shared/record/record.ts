import { z } from 'zod'
import { DEFICIENCY_CLASSES, DRAWINGS, METHODS } from '../checklist/check'
import { DECISIONS, digestSchema, ENTRY_KINDS, MEANINGS, placeSchema, readingValueSchema, strokeSchema } from '../entry/entry'
import { limitSchema, UNITS } from '../limit/limit'
import { elementSchema, FACES, lineSchema } from '../line/line'
import { SYSTEMS } from '../measure/length'
import { provisionSchema } from '../provision/provision'
import { questionAnswerSchema } from '../question/question'
import { DEFICIENCY_STATES, VERDICTS } from '../round/outcome'

/** The version of the code that paints a record; a record keeps the one that it was built with. */
export const RENDERER_VERSION = 1

/** Whether work stays open (`interim`) or nothing does (`final`). */
export const RECORD_SCOPES = ['interim', 'final'] as const
export type RecordScope = (typeof RECORD_SCOPES)[number]
export const RECORD_LANGUAGES = ['en', 'es'] as const
export type RecordLanguage = (typeof RECORD_LANGUAGES)[number]
/** What a later record does to an earlier one. */
export const AMENDMENTS = ['amendsParticulars', 'replacesElements', 'replacesAll'] as const
/** Cautions that a record carries; which ones is decided by what stands on its line. */
export const CAUTIONS = ['general', 'cutEnds', 'tension', 'pinch', 'water', 'traffic', 'automatic'] as const
export type Caution = (typeof CAUTIONS)[number]
/** How a deficiency is held out of use, as the entry `dangerNow` has it. */
export const HELD = ['closed', 'taped', 'removed', 'attended', 'heldOpen', 'sentRound', 'other'] as const

const uuid = z.string().uuid()
const instant = z.string().datetime({ offset: true })
const day = z.string().regex(/^\d{4}-\d\d-\d\d$/)
const short = z.string().trim().min(1).max(200)
const words = z.string().trim().min(1).max(2000)
/** A text as it was shown to the people of the record, in the record's language. */
const shown = z.string().min(1).max(2000)
const person = z.object({ name: z.string().trim().min(1).max(120), title: z.string().max(120).optional(), phone: z.string().max(60).optional() }).strict()
const face = z.enum(FACES).nullable()
const photoDigests = z.array(digestSchema)

/** What stands on the first page and comes from the desk, not from the entries. */
export const recordParticularsSchema = z.object({
  id: uuid,
  /** Running number within the job. */
  number: z.number().int().min(1),
  /** What a person types on the public check page, e.g. LS-0417-2. */
  code: z.string().regex(/^[A-Z0-9][A-Z0-9-]{2,39}$/),
  scope: z.enum(RECORD_SCOPES),
  language: z.enum(RECORD_LANGUAGES),
  system: z.enum(SYSTEMS),
  sealedAt: instant,
  /** What the people of the place call an offset, e.g. {"-05:00": "EST"}; an offset without a name is printed as UTC-05:00. */
  zones: z.record(z.string().regex(/^([+-]\d\d:\d\d|Z)$/), z.string().min(1).max(8)),
  /** Address of the public check page for this record, shown and drawn as a QR code. */
  checkAddress: z.string().url().max(300),
  organisation: z.object({ id: uuid, name: short, address: z.array(z.string().min(1).max(120)).max(5) }).strict(),
  inspectors: z.array(person.extend({ employer: short, builtTheFence: z.boolean() }).strict()).min(1).max(10),
  client: z.object({ id: uuid, name: short, contact: person.nullable() }).strict(),
  site: z.object({ id: uuid, name: short, address: z.string().max(300), onSite: person.nullable(), emergency: person.nullable() }).strict(),
  job: z.object({
    id: uuid,
    number: short,
    title: z.string().max(200),
    neededBy: day.nullable(),
    keys: z.object({ contract: short.optional(), permit: short.optional(), buildingCode: short.optional(), gateTag: short.optional() }).strict(),
  }).strict(),
  round: z.object({ id: uuid, number: z.number().int().min(1) }).strict(),
  /** The earlier record that this one changes; null for one that stands for itself. */
  amends: z.object({ id: uuid, code: z.string().min(3).max(40), digest: digestSchema, how: z.enum(AMENDMENTS), elements: z.array(uuid), why: words }).strict().nullable(),
  /** What was asked and has no answer yet. */
  questions: z.array(z.object({ words, askedOf: short, on: day }).strict()),
  /** Devices that had taken the round along and had not come back when it was sealed, and why that was not waited for. */
  devicesOut: z.array(z.object({ device: short, holder: short, takenAt: instant, reason: words }).strict()),
  /** Entries that came after the set was signed: listed, never folded in. */
  late: z.array(z.object({ id: uuid, digest: digestSchema, number: z.number().int().min(1), kind: z.string().max(40), by: short, madeAt: instant, element: uuid.nullable(), check: z.string().nullable() }).strict()),
}).strict()
export type RecordParticulars = z.infer<typeof recordParticularsSchema>

/** One reading as the record shows it. Amounts are integers in the check's unit (limit.ts). */
export const recordReadingSchema = z.object({
  entry: uuid,
  by: short,
  madeAt: instant,
  place: placeSchema.nullable(),
  value: readingValueSchema,
  verdict: z.enum(VERDICTS).nullable(),
  /** Signed distance to the limit that decided, inside positive; null where there is none. */
  margin: z.number().int().safe().nullable(),
  /** Key of that limit in `limits`. */
  limit: z.string().nullable(),
  otherSystemDiffers: z.boolean(),
  disagreesWith: z.array(uuid),
  /** The settlement by which another reading at this place stands; this one is shown and does not count. */
  overruledBy: uuid.nullable(),
  note: z.string().nullable(),
  tag: z.string().nullable(),
  photos: photoDigests,
  /** For an earlier reading: which one took its place, and why. */
  replacedBy: uuid.nullable(),
  reason: z.string().nullable(),
}).strict()
export type RecordReading = z.infer<typeof recordReadingSchema>

export const recordCheckSchema = z.object({
  element: uuid,
  check: z.string(),
  face,
  title: shown,
  task: shown,
  note: shown,
  caution: shown.nullable(),
  method: z.enum(METHODS),
  unit: z.enum(UNITS).nullable(),
  measurand: z.string().nullable(),
  datum: z.string().nullable(),
  drawing: z.enum(DRAWINGS).nullable(),
  class: z.enum(DEFICIENCY_CLASSES),
  /** Keys into `limits`. */
  limits: z.array(z.string()),
  /** Why no limit stands here, where the method wants one. */
  noLimit: shown.nullable(),
  tries: z.array(z.object({ from: z.string(), label: shown, times: z.number().int() }).strict()),
  /** For a template: whether it conforms when the gauge passes or when it stops. */
  conformsWhen: z.enum(['passes', 'stops']).nullable(),
  verdict: z.enum(VERDICTS),
  settled: z.boolean(),
  readAgain: z.boolean(),
  /** The newest reading at each place; the first one governs. */
  readings: z.array(recordReadingSchema),
  /** Readings whose place another took. */
  earlier: z.array(recordReadingSchema),
  setAside: z.object({ entry: uuid, as: z.enum(['notApplicable', 'notInspected']), why: z.string(), words: z.string().nullable(), by: short, at: instant, photos: photoDigests }).strict().nullable(),
}).strict()
export type RecordCheck = z.infer<typeof recordCheckSchema>

/** One step in the history of a deficiency; fields that its kind does not have are null. */
export const recordStepSchema = z.object({
  entry: uuid,
  kind: z.enum(ENTRY_KINDS),
  at: instant,
  by: short,
  /** True when the payload was erased under a reason and by two people: a marked gap. */
  erased: z.boolean(),
  words: z.string().nullable(),
  reason: z.string().nullable(),
  /** The person it names: corrected by, assigned to, told, accepted by, decided by. */
  person: short.nullable(),
  /** For whom that person acts. */
  actsFor: z.string().nullable(),
  done: z.enum(HELD).nullable(),
  toldAt: instant.nullable(),
  due: instant.nullable(),
  waitsFor: z.string().nullable(),
  on: day.nullable(),
  document: z.string().nullable(),
  decision: z.enum(DECISIONS).nullable(),
  accepted: z.boolean().nullable(),
  condition: z.string().nullable(),
  until: day.nullable(),
  value: readingValueSchema.nullable(),
  photos: photoDigests,
}).strict()
export type RecordStep = z.infer<typeof recordStepSchema>

export const recordDeficiencySchema = z.object({
  id: uuid,
  tag: z.string(),
  element: uuid,
  check: z.string(),
  place: placeSchema.nullable(),
  class: z.enum(DEFICIENCY_CLASSES),
  state: z.enum(DEFICIENCY_STATES),
  held: z.enum(HELD).nullable(),
  assignedTo: z.string().nullable(),
  due: instant.nullable(),
  waitsFor: z.string().nullable(),
  until: day.nullable(),
  steps: z.array(recordStepSchema).min(1),
}).strict()
export type RecordDeficiency = z.infer<typeof recordDeficiencySchema>

export const recordPhotoSchema = z.object({
  digest: digestSchema,
  width: z.number().int().min(1).max(2048),
  height: z.number().int().min(1).max(2048),
  taken: z.object({ digest: digestSchema, at: instant.nullable(), origin: z.enum(['camera', 'gallery']) }).strict(),
  /** The entries that name it, oldest first. */
  entries: z.array(uuid).min(1),
  element: uuid.nullable(),
  tag: z.string().nullable(),
  /** What it shows: the kind of the first entry that names it. */
  of: z.enum(ENTRY_KINDS),
  by: short,
  at: instant,
}).strict()
export type RecordPhoto = z.infer<typeof recordPhotoSchema>

export const recordSignatureSchema = z.object({
  entry: uuid,
  state: z.enum(['signed', 'absent', 'refused', 'toFollow']),
  meaning: z.enum(MEANINGS),
  /** The meaning in full, as the signer read it. */
  meaningText: shown,
  signer: person,
  role: short,
  known: z.enum(['ownAccount', 'ownLink', 'onDevice']),
  presence: z.string().nullable(),
  at: instant,
  /** The sign sheet's exact bytes and their SHA-256; null unless signed. */
  sheet: z.string().nullable(),
  sheetDigest: digestSchema.nullable(),
  strokes: z.array(strokeSchema).nullable(),
  typed: z.string().nullable(),
  words: z.string().nullable(),
}).strict()
export type RecordSignature = z.infer<typeof recordSignatureSchema>

/**
 * record.json, version 1, for ever: everything that the PDF shows, as data. Codes and integers speak no language; the texts beside them are those
 * that were shown, in `language`. Checking hashes its RFC 8785 bytes and never folds again. A change is a version 2 beside it.
 */
export const recordSchema = recordParticularsSchema.extend({
  format: z.literal('smoothside-record'),
  version: z.literal(1),
  rules: z.number().int().min(1),
  renderer: z.number().int().min(1),
  /** Digest of the basis in force when the set was signed. */
  basis: digestSchema,
  /** The checklists that were walked. */
  checklists: z.array(z.object({ id: z.string(), version: z.number().int().min(1) }).strict()),
  walks: z.array(z.object({ entry: uuid, at: instant, by: short, device: z.string() }).strict()),
  /** The outcome in one sentence: `lead` says what is released, `rest` what is not. */
  sentence: z.object({ lead: shown, rest: shown }).strict(),
  /** What this record is not, as printed on page 1. */
  isNot: shown,
  /** As built: with the edits of the walk. */
  line: lineSchema,
  /** Elements that the walk struck from the line; readings on them stay in the record. */
  struck: z.array(elementSchema),
  elements: z.array(z.object({
    element: uuid, verdict: z.enum(VERDICTS), settled: z.boolean(), released: z.boolean(), outOfUse: z.boolean(),
    tasks: z.number().int().min(0), answered: z.number().int().min(0),
  }).strict()),
  limits: z.record(z.string(), limitSchema),
  /** Limits that would have held, and the key of the one that stands in their place. */
  limitsSetAside: z.array(z.object({ limit: limitSchema, by: z.string(), why: z.enum(['replaced', 'looser']) }).strict()),
  /** Local numbers and notes of the job as they were pinned. */
  provisions: z.array(provisionSchema),
  checks: z.array(recordCheckSchema),
  deficiencies: z.array(recordDeficiencySchema),
  notes: z.array(z.object({ entry: uuid, element: uuid.nullable(), by: short, at: instant, words, photos: photoDigests }).strict()),
  photos: z.array(recordPhotoSchema),
  signatures: z.array(recordSignatureSchema),
  cautions: z.array(z.object({ caution: z.enum(CAUTIONS), text: shown }).strict()).min(1),
  /** The sealed set in order of acceptance: every entry by its digest. */
  entries: z.array(z.object({ id: uuid, digest: digestSchema, number: z.number().int().min(1), kind: z.string().max(40), madeAt: instant }).strict()),
  /** Entries of that set which the rules set aside, and why. */
  ignored: z.array(z.object({ entry: uuid, why: z.string() }).strict()),
  /** Links between entries that the rules do not follow. */
  refusedLinks: z.array(z.object({ entry: uuid, target: uuid, why: z.string() }).strict()),
  /** Readings whose payload was erased under a reason and by two people. */
  erased: z.array(uuid),
  /** Changes of the basis or the line that stand side by side and that nobody has settled. */
  conflicts: z.array(z.object({ of: z.enum(['basis', 'line']), entries: z.array(uuid) }).strict()),
}).strict()

/**
 * record.json, version 2: version 1 and what authorities answered. It is written only where a job has a question that was answered or was not put to anybody yet;
 * every other record is version 1 still, byte for byte.
 */
export const recordSchemaV2 = recordSchema.extend({
  version: z.literal(2),
  /** Questions that somebody settled: what was asked, of whom and when (null where nobody had been asked in writing), and the answer. */
  answers: z.array(z.object({ words, askedOf: short.nullable(), askedOn: day.nullable(), answer: questionAnswerSchema }).strict()),
  /** Questions that were written down and not put to anybody. */
  notPut: z.array(words),
}).strict()

/** A record of any version. */
export const anyRecordSchema = z.discriminatedUnion('version', [recordSchema, recordSchemaV2])
export type RecordDocument = z.infer<typeof anyRecordSchema>
/** What version 2 adds; empty for a record of version 1. */
export const settledQuestions = (record: RecordDocument): Pick<z.infer<typeof recordSchemaV2>, 'answers' | 'notPut'> => record.version === 2 ? record : { answers: [], notPut: [] }
