import type { z } from 'zod'
import type { PushAnswer, pushSchema } from '../../../shared/sync/sync'
import { readEntry } from '../../../shared/entry/readEntry'
import { entrance } from '../../database/entrance'
import { noteDevice } from '../../database/queries/round'
import type { Session } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { acceptOnDevice } from '../acceptance/acceptOnDevice'
import { acceptEntries } from './acceptEntries'

/** Accepts a device's push and notes whether anything still waits on it. */
export async function pushEntries(who: Session, roundId: string, push: z.infer<typeof pushSchema>): Promise<PushAnswer> {
  const { store_epoch: storeEpoch } = await entrance.installation()
  const answer = await acceptEntries(who, roundId, push.entries)
  // Also one that is sent again: the first time may have ended between the two.
  for (const [at, { state }] of answer.results.entries()) {
    const wire = push.entries[at]!
    const read = (state === 'accepted' || state === 'resent') && wire.envelope.includes('"kind":"signature"') ? readEntry(wire) : null
    if (read?.state === 'known') await acceptOnDevice(who.organisationId!, read.entry)
  }
  const empty = push.empty && answer.results.every(one => one.state === 'accepted' || one.state === 'resent')
  await withSession(who, tx => noteDevice(tx, roundId, push.device, empty))
  return { storeEpoch, ...answer }
}
