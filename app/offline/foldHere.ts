import type { KeptEntry } from '#shared/entry/entry'
import { sha256Hex } from '#shared/record/canonicalJson'
import type { RoundBasis } from '#shared/round/basis'
import { fold } from '#shared/round/fold'
import { tasksFor } from '#shared/round/makeBasis'
import type { RoundOutcome } from '#shared/round/outcome'
import { RoundError } from '#shared/round/roundError'
import type { FieldBundle } from '#shared/sync/sync'

/** The bases of a bundle by digest; those known before are not read again. A text that is not what its name says is no basis. */
export function basesHere(bundle: FieldBundle, before: ReadonlyMap<string, RoundBasis> = new Map()): Map<string, RoundBasis> {
  return new Map(bundle.bases.flatMap(({ digest, text }) => {
    const known = before.get(digest) ?? (sha256Hex(text) === digest ? JSON.parse(text) as RoundBasis : null)
    return known ? [[digest, known] as const] : []
  }))
}

/**
 * What the entries on this device come to, by the same fold and with the same options as the server's. Where a change of basis came without the basis
 * itself, what was known before it is shown, and `basisMissing` says that nothing may be signed.
 */
export function foldHere(bundle: FieldBundle, bases: ReadonlyMap<string, RoundBasis>, entries: readonly KeptEntry[]): { outcome: RoundOutcome | null, basisMissing: boolean } {
  const opening = bundle.round.basis
  const run = (of: readonly KeptEntry[]) => fold(of, bases, { basis: opening, startsFrom: bundle.startsFrom ?? undefined, tasksFor: (element, basis) => tasksFor(basis, element).tasks })
  try {
    return { outcome: run(entries), basisMissing: false }
  }
  catch (error) {
    if (!(error instanceof RoundError)) throw error
    const known = entries.filter(entry => entry.envelope.basis === null || bases.has(entry.envelope.basis))
    return { outcome: bases.has(opening) ? run(known) : null, basisMissing: true }
  }
}
