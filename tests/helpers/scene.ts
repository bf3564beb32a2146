import { randomUUID } from 'node:crypto'
import pg from 'pg'
import { setPool } from '../../server/database/client'
import type { Session } from '../../server/database/withSession'
import type { Role } from '../../shared/permission/permission'
import { cloneDatabase, type TestDatabase } from './postgres'

/** One organisation of a test with a person in every role, a client with a contact, a site and a job. Invented, for tests alone. */
export interface TestOrganisation {
  id: string
  accounts: Record<Role | 'client', string>
  clientId: string
  contactId: string
  siteId: string
  jobId: string
  as: (actor: Role | 'client') => Session & { accountId: string }
}

export interface Scene { database: TestDatabase, one: TestOrganisation, other: TestOrganisation, admin: pg.Pool, end: () => Promise<void> }

async function makeOrganisation(admin: pg.Pool, code: string): Promise<TestOrganisation> {
  const id = randomUUID()
  const [clientId, contactId, siteId, jobId] = [randomUUID(), randomUUID(), randomUUID(), randomUUID()]
  const accounts = Object.fromEntries(['inspector', 'crew', 'manager', 'administrator', 'client'].map(role => [role, randomUUID()])) as TestOrganisation['accounts']
  await admin.query(`insert into organisation (id, name, code, time_zone) values ($1, $2, $3, 'America/New_York')`, [id, `Fence crew ${code}`, code])
  for (const [role, account] of Object.entries(accounts)) {
    await admin.query('insert into account (id, email, name) values ($1, $2, $3)', [account, `${role}.${code.toLowerCase()}@test.example`, `${role} of ${code}`])
    if (role !== 'client') await admin.query('insert into membership (organisation_id, account_id, role) values ($1, $2, $3)', [id, account, role])
  }
  await admin.query('insert into client (organisation_id, id, name) values ($1, $2, $3)', [id, clientId, `School board ${code}`])
  await admin.query('insert into contact (organisation_id, id, client_id, account_id, name, email, accepts) values ($1, $2, $3, $4, $5, $6, true)', [id, contactId, clientId, accounts.client, `Clerk ${code}`, `client.${code.toLowerCase()}@test.example`])
  await admin.query(`insert into site (organisation_id, id, client_id, name, time_zone) values ($1, $2, $3, $4, 'America/New_York')`, [id, siteId, clientId, `School ${code}`])
  await admin.query(`insert into job (organisation_id, id, number, site_id, client_id, title, system, language, checklists, created_by) values ($1, $2, 1, $3, $4, $5, 'imperial', 'en', '["school-grounds"]', $6)`, [id, jobId, siteId, clientId, `Job of ${code}`, accounts.manager])
  await admin.query('update organisation set next_job = 2 where id = $1', [id])
  return {
    id, accounts, clientId, contactId, siteId, jobId,
    as: actor => ({ accountId: accounts[actor], standing: actor === 'client' ? 'client' : actor === 'crew' ? 'crew' : 'staff', organisationId: actor === 'client' ? null : id, role: actor === 'client' ? null : actor }),
  }
}

/** Two organisations in a database of their own; services run against it as the app role. */
export async function makeScene(): Promise<Scene> {
  const database = await cloneDatabase()
  const admin = new pg.Pool({ connectionString: database.adminUrl, max: 3 })
  const app = new pg.Pool({ connectionString: database.appUrl, max: 6 })
  admin.on('error', () => undefined)
  app.on('error', () => undefined)
  setPool(app)
  const [one, other] = [await makeOrganisation(admin, 'AA'), await makeOrganisation(admin, 'BB')]
  return { database, one, other, admin, end: async () => { await app.end(); await admin.end(); await database.drop() } }
}
