import type { z } from 'zod'
import type { numberInputSchema } from '../../../shared/api/numbers'
import type { Provision } from '../../../shared/provision/provision'
import type { Tx } from '../withSession'

type Input = z.infer<typeof numberInputSchema>

export async function listProvisions(tx: Tx, authorityId: string | null, clientId: string | null): Promise<Provision[]> {
  return (await tx.client.query<{ provision: Provision }>(
    `select provision from provision where organisation_id = app_organisation() and ended_at is null
        and authority_id is not distinct from $1 and client_id is not distinct from $2 order by measurand, id`, [authorityId, clientId])).rows.map(row => row.provision)
}

/** All local numbers in force that are to be asked after again by a day, whoever's they are; the soonest first. */
export async function provisionsToReview(tx: Tx, by: string): Promise<{ provision: Provision, authorityId: string | null, clientId: string | null }[]> {
  return (await tx.client.query<{ provision: Provision, authorityId: string | null, clientId: string | null }>(
    `select provision, authority_id as "authorityId", client_id as "clientId" from provision where organisation_id = app_organisation() and ended_at is null and provision->>'reviewOn' <= $1
      order by provision->>'reviewOn', id`, [by])).rows
}

/** The local numbers that hold at a job: of its site's authority, of its client's specification, and of the organisation itself. */
export async function provisionsInForce(tx: Tx, job: { authorityId: string | null, clientId: string }): Promise<Provision[]> {
  const { rows } = await tx.client.query<{ provision: Provision }>(
    `select provision from provision where organisation_id = app_organisation() and ended_at is null
        and (authority_id = $1 or client_id = $2 or (authority_id is null and client_id is null)) order by id`, [job.authorityId, job.clientId])
  return rows.map(row => row.provision)
}

export async function isThere(tx: Tx, id: string): Promise<boolean> {
  return (await tx.client.query('select from provision where organisation_id = app_organisation() and id = $1', [id])).rowCount === 1
}

export async function endSame(tx: Tx, { authorityId, clientId, provision }: Input): Promise<void> {
  await tx.client.query(
    `update provision set ended_at = now() where organisation_id = app_organisation() and ended_at is null and authority_id is not distinct from $1 and client_id is not distinct from $2
        and measurand = $3 and setting = $4 and (provision->>'when') is not distinct from $5 and (provision->'limit' = 'null') = $6`,
    [authorityId, clientId, provision.measurand, provision.setting ?? '', provision.when ?? null, provision.limit === null])
}

export async function insertProvision(tx: Tx, { authorityId, clientId, provision }: Input, writtenBy: string): Promise<void> {
  await tx.client.query('insert into provision (organisation_id, id, authority_id, client_id, setting, measurand, provision, written_by) values (app_organisation(), $1, $2, $3, $4, $5, $6, $7)',
    [provision.id, authorityId, clientId, provision.setting ?? '', provision.measurand, JSON.stringify(provision), writtenBy])
}

export async function endOne(tx: Tx, id: string): Promise<boolean> {
  return (await tx.client.query('update provision set ended_at = now() where organisation_id = app_organisation() and id = $1 and ended_at is null', [id])).rowCount === 1
}
