import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { withSession } from '../../server/database/withSession'
import { makeScene, type Scene } from '../helpers/scene'

let scene: Scene
beforeAll(async () => { scene = await makeScene() })
afterAll(() => scene.end())

/** Tables of the installation, which no organisation owns; reached by functions alone. */
const INSTALLATION = ['account', 'installation', 'limiter', 'link', 'log_head', 'log_leaf', 'organisation', 'session']

describe('the catalogue', () => {
  it('has row-level security enabled and forced on every table', async () => {
    const { rows } = await scene.admin.query(`select relname from pg_class where relnamespace = 'public'::regnamespace and relkind = 'r' and not (relrowsecurity and relforcerowsecurity)`)
    expect(rows).toEqual([])
  })

  it('begins every tenant table\'s primary key with the organisation', async () => {
    const { rows } = await scene.admin.query<{ relname: string, first: string }>(
      `select c.relname, (select a.attname from pg_attribute a where a.attrelid = c.oid and a.attnum = i.indkey[0]) as first
         from pg_class c join pg_index i on i.indrelid = c.oid and i.indisprimary where c.relnamespace = 'public'::regnamespace and c.relkind = 'r'`)
    expect(rows.filter(row => row.first !== 'organisation_id').map(row => row.relname).sort()).toEqual(INSTALLATION)
  })

  it('carries the organisation in every foreign key between tenant tables', async () => {
    const { rows } = await scene.admin.query<{ conname: string, columns: string[] }>(
      `select k.conname, (select array_agg(a.attname::text order by x.n) from unnest(k.conkey) with ordinality x(num, n) join pg_attribute a on a.attrelid = k.conrelid and a.attnum = x.num) as columns
         from pg_constraint k join pg_class target on target.oid = k.confrelid where k.contype = 'f' and k.connamespace = 'public'::regnamespace and target.relname <> all($1)`, [INSTALLATION])
    expect(rows.filter(row => row.columns[0] !== 'organisation_id')).toEqual([])
    expect(rows.length).toBeGreaterThan(20)
  })

  it('makes uniqueness one organisation\'s own affair', async () => {
    const { rows } = await scene.admin.query<{ index: string, columns: string[] }>(
      `select i.indexrelid::regclass::text as index, (select array_agg(a.attname::text) from pg_attribute a where a.attrelid = i.indrelid and a.attnum = any(i.indkey)) as columns
         from pg_index i join pg_class c on c.oid = i.indrelid where i.indisunique and c.relnamespace = 'public'::regnamespace and c.relname <> all($1)`, [INSTALLATION])
    expect(rows.filter(row => !row.columns.includes('organisation_id'))).toEqual([])
  })

  it('gives the app role itself no table but the counters of tries', async () => {
    const { rows } = await scene.admin.query(`select distinct table_name from information_schema.role_table_grants where grantee = 'smoothside_app' and table_schema = 'public'`)
    expect(rows).toEqual([{ table_name: 'limiter' }])
  })

  it('fixes the search path of every function that runs as the owner', async () => {
    const { rows } = await scene.admin.query(`select proname from pg_proc where prosecdef and pronamespace in ('entrance'::regnamespace, 'public'::regnamespace) and not coalesce(proconfig::text like '%search_path=public, pg_temp%', false)`)
    expect(rows).toEqual([])
  })
})

