import type { KeptEntry } from '../entry/entry'
import { isKnown } from '../entry/entry'

/** The entries of a round by what they are about, and which elements' entries name those of others. It grows with the round. */
export interface EntryIndex {
  /** How many entries it holds. */
  size: number
  /** What an entry is about; null where these rules do not know its kind, and what names it waits. */
  about: Map<string, string | null>
  entries: Map<string, KeptEntry[]>
  /** Both ways. */
  linked: Map<string, Set<string>>
}

/** What an entry is about: an element's id, or the empty text for the round as a whole. */
export const elementOf = (entry: KeptEntry): string => entry.envelope.element ?? ''

/**
 * The index of some entries and some more. An index that holds just the earlier ones is added to in place, so whoever goes on from the same entries twice finds it grown and
 * has it made anew. Null where an entry stands twice or names one that is not here.
 */
export function extended(index: EntryIndex | undefined, earlier: readonly KeptEntry[], fresh: readonly KeptEntry[]): EntryIndex | null {
  if (index?.size === earlier.length) return add(index, fresh)
  return add({ size: 0, about: new Map(), entries: new Map(), linked: new Map() }, [...earlier, ...fresh])
}

function add(index: EntryIndex, fresh: readonly KeptEntry[]): EntryIndex | null {
  const { about, entries, linked } = index
  // Counted first: what is given up half way is not taken for whole later.
  index.size += fresh.length
  for (const entry of fresh) about.set(entry.envelope.id, isKnown(entry) ? elementOf(entry) : null)
  if (about.size !== index.size) return null
  const link = (from: string, to: string) => linked.set(from, (linked.get(from) ?? new Set()).add(to))
  for (const entry of fresh) {
    const element = elementOf(entry)
    const list = entries.get(element)
    if (list) list.push(entry)
    else entries.set(element, [entry])
    for (const id of [...entry.envelope.answers, ...entry.envelope.replaces]) {
      const other = about.get(id) ?? null
      if (other === null) return null
      if (other === element) continue
      link(element, other)
      link(other, element)
    }
  }
  return index
}

/** The entries about any of these elements. */
export const entriesAbout = (index: EntryIndex, elements: ReadonlySet<string>): KeptEntry[] => [...elements].flatMap(element => index.entries.get(element) ?? [])

/** These elements and all that are linked with them, link after link. */
export function linkedWith(index: EntryIndex, elements: ReadonlySet<string>): Set<string> {
  const all = new Set(elements)
  // A set that grows while it is gone through is gone through to its end.
  for (const element of all) for (const other of index.linked.get(element) ?? []) all.add(other)
  return all
}
