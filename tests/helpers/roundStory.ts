import type { Check } from '#shared/checklist/check'
import type { AnyEntry, EntryKind, PayloadOf, Place, ReadingValue } from '#shared/entry/entry'
import type { EntryDraft } from '#shared/entry/makeEntry'
import { makeEntry } from '#shared/entry/makeEntry'
import type { Limit } from '#shared/limit/limit'
import type { LineElement } from '#shared/line/line'
import { elementSchema } from '#shared/line/line'
import { INCH } from '#shared/measure/length'
import { digestOf } from '#shared/record/canonicalJson'
import type { RoundBasis } from '#shared/round/basis'

/** Ids that differ only in their last digits; the order of ids must mean nothing, so tests may number them as they like. */
export const uuid = (group: number, number: number) => `019a${group.toString(16).padStart(4, '0')}-0000-7000-8000-${number.toString(16).padStart(12, '0')}`

export const ORGANISATION = uuid(1, 1)
export const JOB = uuid(2, 1)
export const ROUND = uuid(3, 1)
export const WALK = uuid(4, 1)
export const PEOPLE = { ana: uuid(6, 1), bo: uuid(6, 2), crew: uuid(6, 3), manager: uuid(6, 4), client: uuid(6, 5) }
export const RUN = uuid(7, 1)
export const GATE = uuid(7, 2)
export const RUN2 = uuid(7, 3)

export function element(id: string, tag: string, more: Partial<LineElement> = {}): LineElement {
  const face = { settings: ['school' as const], ground: { finished: true, surface: 'soft' as const } }
  return elementSchema.parse({
    id, tag, kind: 'run', work: 'new', length: 480 * INCH, height: 72 * INCH, rise: 0, bays: 4, topRail: true, bottom: 'tensionWire', faces: { outer: face, inner: face }, ...more,
  })
}

const both = (text: string) => ({ en: text, es: text })
function check(id: string, more: Partial<Check>): Check {
  return {
    id, section: 'fabric', title: both(id), task: both(id), method: 'look', answeredFor: 'worst', elements: ['run', 'gate'], settings: [], limits: [],
    class: 'correctFirst', concern: 'injury', finding: 'tieEnd', group: false, photo: 'none', disturbs: [], placeTolerance: 6 * INCH,
    drawing: { none: 'test' }, note: both('Local code comes first.'), ...more,
  }
}

/** At most 2 in. */
const gapLimit: Limit = {
  id: 'gap', measurand: 'gap-below', datum: 'ground', unit: 'length', low: null, high: { imperial: 2 * INCH, inclusive: true }, avoid: null,
  basis: { kind: 'authority', name: 'Town of Fenwick', confirmedBy: 'R. Tam', confirmedOn: '2026-11-01' },
}

export const CHECKS: Record<string, Check> = {
  /** A look for each finding, which may be confirmed as a group. */
  ties: check('tie-ends', { group: true }),
  /** A measure; re-stretching what it asks for moves the ties. */
  gap: check('gap-below', { method: 'measure', measurand: 'gap-below', datum: 'ground', unit: 'length', finding: 'gapBelow', disturbs: ['tie-ends'] }),
  /** Each bay by itself; the owner may accept it. */
  spacing: check('post-spacing', { answeredFor: 'bay', class: 'ownerMayAccept', concern: 'workmanship', finding: 'other', elements: ['run'] }),
  closing: check('self-closing', { method: 'trial', answeredFor: 'once', elements: ['gate'], class: 'outOfUse', concern: 'drowning', tries: [{ from: 'open', label: both('open'), times: 3 }] }),
}

export function basisOf(more: Partial<RoundBasis> = {}): RoundBasis {
  const elements = [element(RUN, 'R1'), element(GATE, 'G1', { kind: 'gate', bays: 1, length: 48 * INCH, gate: { form: 'singleSwing', leaves: [48 * INCH], hinge: 'start', opens: 'inner', exit: false, selfClosing: true, automatic: false } }), element(RUN2, 'R2')]
  return {
    rules: 1,
    line: { version: 1, system: 'imperial', sides: [{ key: 'A', name: 'North', elements }] },
    checklists: [{ id: 'school-grounds', version: 1 }],
    checks: Object.values(CHECKS),
    limits: { gap: gapLimit },
    tasks: elements.flatMap(one => [
      { element: one.id, check: 'tie-ends', face: null, limits: [] },
      ...(one.kind === 'run'
        ? [{ element: one.id, check: 'gap-below', face: null, limits: ['gap'] }, { element: one.id, check: 'post-spacing', face: null, limits: [] }]
        : [{ element: one.id, check: 'self-closing', face: null, limits: [] }]),
    ]),
    ...more,
  }
}

