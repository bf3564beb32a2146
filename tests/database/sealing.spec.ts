import { createHash, randomUUID } from 'node:crypto'
import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import pg from 'pg'
import { uuidv7 } from 'uuidv7'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { PayloadOf } from '#shared/entry/entry'
import { makeEntry } from '#shared/entry/makeEntry'
import { readEntry } from '#shared/entry/readEntry'
import { sha256Hex } from '#shared/record/canonicalJson'
import { lockRound, storeEntries } from '../../server/database/queries/entry'
import { withSession } from '../../server/database/withSession'
import { acceptEntries } from '../../server/services/entry/acceptEntries'
import { requestSealing } from '../../server/services/record/requestSealing'
import { setPool } from '../../server/database/client'
import { sealRecord } from '../../server/services/record/sealRecord'
import { readRecord, readRecordFile } from '../../server/services/record/readRecord'
import { run, testFolder } from '../helpers/outsideTools'
import { digestOfFile, drawLineOf, makeSealingScene, signAndRequest, walkAll, type SealingScene } from '../helpers/signedRound'

let scene: SealingScene
const pools: pg.Pool[] = []
const folder = testFolder()
beforeAll(async () => { scene = await makeSealingScene() })
afterAll(async () => {
  folder.remove()
  await Promise.all(pools.map(pool => pool.end()))
  await scene.end()
})

/** When a connection is to break: at the query that `at` knows, before it reaches the database. */
class BreakingPool extends pg.Pool {
  at: ((text: string, values: unknown[]) => boolean) | null = null
  broke = 0
  override connect(): Promise<pg.PoolClient>
  override connect(callback: Parameters<pg.Pool['connect']>[0]): void
  override connect(callback?: Parameters<pg.Pool['connect']>[0]): Promise<pg.PoolClient> | void {
    // A single query of the pool takes its client by callback; only transactions break.
    return callback ? super.connect(callback) : this.breaking()
  }

  private async breaking(): Promise<pg.PoolClient> {
    const client = await super.connect() as pg.PoolClient & { whole?: pg.PoolClient['query'] }
    const whole = client.whole ??= client.query.bind(client) as pg.PoolClient['query']
    client.query = ((...args: unknown[]) => {
      if (this.at?.(String(args[0]), (args[1] ?? []) as unknown[])) {
        this.at = null
        this.broke++
        return Promise.reject(Object.assign(new Error('the process was killed here'), { code: 'KILLED' }))
      }
      return (whole as (...args: unknown[]) => unknown)(...args)
    }) as pg.PoolClient['query']
    return client
  }
}

const STATES = ['built', 'signed', 'logged', 'sealed'] as const
const advancing = (to: string) => (text: string, values: unknown[]) => text.startsWith('update record set sealing') && values[1] === to
/** The first commit after that update was let through: the transaction is lost whole. */
const committing = (to: string) => {
  let seen = false
  return (text: string, values: unknown[]) => {
    if (advancing(to)(text, values)) seen = true
    return seen && text === 'commit'
  }
}
/** The first look at the row after that commit: what was done stands, and nobody went on. */
const after = (to: string) => {
  let [seen, committed] = [false, false]
  return (text: string, values: unknown[]) => {
    if (advancing(to)(text, values)) seen = true
    if (committed && /^begin/.test(text)) return true
    if (seen && text === 'commit') committed = true
    return false
  }
}
const stateOf = async (id: string) => (await scene.admin.query<{ sealing: string, trouble: string | null, leaf: string | null, file_digest: string | null }>('select sealing, trouble, leaf, file_digest from record where id = $1', [id])).rows[0]!
const leavesOf = async (id: string) => (await scene.admin.query<{ n: number }>(`select count(*)::int as n from log_leaf where kind = 'record' and record_id = $1`, [id])).rows[0]!.n

const manager = () => scene.one.as('manager') as ReturnType<SealingScene['one']['as']> & { organisationId: string }
/** The inspector's signature with a payload as only a foreign or broken program writes it. */
async function signatureWire(side: SealingScene['one'], more: Partial<PayloadOf<'signature'>>, replaces: string[] = []) {
  const { rows: [round] } = await scene.admin.query<{ id: string, basis: string }>('select id, basis from round where job_id = $1', [side.jobId])
  const author = side.accounts.inspector
  const payload: Omit<PayloadOf<'signature'>, 'salt'> = { state: 'signed', meaning: 'present', signer: { account: author, name: 'Nonsense' }, role: 'inspector', known: 'ownAccount', presence: null, sheet: null, sheetDigest: null, strokes: null, typed: 'N', ...more }
  return { round: round!.id, wire: makeEntry({ kind: 'signature', id: uuidv7(), salt: '0'.repeat(32), madeAt: '2026-11-30T09:00:00-05:00', organisation: side.id, job: side.jobId, round: round!.id, author, device: uuidv7(), replaces, payload }).wire }
}

