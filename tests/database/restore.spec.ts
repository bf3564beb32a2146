import { spawnSync } from 'node:child_process'
import fs from 'node:fs'
import os from 'node:os'
import path from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { databaseUrl, withClient } from '../../scripts/lib/migration.mjs'
import { makeCluster, startCluster, stopCluster } from '../../scripts/lib/cluster.mjs'

const root = path.resolve(import.meta.dirname, '../..')
const scratch = fs.mkdtempSync(path.join(os.tmpdir(), 'smoothside-restore-'))
fs.chmodSync(scratch, 0o711)
const first = path.join(scratch, 'first')
const second = path.join(scratch, 'second')

function script(name: string, folder: string, ...parameters: string[]) {
  const { status, stdout, stderr } = spawnSync(process.execPath, [path.join(root, `scripts/${name}.mjs`), ...parameters], { encoding: 'utf8', env: { ...process.env, SMOOTHSIDE_DATA: folder } })
  return { status, said: `${stdout}${stderr}` }
}

/** Looks into the database of a data folder, which is down between scripts. */
async function query(folder: string, text: string) {
  const cluster = path.join(folder, 'postgres')
  const { admin } = JSON.parse(fs.readFileSync(path.join(folder, 'keys/database.json'), 'utf8')) as { admin: string }
  const port = await startCluster(cluster)
  try { return await withClient(databaseUrl({ port, user: 'postgres', password: admin, database: 'smoothside' }), async client => (await client.query(text)).rows) }
  finally { stopCluster(cluster) }
}

let backup = ''
beforeAll(async () => {
  expect(script('migrate', first)).toMatchObject({ status: 0 })
  fs.mkdirSync(path.join(first, 'files/photo'), { recursive: true })
  fs.writeFileSync(path.join(first, 'files/photo/one'), 'a picture')
  fs.writeFileSync(path.join(first, 'log-heads.jsonl'), 'size 3')
  fs.writeFileSync(path.join(first, 'keys/server.json'), JSON.stringify({ secret: 'a'.repeat(64) }))
  await query(first, `create table kept (line text); insert into kept values ('written before the backup'); alter table kept owner to smoothside_owner`)
  expect(script('backup', first, path.join(scratch, 'backups'))).toMatchObject({ status: 0 })
  backup = path.join(scratch, 'backups', fs.readdirSync(path.join(scratch, 'backups'))[0]!)
}, 240_000)
afterAll(() => { fs.rmSync(scratch, { recursive: true, force: true }) })

describe('a backup', { timeout: 240_000 }, () => {
  it('is for its owner only, names the digest of each of its files, and leaves the database passwords out', () => {
    const { files } = JSON.parse(fs.readFileSync(path.join(backup, 'manifest.json'), 'utf8')) as { files: { file: string, sha256: string }[] }
    expect(files.map(({ file }) => file)).toEqual(['data/files/photo/one', 'data/keys/server.json', 'data/log-heads.jsonl', 'database.dump'])
    // printf 'a picture' | sha256sum
    expect(files[0]!.sha256).toBe(spawnSync('sha256sum', [path.join(first, 'files/photo/one')], { encoding: 'utf8' }).stdout.slice(0, 64))
    for (const { file } of files) expect(fs.statSync(path.join(backup, file)).mode & 0o077, file).toBe(0)
    expect(fs.statSync(backup).mode & 0o077).toBe(0)
  })

  it('fills a new data folder with all that it holds, under a new epoch', async () => {
    expect(script('restore', second, backup)).toMatchObject({ status: 0 })
    expect(await query(second, 'select * from kept')).toEqual([{ line: 'written before the backup' }])
    expect(fs.readFileSync(path.join(second, 'files/photo/one'), 'utf8')).toBe('a picture')
    expect(fs.readFileSync(path.join(second, 'log-heads.jsonl'), 'utf8')).toBe('size 3')
    expect(JSON.parse(fs.readFileSync(path.join(second, 'keys/server.json'), 'utf8'))).toEqual({ secret: 'a'.repeat(64) })
    const epoch = (folder: string) => query(folder, 'select store_epoch from installation')
    expect(await epoch(second)).not.toEqual(await epoch(first))
  })

  it('keeps row-level security and who may do what', async () => {
    const rights = `select c.relname, c.relrowsecurity, c.relforcerowsecurity, c.relowner::regrole::text as owner, coalesce(c.relacl, acldefault('r', c.relowner))::text as rights from pg_class c where relnamespace = 'public'::regnamespace and relkind = 'r' order by 1`
    const before = await query(first, rights)
    expect(before.length).toBeGreaterThan(10)
    expect(await query(second, rights)).toEqual(before)
  })

  it('is refused over data that is there', async () => {
    const { status, said } = script('restore', first, backup)
    expect(status).toBe(1)
    expect(said).toContain('is not empty, and a restore writes over nothing')
    expect(await query(first, 'select * from kept')).toHaveLength(1)
  })

  it('is refused when one byte of it changed, before anything is made', () => {
    const copy = path.join(scratch, 'changed')
    fs.cpSync(backup, copy, { recursive: true })
    const dump = fs.readFileSync(path.join(copy, 'database.dump'))
    dump[dump.length >> 1]! ^= 1
    fs.writeFileSync(path.join(copy, 'database.dump'), dump)
    const third = path.join(scratch, 'third')
    const { status, said } = script('restore', third, copy)
    expect(status).toBe(1)
    expect(said).toContain('database.dump of the backup is not what it was')
    expect(fs.existsSync(third)).toBe(false)
  })

  it('that was broken off while being restored keeps the folder from being started', () => {
    const half = path.join(scratch, 'half')
    fs.mkdirSync(path.join(half, 'run'), { recursive: true })
    fs.writeFileSync(path.join(half, 'run/restore-unfinished'), '')
    expect(script('migrate', half).said).toContain('A restore into')
    expect(script('start', half).said).toContain('A restore into')
  })
})

describe('making a cluster', () => {
  it('leaves nothing half made that a later start would take for whole', async () => {
    const cluster = path.join(scratch, 'broken/postgres')
    fs.mkdirSync(`${cluster}.making/base`, { recursive: true }) // what a killed initdb leaves
    fs.writeFileSync(`${cluster}.making/PG_VERSION`, '15\n')
    expect(makeCluster(cluster, 'a password', { durable: false })).toBe(true)
    expect(makeCluster(cluster, 'another', { durable: false })).toBe(false)
    const port = await startCluster(cluster, { durable: false })
    try { await withClient(databaseUrl({ port, user: 'postgres', password: 'a password', database: 'postgres' }), async client => client.query('select 1')) }
    finally { stopCluster(cluster) }
  })
})
