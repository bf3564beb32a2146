import { entrance } from '../../database/entrance'
import { Failure } from '../failure'
import { hashPassword, verifyPassword } from './password'

export async function changeProfile(accountId: string, change: { name?: string, language?: 'en' | 'es' }): Promise<void> {
  await entrance.changeAccount(accountId, change)
}

/** Sets a new password; needs the one of now, and ends every session. */
export async function changePassword(who: { accountId: string, email: string }, now: string, next: string): Promise<void> {
  const account = await entrance.accountForSignIn(who.email)
  if (!account?.password_hash || !await verifyPassword(account.password_hash, now)) throw new Failure('invalid', 'The password of now is not right.', [{ pointer: '/now', code: 'wrong', detail: 'The password of now is not right.' }])
  await entrance.changeAccount(who.accountId, { passwordHash: await hashPassword(next) })
  await entrance.endAllSessions(who.accountId)
}
