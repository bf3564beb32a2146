import type { KeptEntry } from '../entry/entry'
import { isKnown } from '../entry/entry'
import { elementsOf } from '../line/line'
import type { RoundBasis } from './basis'
import { sortBeside } from './elementOutcomes'
import { elementOf, entriesAbout, extended, linkedWith } from './entryIndex'
import type { Folded, FoldOptions } from './fold'
import { foldWhole, GROUND_KINDS, roundOutcome } from './fold'

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
  const index = before && goesOn(before, fresh, bases, options) ? extended(before.index, before.entries, fresh) : null
  if (!before || !index) return foldWhole(entries, bases, options)

  const { ground, once } = before
  const beside = (elements: ReadonlySet<string>) => new Set([...elements, ...[...elements].flatMap(element => ground.neighbours.get(element) ?? [])])
  const changes = beside(linkedWith(index, new Set(fresh.map(elementOf))))
  const needs = linkedWith(index, beside(changes))
  const { outcome: part, planned } = foldWhole(entriesAbout(index, needs), bases, options, { ground, elements: needs, once })
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
  const unasked = [...checks.slice(before.planned).filter(stays), ...part.checks.slice(planned).filter(comes)]
  sortBeside(unasked, walking)
  const struck = [...elements.slice(walking.size).filter(stays), ...part.elements.filter(one => comes(one) && !walking.has(one.element))].sort((a, b) => a.element < b.element ? -1 : 1)
  // What was said of the entries about the changed elements is said anew; edits of the line belong to the ground.
  const told = new Set(entriesAbout(index, changes).filter(entry => entry.envelope.kind !== 'lineEdit').map(entry => entry.envelope.id))
  const retold = <T>(list: readonly T[], parts: readonly T[], idOf: (one: T) => string) => [...list.filter(one => !told.has(idOf(one))), ...parts.filter(one => told.has(idOf(one)))]
  return {
    entries, ground, once, planned: before.planned, bases: bases.size, options, index,
    outcome: roundOutcome(ground, {
      elements: [...inPlace(elements.slice(0, walking.size), part.elements.filter(one => walking.has(one.element))), ...struck],
      checks: [...inPlace(checks.slice(0, before.planned), part.checks.slice(0, planned)), ...unasked],
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
function goesOn(before: Folded, fresh: readonly KeptEntry[], bases: ReadonlyMap<string, RoundBasis>, { basis, startsFrom }: FoldOptions): boolean {
  return before.bases === bases.size && before.options.basis === basis && !before.options.startsFrom && !startsFrom
    && fresh.every(entry => isKnown(entry) && !GROUND_KINDS.includes(entry.envelope.kind)) && !speaksOfTheLine(before, fresh)
}

/** Whether new entries may touch a check that is answered once for the line: by their own check, for all checks of an element, by what they name, or by disturbing it. */
function speaksOfTheLine({ once: { checks }, entries }: Folded, fresh: readonly KeptEntry[]): boolean {
  if (checks.size === 0) return false
  const speaks = ({ envelope }: KeptEntry) => envelope.check === null || checks.has(envelope.check) || envelope.kind === 'correction'
  if (fresh.some(speaks)) return true
  const named = new Set(fresh.flatMap(({ envelope }) => [...envelope.answers, ...envelope.replaces]))
  return named.size > 0 && entries.some(entry => named.has(entry.envelope.id) && speaks(entry))
}
