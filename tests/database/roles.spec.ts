import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { withClient } from '../../scripts/lib/migration.mjs'
import { cloneDatabase, type TestDatabase } from '../helpers/postgres'

let database: TestDatabase
beforeAll(async () => { database = await cloneDatabase() })
afterAll(async () => { await database.drop() })

const rowsAs = (url: string, text: string) => withClient(url, async client => (await client.query(text)).rows)

describe('the roles that reach the database', () => {
  it('give web and worker a role without any power of its own', async () => {
    expect(await rowsAs(database.adminUrl, `select rolname, rolsuper, rolbypassrls, rolcreatedb, rolcreaterole, rolreplication from pg_roles where rolname ~ '^smoothside_' and (rolsuper or rolbypassrls or rolcreatedb or rolcreaterole or rolreplication)`)).toEqual([])
    expect(await rowsAs(database.adminUrl, `select relname from pg_class where relowner = 'smoothside_app'::regrole union all select proname from pg_proc where proowner = 'smoothside_app'::regrole`)).toEqual([])
  })

  it('end a statement, a wait for a lock and a forgotten transaction of the app role', async () => {
    const [limits] = await rowsAs(database.appUrl, `select current_setting('statement_timeout') statement, current_setting('lock_timeout') lock, current_setting('idle_in_transaction_session_timeout') idle`)
    expect(limits).toEqual({ statement: '30s', lock: '10s', idle: '1min' })
  })

  it('keep the app role from making anything', async () => {
    for (const text of ['create table mine (a int)', 'create schema mine', 'create role mine', 'alter table entry disable row level security', 'truncate pgboss.job', 'select * from pg_authid'])
      await expect(rowsAs(database.appUrl, text), text).rejects.toMatchObject({ code: '42501' })
  })

  it('let a standing queue a task inside its own transaction, and not take away what is queued', async () => {
    await withClient(database.appUrl, async (client) => {
      await client.query(`begin; set local role smoothside_staff; insert into pgboss.job (name, data) values ('seal', '{}'); rollback`)
      await client.query('begin; set local role smoothside_staff')
      await expect(client.query('delete from pgboss.job')).rejects.toMatchObject({ code: '42501' })
    })
  })

  it('know each other only by password', async () => {
    const wrong = new URL(database.appUrl)
    wrong.password = 'guess'
    await expect(rowsAs(wrong.href, 'select 1')).rejects.toMatchObject({ code: '28P01' })
  })
})
