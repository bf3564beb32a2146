import type { CheckOutcome, DeficiencyOutcome, RoundOutcome } from '../../../shared/round/outcome'
import type { JobSummary } from '../../services/job/jobSummary'
import { binaryTexts } from '../binaryTexts'
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

/** Whether two values are the same as JSON, whatever the order of their keys. */
function same(one: unknown, other: unknown): boolean {
  if (one === other) return true
  if (typeof one !== 'object' || typeof other !== 'object' || one === null || other === null) return false
  const keys = Object.keys(one)
  return keys.length === Object.keys(other).length && keys.every(key => same((one as Record<string, unknown>)[key], (other as Record<string, unknown>)[key]))
}

const keyOf = (check: CheckOutcome) => `${check.element} ${check.check} ${check.face ?? ''}`

/** Checks that stand otherwise than before, with their places, and those that are gone. Nearly always each stands where it stood, and most are the very same objects. */
function checkChanges(before: readonly CheckOutcome[], now: readonly CheckOutcome[]): { changed: { one: CheckOutcome, at: number }[], gone: CheckOutcome[] } {
  const moved = before.filter((one, at) => one !== now[at] && (!now[at] || keyOf(one) !== keyOf(now[at])))
  const stands = new Set(moved.length > 0 ? now.map(keyOf) : [])
  return { changed: now.map((one, at) => ({ one, at })).filter(({ one, at }) => !same(before[at], one)), gone: moved.filter(one => !stands.has(keyOf(one))) }
}

/**
 * Makes ready what lists show of a round: the fold without its checks, the checks and deficiencies that changed, and what the list of jobs shows. All is written by one
 * statement when the answer is called, so that it can be made ready while the database still stores the entries.
 */
export function stateWriting(round: { id: string, jobId: string, accepted: number }, before: RoundOutcome | null, now: RoundOutcome, summary: JobSummary): (tx: Tx) => Promise<void> {
  const values: unknown[] = []
  const the = (value: unknown) => `$${values.push(value)}`
  const [roundId, jobId] = [`${the(round.id)}::uuid`, `${the(round.jobId)}::uuid`]
  const { checks: _, ...outcome } = now
  const parts = [`outcome as (
    insert into round_state (organisation_id, round_id, accepted, outcome) values (app_organisation(), ${roundId}, ${the(round.accepted)}, ${the(JSON.stringify(outcome))})
    on conflict (organisation_id, round_id) do update set accepted = excluded.accepted, outcome = excluded.outcome)`]

  const checks = checkChanges(before?.checks ?? [], now.checks)
  const ofGone = <T>(pick: (check: CheckOutcome) => T) => the(checks.gone.map(pick))
  if (checks.gone.length > 0) {
    parts.push(`checks_gone as (
      delete from check_state c using unnest(${ofGone(one => one.element)}::uuid[], ${ofGone(one => one.check)}::text[], ${ofGone(one => one.face ?? '')}::text[]) as g(element, check_id, face)
       where c.organisation_id = app_organisation() and c.round_id = ${roundId} and c.element_id = g.element and c.check_id = g.check_id and c.face = g.face)`)
  }
  const ofCheck = <T>(pick: (check: CheckOutcome, at: number) => T) => the(checks.changed.map(({ one, at }) => pick(one, at)))
  if (checks.changed.length > 0) {
    parts.push(`checks as (
      insert into check_state (organisation_id, round_id, element_id, check_id, face, verdict, settled, read_again, at, outcome)
      select app_organisation(), ${roundId}, c.element, c.check_id, c.face, c.verdict, c.settled, c.read_again, c.at, c.outcome::jsonb
        from unnest(${ofCheck(one => one.element)}::uuid[], ${ofCheck(one => one.check)}::text[], ${ofCheck(one => one.face ?? '')}::text[], ${ofCheck(one => one.verdict)}::text[], ${ofCheck(one => one.settled)}::bool[],
          ${ofCheck(one => one.readAgain)}::bool[], ${ofCheck((_, at) => at)}::int[], ${the(binaryTexts(checks.changed.map(({ one }) => JSON.stringify(one))))}::text[]) as c(element, check_id, face, verdict, settled, read_again, at, outcome)
      on conflict (organisation_id, round_id, element_id, check_id, face) do update set verdict = excluded.verdict, settled = excluded.settled, read_again = excluded.read_again, at = excluded.at, outcome = excluded.outcome)`)
  }

  const stood = new Map(before?.deficiencies.map(one => [one.id, one]))
  const stands = new Set(now.deficiencies.map(one => one.id))
  const gone = [...stood.keys()].filter(id => !stands.has(id))
  const found = now.deficiencies.filter(one => !same(stood.get(one.id), one))
  const ofFound = <T>(pick: (one: DeficiencyOutcome) => T) => the(found.map(pick))
  if (gone.length > 0) parts.push(`deficiencies_gone as (delete from deficiency_state where organisation_id = app_organisation() and id = any(${the(gone)}::uuid[]))`)
  if (found.length > 0) {
    parts.push(`deficiencies as (
      insert into deficiency_state (organisation_id, round_id, job_id, id, tag, element_id, check_id, class, state, assigned_to, due, outcome)
      select app_organisation(), ${roundId}, ${jobId}, d.id, d.tag, d.element, d.check_id, d.class, d.state, d.assigned_to, d.due, d.outcome::jsonb
        from unnest(${ofFound(one => one.id)}::uuid[], ${ofFound(one => one.tag)}::text[], ${ofFound(one => one.element)}::uuid[], ${ofFound(one => one.check)}::text[], ${ofFound(one => one.class)}::text[], ${ofFound(one => one.state)}::text[],
          ${ofFound(one => one.assignedTo)}::uuid[], ${ofFound(one => one.due)}::timestamptz[], ${the(binaryTexts(found.map(one => JSON.stringify(one))))}::text[]) as d(id, tag, element, check_id, class, state, assigned_to, due, outcome)
      on conflict (organisation_id, id) do update set round_id = excluded.round_id, tag = excluded.tag, class = excluded.class, state = excluded.state, assigned_to = excluded.assigned_to, due = excluded.due, outcome = excluded.outcome)`)
  }

  const [by, move] = [`${the(summary.moveBy)}::text`, `${the(summary.move)}::text`]
  const text = `with ${parts.join(', ')}
    update job set state = ${the(summary.state)}, move_by = ${by}, move = ${move}, move_count = ${the(summary.moveCount)}, open_tags = ${the(summary.openTags)}, held_out = ${the(summary.heldOut)}, strip = ${the(JSON.stringify(summary.strip))},
           move_since = case when move = ${move} and move_by = ${by} then move_since else now() end
     where organisation_id = app_organisation() and id = ${jobId} and state <> 'closed'`
  return async (tx) => { await tx.client.query(text, values) }
}

/** Throws away what is kept of a round, to be folded anew. */
export async function forgetState(tx: Tx, roundId: string): Promise<void> {
  await tx.client.query('delete from check_state where organisation_id = app_organisation() and round_id = $1', [roundId])
  await tx.client.query('delete from deficiency_state where organisation_id = app_organisation() and round_id = $1', [roundId])
  await tx.client.query('delete from round_state where organisation_id = app_organisation() and round_id = $1', [roundId])
}
