import type { H3Event } from 'h3'
import type { Session } from '../database/withSession'
import { entrance, type SessionRow } from '../database/entrance'
import { useSettings } from '../settings'
import { hashToken } from '../services/account/token'

export interface SignedIn extends Session { accountId: string, email: string, name: string, language: 'en' | 'es', organisationName: string | null, tokenHash: string }

const toSignedIn = (row: SessionRow, tokenHash: string): SignedIn => ({
  accountId: row.account_id, email: row.email, name: row.name, language: row.language, standing: row.standing,
  role: row.role, organisationId: row.organisation_id, organisationName: row.organisation_name, tokenHash,
})

/** Who sends this request, or null. Asked of the database once a request, so that an ended session ends at once everywhere. */
export async function readSession(event: H3Event): Promise<SignedIn | null> {
  if (event.context.signedIn !== undefined) return event.context.signedIn as SignedIn | null
  const cookie = await getUserSession(event)
  const token = (cookie.secure as { token?: string } | undefined)?.token
  const row = token ? await entrance.sessionOf(hashToken(token)) : undefined
  return event.context.signedIn = row ? toSignedIn(row, hashToken(token!)) : null
}

/** Puts the token into the sealed cookie. Secure wherever the program is reached by TLS. */
export async function giveSession(event: H3Event, token: string): Promise<void> {
  await replaceUserSession(event, { secure: { token } }, { cookie: { secure: useSettings().origin.startsWith('https:'), sameSite: 'lax', httpOnly: true, path: '/' } })
}

export const dropSession = (event: H3Event) => clearUserSession(event)
