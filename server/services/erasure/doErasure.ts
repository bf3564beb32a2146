import { uuidv7 } from 'uuidv7'
import { lockRound } from '../../database/queries/entry'
import * as erasures from '../../database/queries/erasure'
import { writeAudit } from '../../database/queries/people'
import { forgetState } from '../../database/queries/state'
import type { Session, Tx } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { useStorage } from '../../storage/storage'
import { Failure, notFound } from '../failure'
import { photoKey, thumbnailKey } from '../photo/storePhoto'
import { keepState } from '../round/keepState'

const REFUSALS: Record<string, [code: 'notAllowed' | 'conflict', detail: string]> = {
  SM001: ['notAllowed', 'A second person has to erase this: somebody of the office other than who asked, signed in as themselves.'],
  SM002: ['conflict', 'A hold stands on this job: nothing of it is erased while it does. Ask whoever placed it.'],
}

async function redact(tx: Tx, id: string): Promise<void> {
  try { await erasures.redact(tx, id) }
  catch (error) {
    const refusal = REFUSALS[(error as { code?: string }).code ?? '']
    if (refusal) throw new Failure(...refusal)
    throw error
  }
}

/**
 * Erases what somebody else asked: the payload of an entry, or a picture's files. Envelope and digest stay, what the round comes to is worked out again, and
 * devices are told. Done again it does what may be left of it, since files go last.
 */
export async function doErasure(who: Session & { accountId: string, organisationId: string }, id: string): Promise<{ id: string }> {
  const { photo } = await withSession(who, async (tx) => {
    const found = await erasures.erasureOf(tx, id)
    if (!found) throw notFound('request')
    // The round's lock first, as everybody takes it.
    const round = found.roundId === null ? undefined : await lockRound(tx, found.roundId)
    const row = (await erasures.erasureOf(tx, id))!
    if (row.doneAt !== null) return row
    await redact(tx, id)
    if (round?.state === 'open') {
      await forgetState(tx, round.id)
      await keepState(tx, round, [])
    }
    await writeAudit(tx, uuidv7(), who.accountId, 'erased', id)
    return row
  })
  if (photo !== null) for (const key of [photoKey, thumbnailKey]) await useStorage().remove(key(who.organisationId, photo))
  return { id }
}
