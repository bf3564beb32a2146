import type { Standing } from '../../../shared/permission/permission'
import { entrance } from '../../database/entrance'
import { Failure } from '../failure'
import { hashPassword, verifyPassword } from './password'
import { hashToken, makeToken } from './token'

const SESSION_DAYS = 30
/** Checked when there is no account, so that an unknown address takes as long as a wrong password. */
const decoy = hashPassword(makeToken())

/** Opens a session for a standing that the account has (the first one unless told); returns the token for the cookie. */
export async function openSession(accountId: string, wanted?: { standing: Standing, organisationId: string | null }): Promise<string> {
  const standings = await entrance.standingsOf(accountId)
  const chosen = wanted ? standings.find(one => one.standing === wanted.standing && one.organisation_id === wanted.organisationId) : standings[0]
  if (!chosen) throw new Failure('notAllowed', 'This account belongs to no organisation any more. Ask the administrator who invited you.')
  const token = makeToken()
  await entrance.openSession(hashToken(token), accountId, chosen.organisation_id, chosen.standing, new Date(Date.now() + SESSION_DAYS * 86_400_000))
  return token
}

/** Signs in by e-mail and password. */
export async function signIn(email: string, password: string): Promise<{ accountId: string, token: string }> {
  const account = await entrance.accountForSignIn(email)
  const right = await verifyPassword(account?.password_hash ?? await decoy, password)
  if (!account?.password_hash || !right) throw new Failure('wrongSignIn', 'E-mail or password is not right. Check both, or ask for a link to set a new password.')
  return { accountId: account.id, token: await openSession(account.id) }
}
