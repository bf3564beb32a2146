import type { JobInput, JobListQuery, JobRow, LineStripOf } from '../../../shared/api/job'
import type { Tx } from '../withSession'

export async function jobNumber(tx: Tx, jobId: string): Promise<number | undefined> {
  return (await tx.client.query<{ number: number }>('select number from job where organisation_id = app_organisation() and id = $1', [jobId])).rows[0]?.number
}

export interface SiteOfJob { id: string, name: string, clientId: string, clientName: string }

export async function siteOfJob(tx: Tx, siteId: string): Promise<SiteOfJob | undefined> {
  return (await tx.client.query<SiteOfJob>(
    `select s.id, s.name, s.client_id as "clientId", c.name as "clientName" from site s join client c on c.organisation_id = s.organisation_id and c.id = s.client_id
      where s.organisation_id = app_organisation() and s.id = $1`, [siteId])).rows[0]
}

const words = (...parts: (string | null)[]) => parts.filter(Boolean).join(' ').toLowerCase()

export async function insertJob(tx: Tx, input: JobInput, site: SiteOfJob, createdBy: string): Promise<number> {
  const { rows } = await tx.client.query<{ next_job: number }>('update organisation set next_job = next_job + 1 where id = app_organisation() returning next_job - 1 as next_job')
  const number = rows[0]!.next_job
  await tx.client.query(
    `insert into job (organisation_id, id, number, site_id, client_id, title, needed_by, onsite_name, onsite_phone, emergency_name, emergency_phone, contract, permit, building_code, gate_tag, system, language, checklists, created_by, search_text)
     values (app_organisation(), $1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11, $12, $13, $14, $15, $16, $17, $18, $19)`,
    [input.id, number, site.id, site.clientId, input.title, input.neededBy, input.onsiteName, input.onsitePhone, input.emergencyName, input.emergencyPhone, input.contract, input.permit, input.buildingCode, input.gateTag,
      input.system, input.language, JSON.stringify(input.checklists), createdBy, words(String(number).padStart(4, '0'), input.title, site.name, site.clientName, input.permit, input.contract, input.onsiteName)])
  return number
}

export async function updateJob(tx: Tx, jobId: string, input: Omit<JobInput, 'id' | 'siteId'>): Promise<boolean> {
  const { rowCount } = await tx.client.query(
    `update job j set title = $2, needed_by = $3, onsite_name = $4, onsite_phone = $5, emergency_name = $6, emergency_phone = $7, contract = $8, permit = $9, building_code = $10, gate_tag = $11, system = $12, language = $13, checklists = $14,
            search_text = (select lower(concat_ws(' ', lpad(j.number::text, 4, '0'), $2::text, s.name, c.name, $9::text, $8::text, $4::text)) from site s, client c
                            where s.organisation_id = j.organisation_id and s.id = j.site_id and c.organisation_id = j.organisation_id and c.id = j.client_id)
      where j.organisation_id = app_organisation() and j.id = $1`,
    [jobId, input.title, input.neededBy, input.onsiteName, input.onsitePhone, input.emergencyName, input.emergencyPhone, input.contract, input.permit, input.buildingCode, input.gateTag, input.system, input.language, JSON.stringify(input.checklists)])
  return rowCount === 1
}

export async function replaceGiven(tx: Tx, jobId: string, given: JobInput['given']): Promise<void> {
  await tx.client.query('delete from job_given where organisation_id = app_organisation() and job_id = $1', [jobId])
  if (given.length > 0) {
    // Only members of the organisation can be given a job.
    await tx.client.query(
      `insert into job_given (organisation_id, job_id, account_id, given_as)
       select app_organisation(), $1, g.account, g.given_as from unnest($2::uuid[], $3::text[]) as g(account, given_as)
         join membership m on m.organisation_id = app_organisation() and m.account_id = g.account and m.ended_at is null on conflict do nothing`,
      [jobId, given.map(one => one.accountId), given.map(one => one.as)])
  }
}

const FILTERS: Record<JobListQuery['filter'], string> = {
  all: `j.state <> 'closed'`,
  yours: `j.state <> 'closed' and j.move_by = 'manager' and j.move <> 'none'`,
  thisWeek: `j.state not in ('sealed', 'closed') and j.needed_by between current_date and current_date + 6`,
  heldOut: `j.state <> 'closed' and j.held_out > 0`,
  unopened: `j.state <> 'closed' and j.move = 'readRecord'`,
  closed: `j.state = 'closed'`,
}

