import type { RecordPageOf, RecordRow } from '../../../shared/api/record'
import type { Tx } from '../withSession'

/** A record as lists show it; row-level security decides which are there. `$1` and on belong to the where clause. */
const recordSql = (where: string, order = 'r.requested_at desc, r.id') => `
  select r.id, r.code, r.number, r.scope, r.job_id as "jobId", j.title as "jobTitle", j.site_id as "siteId", s.name as "siteName", o.name as "organisationName", r.sealing, r.trouble, r.standing,
         r.sealed_at as "sealedAt", r.pages, r.bytes, r.document_digest as "documentDigest",
         coalesce((select json_agg(json_build_object('name', p.name, 'email', p.email, 'newest', e.kind, 'at', e.at) order by p.name) from recipient p
            left join lateral (select kind, at from delivery_event d where d.organisation_id = p.organisation_id and d.recipient_id = p.id order by d.at desc, d.id desc limit 1) e on true
            where p.organisation_id = r.organisation_id and p.record_id = r.id), '[]') as recipients,
         coalesce((select json_agg(json_build_object('tag', x.tag, 'by', n.code) order by x.tag) from record_element x join record n on n.organisation_id = x.organisation_id and n.id = x.replaced_by
            where x.organisation_id = r.organisation_id and x.record_id = r.id), '[]') as "replacedFor"
    from record r join job j on j.organisation_id = r.organisation_id and j.id = r.job_id
    join site s on s.organisation_id = j.organisation_id and s.id = j.site_id
    join organisation o on o.id = r.organisation_id
   where ${where} order by ${order}`

export async function recordsOfJob(tx: Tx, jobId: string): Promise<RecordRow[]> {
  return (await tx.client.query<RecordRow>(recordSql('r.organisation_id = app_organisation() and r.job_id = $1'), [jobId])).rows
}

/** All records that the session may see: of its organisation for staff, of every contractor that sent to them for a client. */
export async function listRecords(tx: Tx, find: string, most: number): Promise<RecordRow[]> {
  const pattern = `%${find.toLowerCase().replace(/[%_\\]/g, '\\$&')}%`
  return (await tx.client.query<RecordRow>(`${recordSql(`lower(r.code || ' ' || j.title || ' ' || s.name) like $1`)} limit ${most}`, [pattern])).rows
}

export async function recordRow(tx: Tx, recordId: string): Promise<RecordRow | undefined> {
  return (await tx.client.query<RecordRow>(recordSql('r.id = $1'), [recordId])).rows[0]
}

export interface RecordDetails {
  organisationId: string
  record: Pick<RecordPageOf['record'], 'standingReason' | 'rangeDigest' | 'fileDigest' | 'leaf' | 'border'>
  acceptances: RecordPageOf['acceptances']
}

export async function recordDetails(tx: Tx, recordId: string): Promise<RecordDetails> {
  const { rows } = await tx.client.query<RecordDetails & { leaf: string | null }>(
    `select r.organisation_id as "organisationId",
            json_build_object('standingReason', r.standing_reason, 'rangeDigest', r.range_digest, 'fileDigest', r.file_digest, 'leaf', r.leaf, 'border', r.border) as record,
            coalesce((select json_agg(json_build_object('id', a.id, 'contactName', c.name, 'meaning', a.meaning, 'deficiencyId', a.deficiency_id, 'at', a.created_at) order by a.created_at)
               from acceptance a join contact c on c.organisation_id = a.organisation_id and c.id = a.contact_id where a.organisation_id = r.organisation_id and a.record_id = r.id), '[]') as acceptances
       from record r where r.id = $1`, [recordId])
  return rows[0]!
}

export async function deliveriesOf(tx: Tx, recordId: string): Promise<RecordPageOf['deliveries']> {
  return (await tx.client.query<RecordPageOf['deliveries'][number]>(
    `select p.name, p.email, d.kind, d.at, d.detail from recipient p join delivery_event d on d.organisation_id = p.organisation_id and d.recipient_id = p.id
      where p.organisation_id = app_organisation() and p.record_id = $1 order by d.at desc, d.id desc limit 500`, [recordId])).rows
}

export async function contactsForRecord(tx: Tx, recordId: string): Promise<RecordPageOf['contacts']> {
  return (await tx.client.query<RecordPageOf['contacts'][number]>(
    `select c.id, c.name, c.title, c.email, c.mailbox, c.accepts from record r join job j on j.organisation_id = r.organisation_id and j.id = r.job_id
       join contact c on c.organisation_id = j.organisation_id and c.client_id = j.client_id
      where r.organisation_id = app_organisation() and r.id = $1 and c.ended_at is null order by c.mailbox, c.name`, [recordId])).rows
}

/** Notes in the delivery log that this client opened or downloaded a record; opening again within the hour says nothing new. */
export async function noteDelivery(tx: Tx, recordId: string, kind: 'opened' | 'downloaded', newId: () => string): Promise<void> {
  const { rows } = await tx.client.query<{ organisation_id: string, id: string }>(
    `select p.organisation_id, p.id from recipient p where p.record_id = $1
        and ($2 = 'downloaded' or not exists (select 1 from delivery_event d where d.organisation_id = p.organisation_id and d.recipient_id = p.id and d.kind = $2 and d.at > now() - interval '1 hour'))`, [recordId, kind])
  for (const row of rows) await tx.client.query('insert into delivery_event (organisation_id, id, recipient_id, kind) values ($1, $2, $3, $4)', [row.organisation_id, newId(), row.id, kind])
}

export async function setStanding(tx: Tx, recordId: string, standing: 'current' | 'underQuestion' | 'withdrawn', reason: string): Promise<boolean> {
  return (await tx.client.query(`update record set standing = $2, standing_reason = $3 where organisation_id = app_organisation() and id = $1 and sealing = 'sealed' and standing <> 'withdrawn'`, [recordId, standing, reason])).rowCount === 1
}
