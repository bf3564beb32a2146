import type { KeptEntry, WireEntry } from '../../../shared/entry/entry'
import type { Target } from '../../../shared/entry/entryRules'
import { binaryTexts } from '../binaryTexts'
import type { Tx } from '../withSession'

export interface LockedRound { id: string, jobId: string, number: number, state: 'open' | 'frozen' | 'sealed', accepted: number, basis: string }

/**
 * Locks the round's row as an update does: whoever comes next waits and then sees the newest number, so numbers follow the order of commit. The same lock freezes it. It is locked
 * and not yet written, since each entry's foreign key looks the row up again and would have to go through every version of it.
 */
export async function lockRound(tx: Tx, roundId: string): Promise<LockedRound | undefined> {
  const { rows } = await tx.client.query<LockedRound>('select id, job_id as "jobId", number, state, accepted, basis from round where organisation_id = app_organisation() and id = $1 for no key update', [roundId])
  return rows[0]
}

/** Which of these ids are here, accepted (with a number) or held (without), and the texts that are held of a round. */
export async function entriesHere(tx: Tx, roundId: string, ids: string[]): Promise<{ here: Map<string, { digest: string, number: number | null }>, held: WireEntry[] }> {
  const { rows } = await tx.client.query<{ id: string, digest: string, number: number | null, envelope: string | null, payload: string }>(
    `select id, digest, null::int as number, case when round_id = $1 then envelope_text end as envelope, payload_text as payload
       from entry_aside where organisation_id = app_organisation() and why = 'held' and (round_id = $1 or id = any($2::uuid[]))
     union all select id, digest, number, null, null from entry where organisation_id = app_organisation() and id = any($2::uuid[])`, [roundId, ids])
  return { here: new Map(rows.map(row => [row.id, row])), held: rows.flatMap(({ envelope, payload }) => envelope === null ? [] : [{ envelope, payload }]) }
}

/** The entries that others name, as the rules of naming need them. */
export async function targetsOf(tx: Tx, ids: string[]): Promise<Map<string, Target>> {
  if (ids.length === 0) return new Map()
  const { rows } = await tx.client.query<Target & { envelope_text: string }>('select envelope_text from entry where organisation_id = app_organisation() and id = any($1::uuid[])', [[...new Set(ids)]])
  return new Map(rows.map((row) => {
    const envelope = JSON.parse(row.envelope_text) as Target
    return [envelope.id, envelope]
  }))
}

/**
 * Stores accepted entries of a round, the texts exactly as they came, with the number that it has come to; they are held no more. Throws unless every one of them can
 * be read back.
 */
export async function storeEntries(tx: Tx, roundId: string, accepted: number, stored: { entry: KeptEntry, wire: WireEntry }[]): Promise<void> {
  const column = <T>(pick: (one: { entry: KeptEntry, wire: WireEntry }) => T) => stored.map(pick)
  const { rowCount } = await tx.client.query(
    `with held_no_more as (delete from entry_aside where organisation_id = app_organisation() and why = 'held' and id = any($2::uuid[]))
     insert into entry (organisation_id, id, round_id, number, job_id, kind, author_id, element_id, check_id, digest, envelope_text, payload_text, payload)
     select app_organisation(), e.id, $1, e.number, e.job, e.kind, e.author, e.element, e.check_id, e.digest, e.envelope, e.payload, e.payload::jsonb
       from unnest($2::uuid[], $3::int[], $4::uuid[], $5::text[], $6::uuid[], $7::uuid[], $8::text[], $9::text[], $10::text[], $11::text[])
         as e(id, number, job, kind, author, element, check_id, digest, envelope, payload)
     returning id`,
    [roundId, column(one => one.entry.envelope.id), column(one => one.entry.number), column(one => one.entry.envelope.job), column(one => one.entry.envelope.kind),
      column(one => one.entry.envelope.author), column(one => one.entry.envelope.element), column(one => one.entry.envelope.check), column(one => one.entry.digest),
      binaryTexts(column(one => one.wire.envelope)), binaryTexts(column(one => one.wire.payload))])
  if (rowCount !== stored.length) throw new Error(`${stored.length} entries were to be stored, ${rowCount} can be read back`)
  await tx.client.query('update round set accepted = $2 where organisation_id = app_organisation() and id = $1', [roundId, accepted])
}

export async function putAside(tx: Tx, entry: KeptEntry, wire: WireEntry, why: 'held' | 'quarantined'): Promise<void> {
  await tx.client.query(
    `insert into entry_aside (organisation_id, id, digest, round_id, why, envelope_text, payload_text, author_id) values (app_organisation(), $1, $2, $3, $4, $5, $6, $7) on conflict do nothing`,
    [entry.envelope.id, entry.digest, entry.envelope.round, why, wire.envelope, wire.payload, entry.envelope.author])
}

/** The round's entries up to a number whose payload was erased since they were pulled, or before. */
export async function erasedUpTo(tx: Tx, roundId: string, number: number): Promise<{ number: number, envelope: string, payload: string }[]> {
  const { rows } = await tx.client.query<{ number: number, envelope: string, payload: string }>(
    `select number, envelope_text as envelope, '' as payload from entry where organisation_id = app_organisation() and round_id = $1 and number <= $2 and payload_text is null order by number`, [roundId, number])
  return rows
}

export async function erasedCount(tx: Tx, roundId: string): Promise<number> {
  return (await tx.client.query<{ n: number }>('select count(*)::int as n from entry where organisation_id = app_organisation() and round_id = $1 and payload_text is null', [roundId])).rows[0]!.n
}

/** The round's entries after a number, in order. */
export async function entriesAfter(tx: Tx, roundId: string, after: number, most: number): Promise<{ number: number, envelope: string, payload: string }[]> {
  const { rows } = await tx.client.query<{ number: number, envelope: string, payload: string }>(
    `select number, envelope_text as envelope, coalesce(payload_text, '') as payload from entry where organisation_id = app_organisation() and round_id = $1 and number > $2 order by number limit $3`, [roundId, after, most])
  return rows
}

/** Entries of a kind in a round of which none is the newer word. */
export async function standingOfKind(tx: Tx, roundId: string, kind: string): Promise<string[]> {
  const { rows } = await tx.client.query<{ envelope_text: string }>('select envelope_text from entry where organisation_id = app_organisation() and round_id = $1 and kind = $2', [roundId, kind])
  const envelopes = rows.map(row => JSON.parse(row.envelope_text) as Pick<Target, 'id'> & { replaces: string[] })
  const replaced = new Set(envelopes.flatMap(envelope => envelope.replaces))
  return envelopes.map(envelope => envelope.id).filter(id => !replaced.has(id))
}

/** The rounds of a job before one, oldest first. */
export async function roundsBefore(tx: Tx, jobId: string, number: number): Promise<{ id: string, accepted: number }[]> {
  return (await tx.client.query<{ id: string, accepted: number }>('select id, accepted from round where organisation_id = app_organisation() and job_id = $1 and number < $2 order by number', [jobId, number])).rows
}
