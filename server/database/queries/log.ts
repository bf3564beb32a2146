import type { Tx } from '../withSession'

export async function append(tx: Tx, kind: string, text: string, hash: string, organisationId: string, recordId: string): Promise<number> {
  const { rows } = await tx.client.query<{ log_append: string }>('select entrance.log_append($1, $2, $3, $4, $5)', [kind, text, hash, organisationId, recordId])
  return Number(rows[0]!.log_append)
}