describe('sealing', { timeout: 240_000 }, () => {
  it('refuses a signature over what is no sheet of the round when it comes, and asks one that is kept to sign again', async () => {
    const { one } = scene
    await drawLineOf(one)
    await walkAll(one, false)
    const sheet = '{"scope":"final"}'
    for (const wrong of [{ sheet, sheetDigest: sha256Hex(sheet) }, { sheet: 'not even JSON', sheetDigest: sha256Hex(sheet) }, { sheet: null, sheetDigest: null }]) {
      const wire = await signatureWire(one, wrong)
      expect(await acceptEntries(one.as('inspector'), wire.round, [wire.wire])).toMatchObject({ results: [{ state: 'refused', refusal: { code: 'sheet', pointer: '/payload/sheet' } }] })
    }
    await expect(requestSealing(manager(), one.jobId, { id: randomUUID(), scope: 'final', overDevices: null })).rejects.toMatchObject({ code: 'notReady' })
    // As an earlier program took it in.
    const { wire, round } = await signatureWire(one, { sheet, sheetDigest: sha256Hex(sheet) })
    await withSession(one.as('manager'), async (tx) => {
      const locked = (await lockRound(tx, round))!
      const read = readEntry(wire)
      if (read.state === 'refused') throw new Error(read.refusal.message)
      await storeEntries(tx, round, locked.accepted + 1, [{ entry: { ...read.entry, number: locked.accepted + 1 }, wire }])
    })
    await expect(requestSealing(manager(), one.jobId, { id: randomUUID(), scope: 'final', overDevices: null })).rejects.toMatchObject({ code: 'notReady' })
    await expect(signAndRequest(one, 'final')).rejects.toMatchObject({ code: 'stale', message: expect.stringContaining('Nonsense') as string })
    // Nobody can take it back but its signer, who signs again.
    const { rows: [bad] } = await scene.admin.query<{ id: string }>(`select id from entry where kind = 'signature' order by number limit 1`)
    const absent = await signatureWire(one, { state: 'absent', sheet: null, sheetDigest: null, typed: null }, [bad!.id])
    expect((await acceptEntries(one.as('inspector'), absent.round, [absent.wire])).results[0]!.state).toBe('accepted')
  })

  it('that is killed before, within and after each of its steps ends sealed, signed once and entered once', async () => {
    const { one } = scene
    const id = await signAndRequest(one, 'final')
    const pool = new BreakingPool({ connectionString: scene.database.appUrl, max: 6 })
    setPool(pool)
    const signed = new Set<string>()
    let reached = 0
    for (const to of STATES) {
      for (const kill of [advancing, committing, after]) {
        pool.at = kill(to)
        await sealRecord(one.id, id).catch(() => undefined)
        pool.at = null
        const now = await stateOf(id)
        const at = ['frozen', ...STATES].indexOf(now.sealing)
        expect(at, `${to}: the row never goes back`).toBeGreaterThanOrEqual(reached)
        expect(at, `${to}: the row stands where the last commit left it`).toBe(STATES.indexOf(to) + (kill === after ? 1 : 0))
        reached = at
        const bytes = digestOfFile(scene, `sealing/${one.id}/${id}.pdf`)
        if (bytes) signed.add(bytes)
        expect(await leavesOf(id)).toBe(at >= 3 ? 1 : 0)
      }
    }
    // The last kill came after the last commit: nothing is left to be done, and doing it again does nothing.
    expect(pool.broke).toBeGreaterThanOrEqual(11)
    await sealRecord(one.id, id)
    const done = await stateOf(id)
    expect(done).toMatchObject({ sealing: 'sealed', trouble: null })
    // ECDSA signatures are random: signing twice would have left other bytes.
    expect([...signed]).toEqual([done.file_digest])
    expect(await leavesOf(id)).toBe(1)
    const whole = new pg.Pool({ connectionString: scene.database.appUrl, max: 6 })
    setPool(whole)
    pools.push(pool, whole)
    for (const one of pools) one.on('error', () => undefined)
  })

  it('by two workers at once is done by one of them', async () => {
    const { other } = scene
    await drawLineOf(other)
    await walkAll(other, false)
    const id = await signAndRequest(other, 'final')
    await Promise.all([sealRecord(other.id, id), sealRecord(other.id, id), sealRecord(other.id, id)])
    await expect.poll(async () => (await stateOf(id)).sealing, { timeout: 60_000 }).toBe('sealed')
    expect(await leavesOf(id)).toBe(1)
    expect((await stateOf(id)).file_digest).toBe(digestOfFile(scene, `sealing/${other.id}/${id}.pdf`))
  })

  it('gives a file that outside tools read: whole, with its data in it, signed over all of it', async () => {
    const { rows: [record] } = await scene.admin.query<{ id: string, code: string, document_digest: string }>('select id, code, document_digest from record where organisation_id = $1', [scene.one.id])
    const { bytes, name } = await readRecordFile(scene.one.as('manager'), record!.id)
    expect(name).toBe(`${record!.code}-final.pdf`)
    const path = folder.put('record.pdf', bytes)
    expect(run('qpdf', '--check', path)).toContain('No syntax or stream encoding errors found')
    const text = run('pdftotext', path, '-').replace(/\s+/g, ' ')
    expect(text).toContain(record!.code)
    expect(text).toContain('Ivo Sand')
    run('pdfdetach', '-save', '1', '-o', folder.path('record.json'), path)
    const attached = readFileSync(folder.path('record.json'))
    expect(createHash('sha256').update(attached).digest('hex')).toBe(record!.document_digest)
    const signature = run('pdfsig', '-nocert', path)
    expect(signature).toContain('Signature is Valid')
    expect(signature).toContain('Total document signed')
    // What the page shows is that document and no other.
    const page = await readRecord(scene.one.as('manager'), record!.id)
    expect(page.document).toEqual(JSON.parse(attached.toString('utf8')))
    expect(readFileSync(join(scene.folder, 'files', 'record', scene.one.id, `${record!.document_digest}.json`)).equals(attached)).toBe(true)
  })

  it('keeps a record from the other contractor as if it were not there', async () => {
    const { rows: [record] } = await scene.admin.query<{ id: string }>('select id from record where organisation_id = $1', [scene.one.id])
    for (const ask of [readRecord, readRecordFile]) await expect(ask(scene.other.as('manager'), record!.id)).rejects.toMatchObject({ code: 'notFound' })
    // Not sent to the client either, so not there for them.
    for (const ask of [readRecord, readRecordFile]) await expect(ask(scene.one.as('client'), record!.id)).rejects.toMatchObject({ code: 'notFound' })
  })
})
