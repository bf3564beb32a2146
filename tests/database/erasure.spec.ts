import { randomUUID } from 'node:crypto'
import { existsSync } from 'node:fs'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { readEntry } from '#shared/entry/readEntry'
import { sha256Hex } from '#shared/record/canonicalJson'
import { readOutcome } from '../../server/database/queries/state'
import { withSession } from '../../server/database/withSession'
import { acceptEntries } from '../../server/services/entry/acceptEntries'
import { pullEntries } from '../../server/services/entry/pullEntries'
import { askErasure, withdrawErasure } from '../../server/services/erasure/askErasure'
import { doErasure } from '../../server/services/erasure/doErasure'
import { readErasable } from '../../server/services/erasure/readErasable'
import { setHold } from '../../server/services/erasure/setHold'
import { readPhoto } from '../../server/services/photo/readPhoto'
import { storePhoto } from '../../server/services/photo/storePhoto'
import { readRecordFile, readRecordPhoto } from '../../server/services/record/readRecord'
import { sealRecord } from '../../server/services/record/sealRecord'
import { drawLineOf, makeSealingScene, signAndRequest, walkAll, type SealingScene } from '../helpers/signedRound'
import { run, testFolder } from '../helpers/outsideTools'
import { finalPhoto } from '../helpers/routeTable'
import { makeEntry } from '#shared/entry/makeEntry'

const folder = testFolder()
let scene: SealingScene
let round: string
let note: string
let photo: { bytes: Buffer, digest: string }
const as = (role: 'manager' | 'administrator' | 'inspector') => scene.one.as(role) as ReturnType<SealingScene['one']['as']> & { organisationId: string }
const ask = (of: { entryId?: string, photo?: string }, id: string = randomUUID(), who = as('manager')) => askErasure(who, scene.one.jobId, { id, entryId: null, photo: null, reason: 'The parents asked.', ...of })
const rowOf = async (id: string) => (await scene.admin.query<{ number: number, digest: string, envelope_text: string, payload_text: string | null }>('select number, digest, envelope_text, payload_text from entry where id = $1', [id])).rows[0]!

beforeAll(async () => {
  scene = await makeSealingScene()
  await drawLineOf(scene.one)
  await walkAll(scene.one, false)
  round = (await scene.admin.query<{ id: string }>('select id from round where job_id = $1', [scene.one.jobId])).rows[0]!.id
  photo = await finalPhoto()
  await storePhoto(as('inspector'), scene.one.jobId, photo.digest, photo.bytes)
  note = randomUUID()
  const { wire } = makeEntry({
    kind: 'note', id: note, salt: '2'.repeat(32), madeAt: '2026-11-30T15:00:00-05:00', organisation: scene.one.id, job: scene.one.jobId, round, author: as('inspector').accountId, device: randomUUID(),
    payload: { words: 'Little Ada stood at the gate.', photos: [{ digest: photo.digest, width: 64, height: 48, taken: { digest: 'b'.repeat(64), at: null, origin: 'camera' } }] },
  })
  expect((await acceptEntries(as('inspector'), round, [wire])).results[0]!.state).toBe('accepted')
}, 120_000)
afterAll(async () => {
  folder.remove()
  await scene.end()
})

