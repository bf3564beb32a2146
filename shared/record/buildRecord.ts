import type { Both, Check } from '../checklist/check'
import type { AnyEntry, Entry, PhotoRef, PayloadOf } from '../entry/entry'
import type { LineElement } from '../line/line'
import { elementsOf } from '../line/line'
import type { RoundBasis } from '../round/basis'
import { tasksFor } from '../round/makeBasis'
import type { CheckOutcome, DeficiencyOutcome, RoundOutcome } from '../round/outcome'
import { isEnded } from '../round/outcome'
import type { settledQuestions, Caution, RecordCheck, RecordDeficiency, RecordDocument, RecordParticulars, RecordPhoto, RecordReading, RecordSignature, RecordStep } from './record'
import { anyRecordSchema, RENDERER_VERSION } from './record'
import type { RecordTexts } from './recordSentence'
import { recordSentence } from './recordSentence'

/** Why no record can be made of a round. */
export const RECORD_FAULTS = ['notAccepted', 'unknownEntry', 'unknownName', 'unknownCheck', 'openInFinal', 'otherBasis'] as const
export type RecordFault = (typeof RECORD_FAULTS)[number]

/** A refusal with its stable code and a sentence that says what to do. */
export class RecordError extends Error {
  override readonly name = 'RecordError'
  constructor(readonly code: RecordFault, sentence: string) {
    super(sentence)
  }
}

type SettledQuestions = ReturnType<typeof settledQuestions>

export interface RecordSources {
  particulars: RecordParticulars
  /** The basis in force. */
  basis: RoundBasis
  /** Its digest; must be the one that the outcome was folded over. */
  basisDigest: string
  /** The signed set and the signatures over it, all of them accepted. */
  entries: AnyEntry[]
  /** The fold of those entries. */
  outcome: RoundOutcome
  /** Name of each account that wrote or is named in an entry, by account id. */
  names: Record<string, string>
  texts: RecordTexts
  /** Questions that were answered, and those that were not put to anybody yet; a record that has any is of version 2. */
  answers?: SettledQuestions['answers']
  notPut?: SettledQuestions['notPut']
}

/**
 * The canonical document of a record (record.json v1, or v2 where questions were settled) from its sources: a pure function, the same document for the same sources in any order of
 * entries. Throws {@link RecordError}: for entries that the server has not accepted, names or checks that are not given, and a final record over
 * anything open; a ZodError when the result is no {@link anyRecordSchema}.
 */
