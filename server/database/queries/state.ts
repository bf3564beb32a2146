import type { CheckOutcome, DeficiencyOutcome, RoundOutcome } from '../../../shared/round/outcome'
import type { JobSummary } from '../../services/job/jobSummary'
import type { Tx } from '../withSession'

const CHECKS = `(select coalesce(json_agg(c.outcome order by c.at), '[]') from check_state c where c.organisation_id = s.organisation_id and c.round_id = s.round_id) as checks`
interface KeptRow { outcome: Omit<RoundOutcome, 'checks'>, checks: CheckOutcome[] }
const whole = (row: KeptRow | undefined): RoundOutcome | undefined => row && { ...row.outcome, checks: row.checks }

/** The kept fold of a round; null before the first entry. */
export async function readOutcome(tx: Tx, roundId: string): Promise<RoundOutcome | null> {
  const { rows } = await tx.client.query<KeptRow>(`select s.outcome, ${CHECKS} from round_state s where s.organisation_id = app_organisation() and s.round_id = $1`, [roundId])
  return whole(rows[0]) ?? null
}

/** The sealed outcome that a round goes on from; undefined for the first. */
export async function outcomeBefore(tx: Tx, jobId: string, number: number): Promise<RoundOutcome | undefined> {
  if (number <= 1) return undefined
  const { rows } = await tx.client.query<KeptRow>(
    `select s.outcome, ${CHECKS} from round r join round_state s on s.organisation_id = r.organisation_id and s.round_id = r.id
      where r.organisation_id = app_organisation() and r.job_id = $1 and r.number = $2`, [jobId, number - 1])
  return whole(rows[0])
}

export async function writeOutcome(tx: Tx, roundId: string, accepted: number, { checks: _, ...outcome }: RoundOutcome): Promise<void> {
  await tx.client.query(
    `insert into round_state (organisation_id, round_id, accepted, outcome) values (app_organisation(), $1, $2, $3)
     on conflict (organisation_id, round_id) do update set accepted = excluded.accepted, outcome = excluded.outcome`, [roundId, accepted, JSON.stringify(outcome)])
}

const keyOf = (check: CheckOutcome) => `${check.element} ${check.check} ${check.face ?? ''}`

/** Whether two values are the same as JSON, whatever the order of their keys. */
function same(one: unknown, other: unknown): boolean {
  if (one === other) return true
  if (typeof one !== 'object' || typeof other !== 'object' || one === null || other === null) return false
  const keys = Object.keys(one)
  return keys.length === Object.keys(other).length && keys.every(key => same((one as Record<string, unknown>)[key], (other as Record<string, unknown>)[key]))
}

export async function writeChecks(tx: Tx, roundId: string, before: CheckOutcome[], now: CheckOutcome[]): Promise<void> {
  const stood = new Map(before.map((check, at) => [keyOf(check), { check, at }]))
  const stands = new Set(now.map(keyOf))
  const changed = now.map((check, at) => ({ check, at })).filter(({ check, at }) => {
    const one = stood.get(keyOf(check))
    return one?.at !== at || !same(one.check, check)
  })
  const gone = before.filter(check => !stands.has(keyOf(check)))
  if (gone.length > 0) {
    await tx.client.query(
      `delete from check_state c using unnest($2::uuid[], $3::text[], $4::text[]) as g(element, check_id, face)
        where c.organisation_id = app_organisation() and c.round_id = $1 and c.element_id = g.element and c.check_id = g.check_id and c.face = g.face`,
      [roundId, gone.map(one => one.element), gone.map(one => one.check), gone.map(one => one.face ?? '')])
  }
  if (changed.length > 0) {
    await tx.client.query(
      `insert into check_state (organisation_id, round_id, element_id, check_id, face, verdict, settled, read_again, at, outcome)
       select app_organisation(), $1, * from unnest($2::uuid[], $3::text[], $4::text[], $5::text[], $6::bool[], $7::bool[], $8::int[], $9::jsonb[])
       on conflict (organisation_id, round_id, element_id, check_id, face) do update set verdict = excluded.verdict, settled = excluded.settled, read_again = excluded.read_again, at = excluded.at, outcome = excluded.outcome`,
      [roundId, changed.map(one => one.check.element), changed.map(one => one.check.check), changed.map(one => one.check.face ?? ''), changed.map(one => one.check.verdict), changed.map(one => one.check.settled), changed.map(one => one.check.readAgain),
        changed.map(one => one.at), changed.map(one => JSON.stringify(one.check))])
  }
}

export async function writeDeficiencies(tx: Tx, roundId: string, jobId: string, before: DeficiencyOutcome[], now: DeficiencyOutcome[]): Promise<void> {
  const stood = new Map(before.map(one => [one.id, one]))
  const stands = new Set(now.map(one => one.id))
  const gone = before.filter(one => !stands.has(one.id)).map(one => one.id)
  const changed = now.filter(one => !same(stood.get(one.id), one))
  if (gone.length > 0) await tx.client.query('delete from deficiency_state where organisation_id = app_organisation() and id = any($1::uuid[])', [gone])
  if (changed.length > 0) {
    await tx.client.query(
      `insert into deficiency_state (organisation_id, round_id, job_id, id, tag, element_id, check_id, class, state, assigned_to, due, outcome)
       select app_organisation(), $1, $2, * from unnest($3::uuid[], $4::text[], $5::uuid[], $6::text[], $7::text[], $8::text[], $9::uuid[], $10::timestamptz[], $11::jsonb[])
       on conflict (organisation_id, id) do update set round_id = excluded.round_id, tag = excluded.tag, class = excluded.class, state = excluded.state, assigned_to = excluded.assigned_to, due = excluded.due, outcome = excluded.outcome`,
      [roundId, jobId, changed.map(one => one.id), changed.map(one => one.tag), changed.map(one => one.element), changed.map(one => one.check), changed.map(one => one.class), changed.map(one => one.state),
        changed.map(one => one.assignedTo), changed.map(one => one.due), changed.map(one => JSON.stringify(one))])
  }
}

export async function writeJobSummary(tx: Tx, jobId: string, summary: JobSummary): Promise<void> {
  await tx.client.query(
    `update job set state = $2, move_by = $3, move = $4, move_count = $5, open_tags = $6, held_out = $7, strip = $8,
            move_since = case when move = $4 and move_by = $3 then move_since else now() end
      where organisation_id = app_organisation() and id = $1 and state <> 'closed'`,
    [jobId, summary.state, summary.moveBy, summary.move, summary.moveCount, summary.openTags, summary.heldOut, JSON.stringify(summary.strip)])
}

/** Throws away what is kept of a round, to be folded anew. */
export async function forgetState(tx: Tx, roundId: string): Promise<void> {
  await tx.client.query('delete from check_state where organisation_id = app_organisation() and round_id = $1', [roundId])
  await tx.client.query('delete from deficiency_state where organisation_id = app_organisation() and round_id = $1', [roundId])
  await tx.client.query('delete from round_state where organisation_id = app_organisation() and round_id = $1', [roundId])
}
