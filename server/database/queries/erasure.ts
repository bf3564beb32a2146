import type { AskErasure, ErasablePage, ErasureRow } from '../../../shared/api/erasure'
import type { Tx } from '../withSession'

export async function roundsOfJob(tx: Tx, jobId: string): Promise<{ id: string, accepted: number }[]> {
  return (await tx.client.query<{ id: string, accepted: number }>('select id, accepted from round where organisation_id = app_organisation() and job_id = $1 order by number', [jobId])).rows
}

export async function elementTags(tx: Tx, jobId: string): Promise<Record<string, string>> {
  const { rows } = await tx.client.query<{ id: string, tag: string }>('select e.id, e.tag from element e join job j on j.organisation_id = e.organisation_id and j.site_id = e.site_id where j.organisation_id = app_organisation() and j.id = $1', [jobId])
  return Object.fromEntries(rows.map(row => [row.id, row.tag]))
}

export async function erasedPictures(tx: Tx, jobId: string): Promise<string[]> {
  return (await tx.client.query<{ digest: string }>('select digest from photo where organisation_id = app_organisation() and job_id = $1 and erased_at is not null', [jobId])).rows.map(row => row.digest)
}

export async function holdOf(tx: Tx, jobId: string): Promise<ErasablePage['hold']> {
  return (await tx.client.query<NonNullable<ErasablePage['hold']>>(
    'select h.reason, a.name as by, h.placed_at as at from job_hold h join account a on a.id = h.placed_by where h.organisation_id = app_organisation() and h.job_id = $1 and h.lifted_at is null', [jobId])).rows[0] ?? null
}

export async function placeHold(tx: Tx, id: string, jobId: string, reason: string, by: string): Promise<void> {
  await tx.client.query('insert into job_hold (organisation_id, id, job_id, reason, placed_by) values (app_organisation(), $1, $2, $3, $4) on conflict do nothing', [id, jobId, reason, by])
}

export async function liftHold(tx: Tx, jobId: string, by: string): Promise<void> {
  await tx.client.query('update job_hold set lifted_by = $2, lifted_at = now() where organisation_id = app_organisation() and job_id = $1 and lifted_at is null', [jobId, by])
}

const ROW = `select e.id, e.entry_id as "entryId", e.photo, e.reason, json_build_object('accountId', a.id, 'name', a.name) as "askedBy", e.asked_at as "askedAt", d.name as "doneBy", e.done_at as "doneAt", e.job_id as "jobId", n.round_id as "roundId"
  from erasure e join account a on a.id = e.asked_by left join account d on d.id = e.done_by left join entry n on n.organisation_id = e.organisation_id and n.id = e.entry_id
 where e.organisation_id = app_organisation() and e.withdrawn_at is null`

export async function erasuresOf(tx: Tx, jobId: string): Promise<ErasureRow[]> {
  return (await tx.client.query<ErasureRow>(`${ROW} and e.job_id = $1 order by e.asked_at desc, e.id`, [jobId])).rows
}

export async function erasureOf(tx: Tx, id: string): Promise<(ErasureRow & { jobId: string, roundId: string | null }) | undefined> {
  return (await tx.client.query<ErasureRow & { jobId: string, roundId: string | null }>(`${ROW} and e.id = $1`, [id])).rows[0]
}

/** Whether the job has that entry or picture, not erased yet. */
export async function hasSubject(tx: Tx, jobId: string, { entryId, photo }: AskErasure): Promise<boolean> {
  const [text, value] = entryId !== null
    ? ['select from entry where organisation_id = app_organisation() and job_id = $1 and id = $2 and payload_text is not null', entryId]
    : ['select from photo where organisation_id = app_organisation() and job_id = $1 and digest = $2 and erased_at is null', photo]
  return (await tx.client.query(text, [jobId, value])).rowCount === 1
}

export async function insertErasure(tx: Tx, jobId: string, input: AskErasure, by: string): Promise<void> {
  await tx.client.query('insert into erasure (organisation_id, id, job_id, entry_id, photo, reason, asked_by) values (app_organisation(), $1, $2, $3, $4, $5, $6)', [input.id, jobId, input.entryId, input.photo, input.reason, by])
}

export async function withdrawErasure(tx: Tx, id: string): Promise<void> {
  await tx.client.query('update erasure set withdrawn_at = now() where organisation_id = app_organisation() and id = $1 and done_at is null', [id])
}

/** Erases what was asked; throws the database's SM001 (not a second person of the office) or SM002 (a hold stands). */
export async function redact(tx: Tx, id: string): Promise<void> {
  await tx.client.query('select redact($1)', [id])
}