export function buildRecord({ particulars, basis, basisDigest, entries: given, outcome, names, texts, answers = [], notPut = [] }: RecordSources): RecordDocument {
  const entries = [...given].sort((a, b) => numberOf(a) - numberOf(b))
  if (outcome.basis !== basisDigest) throw new RecordError('otherBasis', 'The outcome was folded over another basis; fold the entries again over the basis in force.')
  refuseUnfinished(particulars, outcome)

  const byId = new Map(entries.map(entry => [entry.envelope.id, entry]))
  const entryOf = (id: string): AnyEntry => byId.get(id) ?? raise('unknownEntry', `The outcome names entry ${id}, which is not among the entries; seal over the set that was folded.`)
  const nameOf = (account: string): string => names[account] ?? raise('unknownName', `No name is given for account ${account}; read it from the organisation's people.`)
  const say = (both: Both) => both[particulars.language]
  const checks = new Map(basis.checks.map(check => [check.id, check]))
  const checkOf = (id: string): Check => checks.get(id) ?? raise('unknownCheck', `The outcome names check ${id}, which is not in the basis; fold over the basis in force.`)
  const replacedBy = new Map(entries.flatMap(entry => entry.envelope.replaces.map(id => [id, entry] as const)))
  const source: Source = { entries, entryOf, names, nameOf, replacedBy }

  const built = elementsOf(outcome.line)
  const walkList = walkListOf(basis, built)
  const recordChecks = outcome.checks.map(one => checkRecord(one, checkOf(one.check), walkList.tasks, say, source))
  const settled = answers.length > 0 || notPut.length > 0
  return anyRecordSchema.parse({
    ...particulars,
    format: 'smoothside-record',
    version: settled ? 2 : 1,
    ...(settled ? { answers, notPut } : {}),
    rules: basis.rules,
    renderer: RENDERER_VERSION,
    basis: basisDigest,
    checklists: basis.checklists,
    walks: entries.filter(is('walkOpened')).map(entry => ({ entry: entry.envelope.id, at: entry.envelope.madeAt, by: nameOf(entry.envelope.author), device: entry.payload?.device ?? '' })),
    sentence: recordSentence(outcome.line, outcome, texts.sentence),
    isNot: texts.isNot,
    line: outcome.line,
    struck: elementsOf(basis.line).filter(element => built.every(one => one.id !== element.id)),
    elements: outcome.elements,
    limits: Object.fromEntries(recordChecks.flatMap(check => check.limits).sort(byCodeUnit).map(key => [key, walkList.limits[key]])),
    limitsSetAside: basis.setAside ?? [],
    provisions: basis.provisions ?? [],
    checks: recordChecks,
    deficiencies: outcome.deficiencies.map(one => deficiencyRecord(one, source)),
    notes: entries.filter(is('note')).flatMap(entry => entry.payload === null ? [] : [{ ...about(entry, source), element: entry.envelope.element, words: entry.payload.words, photos: digestsOf(entry.payload.photos) }]),
    photos: photosOf(source),
    signatures: entries.filter(is('signature')).flatMap(entry => entry.payload === null ? [] : [signatureRecord(entry, entry.payload, texts)]),
    cautions: cautionsOf(built).map(caution => ({ caution, text: texts.cautions[caution] })),
    entries: entries.map(entry => ({ id: entry.envelope.id, digest: entry.digest, number: numberOf(entry), kind: entry.envelope.kind, madeAt: entry.envelope.madeAt })),
    ignored: outcome.ignored,
    refusedLinks: outcome.refusedLinks,
    erased: outcome.erased,
    conflicts: outcome.conflicts,
  })
}

interface Source {
  entries: AnyEntry[]
  entryOf: (id: string) => AnyEntry
  names: Record<string, string>
  nameOf: (account: string) => string
  replacedBy: Map<string, AnyEntry>
}

/** Tasks and limits of the basis, and those of elements that the walk brought. */
function walkListOf(basis: RoundBasis, built: LineElement[]): Pick<RoundBasis, 'tasks' | 'limits'> {
  const planned = new Set(elementsOf(basis.line).map(element => element.id))
  const brought = built.filter(element => !planned.has(element.id)).map(element => tasksFor(basis, element))
  return { tasks: [...basis.tasks, ...brought.flatMap(list => list.tasks)], limits: Object.assign({}, basis.limits, ...brought.map(list => list.limits)) as RoundBasis['limits'] }
}

function raise(code: RecordFault, sentence: string): never {
  throw new RecordError(code, sentence)
}

const is = <K extends AnyEntry['envelope']['kind']>(kind: K) => (entry: AnyEntry): entry is Extract<AnyEntry, Entry<K>> => entry.envelope.kind === kind
/** The payload of an entry of that kind; null for another kind and for an erased one. */
const payloadOf = <K extends AnyEntry['envelope']['kind']>(entry: AnyEntry, kind: K): PayloadOf<K> | null => is(kind)(entry) ? entry.payload as PayloadOf<K> | null : null
const digestsOf = (photos: PhotoRef[]) => photos.map(photo => photo.digest)
const byCodeUnit = (a: string, b: string) => a < b ? -1 : a > b ? 1 : 0
const about = (entry: AnyEntry, { nameOf }: Pick<Source, 'nameOf'>) => ({ entry: entry.envelope.id, at: entry.envelope.madeAt, by: nameOf(entry.envelope.author) })

function numberOf(entry: AnyEntry): number {
  return entry.number ?? raise('notAccepted', `Entry ${entry.envelope.id} has not been accepted by the server; wait until every signed entry has arrived.`)
}

