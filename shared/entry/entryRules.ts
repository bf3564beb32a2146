import type { Permission } from '../permission/permission'
import type { AnyEntry, EntryKind, Envelope } from './entry'
import { isKnownKind } from './entry'
import type { EntryRefusal } from './entryRefused'
import { entryRefusal } from './entryRefused'

/** What an entry of a kind is about, what it may name, and who may write it. */
export interface EntryRule {
  /** `round`: no element; `element`: an element, perhaps a check on it; `check`: both; `any`: whatever it likes. */
  about: 'round' | 'element' | 'check' | 'any'
  /** Kinds of which it may be the newer word. */
  replaces: readonly EntryKind[]
  /** Kinds that it may have looked at. */
  answers: readonly EntryKind[]
  /** How many readings it names in `answers`: it is nothing without them. */
  readings: 'any' | 'one' | 'some'
  /** The permission (shared/permission) that its author needs. */
  permission: Permission
}

/**
 * The rules of naming, as data (contracts.md 2). Targets are of the same job, element and check, except that a reading may name a correction of a
 * check that disturbs its own, on its element or a neighbour: the fold sees to that, since it alone knows the line.
 */
export const ENTRY_RULES: Record<EntryKind, EntryRule> = {
  walkOpened: { about: 'round', replaces: [], answers: [], readings: 'any', permission: 'round.take' },
  basisChanged: { about: 'round', replaces: ['basisChanged'], answers: ['walkOpened', 'basisChanged'], readings: 'any', permission: 'round.basis' },
  reading: { about: 'check', replaces: ['reading', 'setAside'], answers: ['reading', 'setAside', 'correction', 'cannot', 'disputed', 'dangerNow', 'decided', 'note'], readings: 'any', permission: 'entry.send' },
  setAside: { about: 'element', replaces: ['setAside'], answers: ['setAside', 'note'], readings: 'any', permission: 'entry.send' },
  note: { about: 'any', replaces: ['note'], answers: ['reading', 'setAside', 'note', 'assignment', 'correction', 'cannot', 'dangerNow', 'deviationOffered', 'deviationAccepted', 'decided', 'referred', 'settled', 'disputed', 'lineEdit'], readings: 'any', permission: 'entry.send' },
  assignment: { about: 'check', replaces: ['assignment'], answers: ['reading', 'assignment', 'correction', 'cannot', 'disputed', 'dangerNow', 'deviationAccepted'], readings: 'some', permission: 'deficiency.assign' },
  correction: { about: 'check', replaces: ['correction'], answers: ['reading', 'assignment', 'correction', 'cannot', 'disputed', 'dangerNow', 'note'], readings: 'some', permission: 'entry.send' },
  cannot: { about: 'check', replaces: ['cannot'], answers: ['reading', 'assignment', 'correction', 'cannot', 'dangerNow'], readings: 'some', permission: 'entry.send' },
  dangerNow: { about: 'check', replaces: ['dangerNow'], answers: ['reading', 'dangerNow'], readings: 'some', permission: 'entry.send' },
  deviationOffered: { about: 'check', replaces: ['deviationOffered'], answers: ['reading', 'correction', 'cannot', 'disputed', 'deviationOffered', 'deviationAccepted'], readings: 'one', permission: 'job.write' },
  deviationAccepted: { about: 'check', replaces: ['deviationAccepted'], answers: ['reading', 'deviationOffered'], readings: 'one', permission: 'acceptance.write' },
  decided: { about: 'check', replaces: ['decided'], answers: ['reading', 'deviationOffered', 'disputed'], readings: 'one', permission: 'job.write' },
  referred: { about: 'check', replaces: ['referred'], answers: ['reading', 'assignment', 'cannot', 'disputed'], readings: 'one', permission: 'job.write' },
  enteredInError: { about: 'check', replaces: [], answers: ['reading'], readings: 'one', permission: 'deficiency.assign' },
  settled: { about: 'check', replaces: ['settled'], answers: ['reading', 'disputed'], readings: 'some', permission: 'deficiency.assign' },
  disputed: { about: 'check', replaces: ['disputed'], answers: ['reading', 'assignment', 'correction', 'deviationAccepted', 'decided', 'referred', 'settled'], readings: 'some', permission: 'entry.send' },
  lineEdit: { about: 'element', replaces: ['lineEdit'], answers: ['lineEdit', 'note'], readings: 'any', permission: 'line.write' },
  signature: { about: 'round', replaces: ['signature'], answers: ['signature'], readings: 'any', permission: 'entry.send' },
}

