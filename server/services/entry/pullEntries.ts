import type { PullAnswer } from '../../../shared/sync/sync'
import { PULL_MOST } from '../../../shared/sync/sync'
import { entrance } from '../../database/entrance'
import { entriesAfter, erasedUpTo } from '../../database/queries/entry'
import { roundOf } from '../../database/queries/round'
import type { Session } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { notFound } from '../failure'

/** What came after a number, and what was erased of what came before; `more` says to ask again at once. */
export async function pullEntries(who: Session, roundId: string, after: number): Promise<PullAnswer> {
  const { store_epoch: storeEpoch } = await entrance.installation()
  return withSession(who, async (tx) => {
    const round = await roundOf(tx, roundId)
    if (!round) throw notFound('round')
    const entries = await entriesAfter(tx, roundId, after, PULL_MOST)
    const { jobId: _, ...head } = round
    const erased = after > 0 ? await erasedUpTo(tx, roundId, after) : []
    return { storeEpoch, round: head, entries: [...erased, ...entries], more: entries.length === PULL_MOST }
  })
}
