import { setImmediate } from 'node:timers/promises'
import type { KeptEntry } from '../../../shared/entry/entry'
import { isKnown } from '../../../shared/entry/entry'
import type { Folded } from '../../../shared/round/fold'
import { foldWhole } from '../../../shared/round/fold'
import { foldOn } from '../../../shared/round/foldOn'
import type { LockedRound } from '../../database/queries/entry'
import * as states from '../../database/queries/state'
import type { Tx } from '../../database/withSession'
import { jobSummary } from '../job/jobSummary'
import { roundFold } from './foldRound'

/**
 * Writes the fold's result for lists, in the accepting transaction: round, checks, deficiencies, and what the list of jobs shows. Only what changed is
 * written. What comes after a round was frozen or sealed is late: it is kept, and changes nothing here (null).
 *
 * @param accepted - the entries of this transaction, the newest of the round
 * @param store - writes them; the database does so while they are folded here
 */
export async function keepState(tx: Tx, round: LockedRound, accepted: KeptEntry[], store: () => Promise<void> = async () => undefined): Promise<Folded | null> {
  if (round.state !== 'open') {
    await store()
    return null
  }
  const { held: inHand, entries, bases, options } = await roundFold(tx, round, accepted)
  // Folded again with nothing new (refold): what was kept has been thrown away.
  const held = accepted.length === 0 ? null : inHand
  const before = accepted.length === 0 ? null : held?.outcome ?? await states.readOutcome(tx, round.id)
  const signatures = entries.filter(entry => isKnown(entry) && entry.envelope.kind === 'signature').length
  const stored = store()
  // While the database stores, all of it is worked out here.
  const work = setImmediate().then(() => {
    const folded = held ? foldOn(held, accepted, bases, options) : foldWhole(entries, bases, options)
    const { outcome } = folded
    return { folded, write: states.stateWriting(round, before, outcome, jobSummary(outcome.line, outcome, signatures)) }
  })
  const [{ folded, write }] = await Promise.all([work, stored])
  await write(tx)
  return folded
}
