import type { Tx } from '../withSession'

export async function append(tx: Tx, kind: string, text: string, hash: string, organisationId: string, recordId: string): Promise<number> {
  const { rows } = await tx.client.query<{ log_append: string }>('select entrance.log_append($1, $2, $3, $4, $5)', [kind, text, hash, organisationId, recordId])
  return Number(rows[0]!.log_append)
}

/** Opens a new epoch from the one that was seen, with its leaf; false where somebody else did meanwhile. */
export async function openEpoch(tx: Tx, from: number, text: string, hash: string): Promise<boolean> {
  return (await tx.client.query<{ position: string | null }>('select entrance.log_epoch_open($1, $2, $3) as position', [from, text, hash])).rows[0]!.position !== null
}
