import type { AskErasure } from '../../../shared/api/erasure'
import * as erasures from '../../database/queries/erasure'
import type { Session } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { Failure, notFound } from '../failure'

type Who = Session & { accountId: string }

/** Asks that a picture or what an entry says be erased; nothing is erased until a second person of the office does it. The same id again asks once. */
export async function askErasure(who: Who, jobId: string, input: AskErasure): Promise<{ id: string }> {
  return withSession(who, async (tx) => {
    const before = await erasures.erasureOf(tx, input.id)
    if (before) {
      if (before.jobId !== jobId || before.entryId !== input.entryId || before.photo !== input.photo) throw new Failure('differs', 'Something else was asked under this id. Load the page again and ask from there.')
      return { id: before.id }
    }
    if (!await erasures.hasSubject(tx, jobId, input)) throw notFound(input.photo === null ? 'entry' : 'picture')
    if (await erasures.holdOf(tx, jobId)) throw new Failure('conflict', 'A hold stands on this job: nothing of it is erased while it does. Ask whoever placed it.')
    await erasures.insertErasure(tx, jobId, input, who.accountId)
    return { id: input.id }
  })
}

/** Takes back what was asked and not done. */
export async function withdrawErasure(who: Who, id: string): Promise<{ id: string }> {
  return withSession(who, async (tx) => {
    const row = await erasures.erasureOf(tx, id)
    if (!row) throw notFound('request')
    if (row.doneAt !== null) throw new Failure('conflict', 'This is erased already; it cannot be brought back.')
    await erasures.withdrawErasure(tx, id)
    return { id }
  })
}
