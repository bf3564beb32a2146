import { entrance } from '../../database/entrance'
import { sendAccountLink } from './sendLink'

/** Mails a link to set a new password, if the address has an account; the answer is the same either way. */
export async function requestReset(email: string): Promise<void> {
  const account = await entrance.accountForSignIn(email)
  if (!account) return
  await sendAccountLink({ purpose: 'reset', accountId: account.id, email }, { name: '', language: 'en' }, '')
}
