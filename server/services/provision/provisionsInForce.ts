import type { Provision } from '../../../shared/provision/provision'
import type { Tx } from '../../database/withSession'

/** The local numbers that hold at a job: of its site's authority, of its client's specification, and of the organisation itself. */
export async function provisionsInForce(tx: Tx, job: { authorityId: string | null, clientId: string }): Promise<Provision[]> {
  const { rows } = await tx.client.query<{ provision: Provision }>(
    `select provision from provision where organisation_id = app_organisation() and ended_at is null
        and (authority_id = $1 or client_id = $2 or (authority_id is null and client_id is null)) order by id`, [job.authorityId, job.clientId])
  return rows.map(row => row.provision)
}
