import { uuidv7 } from 'uuidv7'
import { entrance } from '../../database/entrance'
import { Failure } from '../failure'
import { hashPassword } from './password'
import { openSession } from './signIn'
import { hashToken } from './token'

const spent = () => new Failure('linkSpent', 'This link was used already or is too old. Ask for a new one where you got it.')

/** What a link is for; changes nothing, since mail filters open every link. */
export async function readLink(token: string) {
  const link = await entrance.linkOf(hashToken(token))
  if (!link) throw new Failure('notFound', 'This link is not known here. Open it exactly as it stands in the mail.')
  if (link.state === 'expired' || (link.state === 'redeemed' && link.purpose !== 'contact')) throw spent()
  return { purpose: link.purpose, email: link.email, name: link.name, organisationName: link.organisation_name, role: link.role, hasPassword: link.has_password }
}

/** Redeems a link by the button on its page: sets the password where it asks for one, and opens a session. */
export async function redeemLink(token: string, input: { name?: string, password?: string }): Promise<{ token: string, recordId: string | null }> {
  const shown = await readLink(token)
  const needsPassword = shown.purpose === 'reset' || (shown.purpose === 'invitation' && !shown.hasPassword)
  if (needsPassword && !input.password) throw new Failure('invalid', 'Choose a password of at least 12 characters.', [{ pointer: '/password', code: 'required', detail: 'Choose a password of at least 12 characters.' }])
  const link = await entrance.redeemLink(hashToken(token))
  if (!link) throw spent()
  const accountId = link.account_id ?? await entrance.makeAccount(uuidv7(), link.email, input.name ?? shown.name, 'en')
  if (needsPassword) {
    await entrance.changeAccount(accountId, { passwordHash: await hashPassword(input.password!), name: input.name })
    if (link.purpose === 'reset') await entrance.endAllSessions(accountId)
  }
  if (link.purpose === 'invitation' && link.organisation_id && link.role) {
    await entrance.takeMembership(link.organisation_id, accountId, link.role)
    return { token: await openSession(accountId, { standing: link.role === 'crew' ? 'crew' : 'staff', organisationId: link.organisation_id }), recordId: null }
  }
  if (link.purpose === 'contact' && link.organisation_id && link.contact_id) {
    await entrance.takeContact(link.organisation_id, link.contact_id, accountId)
    // The link came to this address, so every contractor's contact of the same address is the same person.
    await entrance.takeContactsByEmail(link.email, accountId)
    return { token: await openSession(accountId, { standing: 'client', organisationId: null }), recordId: link.record_id }
  }
  return { token: await openSession(accountId), recordId: null }
}
