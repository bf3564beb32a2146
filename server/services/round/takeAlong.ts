import type { FieldBundle } from '../../../shared/sync/sync'
import { SYNC_VERSION } from '../../../shared/sync/sync'
import { jobCode } from '../../../shared/api/job'
import { entrance } from '../../database/entrance'
import { instrumentsInUse } from '../../database/queries/instrument'
import * as rounds from '../../database/queries/round'
import { outcomeBefore } from '../../database/queries/state'
import type { Session } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { Failure, notFound } from '../failure'

/** Letters of tags: none that a marker on wet tape makes look like a figure. */
const LETTERS = [...'ABCDEFGHJKLMNPRSTUVWXYZ']

/** The n-th letter: A to Z without I, O, Q, then AA, AB ... */
export function tagLetter(index: number): string {
  const first = Math.floor(index / LETTERS.length)
  return (first > 0 ? LETTERS[first - 1]! : '') + LETTERS[index % LETTERS.length]!
}

/** Gives a device everything that it needs to work on a job with no signal, and the letter for its tags. Asking again gives the same letter. */
export async function takeAlong(who: Session & { accountId: string, name: string }, jobId: string, device: { device: string, name: string }): Promise<FieldBundle> {
  const { store_epoch: storeEpoch } = await entrance.installation()
  return withSession(who, async (tx) => {
    const head = await rounds.jobHead(tx, jobId)
    if (!head) throw notFound('job')
    const round = await rounds.newestRound(tx, jobId)
    if (!round) throw new Failure('notReady', 'This job has no line and walk list yet. Ask its project manager to finish them.')
    const before = await rounds.devicesOf(tx, round.id)
    if (!before.some(one => one.device === device.device)) await rounds.addDevice(tx, round.id, device, who.accountId, tagLetter(before.length))
    const devices = await rounds.devicesOf(tx, round.id)
    const { organisationCode, ...job } = head.job
    return {
      syncVersion: SYNC_VERSION,
      storeEpoch,
      me: { accountId: who.accountId, name: who.name, role: who.role! },
      organisation: head.organisation,
      job: { ...job, code: jobCode(organisationCode, job.number) },
      site: head.site,
      client: head.client,
      round,
      startsFrom: await outcomeBefore(tx, jobId, round.number) ?? null,
      letter: devices.find(one => one.device === device.device)!.letter,
      bases: await rounds.basesOf(tx, jobId),
      instruments: await instrumentsInUse(tx),
      people: await rounds.peopleOf(tx),
      contacts: who.standing === 'staff' ? await rounds.contactsOf(tx, head.client.id) : [],
      devices,
    }
  })
}
