import type { AnyEntry, EntryKind, KeptEntry, PayloadOf } from '../entry/entry'
import type { CheckOutcome, DeficiencyOutcome, RoundOutcome } from './outcome'

/** What an earlier round left, as the fold of the next one starts from it. */
export interface CarriedOver {
  /** Its standing readings and open corrections, in the shape of entries; their ids are those of the entries that they were. */
  entries: AnyEntry[]
  /** Other ids of its history: a later entry may name them without effect. */
  settledIds: Set<string>
  /** Deficiencies of which a reading, or a correction, speaks. */
  roots: Map<string, string[]>
  corrections: Map<string, string[]>
  /** Readings of which only the finding is left: they do not stand any more. */
  gone: Set<string>
  /** Slots that a correction disturbed and nobody has read again. */
  disturbs: Map<string, Pick<CheckOutcome, 'element' | 'check' | 'face'>[]>
  /** Deficiencies that go on: open, or ended by a word about a reading that stands. */
  deficiencies: Map<string, DeficiencyOutcome>
  /** Deficiencies that ended for good. */
  ended: DeficiencyOutcome[]
  asides: CheckOutcome[]
}

const GOES_ON = (state: DeficiencyOutcome['state']) => state !== 'endedCorrected' && state !== 'endedInError'

/** Brings the sealed outcome of the round before into the shape that the fold works on. */
export function carryOver(from: RoundOutcome | undefined, given: readonly KeptEntry[]): CarriedOver {
  const over: CarriedOver = { entries: [], settledIds: new Set(), roots: new Map(), corrections: new Map(), gone: new Set(), disturbs: new Map(), deficiencies: new Map(), ended: [], asides: [] }
  if (!from) return over
  const job = given[0]?.envelope.job ?? ''
  const known = new Set(given.map(entry => entry.envelope.id))
  const bring = <K extends EntryKind>(kind: K, id: string, about: Pick<CheckOutcome, 'element' | 'check'>, payload: PayloadOf<K> | null, more: Partial<AnyEntry['envelope']> = {}) => {
    if (known.has(id)) return
    known.add(id)
    const envelope = {
      id, organisation: '', job, round: '', walk: null, kind, version: 1, author: '', device: '', madeAt: '', element: about.element, check: about.check,
      basis: from.basis, place: null, answers: [], replaces: [], payload: '', rules: from.rules, ...more,
    }
    over.entries.push({ envelope, payload, digest: id, number: null } as unknown as AnyEntry)
  }

  for (const check of from.checks) {
    for (const { entry, value, verdict, place, author, madeAt, overruledBy } of check.heads) {
      if (overruledBy === null) bring('reading', entry, check, { salt: '', value, photos: [], ...(verdict === 'groundNotFinished' ? { groundUnfinished: true } : {}) }, { place, author, madeAt })
      else over.settledIds.add(entry)
    }
    for (const id of check.earlier) over.settledIds.add(id)
    if (check.setAside) {
      over.asides.push(check)
      over.settledIds.add(check.setAside.entry)
    }
  }
  for (const one of from.deficiencies) {
    for (const id of one.history) over.settledIds.add(id)
    if (!GOES_ON(one.state)) {
      over.ended.push(one)
      continue
    }
    over.deficiencies.set(one.id, one)
    const readings = [one.id, ...one.standing.filter(word => word.kind === 'reading').map(word => word.entry)]
    for (const id of new Set(readings)) {
      if (!known.has(id)) {
        bring('reading', id, one, null, { place: one.place })
        over.gone.add(id)
      }
      over.roots.set(id, [...over.roots.get(id) ?? [], one.id])
    }
    for (const { entry, kind } of one.standing) {
      if (kind !== 'correction') continue
      bring('correction', entry, one, null)
      over.corrections.set(entry, [...over.corrections.get(entry) ?? [], one.id])
    }
  }
  for (const { element, check, face, disturbedBy } of from.checks) {
    for (const id of disturbedBy) {
      bring('correction', id, { element, check }, null)
      over.disturbs.set(id, [...over.disturbs.get(id) ?? [], { element, check, face }])
    }
  }
  return over
}
