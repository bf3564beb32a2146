import type { DeficiencyClass } from '../checklist/check'
import type { EntryKind, PayloadOf } from '../entry/entry'
import { findingClass, graver } from './judgeReading'
import type { EntryLinks } from './linkEntries'
import type { DeficiencyOutcome, DeficiencyState } from './outcome'
import { isHead } from './settleReadings'
import type { Finding, ReadingThreads } from './threadReadings'
import type { Slot } from './walkSlots'

export interface DeficiencySources {
  links: EntryLinks
  threads: ReadingThreads
  slotOf: readonly (Slot | null)[]
  /** Readings that a settlement overruled. */
  overruled: ReadonlyMap<number, number>
  /** What an earlier round's outcome said, by the position of the first reading. */
  carried: ReadonlyMap<number, DeficiencyOutcome>
}

/** Which later words take a word off the table, so that the next move is no longer the one that it asked for. */
export const ANSWERED_BY: Partial<Record<EntryKind, readonly EntryKind[]>> = {
  assignment: ['assignment'],
  correction: ['reading', 'cannot', 'assignment', 'deviationOffered'],
  cannot: ['reading', 'correction', 'cannot', 'assignment', 'deviationOffered', 'referred'],
  dangerNow: ['dangerNow'],
  deviationOffered: ['deviationAccepted', 'deviationOffered'],
  disputed: ['reading', 'correction', 'assignment', 'deviationOffered', 'decided', 'referred', 'settled'],
}
/** Whose move it is, most pressing word first. */
const STATES: readonly [EntryKind, DeficiencyState][] = [['disputed', 'disputed'], ['deviationOffered', 'offered'], ['correction', 'corrected'], ['cannot', 'cannot'], ['assignment', 'assigned']]
const ENDS = { deviationAccepted: 'endedAccepted', decided: 'endedDecided', referred: 'endedReferred' } as const satisfies Partial<Record<EntryKind, DeficiencyState>>
type EndKind = keyof typeof ENDS
/** How a deficiency ended; `by` is the word that ended it, where there is one. */
interface End { state: DeficiencyState, by?: number }

/** All deficiencies of a round, in no order. Words that came to nothing are told in `links.ignored`. */
export function findDeficiencies(sources: DeficiencySources): Map<number, DeficiencyOutcome> {
  return new Map([...sources.threads.findings.values()].map(finding => [finding.root, deficiencyOf(finding, sources)]))
}

function deficiencyOf(finding: Finding, sources: DeficiencySources): DeficiencyOutcome {
  const { links, threads, slotOf, overruled } = sources
  const { entries } = links
  const carried = sources.carried.get(finding.root)
  const members = inOrder(links, finding.members)
  const words = inOrder(links, [...new Set(finding.words)])
  const first = entries[finding.root]!
  const slot = slotOf[finding.root] ?? slotOf[members[0]!]
  const payloads = members.map(at => entries[at]!.payload as PayloadOf<'reading'> | null)
  const weight = payloads.reduce<DeficiencyClass>((sum, payload) => slot ? graver(sum, findingClass(slot.check, payload?.class)) : sum, carried?.class ?? 'ownerMayAccept')

  const standing = members.filter(at => isHead(links, threads, at) && !overruled.has(at))
  const end: End | null = standing.length > 0 ? endByWord(standing, words, weight, carried, sources) : endByReading(finding, members, sources)
  const open = words.filter(at => threads.replaced[at] === 0 && !isAnswered(at, words, finding, sources))
  const corrections = open.filter(at => entries[at]!.envelope.kind === 'correction')
  // What was carried over names nothing, what came since names something.
  const kept = finding.rereadBy.length === 0 && [...members, ...words].every(at => links.depth[at] === 0) ? carried : undefined
  const said = <K extends EntryKind>(kind: K) => payloadOf(links, kind, open)
  const assignment = said('assignment')
  const acceptance = end?.by === undefined ? undefined : payloadOf(links, 'deviationAccepted', [end.by])
  const state = end?.state ?? kept?.state ?? STATES.find(([kind]) => open.some(at => entries[at]!.envelope.kind === kind))?.[1] ?? 'open'
  return {
    id: first.envelope.id,
    tag: payloads.find(payload => payload?.tag !== undefined)?.tag ?? carried?.tag ?? '',
    element: first.envelope.element!,
    check: first.envelope.check!,
    place: first.envelope.place,
    class: weight,
    state,
    history: [...new Set([...carried?.history ?? [], ...inOrder(links, [...new Set([...members, ...words, ...finding.rereadBy])]).map(at => entries[at]!.envelope.id)])],
    standing: [...(standing.length > 0 ? standing : tips(members, sources)), ...corrections].map(at => ({ entry: entries[at]!.envelope.id, kind: entries[at]!.envelope.kind })),
    assignedTo: assignment ? assignment.to.account : carried?.assignedTo ?? null,
    due: assignment ? assignment.due : carried?.due ?? null,
    waitsFor: state === 'cannot' ? said('cannot')?.waitsFor ?? carried?.waitsFor ?? null : null,
    until: state === 'endedAccepted' ? (acceptance ? acceptance.until : carried?.until ?? null) : null,
    held: said('dangerNow')?.done ?? carried?.held ?? null,
  }
}