describe('what each standing sees', () => {
  const jobs = (scene: Scene, who: Parameters<typeof withSession>[0]) => withSession(who, async tx => (await tx.client.query<{ id: string }>('select id from job')).rows.map(row => row.id))

  it('shows staff their own organisation and nothing of another', async () => {
    for (const role of ['inspector', 'manager', 'administrator'] as const) expect(await jobs(scene, scene.one.as(role))).toEqual([scene.one.jobId])
  })

  it('shows crew only jobs that were given to them', async () => {
    expect(await jobs(scene, scene.one.as('crew'))).toEqual([])
    await scene.admin.query(`insert into job_given (organisation_id, job_id, account_id, given_as) values ($1, $2, $3, 'crew')`, [scene.one.id, scene.one.jobId, scene.one.accounts.crew])
    expect(await jobs(scene, scene.one.as('crew'))).toEqual([scene.one.jobId])
    expect(await jobs(scene, scene.other.as('crew'))).toEqual([])
  })

  it('shows a client a job only once a sealed record of it was sent to them', async () => {
    const may = async () => withSession(scene.one.as('client'), async tx => (await tx.client.query('select id from job')).rowCount)
    expect(await may()).toBe(0)
    const [round, record, transmittal, recipient] = [randomUUID(), randomUUID(), randomUUID(), randomUUID()]
    const { one, admin } = scene
    await admin.query(`insert into round (organisation_id, id, job_id, number, basis, opened_by) values ($1, $2, $3, 1, 'x', $4)`, [one.id, round, one.jobId, one.accounts.manager])
    await admin.query(`insert into record (organisation_id, id, job_id, round_id, number, scope, code, border, requested_by) values ($1, $2, $3, $4, 1, 'interim', 'AA-0001-1', 0, $5)`, [one.id, record, one.jobId, round, one.accounts.manager])
    await admin.query(`insert into transmittal (organisation_id, id, record_id, sent_by) values ($1, $2, $3, $4)`, [one.id, transmittal, record, one.accounts.manager])
    await admin.query(`insert into recipient (organisation_id, id, transmittal_id, record_id, contact_id, name, email) values ($1, $2, $3, $4, $5, 'Clerk', 'client.aa@test.example')`, [one.id, recipient, transmittal, record, one.contactId])
    expect(await may()).toBe(0)
    await admin.query(`update record set sealing = 'sealed' where id = $1`, [record])
    expect(await may()).toBe(1)
    expect(await withSession(scene.other.as('client'), async tx => (await tx.client.query('select id from record')).rowCount)).toBe(0)
  })

  it('shows nobody anything once a session names no organisation', async () => {
    expect(await jobs(scene, { accountId: scene.one.accounts.manager, standing: 'staff', organisationId: null, role: 'manager' })).toEqual([])
  })

  it('refuses a row for another organisation, and a child of another organisation\'s parent', async () => {
    const { one, other } = scene
    await expect(withSession(one.as('manager'), tx => tx.client.query('insert into client (organisation_id, id, name) values ($1, $2, $3)', [other.id, randomUUID(), 'Not ours']))).rejects.toMatchObject({ code: '42501' })
    await expect(withSession(one.as('manager'), tx => tx.client.query(`insert into site (organisation_id, id, client_id, name, time_zone) values (app_organisation(), $1, $2, 'x', 'UTC')`, [randomUUID(), other.clientId]))).rejects.toMatchObject({ code: '23503' })
  })

  it('lets go of the standing with the transaction', async () => {
    await withSession(scene.one.as('manager'), async () => undefined)
    const client = await (await import('../../server/database/client')).usePool().connect()
    try { await expect(client.query('select id from job')).rejects.toMatchObject({ code: '42501' }) }
    finally { client.release() }
  })
})

describe('what was written down', () => {
  it('refuses UPDATE, DELETE and TRUNCATE of entries, even to the owner', async () => {
    const { one, admin } = scene
    const round = randomUUID()
    await admin.query(`insert into round (organisation_id, id, job_id, number, basis, opened_by) values ($1, $2, $3, 7, 'x', $4)`, [one.id, round, one.jobId, one.accounts.manager])
    await admin.query(`insert into entry (organisation_id, id, round_id, number, job_id, kind, author_id, digest, envelope_text) values ($1, $2, $3, 1, $4, 'note', $5, 'd', '{}')`, [one.id, randomUUID(), round, one.jobId, one.accounts.manager])
    for (const change of [`update entry set digest = 'e'`, 'delete from entry', 'truncate entry cascade']) await expect(admin.query(change), change).rejects.toMatchObject({ code: '42501' })
    await expect(withSession(one.as('manager'), tx => tx.client.query(`update entry set digest = 'e'`))).rejects.toMatchObject({ code: '42501' })
  })

  it('never moves the identity of a sealed record, and never deletes one', async () => {
    await expect(scene.admin.query(`update record set border = 99 where sealing = 'sealed'`)).rejects.toMatchObject({ code: '42501' })
    await expect(scene.admin.query('delete from record_element; delete from record')).rejects.toMatchObject({ code: '42501' })
    await scene.admin.query(`update record set standing = 'underQuestion', standing_reason = 'post found loose' where sealing = 'sealed'`)
  })
})
