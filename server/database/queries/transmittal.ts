import type { DeliveryEvent } from '../../../shared/api/record'
import type { Tx } from '../withSession'

interface ContactOf { id: string, name: string, email: string }

/** Which record went to which contacts under that id. */
export async function sentAs(tx: Tx, transmittalId: string): Promise<{ recordId: string, contacts: string[] }> {
  return (await tx.client.query<{ recordId: string, contacts: string[] }>(
    `select t.record_id as "recordId", array(select p.contact_id from recipient p where p.organisation_id = t.organisation_id and p.transmittal_id = t.id) as contacts
       from transmittal t where t.organisation_id = app_organisation() and t.id = $1`, [transmittalId])).rows[0]!
}

/** Those of the given contacts that are of the record's client and still stand. */
export async function contactsAmong(tx: Tx, recordId: string, ids: string[]): Promise<ContactOf[]> {
  return (await tx.client.query<ContactOf>(
    `select c.id, c.name, c.email from record r join job j on j.organisation_id = r.organisation_id and j.id = r.job_id
       join contact c on c.organisation_id = j.organisation_id and c.client_id = j.client_id
      where r.organisation_id = app_organisation() and r.id = $1 and c.id = any($2::uuid[]) and c.ended_at is null`, [recordId, ids])).rows
}

/** False where that id was used already; one that is being written at this moment is waited for. */
export async function insertTransmittal(tx: Tx, transmittal: { id: string, recordId: string, message: string, sentBy: string }): Promise<boolean> {
  return (await tx.client.query('insert into transmittal (organisation_id, id, record_id, message, sent_by) values (app_organisation(), $1, $2, $3, $4) on conflict do nothing', [transmittal.id, transmittal.recordId, transmittal.message, transmittal.sentBy])).rowCount === 1
}

export async function insertRecipient(tx: Tx, recipient: { id: string, transmittalId: string, recordId: string, contact: ContactOf }): Promise<void> {
  await tx.client.query('insert into recipient (organisation_id, id, transmittal_id, record_id, contact_id, name, email) values (app_organisation(), $1, $2, $3, $4, $5, $6)',
    [recipient.id, recipient.transmittalId, recipient.recordId, recipient.contact.id, recipient.contact.name, recipient.contact.email])
}

export async function addEvent(tx: Tx, recipientId: string, id: string, kind: DeliveryEvent, detail: string): Promise<void> {
  await tx.client.query('insert into delivery_event (organisation_id, id, recipient_id, kind, detail, at) values (app_organisation(), $1, $2, $3, $4, clock_timestamp())', [id, recipientId, kind, detail])
}

export async function moveToClient(tx: Tx, jobId: string, count: number): Promise<void> {
  await tx.client.query(`update job set move_by = 'client', move = 'readRecord', move_count = $2, move_since = now() where organisation_id = app_organisation() and id = $1 and move = 'send'`, [jobId, count])
}

export interface MailToSend {
  recipientId: string, contactId: string, recordId: string, name: string, email: string, mailbox: boolean, language: 'en' | 'es', message: string
  organisationName: string, siteName: string, code: string, scope: 'interim' | 'final', number: number, sentence: { lead: string, rest: string } | null, fileDigest: string, bytes: number
  /** True once the mail server took it: never mailed twice. */
  handed: boolean
}

export async function mailToSend(tx: Tx, recipientId: string): Promise<MailToSend | undefined> {
  return (await tx.client.query<MailToSend>(
    `select p.id as "recipientId", p.contact_id as "contactId", p.record_id as "recordId", p.name, p.email, c.mailbox, coalesce(a.language, j.language) as language, t.message, o.name as "organisationName", s.name as "siteName",
            r.code, r.scope, r.number, r.sentence, r.file_digest as "fileDigest", r.bytes,
            exists (select 1 from delivery_event d where d.organisation_id = p.organisation_id and d.recipient_id = p.id and d.kind in ('handed', 'returned')) as handed
       from recipient p join transmittal t on t.organisation_id = p.organisation_id and t.id = p.transmittal_id
       join record r on r.organisation_id = p.organisation_id and r.id = p.record_id
       join job j on j.organisation_id = r.organisation_id and j.id = r.job_id join site s on s.organisation_id = j.organisation_id and s.id = j.site_id
       join organisation o on o.id = p.organisation_id join contact c on c.organisation_id = p.organisation_id and c.id = p.contact_id left join account a on a.id = c.account_id
      where p.organisation_id = app_organisation() and p.id = $1`, [recipientId])).rows[0]
}