/** What is wrong with an entry by itself: its subject must fit its kind. Null when nothing is. Told apart from targets, which need other entries. */
export function subjectRefusal(entry: AnyEntry): EntryRefusal | null {
  const { envelope, payload } = entry
  const { about } = ENTRY_RULES[envelope.kind]
  const wrong = (field: keyof Envelope) => entryRefusal('subject', `/envelope/${field}`)
  if (about === 'round' ? envelope.element !== null : about !== 'any' && envelope.element === null) return wrong('element')
  if (about === 'check' ? envelope.check === null : about === 'round' && envelope.check !== null) return wrong('check')
  if (envelope.element === null && (envelope.check !== null || envelope.place !== null)) return wrong(envelope.check === null ? 'place' : 'check')
  if (envelope.check !== null && envelope.basis === null) return wrong('basis')
  if (envelope.replaces.includes(envelope.id)) return wrong('replaces')
  if (envelope.answers.includes(envelope.id)) return wrong('answers')
  if (payload === null) return null
  if (entry.envelope.kind === 'reading') {
    const { value } = entry.payload as NonNullable<Extract<AnyEntry, { envelope: { kind: 'reading' } }>['payload']>
    if (value.method === 'look' && (value.found === 'finding') !== (value.finding !== undefined)) return entryRefusal('subject', '/payload/value/finding')
    if (value.method === 'trial' && value.tries.some(one => one.good > one.of)) return entryRefusal('subject', '/payload/value/tries')
  }
  if (('basis' in payload) && payload.basis !== envelope.basis) return wrong('basis')
  if ('edit' in payload) {
    const { edit } = payload
    const element = edit.kind === 'add' ? edit.element.id : edit.element
    if (element !== envelope.element || envelope.check !== null) return wrong(element === envelope.element ? 'check' : 'element')
    if (edit.kind === 'split' && (edit.into[0].id !== element || edit.into[1].id === element)) return entryRefusal('subject', '/payload/edit/into')
  }
  if ('stands' in payload && !envelope.answers.includes(payload.stands)) return entryRefusal('subject', '/payload/stands')
  return null
}

/** What is kept of an entry that another one names. */
export type Target = Pick<Envelope, 'id' | 'job' | 'kind' | 'version' | 'element' | 'check' | 'author'>

/** May an entry name that target in that list? Kinds, job, element and check only; never who or when. */
export function mayName(entry: Envelope & { kind: EntryKind }, list: 'replaces' | 'answers', target: Target): boolean {
  const rule = ENTRY_RULES[entry.kind]
  if (!(rule[list] as readonly string[]).includes(target.kind) || target.job !== entry.job) return false
  if (target.element === entry.element && target.check === entry.check) return true
  if (list === 'replaces') return false
  // A note may have looked at another subject; what is read on an element may have looked at the word that set the whole of it aside.
  if (entry.kind === 'note' || (target.kind === 'setAside' && target.check === null && target.element === entry.element)) return true
  return entry.kind === 'reading' && target.kind === 'correction'
}

/** What an entry's targets come to: all known and allowed, some not known yet (hold it), or one that it may not name. */
export type TargetsState = { state: 'ok' } | { state: 'waiting', for: string[] } | { state: 'refused', refusal: EntryRefusal }

/**
 * Checks the entries that one names against those which stand before it (accepted, or earlier in the same batch). `known` gives a target by id,
 * or undefined. An entry of a kind that these rules do not know is no target: who names it waits.
 */
export function checkTargets(entry: AnyEntry, known: (id: string) => Target | undefined): TargetsState {
  const envelope = entry.envelope
  const waitsFor: string[] = []
  let readings = 0
  for (const list of ['replaces', 'answers'] as const) {
    for (let at = 0; at < envelope[list].length; at++) {
      const id = envelope[list][at]!
      const target = known(id)
      if (!target || !isKnownKind(target)) {
        waitsFor.push(id)
        continue
      }
      if (!mayName(envelope, list, target)) return { state: 'refused', refusal: entryRefusal('target', `/envelope/${list}/${at}`) }
      if (list === 'answers' && target.kind === 'reading') readings++
      if (envelope.kind === 'enteredInError' && target.author === envelope.author) return { state: 'refused', refusal: entryRefusal('ownReading', `/envelope/${list}/${at}`) }
    }
  }
  if (waitsFor.length > 0) return { state: 'waiting', for: waitsFor }
  const wanted = ENTRY_RULES[envelope.kind].readings
  if (wanted === 'one' ? readings !== 1 : wanted === 'some' && readings === 0) return { state: 'refused', refusal: entryRefusal('target', '/envelope/answers') }
  return { state: 'ok' }
}