function refuseUnfinished(particulars: RecordParticulars, outcome: RoundOutcome): void {
  if (outcome.unknown.length > 0) throw new RecordError('unknownEntry', `${outcome.unknown.length} entries are of a kind that these rules do not know; update before sealing.`)
  if (outcome.waiting.length > 0) throw new RecordError('unknownEntry', `${outcome.waiting.length} entries wait for entries that have not come; let every device send first.`)
  const open = outcome.deficiencies.some(one => !isEnded(one)) || outcome.elements.some(element => !element.released)
  if (particulars.scope === 'final' && open) throw new RecordError('openInFinal', 'Something is still open, so the record cannot be final; seal an interim record or close what is open first.')
}

function checkRecord(one: CheckOutcome, check: Check, tasks: RoundBasis['tasks'], say: (both: Both) => string, source: Source): RecordCheck {
  const task = tasks.find(task => task.element === one.element && task.check === one.check && task.face === one.face)
  const readings = one.heads.map(head => readingRecord(source.entryOf(head.entry), source, head))
  // The reading that governs comes first; sorting is stable, so the others keep the order of the fold.
  readings.sort((a, b) => Number(b.entry === one.governs) - Number(a.entry === one.governs))
  const earlier = one.earlier.map(source.entryOf).filter(entry => entry.payload !== null)
  const aside = one.setAside === null ? null : source.entryOf(one.setAside.entry)
  return {
    element: one.element, check: one.check, face: one.face,
    title: say(check.title), task: say(check.task), note: say(check.note), caution: check.caution ? say(check.caution) : null,
    method: check.method, unit: check.unit ?? null, measurand: check.measurand ?? null, datum: check.datum ?? null, drawing: typeof check.drawing === 'string' ? check.drawing : null, class: check.class,
    limits: task?.limits ?? [],
    noLimit: check.noLimit ? say(check.noLimit) : null,
    tries: (check.tries ?? []).map(({ from, label, times }) => ({ from, label: say(label), times })),
    conformsWhen: check.conformsWhen ?? null,
    verdict: one.verdict, settled: one.settled, readAgain: one.readAgain,
    readings,
    earlier: earlier.map(entry => readingRecord(entry, source, null)),
    setAside: aside === null || one.setAside === null
      ? null
      : { ...about(aside, source), as: one.setAside.as, why: one.setAside.why, words: payloadOf(aside, 'setAside')?.words ?? null, photos: digestsOf(payloadOf(aside, 'setAside')?.photos ?? []) },
  }
}

function readingRecord(entry: AnyEntry, source: Source, head: CheckOutcome['heads'][number] | null): RecordReading {
  const payload = payloadOf(entry, 'reading') ?? raise('unknownEntry', `Entry ${entry.envelope.id} stands as a reading but is none that can be read; fold again.`)
  const next = source.replacedBy.get(entry.envelope.id)
  return {
    entry: entry.envelope.id, by: source.nameOf(entry.envelope.author), madeAt: entry.envelope.madeAt, place: entry.envelope.place, value: payload.value,
    verdict: head?.verdict ?? null, margin: head?.margin ?? null, limit: head?.limit ?? null,
    otherSystemDiffers: head?.otherSystemDiffers ?? false, disagreesWith: head?.disagreesWith ?? [], overruledBy: head?.overruledBy ?? null,
    note: payload.note || null, tag: payload.tag ?? null, photos: digestsOf(payload.photos),
    replacedBy: next?.envelope.id ?? null,
    reason: (next && payloadOf(next, 'reading')?.reason) || null,
  }
}

function deficiencyRecord(one: DeficiencyOutcome, source: Source): RecordDeficiency {
  const { id, tag, element, check, place, class: weight, state, held, assignedTo, due, waitsFor, until } = one
  return {
    id, tag, element, check, place, class: weight, state, held, due, waitsFor, until,
    // The fold names an account where the person has one, else the name as it was written.
    assignedTo: assignedTo === null ? null : source.names[assignedTo] ?? assignedTo,
    steps: one.history.map(entry => stepRecord(source.entryOf(entry), source)),
  }
}

