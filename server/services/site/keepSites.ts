import type { ClientInput, ContactInput, SiteInput } from '../../../shared/api/site'
import * as sites from '../../database/queries/site'
import type { Session } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { Failure, notFound } from '../failure'

/** Turns the database's refusals that a person can mend into words with a pointer. */
async function readable<T>(work: Promise<T>): Promise<T> {
  return work.catch((error: { code?: string, constraint?: string }) => {
    const taken = { client_name: ['/name', 'There is a client of this name already.'], authority_name: ['/name', 'There is an authority of this name already.'], contact_email: ['/email', 'This client has a contact with this address already.'] }[error.constraint ?? '']
    if (error.code === '23505' && taken) throw new Failure('taken', taken[1]!, [{ pointer: taken[0]!, code: 'taken', detail: taken[1]! }])
    if (error.code === '23503') throw new Failure('invalid', 'What this belongs to is not here any more. Choose it again.', [{ pointer: '/', code: 'unknown', detail: 'Choose it again.' }])
    throw error
  })
}

export const listClients = (who: Session) => withSession(who, sites.listClients)
export const listSites = (who: Session) => withSession(who, sites.listSites)
export const listAuthorities = (who: Session) => withSession(who, sites.listAuthorities)
export const putClient = (who: Session, input: ClientInput) => readable(withSession(who, tx => sites.putClient(tx, input)))
export const putAuthority = (who: Session, input: { id: string, name: string }) => readable(withSession(who, tx => sites.insertAuthority(tx, input)))

export const putContact = (who: Session, clientId: string, input: ContactInput) => readable(withSession(who, async (tx) => {
  if (!await sites.clientIsTheirs(tx, clientId)) throw notFound('client')
  await sites.putContact(tx, clientId, input)
}))

export const endContact = (who: Session, clientId: string, contactId: string) => withSession(who, async (tx) => {
  if (!await sites.endContact(tx, clientId, contactId)) throw notFound('contact')
})

export const putSite = (who: Session, input: SiteInput) => readable(withSession(who, async (tx) => {
  try { new Intl.DateTimeFormat('en', { timeZone: input.timeZone }) }
  catch { throw new Failure('invalid', 'This time zone is not known.', [{ pointer: '/timeZone', code: 'unknown', detail: 'Choose a time zone of the list, as in America/New_York.' }]) }
  await sites.putSite(tx, input)
}))