export const look = (found: 'clear' | 'finding'): ReadingValue => found === 'clear' ? { method: 'look', found } : { method: 'look', found, finding: 'tieEnd' }
export const gap = (inches: number): ReadingValue => ({ method: 'measure', amount: Math.round(inches * INCH), text: `${inches} in`, system: 'imperial' })
export const trial = (good: number, of = 3): ReadingValue => ({ method: 'trial', tries: [{ from: 'open', good, of }] })
export const bay = (number: number, distance?: number): Place => ({ face: null, bay: number, from: distance === undefined ? null : { end: 'start', distance: distance * INCH }, height: null })

const person = (account: string | null, name = 'Somebody') => ({ account, name })
type About = Partial<Pick<EntryDraft<EntryKind>, 'element' | 'check' | 'place' | 'answers' | 'replaces' | 'basis' | 'author' | 'round' | 'device'>>

/** Writes entries of one round, as people would: each call returns the id of what was written. */
export class RoundStory {
  readonly entries: AnyEntry[] = []
  readonly bases = new Map<string, RoundBasis>()
  readonly basis: string
  private count = 0

  constructor(basis: RoundBasis = basisOf(), private readonly group = 8) {
    this.basis = this.hold(basis)
  }

  /** Keeps a basis and gives its digest. */
  hold(basis: RoundBasis): string {
    const digest = digestOf(basis)
    this.bases.set(digest, basis)
    return digest
  }

  write<K extends EntryKind>(kind: K, payload: Omit<PayloadOf<K>, 'salt'>, about: About = {}): string {
    this.count++
    const { entry } = makeEntry<K>({
      id: uuid(this.group, this.count), salt: this.count.toString(16).padStart(32, '0'), madeAt: '2026-11-30T09:00:00-05:00', organisation: ORGANISATION, job: JOB, round: ROUND,
      walk: WALK, author: PEOPLE.ana, device: uuid(5, 1), basis: this.basis, kind, payload, ...about,
    })
    this.entries.push(entry as AnyEntry)
    return entry.envelope.id
  }

  open(): string {
    return this.write('walkOpened', { basis: this.basis, device: 'Phone' })
  }

  reading(about: About & { element: string, check: string }, value: ReadingValue, more: Partial<PayloadOf<'reading'>> = {}): string {
    return this.write('reading', { value, photos: [], ...more }, about)
  }

  /** A word of a kind about readings: element and check are those of the first one. */
  about(ids: string[]): About & { element: string, check: string } {
    const { envelope } = this.entries.find(entry => entry.envelope.id === ids[0])!
    return { element: envelope.element!, check: envelope.check!, answers: ids }
  }

  correct(ids: string[], more: About = {}): string {
    return this.write('correction', { photos: [], by: person(PEOPLE.crew) }, { author: PEOPLE.crew, ...this.about(ids), ...more })
  }

  accept(ids: string[], accepted = true, until: string | null = null): string {
    return this.write('deviationAccepted', { by: person(PEOPLE.client, 'Mara Holt'), for: 'Alder School District', accepted, until }, { author: PEOPLE.client, ...this.about(ids) })
  }

  inError(reading: string, author = PEOPLE.bo): string {
    return this.write('enteredInError', { reason: 'Another run' }, { author, ...this.about([reading]) })
  }

  settle(stands: string, others: string[], author = PEOPLE.manager): string {
    return this.write('settled', { stands, reason: 'Looked at together' }, { author, ...this.about([stands, ...others]) })
  }

  refer(reading: string): string {
    return this.write('referred', { to: person(null, 'Owner of the wall'), on: '2026-11-30', words: 'Not ours' }, { author: PEOPLE.manager, ...this.about([reading]) })
  }

  decide(reading: string): string {
    return this.write('decided', { as: 'variance', by: person(null, 'R. Tam'), on: '2026-11-30', document: 'Letter 14', words: 'May stay' }, { author: PEOPLE.manager, ...this.about([reading]) })
  }

  assign(ids: string[], more: About = {}): string {
    return this.write('assignment', { to: person(PEOPLE.crew, 'Nilo Arce'), due: '2026-12-01T15:00:00-05:00' }, { author: PEOPLE.manager, ...this.about(ids), ...more })
  }

  get(id: string): AnyEntry {
    return this.entries.find(entry => entry.envelope.id === id)!
  }
}