describe('erasing', { timeout: 120_000 }, () => {
  it('lists what names somebody or says something, and every picture once', async () => {
    const page = await readErasable(as('manager'), scene.one.jobId)
    expect(page.entries.find(entry => entry.id === note)).toMatchObject({ kind: 'note', words: 'Little Ada stood at the gate.', erased: false })
    expect(page.pictures).toMatchObject([{ digest: photo.digest, erased: false }])
    await expect(readErasable(scene.other.as('manager') as never, scene.one.jobId)).rejects.toMatchObject({ code: 'notFound' })
  })

  it('is not done by whoever asked, nor by the field, nor by another organisation', async () => {
    const id = randomUUID()
    await ask({ entryId: note }, id)
    await ask({ entryId: note }, id)
    await expect(ask({ photo: photo.digest }, id)).rejects.toMatchObject({ code: 'differs' })
    await expect(ask({ entryId: randomUUID() })).rejects.toMatchObject({ code: 'notFound' })
    await expect(doErasure(as('manager'), id)).rejects.toMatchObject({ code: 'notAllowed' })
    await expect(doErasure(as('inspector'), id)).rejects.toMatchObject({ code: 'notAllowed' })
    await expect(doErasure(scene.other.as('administrator') as never, id)).rejects.toMatchObject({ code: 'notFound' })
    await withdrawErasure(as('administrator'), id)
    await expect(doErasure(as('administrator'), id)).rejects.toMatchObject({ code: 'notFound' })
    expect((await rowOf(note)).payload_text).toContain('Ada')
  })

  it('waits while a hold stands on the job, to ask and to do', async () => {
    const id = randomUUID()
    await ask({ entryId: note }, id)
    await setHold(as('manager'), scene.one.jobId, 'A claim was made on 3 Mar.')
    await setHold(as('manager'), scene.one.jobId, 'Again.')
    expect((await readErasable(as('manager'), scene.one.jobId)).hold).toMatchObject({ reason: 'A claim was made on 3 Mar.' })
    await expect(ask({ photo: photo.digest })).rejects.toMatchObject({ code: 'conflict' })
    await expect(doErasure(as('administrator'), id)).rejects.toMatchObject({ code: 'conflict', message: expect.stringContaining('hold') as string })
    await setHold(as('administrator'), scene.one.jobId, null)
    await withdrawErasure(as('manager'), id)
  })

  it('by a second person leaves envelope, digest and number, and the devices pull the gap', async () => {
    const before = await rowOf(note)
    const kept = (await withSession(as('manager'), tx => readOutcome(tx, round)))!
    const { accepted } = (await pullEntries(as('inspector'), round, 0)).round
    const id = randomUUID()
    await ask({ entryId: note }, id)
    await doErasure(as('administrator'), id)
    await doErasure(as('administrator'), id)
    expect(await rowOf(note)).toEqual({ ...before, payload_text: null })
    expect(sha256Hex(before.envelope_text)).toBe(before.digest)
    // A device that had it, and one that comes new.
    expect((await pullEntries(as('inspector'), round, accepted)).entries).toEqual([{ number: before.number, envelope: before.envelope_text, payload: '' }])
    const whole = (await pullEntries(as('inspector'), round, 0)).entries
    expect(whole.map(one => one.number)).toEqual(Array.from({ length: accepted }, (_, at) => at + 1))
    expect(readEntry(whole[before.number - 1]!, { mayBeErased: true })).toMatchObject({ state: 'known', entry: { payload: null, digest: before.digest } })
    const now = (await withSession(as('manager'), tx => readOutcome(tx, round)))!
    expect({ ...now, erased: [] }).toEqual({ ...kept, erased: [] })
    expect((await readErasable(as('manager'), scene.one.jobId)).entries.find(entry => entry.id === note)).toMatchObject({ erased: true, words: null, names: [] })
    expect((await scene.admin.query(`select account_id from audit_row where act = 'erased'`)).rows).toEqual([{ account_id: as('administrator').accountId }])
  })

  it('cannot be done around the two people: nothing else of an entry changes, whoever tries', async () => {
    for (const text of [`update entry set payload_text = null where id = '${note}'`, `update entry set number = 900 where id = '${note}'`, `select set_config('app.redacting', '${note}', true); update entry set kind = 'x' where id = '${note}'`, `update erasure set done_at = now()`, `update photo set erased_at = now()`])
      await expect(withSession(as('administrator'), tx => tx.client.query(text)), text).rejects.toMatchObject({ code: '42501' })
    await expect(scene.admin.query(`begin; select set_config('app.redacting', '${note}', true); update entry set kind = 'x' where id = '${note}'`)).rejects.toMatchObject({ code: '42501' })
    await scene.admin.query('rollback')
  })

  it('of a picture takes its files away, and it does not come back with a device that still holds it', async () => {
    const id = randomUUID()
    await ask({ photo: photo.digest }, id)
    await doErasure(as('administrator'), id)
    await expect(readPhoto(as('manager'), photo.digest, false)).rejects.toMatchObject({ code: 'notFound' })
    expect(await storePhoto(as('inspector'), scene.one.jobId, photo.digest, photo.bytes)).toMatchObject({ digest: photo.digest })
    for (const room of ['photo', 'thumbnail']) expect(existsSync(join(scene.folder, 'files', room, scene.one.id, `${photo.digest}.jpg`))).toBe(false)
  })

  it('does not stop a record, which shows the gap', async () => {
    const shown = await finalPhoto(80)
    await storePhoto(as('inspector'), scene.one.jobId, shown.digest, shown.bytes)
    const { wire } = makeEntry({
      kind: 'note', id: randomUUID(), salt: '3'.repeat(32), madeAt: '2026-11-30T15:10:00-05:00', organisation: scene.one.id, job: scene.one.jobId, round, author: as('inspector').accountId, device: randomUUID(),
      payload: { words: 'The gate from the yard.', photos: [{ digest: shown.digest, width: 80, height: 48, taken: { digest: 'c'.repeat(64), at: null, origin: 'camera' } }] },
    })
    await acceptEntries(as('inspector'), round, [wire])
    const id = randomUUID()
    await ask({ photo: shown.digest }, id)
    await doErasure(as('administrator'), id)
    const record = await signAndRequest(scene.one, 'final')
    await sealRecord(scene.one.id, record)
    const { bytes } = await readRecordFile(as('manager'), record)
    const text = run('pdftotext', folder.put('record.pdf', bytes), '-').replace(/\s+/g, ' ')
    expect(text).toContain('This photo was erased')
    expect(text).toContain('the words of 1 of these entries')
    await expect(readRecordPhoto(as('manager'), record, shown.digest)).rejects.toMatchObject({ code: 'erased' })
    expect((await readErasable(as('manager'), scene.one.jobId)).shownIn[shown.digest]).toHaveLength(1)
  })
})
