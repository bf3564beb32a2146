import type { PortalSite, PortalSiteRow } from '../../../shared/api/portal'
import type { WireEntry } from '../../../shared/entry/entry'
import type { Tx } from '../withSession'

/** The newest record of each job of a site that this session may see and that holds; nothing of it is withdrawn. */
const NEWEST = `(select distinct on (r.organisation_id, r.job_id) r.organisation_id, r.id, r.job_id, r.sealed_at from record r join job j on j.organisation_id = r.organisation_id and j.id = r.job_id
  where j.organisation_id = s.organisation_id and j.site_id = s.id and r.sealing = 'sealed' and r.standing <> 'withdrawn' order by r.organisation_id, r.job_id, r.number desc)`

/** Sites of which something was sent to this client. */
export async function portalSites(tx: Tx): Promise<PortalSiteRow[]> {
  return (await tx.client.query<PortalSiteRow>(
    `select s.id, s.name, s.address, o.name as "organisationName", cl.name as "clientName",
            (select count(*)::int from record_element e join ${NEWEST} n on n.organisation_id = e.organisation_id and n.id = e.record_id where e.released = 'released') as released,
            (select count(*)::int from record_element e join ${NEWEST} n on n.organisation_id = e.organisation_id and n.id = e.record_id where e.released = 'held') as held,
            (select count(*)::int from record_element e join ${NEWEST} n on n.organisation_id = e.organisation_id and n.id = e.record_id) as total,
            (select count(*)::int from record r join job j on j.organisation_id = r.organisation_id and j.id = r.job_id where j.organisation_id = s.organisation_id and j.site_id = s.id) as records,
            (select count(*)::int from deficiency_state d join job j on j.organisation_id = d.organisation_id and j.id = d.job_id where d.state = 'offered' and j.organisation_id = s.organisation_id and j.site_id = s.id) as offers,
            (select max(n.sealed_at) from ${NEWEST} n) as "newestAt"
       from site s join organisation o on o.id = s.organisation_id join client cl on cl.organisation_id = s.organisation_id and cl.id = s.client_id
      order by s.name, s.id`)).rows
}

export interface PortalSiteHead extends Omit<PortalSite, 'jobs'> { organisationId: string }

export async function portalSiteHead(tx: Tx, siteId: string, accountId: string): Promise<PortalSiteHead | undefined> {
  return (await tx.client.query<PortalSiteHead>(
    `select s.organisation_id as "organisationId", json_build_object('id', s.id, 'name', s.name, 'address', s.address, 'timeZone', s.time_zone) as site, json_build_object('name', o.name, 'phone', o.phone) as organisation, cl.name as "clientName",
            (select json_build_object('id', c.id, 'name', c.name, 'accepts', c.accepts) from contact c
              where c.organisation_id = s.organisation_id and c.client_id = s.client_id and c.account_id = $2 and c.ended_at is null and not c.mailbox order by c.accepts desc limit 1) as contact
       from site s join organisation o on o.id = s.organisation_id join client cl on cl.organisation_id = s.organisation_id and cl.id = s.client_id where s.id = $1`, [siteId, accountId])).rows[0]
}

export interface AcceptingContact { id: string, clientId: string, name: string, title: string, accepts: boolean, clientName: string }

/** This person as a contact of the record's client, the one who may accept first. */
export async function acceptingContact(tx: Tx, recordId: string, accountId: string): Promise<AcceptingContact | undefined> {
  return (await tx.client.query<AcceptingContact>(
    `select c.id, c.client_id as "clientId", c.name, c.title, c.accepts, cl.name as "clientName" from record r join job j on j.organisation_id = r.organisation_id and j.id = r.job_id
       join contact c on c.organisation_id = j.organisation_id and c.client_id = j.client_id join client cl on cl.organisation_id = c.organisation_id and cl.id = c.client_id
      where r.id = $1 and c.account_id = $2 and c.ended_at is null and not c.mailbox order by c.accepts desc, c.id limit 1`, [recordId, accountId])).rows[0]
}

/** Who signed on a device, as a contact of the job's client: by the account, or by the very name where the contact has none. */
export async function contactNamed(tx: Tx, jobId: string, signer: { account: string | null, name: string }): Promise<AcceptingContact | undefined> {
  return (await tx.client.query<AcceptingContact>(
    `select c.id, c.client_id as "clientId", c.name, c.title, c.accepts, cl.name as "clientName" from job j
       join contact c on c.organisation_id = j.organisation_id and c.client_id = j.client_id join client cl on cl.organisation_id = c.organisation_id and cl.id = c.client_id
      where j.organisation_id = app_organisation() and j.id = $1 and c.ended_at is null and not c.mailbox and (c.account_id = $2::uuid or ($2::uuid is null and c.account_id is null and c.name = $3))
      order by c.accepts desc, c.id limit 1`, [jobId, signer.account, signer.name])).rows[0]
}

/** Deficiencies of a job that this client may see: offered to it, or accepted. */
export async function offeredOf(tx: Tx, organisationId: string, jobId: string): Promise<string[]> {
  return (await tx.client.query<{ id: string }>('select id from deficiency_state where organisation_id = $1 and job_id = $2', [organisationId, jobId])).rows.map(row => row.id)
}

export interface AcceptanceRow { id: string, organisationId: string, recordId: string, recordCode: string, meaning: string, deficiencyId: string | null, contactId: string, fileDigest: string, leaf: string, createdAt: Date }
const ACCEPTANCE = `select a.id, a.organisation_id as "organisationId", a.record_id as "recordId", r.code as "recordCode", a.meaning, a.deficiency_id as "deficiencyId", a.contact_id as "contactId", a.file_digest as "fileDigest", a.leaf, a.created_at as "createdAt"
  from acceptance a join record r on r.organisation_id = a.organisation_id and r.id = a.record_id`

/** An acceptance, for whoever may see its record. */
export async function acceptanceOf(tx: Tx, id: string): Promise<AcceptanceRow | undefined> {
  return (await tx.client.query<AcceptanceRow>(`${ACCEPTANCE} where a.id = $1`, [id])).rows[0]
}

export async function acceptancesOf(tx: Tx, recordId: string): Promise<AcceptanceRow[]> {
  return (await tx.client.query<AcceptanceRow>(`${ACCEPTANCE} where a.record_id = $1 order by a.created_at`, [recordId])).rows
}

export async function insertAcceptance(tx: Tx, row: { organisationId: string, id: string, recordId: string, contactId: string, deficiencyId: string | null, meaning: string, sheet: string, fileDigest: string, leaf: number }): Promise<boolean> {
  const { rowCount } = await tx.client.query(
    'insert into acceptance (organisation_id, id, record_id, contact_id, deficiency_id, meaning, sheet, file_digest, leaf) values ($1, $2, $3, $4, $5, $6, $7, $8, $9) on conflict do nothing',
    [row.organisationId, row.id, row.recordId, row.contactId, row.deficiencyId, row.meaning, row.sheet, row.fileDigest, row.leaf])
  return rowCount === 1
}

/** Entries by their ids, as they were received. */
export async function entriesNamed(tx: Tx, ids: string[]): Promise<(WireEntry & { id: string, kind: string, number: number })[]> {
  return (await tx.client.query<WireEntry & { id: string, kind: string, number: number }>(
    `select id, kind, number, envelope_text as envelope, coalesce(payload_text, '') as payload from entry where organisation_id = app_organisation() and id = any($1::uuid[])`, [ids])).rows
}
