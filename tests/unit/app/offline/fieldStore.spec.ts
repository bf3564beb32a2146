import 'fake-indexeddb/auto'
import { IDBFactory } from 'fake-indexeddb'
import Dexie from 'dexie'
import { beforeEach, describe, expect, it } from 'vitest'
import { FieldDatabase } from '~/offline/fieldDatabase'
import { forgetOld, keepBundle, keepPhoto, keepPulled, letGo, offerRows, spendTag, takeBackEntries, tallyOf, writeEntry } from '~/offline/fieldStore'
import { RowReader } from '~/offline/readRow'
import { JOB, makeRow, OTHER, ROUND, TestServer, WHO } from './testServer'

const DAY = 24 * 3600_000
let db: FieldDatabase
let server: TestServer
beforeEach(async () => {
  Dexie.dependencies.indexedDB = new IDBFactory()
  db = new FieldDatabase(WHO.accountId, WHO.organisationId)
  server = new TestServer()
  await keepBundle(db, server.bundle(), 0)
})
const write = async (more: Parameters<typeof makeRow>[0] = {}) => {
  const row = makeRow(more)
  const seq = await writeEntry(db, row, { tags: 0 })
  return { ...row, seq }
}
const pulled = (...entries: { number: number, envelope: string, payload: string }[]) => ({ storeEpoch: server.epoch, round: server.bundle().round, entries, more: false })
const rowOf = async (id: string) => (await db.entries.where('id').equals(id).first())!

describe('taking back', () => {
  it('takes all of them, or none where one was on its way already', async () => {
    const [one, two, three] = [await write(), await write(), await write()]
    expect(await takeBackEntries(db, JOB, [two.id, three.id])).toBe(true)
    const four = await write()
    await offerRows(db, [one.seq])
    expect(await takeBackEntries(db, JOB, [one.id, four.id])).toBe(false)
    expect((await db.entries.toArray()).map(row => row.id)).toEqual([one.id, four.id])
  })
  it('leaves what another entry here names, unless that goes too', async () => {
    const one = await write()
    const two = await write({ answers: [one.id] })
    expect(await takeBackEntries(db, JOB, [one.id])).toBe(false)
    expect(await takeBackEntries(db, JOB, [one.id, two.id])).toBe(true)
  })
  it('leaves what others wrote, and what is not here', async () => {
    await keepPulled(db, JOB, pulled({ ...makeRow({ author: OTHER }), number: 1 }), 0)
    const [theirs] = await db.entries.toArray()
    expect(await takeBackEntries(db, JOB, [theirs!.id])).toBe(false)
    expect(await takeBackEntries(db, JOB, ['not here'])).toBe(false)
  })
  it('does not send the photo of what was taken back, unless another entry names it', async () => {
    for (const digest of ['a'.repeat(64), 'b'.repeat(64)]) await keepPhoto(db, { digest, jobId: JOB, bytes: new Uint8Array(1), writtenAt: 0 })
    const both = await write({ photos: ['a'.repeat(64), 'b'.repeat(64)] })
    await write({ photos: ['b'.repeat(64)] })
    await takeBackEntries(db, JOB, [both.id])
    expect((await db.photos.toArray()).map(photo => [photo.digest[0], photo.state])).toEqual([['a', 'unnamed'], ['b', 'waiting']])
  })
  it('is either taken back or offered where both come at once, never both', async () => {
    const one = await write()
    const [offered, takenBack] = await Promise.all([offerRows(db, [one.seq]), takeBackEntries(db, JOB, [one.id])])
    expect(offered.length).toBe(takenBack ? 0 : 1)
    expect(await db.entries.count()).toBe(takenBack ? 0 : 1)
  })
})

