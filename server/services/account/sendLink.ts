import { entrance, type LinkRow } from '../../database/entrance'
import { composeMail } from '../../mail/composeMail'
import { sendMail } from '../../mail/sendMail'
import { useSettings } from '../../settings'
import { hashToken, makeToken } from './token'

type Link = Parameters<typeof entrance.makeLink>[1]
const HOURS: Record<LinkRow['purpose'], number> = { invitation: 14 * 24, reset: 2, contact: 90 * 24 }

/** Makes a link and returns its address; the token is nowhere else. */
export async function makeLink(link: Link): Promise<string> {
  const token = makeToken()
  await entrance.makeLink(hashToken(token), link, new Date(Date.now() + HOURS[link.purpose] * 3_600_000))
  return `${useSettings().origin}/link/${token}`
}

/** Mails an invitation or a link to set a password. */
export async function sendAccountLink(link: Link & { purpose: 'invitation' | 'reset' }, to: { name: string, language: 'en' | 'es' }, organisationName: string): Promise<void> {
  const address = await makeLink(link)
  await sendMail({ to: { name: to.name, address: link.email }, ...composeMail(to.language, link.purpose, { name: to.name, organisation: organisationName, link: address, hours: String(HOURS[link.purpose]), days: String(HOURS[link.purpose] / 24) }) })
}
