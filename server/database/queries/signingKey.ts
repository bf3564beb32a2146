import type { Tx } from '../withSession'

export interface KeyRow { wrappedKey: string, certificate: string, root: string }

export async function newestKey(tx: Tx): Promise<KeyRow | undefined> {
  return (await tx.client.query<KeyRow>(`select wrapped_key as "wrappedKey", certificate, root from signing_key where organisation_id = app_organisation() and retired_at is null order by created_at desc limit 1`)).rows[0]
}

/** Inserts the first key; where another process was faster, nothing happens. The row lock on the organisation puts them in order. */
export async function insertFirstKey(tx: Tx, key: KeyRow & { id: string }): Promise<void> {
  await tx.client.query('select from organisation where id = app_organisation() for update')
  await tx.client.query(
    `insert into signing_key (organisation_id, id, wrapped_key, certificate, root) select app_organisation(), $1, $2, $3, $4
      where not exists (select 1 from signing_key where organisation_id = app_organisation() and retired_at is null)`, [key.id, key.wrappedKey, key.certificate, key.root])
}

export async function organisationOf(tx: Tx): Promise<{ id: string, name: string, code: string, phone: string | null }> {
  return (await tx.client.query<{ id: string, name: string, code: string, phone: string | null }>('select id, name, code, phone from organisation where id = app_organisation()')).rows[0]!
}
