import type { Check, FindingKind } from '#shared/checklist/check'
import type { Entry, EntryKind, KeptEntry, PayloadOf, PhotoRef } from '#shared/entry/entry'
import { isKnown } from '#shared/entry/entry'
import { ENTRY_RULES } from '#shared/entry/entryRules'
import type { Limit } from '#shared/limit/limit'
import type { Face, LineElement } from '#shared/line/line'
import { elementsOf } from '#shared/line/line'
import { placeAlong } from '#shared/line/lineMark'
import type { Permission } from '#shared/permission/permission'
import type { RoundBasis } from '#shared/round/basis'
import type { DeficiencyOutcome, DeficiencyState, Head, RoundOutcome } from '#shared/round/outcome'
import { isEnded } from '#shared/round/outcome'
import { wordAnswers } from '#shared/round/wordAnswers'

/** The newest word of a kind on a tag, as it was written. */
type Said<K extends EntryKind> = { entry: Entry<K>, payload: PayloadOf<K> } | null

/** A tag with everything that a list says of it. */
export interface TagRow {
  of: DeficiencyOutcome
  element: LineElement | null
  check: Check | null
  /** Of the task that it answers. */
  face: Face | null
  /** The reading that stands against it, and what it comes to; null where an earlier round wrote it or it stands no more. */
  reading: Said<'reading'>
  head: Head | null
  limits: Limit[]
  finding: FindingKind
  assignment: Said<'assignment'>
  cannot: Said<'cannot'>
  correction: Said<'correction'>
  offered: Said<'deviationOffered'>
  photos: { before: PhotoRef[], after: PhotoRef[] }
}

/** Tags that one correction serves. */
export interface TagGroup { key: string, rows: TagRow[] }
export const TAG_PARTS = ['toRead', 'toCorrect', 'others', 'waiting', 'corrected', 'settled'] as const
export type TagPart = (typeof TAG_PARTS)[number]
export interface TagSection { part: TagPart, groups: TagGroup[] }

/** Every tag of a round with what was said of it. Entries that are not here (of an earlier round) leave their part empty. */
export function tagRows(outcome: RoundOutcome, basis: RoundBasis, entries: readonly KeptEntry[]): TagRow[] {
  const byId = new Map(entries.filter(isKnown).map(entry => [entry.envelope.id, entry]))
  const elements = new Map(elementsOf(outcome.line).map(element => [element.id, element]))
  const checks = new Map(basis.checks.map(check => [check.id, check]))
  const heads = new Map(outcome.checks.flatMap(check => check.heads.map(head => [head.entry, head] as const)))
  return outcome.deficiencies.map((of) => {
    const history = of.history.flatMap(id => byId.get(id) ?? [])
    const last = <K extends EntryKind>(kind: K): Said<K> => {
      const entry = history.findLast(one => one.envelope.kind === kind && one.payload !== null) as Entry<K> | undefined
      return entry ? { entry, payload: entry.payload! } : null
    }
    const standing = of.standing.find(one => one.kind === 'reading')
    const found = standing ? byId.get(standing.entry) as Entry<'reading'> | undefined : undefined
    const check = checks.get(of.check) ?? null
    const value = found?.payload?.value
    const photosOf = (kind: EntryKind) => history.filter(one => one.envelope.kind === kind).flatMap(one => (one.payload as { photos?: PhotoRef[] } | null)?.photos ?? [])
    const task = basis.tasks.find(one => one.element === of.element && one.check === of.check && (one.face === null || one.face === of.place?.face))
    return {
      of, check, face: task?.face ?? null, element: elements.get(of.element) ?? null,
      reading: found?.payload ? { entry: found, payload: found.payload } : null,
      head: standing ? heads.get(standing.entry) ?? null : null,
      limits: (task?.limits ?? []).flatMap(key => basis.limits[key] ?? []),
      finding: (value?.method === 'look' ? value.finding : undefined) ?? check?.finding ?? 'other',
      assignment: last('assignment'), cannot: last('cannot'), correction: last('correction'), offered: last('deviationOffered'),
      photos: { before: photosOf('reading'), after: photosOf('correction') },
    }
  })
}

const PART_OF: Record<DeficiencyState, 'toCorrect' | 'waiting' | 'corrected' | 'settled'> = {
  open: 'toCorrect', assigned: 'toCorrect', disputed: 'toCorrect', cannot: 'waiting', offered: 'waiting', corrected: 'corrected',
  endedCorrected: 'settled', endedAccepted: 'settled', endedDecided: 'settled', endedReferred: 'settled', endedInError: 'settled',
}

/**
 * The list as one walks it: what is due first, then along the line, tags that one correction serves side by side. Crew see what is theirs or nobody's
 * before what others have; whoever reads again sees that first.
 */