describe('what is pulled', () => {
  it('is kept once, however often it comes, and moves the cursor with it', async () => {
    const theirs = { ...makeRow({ author: OTHER }), number: 1 }
    expect(await keepPulled(db, JOB, pulled(theirs), 0)).toBe(1)
    expect(await keepPulled(db, JOB, pulled(theirs), 0)).toBe(0)
    expect(await db.entries.count()).toBe(1)
    expect((await db.rounds.get(ROUND))!.cursor).toBe(1)
  })
  it('tells that the server has ours, though its answer was lost', async () => {
    const mine = await write()
    await keepPulled(db, JOB, pulled({ ...mine, number: 1 }), 0)
    expect(await rowOf(mine.id)).toMatchObject({ state: 'sent', number: 1, own: 1 })
  })
  it('empties our copy of a payload that was erased, and it is read as erased', async () => {
    const mine = await write()
    await keepPulled(db, JOB, pulled({ ...mine, number: 1, payload: '' }), 0)
    const row = await rowOf(mine.id)
    expect(row.payload).toBe('')
    expect(new RowReader().read(row)).toMatchObject({ payload: null, digest: new RowReader().read(mine)!.digest })
  })
  it('keeps both where the server holds another text under our id, and shows it', async () => {
    const mine = await write()
    const other = makeRow({ author: OTHER })
    const envelope = other.envelope.replace(other.id, mine.id)
    await keepPulled(db, JOB, pulled({ number: 1, envelope, payload: other.payload }), 0)
    expect(await rowOf(mine.id)).toMatchObject({ state: 'heldBack', envelope, aside: { envelope: mine.envelope, payload: mine.payload }, refusal: { code: 'quarantined' } })
    expect((await tallyOf(db, JOB)).heldBack).toBe(1)
  })
  it('is kept where a newer program wrote a kind that this one does not know', async () => {
    const other = makeRow({ author: OTHER })
    const envelope = other.envelope.replace('"kind":"note"', '"kind":"smell"')
    await keepPulled(db, JOB, pulled({ number: 1, envelope, payload: other.payload }), 0)
    expect(new RowReader().read(await rowOf(other.id))).toMatchObject({ envelope: { kind: 'smell' }, payloadText: other.payload })
  })
})

describe('the number of a tag', () => {
  it('is spent for good, in whatever order it is told, also by an entry', async () => {
    await Promise.all([spendTag(db, JOB, 4), spendTag(db, JOB, 3)])
    await writeEntry(db, makeRow(), { tags: 2 })
    expect((await db.jobs.get(JOB))!.tags).toBe(4)
    await keepBundle(db, server.bundle(), 5)
    expect((await db.jobs.get(JOB))!.tags).toBe(4)
  })
})

describe('what may leave this device', () => {
  it('is a job of which nothing is only here', async () => {
    const one = await write()
    expect(await letGo(db, JOB)).toBe(false)
    await db.entries.update(one.seq, { state: 'heldBack' })
    expect(await letGo(db, JOB)).toBe(false)
    await db.entries.update(one.seq, { state: 'sent' })
    expect(await letGo(db, JOB)).toBe(true)
    expect([await db.jobs.count(), await db.rounds.count(), await db.entries.count()]).toEqual([0, 0, 0])
  })
  it('is a sealed round after a fortnight, never before, and never with anything unsent', async () => {
    const one = await write()
    await db.entries.update(one.seq, { state: 'sent' })
    await keepPulled(db, JOB, { ...pulled(), round: { ...server.bundle().round, state: 'sealed' } }, 0)
    await forgetOld(db, 14 * DAY)
    expect(await db.entries.count()).toBe(1)
    await db.entries.update(one.seq, { state: 'waiting' })
    await forgetOld(db, 15 * DAY)
    expect(await db.entries.count()).toBe(1)
    await db.entries.update(one.seq, { state: 'sent' })
    await forgetOld(db, 15 * DAY)
    expect([await db.jobs.count(), await db.entries.count()]).toEqual([0, 0])
  })
  it('is a picture that nothing ever named, after two days', async () => {
    await keepPhoto(db, { digest: 'a'.repeat(64), jobId: JOB, bytes: new Uint8Array(1), writtenAt: 0 })
    await forgetOld(db, DAY)
    expect(await db.photos.count()).toBe(1)
    await forgetOld(db, 3 * DAY)
    expect(await db.photos.count()).toBe(0)
  })
})

describe('the device', () => {
  it('has one id for a person and organisation, another for the next person', async () => {
    const ids = await Promise.all([db.deviceId(), db.deviceId(), new FieldDatabase(WHO.accountId, WHO.organisationId).deviceId()])
    expect(new Set(ids).size).toBe(1)
    expect(await new FieldDatabase(OTHER, WHO.organisationId).deviceId()).not.toBe(ids[0])
  })
  it('shows nothing of one person to the next', async () => {
    await write()
    expect(await new FieldDatabase(OTHER, WHO.organisationId).entries.count()).toBe(0)
  })
})
