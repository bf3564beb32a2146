import type { RecordRow } from '../../../shared/api/record'
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