export function tagSections(rows: readonly TagRow[], line: RoundOutcome['line'], me: { accountId: string, crew: boolean }): TagSection[] {
  const order = new Map(elementsOf(line).map((element, at) => [element.id, at]))
  const due = (row: TagRow) => isEnded(row.of) || row.of.due === null ? Infinity : Date.parse(row.of.due)
  const along = (row: TagRow) => row.element ? placeAlong(row.element, row.of.place) ?? 0 : 0
  const compare = (a: TagRow, b: TagRow) => {
    const [one, other] = [due(a), due(b)]
    return (one === other ? 0 : one - other) || (order.get(a.of.element) ?? Infinity) - (order.get(b.of.element) ?? Infinity) || along(a) - along(b) || (a.of.tag < b.of.tag ? -1 : 1)
  }
  const partOf = (row: TagRow): TagPart => {
    const part = PART_OF[row.of.state]
    if (!me.crew) return part === 'corrected' ? 'toRead' : part
    return part === 'toCorrect' && row.of.assignedTo !== null && row.of.assignedTo !== me.accountId ? 'others' : part
  }
  const groups = new Map<string, TagGroup & { part: TagPart }>()
  for (const row of [...rows].sort(compare)) {
    const part = partOf(row)
    const shared = part === 'toCorrect' || part === 'others'
    const key = shared ? [part, row.of.element, row.of.check, row.of.due, row.of.assignedTo].join(' ') : row.of.id
    const group = groups.get(key)
    if (group) group.rows.push(row)
    else groups.set(key, { key, part, rows: [row] })
  }
  return TAG_PARTS.map(part => ({ part, groups: [...groups.values()].filter(group => group.part === part) })).filter(section => section.groups.length > 0)
}

/** What the next word of a kind on a tag names in `answers`; several lists where each reading needs a word of its own. */
export function answersOf(kind: EntryKind, row: Pick<TagRow, 'of'>, entries: readonly KeptEntry[]): string[][] {
  const kinds = new Map(entries.map(entry => [entry.envelope.id, entry.envelope.kind]))
  return wordAnswers(kind, row.of, id => kinds.get(id))
}

/** What can be done with a tag. */
export const TAG_DOINGS = ['correction', 'cannot', 'assignment', 'disputed', 'deviationOffered', 'decided', 'referred', 'enteredInError'] as const
export type TagDoing = (typeof TAG_DOINGS)[number]
export type TagDoingWhyNot = 'ended' | 'staffOnly' | 'managerOnly' | 'mustBeCorrected' | 'ownReading' | 'corrected' | 'disputed' | 'notHere'

/** Each doing with the reason why this person cannot do it now; null where they can. */
export function tagDoings(row: TagRow, who: { accountId: string, may: (permission: Permission) => boolean }): { doing: TagDoing, whyNot: TagDoingWhyNot | null }[] {
  return TAG_DOINGS.map(doing => ({ doing, whyNot: whyNot(doing, row, who) }))
}

function whyNot(doing: TagDoing, { of, reading }: TagRow, { accountId, may }: { accountId: string, may: (permission: Permission) => boolean }): TagDoingWhyNot | null {
  if (isEnded(of)) return 'ended'
  const { permission } = ENTRY_RULES[doing]
  if (!may(permission)) return permission === 'job.write' ? 'managerOnly' : 'staffOnly'
  // Law, drowning, entrapment, ways out and accessibility are never the owner's to accept: their classes do not allow it.
  if (doing === 'deviationOffered' && of.class !== 'ownerMayAccept') return 'mustBeCorrected'
  if (doing === 'enteredInError') return reading === null ? 'notHere' : reading.entry.envelope.author === accountId ? 'ownReading' : null
  if (doing === 'cannot' && of.state === 'disputed') return 'disputed'
  if ((doing === 'correction' || doing === 'cannot') && of.state === 'corrected') return 'corrected'
  return null
}

/** Where the walk opens a tag for its re-reading. */
export function readAgainAt(jobId: string, { of, face }: Pick<TagRow, 'of' | 'face'>) {
  return { path: `/w/${jobId}/check/${of.element}/${of.check}`, query: { ...(face && { face }), ...(of.place?.bay && { bay: of.place.bay }), again: of.id, from: 'tags' } }
}

/** An hour as people on site say it: `3 pm`, `3:30 pm`; in Spanish `15:00`. What stands after the minutes (a zone) is left out. */
export function hourWords(clock: string, language: 'en' | 'es'): string {
  const [hour = 0, minute = 0] = clock.slice(0, 5).split(':').map(Number)
  if (language === 'es') return `${hour}:${String(minute).padStart(2, '0')}`
  return `${hour % 12 || 12}${minute ? `:${String(minute).padStart(2, '0')}` : ''} ${hour < 12 ? 'am' : 'pm'}`
}