/** Order, and the two values that a page goes on from. Nulls (no date) come last as the far future. */
const SORTS: Record<JobListQuery['sort'], { key: string, type: string }> = {
  neededBy: { key: `coalesce(j.needed_by, date '9999-12-31')`, type: 'date' },
  number: { key: 'j.number', type: 'int' },
  since: { key: 'j.move_since', type: 'timestamptz' },
}

const COLUMNS = `j.id, j.number, j.title, j.site_id as "siteId", s.name as "siteName", c.name as "clientName", j.needed_by::text as "neededBy", j.system, j.state,
  j.move_by as "moveBy", j.move, j.move_count as "moveCount", j.move_since as "moveSince", j.strip, j.open_tags as "openTags", j.held_out as "heldOut", o.code as "organisationCode"`

export type JobListRow = Omit<JobRow, 'code' | 'length'> & { organisationCode: string, strip: LineStripOf | Record<string, never>, key: string }

/** The SQL of one page; shared with the bench, which runs it bare. */
export function jobListSql(query: JobListQuery): { text: string, values: unknown[] } {
  const { key, type } = SORTS[query.sort]
  const values: unknown[] = []
  const bind = (value: unknown) => `$${values.push(value)}`
  const wheres = ['j.organisation_id = app_organisation()', FILTERS[query.filter]]
  for (const word of query.find.toLowerCase().split(/\s+/).filter(Boolean)) wheres.push(`j.search_text like ${bind(`%${word.replace(/[%_\\]/g, '\\$&')}%`)}`)
  if (query.siteId) wheres.push(`j.site_id = ${bind(query.siteId)}`)
  if (query.after) {
    const [id = '', value = ''] = [query.after.slice(0, 36), query.after.slice(37)]
    wheres.push(`(${key}, j.id) > (${bind(value)}::${type}, ${bind(id)}::uuid)`)
  }
  const text = `select ${COLUMNS}, (${key})::text as key from job j join organisation o on o.id = j.organisation_id
     join site s on s.organisation_id = j.organisation_id and s.id = j.site_id
     join client c on c.organisation_id = j.organisation_id and c.id = j.client_id
    where ${wheres.join(' and ')} order by ${key}, j.id limit ${query.most + 1}`
  return { text, values }
}

export async function listJobs(tx: Tx, query: JobListQuery): Promise<JobListRow[]> {
  const { text, values } = jobListSql(query)
  return (await tx.client.query<JobListRow>(text, values)).rows
}

export async function countJobs(tx: Tx): Promise<Record<JobListQuery['filter'], number>> {
  const counts = Object.entries(FILTERS).map(([name, where]) => `count(*) filter (where ${where})::int as "${name}"`).join(', ')
  return (await tx.client.query<Record<JobListQuery['filter'], number>>(`select ${counts} from job j where j.organisation_id = app_organisation()`)).rows[0]!
}

export interface JobWhole extends JobInput { number: number, organisationCode: string, organisationName: string, clientId: string, clientName: string, siteName: string, siteAddress: string, timeZone: string, authorityId: string | null, authorityName: string | null, state: JobRow['state'], moveBy: JobRow['moveBy'], move: JobRow['move'], moveCount: number, moveSince: string }

export async function readJobRow(tx: Tx, jobId: string): Promise<JobWhole | undefined> {
  const { rows } = await tx.client.query<JobWhole>(
    `select j.id, j.number, j.site_id as "siteId", j.title, j.needed_by::text as "neededBy", j.onsite_name as "onsiteName", j.onsite_phone as "onsitePhone", j.emergency_name as "emergencyName", j.emergency_phone as "emergencyPhone",
            j.contract, j.permit, j.building_code as "buildingCode", j.gate_tag as "gateTag", j.system, j.language, j.checklists, j.state, j.move_by as "moveBy", j.move, j.move_count as "moveCount", j.move_since as "moveSince",
            o.code as "organisationCode", o.name as "organisationName", c.id as "clientId", c.name as "clientName", s.name as "siteName", s.address as "siteAddress", s.time_zone as "timeZone", s.authority_id as "authorityId", a.name as "authorityName",
            coalesce((select json_agg(json_build_object('accountId', g.account_id, 'as', g.given_as)) from job_given g where g.organisation_id = j.organisation_id and g.job_id = j.id), '[]') as given
       from job j join organisation o on o.id = j.organisation_id
       join site s on s.organisation_id = j.organisation_id and s.id = j.site_id
       join client c on c.organisation_id = j.organisation_id and c.id = j.client_id
       left join authority a on a.organisation_id = s.organisation_id and a.id = s.authority_id
      where j.organisation_id = app_organisation() and j.id = $1`, [jobId])
  return rows[0]
}
