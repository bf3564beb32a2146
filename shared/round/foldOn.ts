import type { KeptEntry } from '../entry/entry'
import { isKnown } from '../entry/entry'
import { elementsOf } from '../line/line'
import type { RoundBasis } from './basis'
import { sortBeside } from './elementOutcomes'
import type { Folded, FoldOptions } from './fold'
import { foldWhole, GROUND_KINDS, roundOutcome } from './fold'

const NO_ELEMENT = ''
const elementOf = (entry: KeptEntry) => entry.envelope.element ?? NO_ELEMENT

/**
 * The fold of a round's entries with some more, from the fold of those before: equal to {@link fold} of all (a law of tests/unit/shared/round/foldOn.spec.ts holds it so),
 * in about the time that the elements take which the new entries can touch. What did not change is the very same object as before.
 *
 * Why a part is enough: on one ground, what an element comes to hangs on the entries about it, on those about its neighbours (a correction there may disturb it), and on
 * whatever these name or are named by, link after link. So the new entries can change the elements that they are linked with and the neighbours of those; and to fold
 * these, it takes again their neighbours and all that is linked. Where the ground itself may move, or an entry stands more than once or waits, all is folded; so it is
 * where a new entry may speak of what is answered once for the line, which hangs on every element.
 *
 * @param before - the fold to go on from; null where there is none
 */
export function foldOn(before: Folded | null, fresh: readonly KeptEntry[], bases: ReadonlyMap<string, RoundBasis>, options: FoldOptions = {}): Folded {
  const entries = [...before?.entries ?? [], ...fresh]
  const reach = before && goesOn(before, bases, options) ? reachOf(before, fresh, entries) : null
  if (!before || !reach) return foldWhole(entries, bases, options)

  const { ground, once } = before
  const { changes, needs } = reach
  const { outcome: part, planned } = foldWhole(entries.filter(entry => needs.has(elementOf(entry))), bases, options, { ground, elements: needs, once })
  const stays = <T extends { element: string }>(one: T) => !changes.has(one.element)
  const comes = <T extends { element: string }>(one: T) => changes.has(one.element)
  /** In a list whose members and order did not change, those that did. */
  const inPlace = <T extends { element: string }>(list: readonly T[], parts: readonly T[]): T[] => {
    const now = parts.filter(comes)
    let next = 0
    return list.map(one => stays(one) ? one : now[next++]!)
  }
  const walking = new Map(elementsOf(ground.built.line).map((element, at) => [element.id, at]))
  const { elements, checks, ...old } = before.outcome
  const beside = [...checks.slice(before.planned).filter(stays), ...part.checks.slice(planned).filter(comes)]
  sortBeside(beside, walking)
  const struck = [...elements.slice(walking.size).filter(stays), ...part.elements.filter(one => comes(one) && !walking.has(one.element))].sort((a, b) => a.element < b.element ? -1 : 1)
  // What was said of the entries about the changed elements is said anew; edits of the line belong to the ground.
  const told = new Set(entries.filter(entry => changes.has(elementOf(entry)) && entry.envelope.kind !== 'lineEdit').map(entry => entry.envelope.id))
  const retold = <T>(list: readonly T[], parts: readonly T[], idOf: (one: T) => string) => [...list.filter(one => !told.has(idOf(one))), ...parts.filter(one => told.has(idOf(one)))]
  return {
    entries, ground, once, planned: before.planned, bases: bases.size, options,
    outcome: roundOutcome(ground, {
      elements: [...inPlace(elements.slice(0, walking.size), part.elements.filter(one => walking.has(one.element))), ...struck],
      checks: [...inPlace(checks.slice(0, before.planned), part.checks.slice(0, planned)), ...beside],
      deficiencies: [...old.deficiencies.filter(stays), ...part.deficiencies.filter(comes)],
      waiting: [],
      unknown: old.unknown,
      ignored: retold(old.ignored, part.ignored, one => one.entry),
      refusedLinks: retold(old.refusedLinks, part.refusedLinks, one => one.entry),
      erased: retold(old.erased, part.erased, id => id),
    }),
  }
}

/** What an earlier round left is folded whole: it is linked in ways of its own. Bases are only ever added. */
function goesOn(before: Folded, bases: ReadonlyMap<string, RoundBasis>, { basis, startsFrom }: FoldOptions): boolean {
  return before.bases === bases.size && before.options.basis === basis && !before.options.startsFrom && !startsFrom && before.outcome.waiting.length === 0
}

/** The elements whose outcome new entries may change, and those whose entries it takes to tell; null where all must be folded. */
function reachOf({ ground, once, entries: earlier }: Folded, fresh: readonly KeptEntry[], entries: readonly KeptEntry[]): { changes: Set<string>, needs: Set<string> } | null {
  const ids = new Set(fresh.map(entry => entry.envelope.id))
  if (ids.size !== fresh.length || fresh.some(entry => !isKnown(entry) || GROUND_KINDS.includes(entry.envelope.kind)) || earlier.some(entry => ids.has(entry.envelope.id))) return null
  if (once.checks.size > 0 && speaksOfTheLine(once.checks, fresh, entries)) return null
  const linked = linkedElements(entries)
  if (!linked) return null
  const beside = (elements: ReadonlySet<string>) => new Set([...elements, ...[...elements].flatMap(element => ground.neighbours.get(element) ?? [])])
  const changes = beside(closed(new Set(fresh.map(elementOf)), linked))
  return { changes, needs: closed(beside(changes), linked) }
}

/** Whether new entries may touch a check that is answered once for the line: by their own check, for all checks of an element, by what they name, or by disturbing it. */
function speaksOfTheLine(checks: ReadonlySet<string>, fresh: readonly KeptEntry[], entries: readonly KeptEntry[]): boolean {
  const speaks = ({ envelope }: KeptEntry) => envelope.check === null || checks.has(envelope.check) || envelope.kind === 'correction'
  if (fresh.some(speaks)) return true
  const named = new Set(fresh.flatMap(({ envelope }) => [...envelope.answers, ...envelope.replaces]))
  return named.size > 0 && entries.some(entry => named.has(entry.envelope.id) && speaks(entry))
}

/** Which elements' entries name those of others, both ways; null where an entry names one that is not here. */
function linkedElements(entries: readonly KeptEntry[]): Map<string, Set<string>> | null {
  const elements = new Map<string, string | null>()
  const naming = entries.filter(({ envelope }) => envelope.answers.length + envelope.replaces.length > 0)
  const namesOf = ({ envelope }: KeptEntry) => [...envelope.answers, ...envelope.replaces]
  for (const entry of naming) for (const id of namesOf(entry)) elements.set(id, null)
  if (elements.size > 0) for (const entry of entries) if (elements.has(entry.envelope.id) && isKnown(entry)) elements.set(entry.envelope.id, elementOf(entry))
  const linked = new Map<string, Set<string>>()
  const link = (from: string, to: string) => linked.set(from, (linked.get(from) ?? new Set()).add(to))
  for (const entry of naming) {
    for (const id of namesOf(entry)) {
      const [from, to] = [elementOf(entry), elements.get(id)!]
      if (to === null) return null
      if (from === to) continue
      link(from, to)
      link(to, from)
    }
  }
  return linked
}

function closed(elements: Set<string>, linked: ReadonlyMap<string, ReadonlySet<string>>): Set<string> {
  // A set that grows while it is gone through is gone through to its end.
  for (const element of elements) for (const other of linked.get(element) ?? []) elements.add(other)
  return elements
}