/** Of several words of a kind side by side, one to show; nothing else hangs on which. */
function payloadOf<K extends EntryKind>(links: EntryLinks, kind: K, among: readonly number[]): PayloadOf<K> | undefined {
  const [entry] = among.map(at => links.entries[at]!).filter(one => one.envelope.kind === kind).sort((a, b) => a.digest < b.digest ? -1 : 1)
  return (entry?.payload ?? undefined) as PayloadOf<K> | undefined
}

/** In the order in which they answer one another; side by side in an order that is only for the eye. */
export function inOrder(links: EntryLinks, positions: readonly number[]): number[] {
  return positions.length < 2 ? [...positions] : [...positions].sort((a, b) => links.depth[a]! - links.depth[b]! || (links.entries[a]!.digest < links.entries[b]!.digest ? -1 : 1))
}

/** Members that no other member replaced: what a next reading has to look at. */
function tips(members: readonly number[], { links }: DeficiencySources): number[] {
  const replacedHere = new Set(members.flatMap(at => links.replaces[at]!))
  return members.filter(at => !replacedHere.has(at))
}

/** Whether a later word, or a reading that still counts, took this one off the table. */
function isAnswered(at: number, words: readonly number[], finding: Finding, { links, threads }: DeficiencySources): boolean {
  const by = ANSWERED_BY[links.entries[at]!.envelope.kind]
  if (!by) return true
  const names = (other: number) => by.includes(links.entries[other]!.envelope.kind) && links.answers[other]!.includes(at)
  if (words.some(other => threads.replaced[other] === 0 && names(other))) return true
  return by.includes('reading') && [...finding.members, ...finding.rereadBy].some(reading => threads.voided[reading] === 0 && threads.looked.get(reading)?.has(at))
}

/**
 * Readings that do not conform still stand, so each must have been accepted, decided or referred by a word that names it. Accepting needs a class that allows
 * it, and no refusal beside it.
 */
function endByWord(standing: readonly number[], words: readonly number[], weight: DeficiencyClass, carried: DeficiencyOutcome | undefined, { links, threads }: DeficiencySources): End | null {
  const { entries, answers } = links
  const ends = words.filter(at => threads.replaced[at] === 0 && entries[at]!.envelope.kind in ENDS)
  const accepts = (at: number) => (entries[at]!.payload as PayloadOf<'deviationAccepted'> | null)?.accepted === true
  const holds = (at: number) => entries[at]!.envelope.kind !== 'deviationAccepted' || (weight === 'ownerMayAccept' && accepts(at))
  const found: End[] = []
  for (const reading of standing) {
    const here = inOrder(links, ends.filter(at => answers[at]!.includes(reading)))
    const refused = here.some(at => entries[at]!.envelope.kind === 'deviationAccepted' && !accepts(at))
    const by = here.find(at => holds(at) && !(refused && entries[at]!.envelope.kind === 'deviationAccepted'))
    if (by !== undefined) found.push({ state: ENDS[entries[by]!.envelope.kind as EndKind], by })
    else if (carried && Object.values<string>(ENDS).includes(carried.state) && carried.standing.some(one => one.entry === entries[reading]!.envelope.id)) found.push({ state: carried.state })
    else return null
  }
  return found[0] ?? null
}

/** No reading that does not conform stands any more: either one that conforms looked at it after a correction, or a second person said that it was an error. */
function endByReading(finding: Finding, members: readonly number[], { links, threads, overruled, ...sources }: DeficiencySources): End | null {
  if (finding.rereadBy.some(at => threads.voided[at] === 0 && threads.replaced[at] === 0)) return { state: 'endedCorrected' }
  // A void of a reading that was replaced still speaks of the finding, since what replaced it conforms.
  const inError = (at: number) => threads.voided[at] === 1 || overruled.has(at) || (threads.replaced[at] === 1 && threads.voids.has(at))
  return tips(members, { links, threads, overruled, ...sources }).every(inError) ? { state: 'endedInError' } : null
}
