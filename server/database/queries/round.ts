import type { FieldBundle, PullAnswer } from '../../../shared/sync/sync'
import type { Tx } from '../withSession'

interface JobHead { organisation: FieldBundle['organisation'], job: Omit<FieldBundle['job'], 'code'> & { organisationCode: string }, site: FieldBundle['site'], client: FieldBundle['client'] }

/** What stands at the head of a job: organisation, job, site, client. Undefined where it is not there or not theirs. */
export async function jobHead(tx: Tx, jobId: string): Promise<JobHead | undefined> {
  const { rows } = await tx.client.query<JobHead>(
    `select json_build_object('id', o.id, 'name', o.name, 'phone', o.phone, 'timeZone', o.time_zone) as organisation,
            json_build_object('id', j.id, 'number', j.number, 'organisationCode', o.code, 'title', j.title, 'neededBy', j.needed_by, 'system', j.system, 'language', j.language, 'permit', j.permit, 'contract', j.contract,
              'buildingCode', j.building_code, 'gateTag', j.gate_tag, 'onsiteName', j.onsite_name, 'onsitePhone', j.onsite_phone, 'emergencyName', j.emergency_name, 'emergencyPhone', j.emergency_phone) as job,
            json_build_object('id', s.id, 'name', s.name, 'address', s.address, 'timeZone', s.time_zone) as site,
            json_build_object('id', c.id, 'name', c.name) as client
       from job j join organisation o on o.id = j.organisation_id
       join site s on s.organisation_id = j.organisation_id and s.id = j.site_id
       join client c on c.organisation_id = j.organisation_id and c.id = j.client_id
      where j.organisation_id = app_organisation() and j.id = $1`, [jobId])
  return rows[0]
}

const ROUND = 'id, number, state, accepted, basis'

export async function newestRound(tx: Tx, jobId: string): Promise<PullAnswer['round'] | undefined> {
  return (await tx.client.query<PullAnswer['round']>(`select ${ROUND} from round where organisation_id = app_organisation() and job_id = $1 order by number desc limit 1`, [jobId])).rows[0]
}

export async function roundOf(tx: Tx, roundId: string): Promise<(PullAnswer['round'] & { jobId: string }) | undefined> {
  return (await tx.client.query<PullAnswer['round'] & { jobId: string }>(`select ${ROUND}, job_id as "jobId" from round where organisation_id = app_organisation() and id = $1`, [roundId])).rows[0]
}

export async function devicesOf(tx: Tx, roundId: string): Promise<FieldBundle['devices']> {
  const { rows } = await tx.client.query<FieldBundle['devices'][number]>(
    `select device_id as device, name, account_id as "accountId", letter, taken_at as "takenAt", empty_at as "emptyAt" from round_device
      where organisation_id = app_organisation() and round_id = $1 order by taken_at, device_id`, [roundId])
  return rows
}

export async function addDevice(tx: Tx, roundId: string, device: { device: string, name: string }, accountId: string, letter: string): Promise<void> {
  await tx.client.query('insert into round_device (organisation_id, round_id, device_id, account_id, name, letter) values (app_organisation(), $1, $2, $3, $4, $5)', [roundId, device.device, accountId, device.name, letter])
}

/** A device of this person says whether anything of the round still waits on it; another's device says so itself. */
export async function noteDevice(tx: Tx, roundId: string, device: string, empty: boolean): Promise<void> {
  await tx.client.query('update round_device set empty_at = case when $3 then now() end where organisation_id = app_organisation() and round_id = $1 and device_id = $2 and account_id = app_account()', [roundId, device, empty])
}

export async function basesOf(tx: Tx, jobId: string): Promise<{ digest: string, text: string }[]> {
  return (await tx.client.query<{ digest: string, text: string }>('select digest, text from basis where organisation_id = app_organisation() and job_id = $1 order by created_at', [jobId])).rows
}

export async function basisDigestsOf(tx: Tx, jobId: string): Promise<string[]> {
  return (await tx.client.query<{ digest: string }>('select digest from basis where organisation_id = app_organisation() and job_id = $1 order by created_at', [jobId])).rows.map(row => row.digest)
}

export async function peopleOf(tx: Tx): Promise<FieldBundle['people']> {
  const { rows } = await tx.client.query<FieldBundle['people'][number]>(
    `select a.id as "accountId", a.name, m.role from membership m join account a on a.id = m.account_id where m.organisation_id = app_organisation() and m.ended_at is null order by a.name`)
  return rows
}

export async function contactsOf(tx: Tx, clientId: string): Promise<FieldBundle['contacts']> {
  const { rows } = await tx.client.query<FieldBundle['contacts'][number]>(
    `select id, account_id as "accountId", name, title, phone, accepts from contact where organisation_id = app_organisation() and client_id = $1 and ended_at is null and not mailbox order by name`, [clientId])
  return rows
}

export async function openRounds(tx: Tx): Promise<string[]> {
  return (await tx.client.query<{ id: string }>(`select id from round where organisation_id = app_organisation() and state = 'open' order by id`)).rows.map(row => row.id)
}
