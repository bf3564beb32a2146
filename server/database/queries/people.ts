import type { Role } from '../../../shared/permission/permission'
import type { Tx } from '../withSession'

export interface PersonRow { accountId: string, name: string, email: string, language: 'en' | 'es', role: Role, endedAt: string | null }

export async function listPeople(tx: Tx): Promise<PersonRow[]> {
  return (await tx.client.query<PersonRow>(
    `select a.id as "accountId", a.name, a.email, a.language, m.role, m.ended_at as "endedAt" from membership m join account a on a.id = m.account_id
      where m.organisation_id = app_organisation() order by m.ended_at nulls first, lower(a.name)`)).rows
}

/** Sets a role, or ends the membership (null). Locks the administrators, so that two at once cannot both leave as the last one. */
export async function changeRole(tx: Tx, accountId: string, role: Role | null): Promise<'changed' | 'notThere' | 'lastAdministrator'> {
  const { rows } = await tx.client.query<{ account_id: string, role: Role }>(`select account_id, role from membership where organisation_id = app_organisation() and ended_at is null for update`)
  const now = rows.find(row => row.account_id === accountId)
  if (!now && role === null) return 'notThere'
  if (now?.role === 'administrator' && role !== 'administrator' && rows.filter(row => row.role === 'administrator').length === 1) return 'lastAdministrator'
  const { rowCount } = await tx.client.query('update membership set role = coalesce($2, role), ended_at = case when $2::text is null then now() end where organisation_id = app_organisation() and account_id = $1', [accountId, role])
  return rowCount === 1 ? 'changed' : 'notThere'
}

export async function writeAudit(tx: Tx, id: string, accountId: string, act: string, subject: string): Promise<void> {
  await tx.client.query('insert into audit_row (organisation_id, id, account_id, act, subject) values (app_organisation(), $1, $2, $3, $4)', [id, accountId, act, subject])
}
