import { uuidv7 } from 'uuidv7'
import type { z } from 'zod'
import type { invitationSchema } from '../../../shared/api/account'
import type { Role } from '../../../shared/permission/permission'
import { entrance } from '../../database/entrance'
import * as people from '../../database/queries/people'
import type { Session } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { Failure, notFound } from '../failure'
import { sendAccountLink } from './sendLink'

type Who = Session & { accountId: string, organisationId: string, organisationName: string | null }

export const listPeople = (who: Session) => withSession(who, people.listPeople)

/** Invites a person by mail; they take part from the moment when they redeem the link. */
export async function invite(who: Who, input: z.infer<typeof invitationSchema>): Promise<void> {
  const accountId = await entrance.makeAccount(uuidv7(), input.email, input.name, input.language)
  await sendAccountLink({ purpose: 'invitation', accountId, organisationId: who.organisationId, role: input.role, email: input.email }, input, who.organisationName ?? '')
  await withSession(who, tx => people.writeAudit(tx, uuidv7(), who.accountId, 'invited', `${accountId} as ${input.role}`))
}

/** Gives a person another role, or ends their part (null): their sessions end with it. */
export async function changeRole(who: Who, accountId: string, role: Role | null): Promise<void> {
  const done = await withSession(who, async (tx) => {
    const outcome = await people.changeRole(tx, accountId, role)
    if (outcome === 'changed') await people.writeAudit(tx, uuidv7(), who.accountId, role ? `role ${role}` : 'ended', accountId)
    return outcome
  })
  if (done === 'notThere') throw notFound('person')
  if (done === 'lastAdministrator') throw new Failure('conflict', 'An organisation needs one administrator. Make somebody else administrator first.')
}
