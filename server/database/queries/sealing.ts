import type { SealingState } from '../../../shared/api/record'
import type { Tx } from '../withSession'

export interface SealingRow {
  id: string, jobId: string, roundId: string, number: number, scope: 'interim' | 'final', code: string, sealing: SealingState, border: number, overDevices: string | null
  documentDigest: string | null, pdfDigest: string | null, rangeDigest: string | null, fileDigest: string | null, leaf: string | null, requestedAt: Date, requestedBy: string
}

const COLUMNS = `id, job_id as "jobId", round_id as "roundId", number, scope, code, sealing, border, over_devices as "overDevices", document_digest as "documentDigest", pdf_digest as "pdfDigest",
  range_digest as "rangeDigest", file_digest as "fileDigest", leaf, requested_at as "requestedAt", requested_by as "requestedBy"`

export async function sealingOf(tx: Tx, recordId: string): Promise<SealingRow | undefined> {
  return (await tx.client.query<SealingRow>(`select ${COLUMNS} from record where organisation_id = app_organisation() and id = $1`, [recordId])).rows[0]
}

/** Records of a job that are sealed, newest first: what a new one may replace. */
export async function sealedOf(tx: Tx, jobId: string): Promise<SealingRow[]> {
  return (await tx.client.query<SealingRow>(`select ${COLUMNS} from record where organisation_id = app_organisation() and job_id = $1 and sealing = 'sealed' order by number desc`, [jobId])).rows
}

export async function nextNumber(tx: Tx, jobId: string): Promise<number> {
  return (await tx.client.query<{ next: number }>('select coalesce(max(number), 0) + 1 as next from record where organisation_id = app_organisation() and job_id = $1', [jobId])).rows[0]!.next
}

export async function freezeRound(tx: Tx, roundId: string): Promise<void> {
  await tx.client.query(`update round set state = 'frozen' where organisation_id = app_organisation() and id = $1`, [roundId])
}

export async function insertRecord(tx: Tx, record: { id: string, jobId: string, roundId: string, number: number, scope: string, code: string, border: number, overDevices: string | null, requestedBy: string }): Promise<void> {
  await tx.client.query('insert into record (organisation_id, id, job_id, round_id, number, scope, code, border, over_devices, requested_by) values (app_organisation(), $1, $2, $3, $4, $5, $6, $7, $8, $9)',
    [record.id, record.jobId, record.roundId, record.number, record.scope, record.code, record.border, record.overDevices, record.requestedBy])
}

/** Takes a sealing one state further, if it still stands in the one it came from; false when somebody else was there first. */
export async function advance(tx: Tx, recordId: string, from: SealingState, to: SealingState, artefacts: Partial<Record<'document_digest' | 'pdf_digest' | 'range_digest' | 'file_digest' | 'pages' | 'bytes' | 'leaf' | 'sealed_at' | 'sentence', unknown>>): Promise<boolean> {
  const names = Object.keys(artefacts)
  const { rowCount } = await tx.client.query(
    `update record set sealing = $2, trouble = null${names.map((name, at) => `, ${name} = $${at + 4}`).join('')} where organisation_id = app_organisation() and id = $1 and sealing = $3`,
    [recordId, to, from, ...Object.values(artefacts)])
  return rowCount === 1
}

export async function writeTrouble(tx: Tx, recordId: string, trouble: string): Promise<void> {
  await tx.client.query(`update record set trouble = $2 where organisation_id = app_organisation() and id = $1 and sealing <> 'sealed'`, [recordId, trouble.slice(0, 500)])
}

/** What the record says of each element; earlier records of the job give way for those that it speaks of. Returns the records that gave way in whole. */
export async function writeElements(tx: Tx, recordId: string, jobId: string, elements: { element: string, tag: string, verdict: string, released: string }[]): Promise<string[]> {
  const ids = elements.map(one => one.element)
  await tx.client.query(
    `insert into record_element (organisation_id, record_id, element_id, tag, verdict, released) select app_organisation(), $1, * from unnest($2::uuid[], $3::text[], $4::text[], $5::text[]) on conflict do nothing`,
    [recordId, ids, elements.map(one => one.tag), elements.map(one => one.verdict), elements.map(one => one.released)])
  await tx.client.query(
    `update record_element e set replaced_by = $1 from record r where r.organisation_id = e.organisation_id and r.id = e.record_id and r.sealing = 'sealed' and r.id <> $1 and r.job_id = $2
        and e.organisation_id = app_organisation() and e.element_id = any($3::uuid[]) and e.replaced_by is null`, [recordId, jobId, ids])
  const { rows } = await tx.client.query<{ id: string }>(
    `update record r set standing = 'superseded' where r.organisation_id = app_organisation() and r.job_id = $2 and r.id <> $1 and r.sealing = 'sealed' and r.standing = 'current'
        and not exists (select 1 from record_element e where e.organisation_id = r.organisation_id and e.record_id = r.id and e.replaced_by is null) returning r.id`, [recordId, jobId])
  return rows.map(row => row.id)
}

export async function endRound(tx: Tx, roundId: string): Promise<void> {
  await tx.client.query(`update round set state = 'sealed' where organisation_id = app_organisation() and id = $1`, [roundId])
}

/** Whose move it is after a seal: the manager sends it. */
export async function jobSealed(tx: Tx, jobId: string, scope: 'interim' | 'final'): Promise<void> {
  await tx.client.query(`update job set state = $2, move_by = 'manager', move = 'send', move_count = 1, move_since = now() where organisation_id = app_organisation() and id = $1`, [jobId, scope === 'final' ? 'sealed' : 'correcting'])
}

/** Names of all accounts that a round's entries may name: people of the organisation, now or once, and its clients' contacts. */
export async function namesOf(tx: Tx): Promise<Record<string, string>> {
  const { rows } = await tx.client.query<{ id: string, name: string }>('select id, name from account')
  return Object.fromEntries(rows.map(row => [row.id, row.name]))
}
