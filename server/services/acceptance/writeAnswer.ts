import type { OfferedDeviation } from '../../../shared/api/portal'
import type { AcceptingContact } from '../../database/queries/portal'
import type { Session } from '../../database/withSession'
import { writeDeskEntry } from '../entry/writeDeskEntry'

interface Answer { id: string, jobId: string, roundId: string, author: string, account: string | null, accepted: boolean, words: string | null }

/** Tells the round what the owner's person answered to an offer: one word that names the reading and the offer, whether signed on the client's own page or on a device. */
export async function writeAnswer(staff: Session & { organisationId: string }, offer: OfferedDeviation, contact: AcceptingContact, { id, jobId, roundId, author, account, accepted, words }: Answer): Promise<void> {
  await writeDeskEntry(staff, author, {
    kind: 'deviationAccepted', id, job: jobId, round: roundId, element: offer.element, check: offer.check, basis: offer.basis, place: offer.place, answers: [offer.readings[0]!, offer.offer],
    payload: {
      by: { account, name: contact.name, ...(contact.title ? { title: contact.title } : {}) }, for: contact.clientName, accepted,
      ...(words ? { words } : {}), ...(offer.condition ? { condition: offer.condition } : {}), until: offer.until,
    },
  })
}