/** One step in the history of a deficiency, as records and screens tell it. */
export function stepRecord(entry: AnyEntry, source: Pick<Source, 'nameOf'>): RecordStep {
  const step: RecordStep = {
    ...about(entry, source), kind: entry.envelope.kind, erased: entry.payload === null,
    words: null, reason: null, person: null, actsFor: null, done: null, toldAt: null, due: null, waitsFor: null, on: null, document: null, decision: null,
    accepted: null, condition: null, until: null, value: null, photos: [],
  }
  if (entry.payload === null) return step
  const { kind } = entry.envelope
  // The discriminant stands in the envelope, so each payload is read by the keys that its kind has.
  const payload = entry.payload as Partial<Record<string, unknown>>
  const read = <T>(key: string) => (payload[key] as T | undefined) ?? null
  const person = read<{ name: string }>('by') ?? read<{ name: string }>('to') ?? read<{ name: string }>('told')
  return {
    ...step,
    words: read<string>(kind === 'reading' ? 'note' : 'words') || null,
    reason: read<string>('reason') || null,
    person: person?.name ?? null,
    actsFor: read('for'), done: read('done'), toldAt: read('toldAt'), due: read('due'), waitsFor: read('waitsFor'), on: read('on'), document: read('document'), decision: read('as'),
    accepted: read('accepted'), condition: read('condition'), until: read('until'), value: read('value'),
    photos: digestsOf(read<PhotoRef[]>('photos') ?? []),
  }
}

/** Every photo once, in the order in which entries first name it; a photo that stands under a tag carries the tag. */
function photosOf(source: Source): RecordPhoto[] {
  const tagOf = new Map<string, string>()
  for (const entry of source.entries.filter(is('reading'))) if (entry.payload?.tag) tagOf.set(entry.envelope.id, entry.payload.tag)
  const photos = new Map<string, RecordPhoto>()
  for (const entry of source.entries) {
    if (entry.payload === null || !('photos' in entry.payload)) continue
    const tag = [entry.envelope.id, ...entry.envelope.answers].map(id => tagOf.get(id)).find(found => found !== undefined) ?? null
    for (const photo of entry.payload.photos) {
      const known = photos.get(photo.digest)
      if (known) known.entries.push(entry.envelope.id)
      else {
        const { entry: first, ...who } = about(entry, source)
        photos.set(photo.digest, { ...photo, ...who, entries: [first], element: entry.envelope.element, tag, of: entry.envelope.kind })
      }
    }
  }
  return [...photos.values()]
}

function signatureRecord(entry: AnyEntry, payload: PayloadOf<'signature'>, texts: RecordTexts): RecordSignature {
  const { account: _, ...signer } = payload.signer
  return {
    entry: entry.envelope.id, at: entry.envelope.madeAt, state: payload.state, meaning: payload.meaning, meaningText: texts.meanings[payload.meaning],
    signer, role: payload.role, known: payload.known, presence: payload.presence?.name ?? null,
    sheet: payload.sheet, sheetDigest: payload.sheetDigest, strokes: payload.strokes, typed: payload.typed, words: payload.words ?? null,
  }
}

/** The cautions that the line itself calls for, in a fixed order. */
function cautionsOf(elements: LineElement[]): Caution[] {
  const settings = new Set(elements.flatMap(element => [...element.faces.outer.settings, ...element.faces.inner.settings]))
  const gates = elements.flatMap(element => element.gate ? [element.gate] : [])
  const wanted: [Caution, boolean][] = [
    ['general', true],
    ['cutEnds', elements.some(element => element.kind === 'run')],
    ['tension', elements.some(element => element.kind === 'run') || gates.some(gate => gate.selfClosing)],
    ['pinch', gates.length > 0],
    ['water', settings.has('pool')],
    ['traffic', settings.has('driveway')],
    ['automatic', gates.some(gate => gate.automatic)],
  ]
  return wanted.flatMap(([caution, stands]) => stands ? [caution] : [])
}
