import type { KeptTrial, TrialInput } from '../../../shared/api/trial'
import { canonicalJson } from '../../../shared/record/canonicalJson'
import type { Trial } from '../../../shared/trial/trial'
import type { Tx } from '../withSession'

/** Two trials are the same when this text is. */
export const asKept = (trial: Trial) => canonicalJson(trial)

export async function trialsOfJob(tx: Tx, jobId: string): Promise<KeptTrial[]> {
  return (await tx.client.query<KeptTrial>(
    `select t.id, t.element_id as element, t.trial, a.name as by, to_char(t.created_at at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS"Z"') as at
       from trial t join account a on a.id = t.written_by
      where t.organisation_id = app_organisation() and t.job_id = $1 order by t.created_at desc, t.id desc limit 200`, [jobId])).rows
}

/** True when it was added; false when its id is taken or the element is not of the job's site. */
export async function insertTrial(tx: Tx, jobId: string, { id, element, trial }: TrialInput, writtenBy: string): Promise<boolean> {
  return (await tx.client.query(
    `insert into trial (organisation_id, id, job_id, element_id, trial, written_by)
     select e.organisation_id, $1, j.id, e.id, $4, $5 from job j join element e on e.organisation_id = j.organisation_id and e.site_id = j.site_id
      where j.organisation_id = app_organisation() and j.id = $2 and e.id = $3 on conflict do nothing`, [id, jobId, element, asKept(trial), writtenBy])).rowCount === 1
}
