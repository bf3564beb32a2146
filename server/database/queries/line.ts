import type { LineStripOf } from '../../../shared/api/job'
import type { LineElement } from '../../../shared/line/line'
import type { Tx } from '../withSession'

export async function newestLine(tx: Tx, jobId: string): Promise<{ version: number, line: string } | undefined> {
  return (await tx.client.query<{ version: number, line: string }>('select version, line from line_version where organisation_id = app_organisation() and job_id = $1 order by version desc limit 1', [jobId])).rows[0]
}

export async function insertLine(tx: Tx, jobId: string, version: number, text: string, writtenBy: string): Promise<void> {
  await tx.client.query('insert into line_version (organisation_id, job_id, version, line, written_by) values (app_organisation(), $1, $2, $3, $4)', [jobId, version, text, writtenBy])
}

/** Elements belong to the site: known ones keep their id and get their newest tag, new ones are added. */
export async function keepElements(tx: Tx, siteId: string, elements: LineElement[]): Promise<void> {
  await tx.client.query(
    `insert into element (organisation_id, id, site_id, kind, tag) select app_organisation(), e.id, $1, e.kind, e.tag from unnest($2::uuid[], $3::text[], $4::text[]) as e(id, kind, tag)
     on conflict (organisation_id, id) do update set tag = excluded.tag`,
    [siteId, elements.map(element => element.id), elements.map(element => element.kind), elements.map(element => element.tag)])
}

export async function insertBasis(tx: Tx, jobId: string, digest: string, text: string, writtenBy: string): Promise<void> {
  await tx.client.query('insert into basis (organisation_id, job_id, digest, text, written_by) values (app_organisation(), $1, $2, $3, $4) on conflict do nothing', [jobId, digest, text, writtenBy])
}

export async function insertRound(tx: Tx, round: { id: string, jobId: string, number: number, basis: string, openedBy: string }): Promise<void> {
  await tx.client.query('insert into round (organisation_id, id, job_id, number, basis, opened_by) values (app_organisation(), $1, $2, $3, $4, $5)', [round.id, round.jobId, round.number, round.basis, round.openedBy])
}

export async function setRoundBasis(tx: Tx, roundId: string, basis: string): Promise<void> {
  await tx.client.query(`update round set basis = $2 where organisation_id = app_organisation() and id = $1 and state = 'open'`, [roundId, basis])
}

/** A line without entries yet: the walk is the next move. */
export async function writeStrip(tx: Tx, jobId: string, strip: LineStripOf): Promise<void> {
  await tx.client.query(`update job set strip = $2, state = 'walking', move_by = 'inspector', move = 'walk', move_count = 0, move_since = now() where organisation_id = app_organisation() and id = $1`, [jobId, JSON.stringify(strip)])
}
