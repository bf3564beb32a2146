import type { OfferedDeviation } from '../../../shared/api/portal'
import type { Entry } from '../../../shared/entry/entry'
import { isKnown } from '../../../shared/entry/entry'
import { readEntry } from '../../../shared/entry/readEntry'
import { elementsOf } from '../../../shared/line/line'
import { fold } from '../../../shared/round/fold'
import { entriesNamed } from '../../database/queries/portal'
import { newestRound } from '../../database/queries/round'
import type { Tx } from '../../database/withSession'
import { roundFold } from '../round/foldRound'
import { sha256 } from '../entry/sha256'

/** The deviations that the newest round of a job holds offered to the owner (or answered), with what was read and the very words of the offer. Asked as the organisation. */
export async function offeredDeviations(tx: Tx, jobId: string): Promise<{ round: { id: string, state: 'open' | 'frozen' | 'sealed' }, offers: OfferedDeviation[] } | null> {
  const round = await newestRound(tx, jobId)
  if (!round) return null
  const { entries, bases, options } = await roundFold(tx, { ...round, jobId })
  const outcome = fold(entries, bases, options)
  const basis = bases.get(outcome.basis)!
  const tags = new Map(elementsOf(outcome.line).map(element => [element.id, element.tag]))
  const named = await entriesNamed(tx, outcome.deficiencies.flatMap(one => one.history))
  const words = new Map(named.filter(one => one.kind === 'deviationOffered').flatMap((one) => {
    const read = readEntry(one, { number: one.number, mayBeErased: true, sha256 })
    return read.state !== 'refused' && isKnown(read.entry) && read.entry.payload !== null ? [[one.id, read.entry as Entry<'deviationOffered'>]] : []
  }))
  const offers = outcome.deficiencies.flatMap((one): OfferedDeviation[] => {
    const offer = one.history.flatMap(id => words.get(id) ?? []).at(-1)
    const check = basis.checks.find(each => each.id === one.check)
    if (!offer || !check) return []
    const readings = one.standing.filter(word => word.kind === 'reading').map(word => word.entry)
    const heads = outcome.checks.filter(each => each.element === one.element && each.check === one.check).flatMap(each => each.heads)
    const head = heads.find(each => readings.includes(each.entry)) ?? heads.find(each => each.entry === one.id)
    return [{
      deficiency: one.id, offer: offer.envelope.id, state: one.state, class: one.class, tag: one.tag, element: one.element, elementTag: tags.get(one.element) ?? '', check: one.check, title: check.title, place: one.place,
      unit: check.unit ?? null, value: head?.value ?? null, margin: head?.margin ?? null, limit: head?.limit ? basis.limits[head.limit] ?? null : null,
      words: offer.payload!.words, condition: offer.payload!.condition ?? null, until: offer.payload!.until, readings, basis: outcome.basis,
    }]
  })
  return { round: { id: round.id, state: round.state }, offers }
}
