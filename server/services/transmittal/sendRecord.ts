import { uuidv7 } from 'uuidv7'
import { recordRow } from '../../database/queries/record'
import * as transmittals from '../../database/queries/transmittal'
import type { Session } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { enqueue } from '../../tasks/queue'
import { Failure, notFound } from '../failure'

/** Sends a sealed record to contacts of its client: one queued mail each, in the same transaction. Sent again with the same id it is the same transmittal. */
export async function sendRecord(who: Session & { accountId: string, organisationId: string }, recordId: string, input: { id: string, contacts: string[], message: string }): Promise<{ sentTo: number }> {
  return withSession(who, async (tx) => {
    const row = await recordRow(tx, recordId)
    if (!row) throw notFound('record')
    if (row.sealing !== 'sealed') throw new Failure('notReady', 'This record is not sealed yet. Wait until it is, then send it.')
    if (row.standing === 'withdrawn') throw new Failure('conflict', 'This record was withdrawn and is sent to nobody any more.')
    if (!await transmittals.insertTransmittal(tx, { id: input.id, recordId, message: input.message, sentBy: who.accountId })) {
      const before = await transmittals.sentAs(tx, input.id)
      const same = before.recordId === recordId && before.contacts.length === new Set(input.contacts).size && input.contacts.every(id => before.contacts.includes(id))
      if (!same) throw new Failure('differs', 'Something else was sent under this id: another record, or to other people. Load the page again and send it from there.')
      return { sentTo: before.contacts.length }
    }
    const contacts = await transmittals.contactsAmong(tx, recordId, input.contacts)
    if (contacts.length !== new Set(input.contacts).size) throw new Failure('invalid', 'Choose people among the contacts of this client.', [{ pointer: '/contacts', code: 'unknown', detail: 'Somebody of these is no contact of this client, or not any more.' }])
    for (const contact of contacts) {
      const recipientId = uuidv7()
      await transmittals.insertRecipient(tx, { id: recipientId, transmittalId: input.id, recordId, contact })
      await transmittals.addEvent(tx, recipientId, uuidv7(), 'queued', '')
      await enqueue(tx, 'send', { organisationId: who.organisationId, id: recipientId })
    }
    await transmittals.moveToClient(tx, row.jobId, contacts.length)
    return { sentTo: contacts.length }
  })
}
