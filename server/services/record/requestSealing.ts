import { jobCode } from '../../../shared/api/job'
import { readyToSign } from '../../../shared/round/readyToSign'
import { readJobRow } from '../../database/queries/job'
import { lockRound } from '../../database/queries/entry'
import { questionsOf } from '../../database/queries/question'
import { devicesOf, newestRound } from '../../database/queries/round'
import * as sealing from '../../database/queries/sealing'
import type { Session } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { enqueue } from '../../tasks/queue'
import { Failure, notFound } from '../failure'
import { roundFold } from '../round/foldRound'
import { signedSet } from './signedSet'

type Who = Session & { accountId: string, organisationId: string }

/**
 * Freezes a round over its signed set and queues the sealing, in one transaction under the round's lock. Refuses with what is to be done: sign first, sign
 * again after something adverse, wait for devices or say why not. The same id again is the same record.
 */
export async function requestSealing(who: Who, jobId: string, input: { id: string, scope: 'interim' | 'final', overDevices: string | null }): Promise<{ id: string, code: string }> {
  return withSession(who, async (tx) => {
    const before = await sealing.sealingOf(tx, input.id)
    if (before) return { id: before.id, code: before.code }
    const job = await readJobRow(tx, jobId)
    const newest = job && await newestRound(tx, jobId)
    if (!job || !newest) throw notFound('job')
    const round = (await lockRound(tx, newest.id))!
    if (round.state !== 'open') throw new Failure('frozen', 'A record of this round is being sealed already. Look at the records of the job.')
    const { entries, bases, options } = await roundFold(tx, round)
    const set = signedSet(entries, bases, options)
    if (!set) throw new Failure('notReady', 'Nobody has signed yet. Have the inspector sign on the device, then seal.')
    if (set.scope !== input.scope) throw new Failure('notReady', set.scope === 'interim' ? 'What was signed is an interim record. Seal it as one, or have a final record signed.' : 'What was signed is a final record. Seal it as one.')
    if (set.adverse.length > 0) throw new Failure('stale', `After the signatures ${set.adverse.length === 1 ? 'something came' : `${set.adverse.length} things came`} that speaks against the work. Look at it with the signers and have the round signed again.`)
    if (set.again.length > 0) throw new Failure('stale', `Not all signed the same: ${set.again.join(', ')} should sign again.`)
    if (!readyToSign(set.outcome, input.scope).ready) throw new Failure('notReady', 'Something still stands against this record. Look at what is open on the job.')
    const waiting = input.scope === 'final' ? (await questionsOf(tx, jobId)).filter(one => one.state !== 'answered').length : 0
    if (waiting > 0) throw new Failure('notReady', `${waiting === 1 ? 'A question to the authority waits' : `${waiting} questions to the authority wait`} for an answer, so this record cannot be final. Write the answer down or withdraw the question on the job, or have an interim record signed.`)
    const out = (await devicesOf(tx, round.id)).filter(device => !device.emptyAt)
    if (out.length > 0 && !input.overDevices) throw new Failure('notReady', `${out.map(device => device.name).join(', ')} ${out.length === 1 ? 'has' : 'have'} the round along and may hold entries that were not sent. Wait for them, or say why you do not.`, [{ pointer: '/overDevices', code: 'required', detail: 'Say why these devices are not waited for; it is printed in the record.' }])
    const number = await sealing.nextNumber(tx, jobId)
    const code = `${jobCode(job.organisationCode, job.number)}-${number}`
    await sealing.freezeRound(tx, round.id)
    await sealing.insertRecord(tx, { id: input.id, jobId, roundId: round.id, number, scope: input.scope, code, border: round.accepted, overDevices: out.length > 0 ? input.overDevices : null, requestedBy: who.accountId })
    await enqueue(tx, 'seal', { organisationId: who.organisationId, id: input.id })
    return { id: input.id, code }
  })
}

/** Queues a sealing that stopped; it goes on from the step that was kept. */
export async function resumeSealing(who: Session, recordId: string): Promise<void> {
  await withSession(who, async (tx) => {
    const row = await sealing.sealingOf(tx, recordId)
    if (!row) throw notFound('record')
    if (row.sealing === 'sealed') return
    await enqueue(tx, 'seal', { organisationId: who.organisationId!, id: recordId })
  })
}
