import { mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import pg from 'pg'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { setPool } from '../../server/database/client'
import { loadDemo } from '../../server/demo/loadDemo'
import { cloneDatabase, type TestDatabase } from '../helpers/postgres'

let database: TestDatabase
let pool: pg.Pool
let admin: pg.Pool
const folder = mkdtempSync(join(tmpdir(), 'smoothside-demo-'))

beforeAll(async () => {
  Object.assign(process.env, { SMOOTHSIDE_DATA: folder, SMOOTHSIDE_SECRET: 'a1'.repeat(32), NUXT_SESSION_PASSWORD: 'p'.repeat(40), SMOOTHSIDE_ORIGIN: 'http://127.0.0.1:1', SMTP_URL: 'smtp://127.0.0.1:1', LOG_LEVEL: 'silent' })
  database = await cloneDatabase()
  process.env.DATABASE_URL_APP = database.appUrl
  pool = new pg.Pool({ connectionString: database.appUrl, max: 6 })
  admin = new pg.Pool({ connectionString: database.adminUrl, max: 2 })
  setPool(pool)
  await loadDemo()
}, 240_000)
afterAll(async () => {
  const { stopQueue } = await import('../../server/tasks/queue')
  await stopQueue()
  await pool.end()
  await admin.end()
  await database.drop()
  rmSync(folder, { recursive: true, force: true })
})

describe('the demo', () => {
  it('has people in every role of two contractors, and a clerk who is a contact of both', async () => {
    const { rows } = await admin.query<{ name: string, roles: string[] }>('select o.name, array_agg(m.role order by m.role) as roles from organisation o join membership m on m.organisation_id = o.id group by o.name order by o.name')
    expect(rows.map(row => row.roles)).toEqual([['administrator', 'crew', 'inspector', 'manager'], ['administrator', 'crew', 'inspector', 'manager']])
    const clerk = await admin.query('select count(distinct organisation_id)::int as contractors from contact where account_id is not null group by account_id')
    expect(clerk.rows).toEqual([{ contractors: 2 }])
  })

  it('has jobs in every state up to the seal', async () => {
    const { rows } = await admin.query<{ state: string }>('select distinct state from job order by state')
    expect(rows.map(row => row.state)).toEqual(expect.arrayContaining(['walking', 'correcting', 'sealing', 'sealed']))
  })

  it('has sealed records that stand in the log, and open tags', async () => {
    const { rows } = await admin.query<{ code: string, sealing: string, leaf: string, pages: number }>('select code, sealing, leaf, pages from record order by code')
    expect(rows.length).toBeGreaterThanOrEqual(2)
    expect(rows.every(row => row.sealing === 'sealed' && row.leaf !== null && row.pages > 1)).toBe(true)
    expect((await admin.query('select count(*)::int as n from log_leaf where kind = \'record\'')).rows[0]).toEqual({ n: rows.length })
    expect((await admin.query('select count(*)::int as n from deficiency_state where state in (\'open\', \'assigned\', \'cannot\')')).rows[0].n).toBeGreaterThan(2)
  })

  it('keeps every address under .example', async () => {
    const { rows } = await admin.query<{ email: string }>('select email from account union select email from contact')
    expect(rows.filter(row => !row.email.endsWith('.example'))).toEqual([])
    expect(JSON.parse(readFileSync(join(folder, 'demo-sign-ins.json'), 'utf8'))).toHaveLength(9)
  })
})
