import type { AnyEntry, PayloadOf } from '../entry/entry'
import type { RoundBasis } from './basis'
import { RoundError } from './roundError'
import type { EntryLinks } from './linkEntries'
import type { RoundOutcome } from './outcome'

/** Entries that say what a round is held against. */
export interface BasisEntries { walkOpened: readonly number[], basisChanged: readonly number[] }

/**
 * The basis in force: that of the change at the desk which no other change replaces, else that of the walks, else `opening` (the one the round was opened
 * with). Several at once are a conflict that the desk resolves by a new change; until then the one with the newest line is shown and nothing can be signed.
 * Throws {@link RoundError}.
 */
export function basisInForce(links: EntryLinks, { walkOpened, basisChanged }: BasisEntries, bases: ReadonlyMap<string, RoundBasis>, opening: string | undefined): { digest: string, basis: RoundBasis, conflicts: RoundOutcome['conflicts'] } {
  const replaced = new Set(basisChanged.flatMap(at => links.counts[at] ? links.replaces[at]! : []))
  const changes = basisChanged.filter(at => links.counts[at] === 1 && !replaced.has(at))
  const naming = changes.length > 0 ? changes : walkOpened.filter(at => links.counts[at] === 1)
  const named = new Map<string, string[]>()
  for (const at of naming) {
    const digest = digestNamedBy(links.entries[at]!)
    if (digest !== null) named.set(digest, [...named.get(digest) ?? [], links.entries[at]!.envelope.id])
  }
  if (named.size === 0 && opening !== undefined) named.set(opening, [])
  if (named.size === 0) throw new RoundError('noBasis')
  const digest = [...named.keys()].sort((a, b) => newness(bases.get(b)) - newness(bases.get(a)) || (a < b ? -1 : 1))[0]!
  const basis = bases.get(digest)
  if (!basis) throw new RoundError('unknownBasis', digest)
  return { digest, basis, conflicts: named.size > 1 ? [{ of: 'basis', entries: [...named.values()].flat().sort() }] : [] }
}

/** It stands in the envelope too, where no erasure reaches. */
function digestNamedBy(entry: AnyEntry): string | null {
  return entry.envelope.basis ?? (entry.payload as PayloadOf<'walkOpened' | 'basisChanged'> | null)?.basis ?? null
}

function newness(basis: RoundBasis | undefined): number {
  return basis?.line.version ?? 0
}
