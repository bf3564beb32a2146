import type { Instrument, InstrumentInput, InstrumentRow } from '../../../shared/api/instrument'
import type { Tx } from '../withSession'

// A bigint comes as text; it is a safe integer by its schema.
const asNumber = <T extends { uncertainty: number }>(row: T): T => ({ ...row, uncertainty: Number(row.uncertainty) })

export async function listInstruments(tx: Tx): Promise<InstrumentRow[]> {
  return (await tx.client.query<InstrumentRow>(
    `select i.id, i.name, i.unit, i.uncertainty, i.text, i.source, to_char(i.checked_on, 'YYYY-MM-DD') as "checkedOn", a.name as by
       from instrument i join account a on a.id = i.written_by where i.organisation_id = app_organisation() and i.ended_at is null order by lower(i.name), i.id`)).rows.map(asNumber)
}

/** What a device takes along of them. */
export async function instrumentsInUse(tx: Tx): Promise<Instrument[]> {
  return (await tx.client.query<Instrument>('select id, name, unit, uncertainty, text from instrument where organisation_id = app_organisation() and ended_at is null order by lower(name), id')).rows.map(asNumber)
}

/** False when its id is there already. */
export async function insertInstrument(tx: Tx, { id, name, unit, uncertainty, text, source, checkedOn }: InstrumentInput, writtenBy: string): Promise<boolean> {
  return (await tx.client.query(
    `insert into instrument (organisation_id, id, name, unit, uncertainty, text, source, checked_on, written_by) values (app_organisation(), $1, $2, $3, $4, $5, $6, $7, $8)
     on conflict (organisation_id, id) do nothing`, [id, name, unit, uncertainty, text, source, checkedOn, writtenBy])).rowCount === 1
}

export async function endInstrument(tx: Tx, id: string): Promise<boolean> {
  return (await tx.client.query('update instrument set ended_at = now() where organisation_id = app_organisation() and id = $1 and ended_at is null', [id])).rowCount === 1
}
