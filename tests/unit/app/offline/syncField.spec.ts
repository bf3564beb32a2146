import 'fake-indexeddb/auto'
import { IDBFactory } from 'fake-indexeddb'
import fc from 'fast-check'
import { beforeEach, describe, expect, it } from 'vitest'
import Dexie from 'dexie'
import { FieldDatabase } from '~/offline/fieldDatabase'
import { keepBundle, keepPhoto, offerAgain, takeBackEntries, tallyOf, writeEntry } from '~/offline/fieldStore'
import { syncOnce } from '~/offline/syncField'
import { sha256Hex } from '#shared/record/canonicalJson'
import { Died, JOB, makeRow, type Mishap, OTHER, ROUND, TestServer, WHO } from './testServer'

let server: TestServer
let db: FieldDatabase
const open = () => new FieldDatabase(WHO.accountId, WHO.organisationId)
const sync = () => syncOnce({ db, wire: server.wire, who: WHO, now: () => 1000, changed: () => {} })
const write = async (more: Parameters<typeof makeRow>[0] = {}) => {
  const row = makeRow(more)
  await writeEntry(db, row, { tags: 0 })
  return row
}
const rowOf = async (id: string) => (await db.entries.where('id').equals(id).first())!

async function fresh() {
  Dexie.dependencies.indexedDB = new IDBFactory()
  server = new TestServer()
  db = open()
  await keepBundle(db, server.bundle(), 0)
}
beforeEach(fresh)

describe('a run', () => {
  it('sends what waits in the order in which it was written, fetches what others wrote, and tells that the device is empty', async () => {
    const [first, second] = [await write(), await write()]
    server.accept(makeRow({ author: OTHER }))
    expect(await sync()).toEqual({ state: 'done' })
    expect(server.pushes[0]).toEqual([first.id, second.id])
    expect((await db.entries.toArray()).map(row => [row.state, row.number])).toEqual([['sent', 2], ['sent', 3], ['sent', 1]])
    expect(server.empty).toBe(true)
    expect(await tallyOf(db, JOB)).toEqual({ waiting: 0, heldBack: 0, sentAt: 1000 })
  })
  it('tells that a device is empty which only took the job along', async () => {
    await sync()
    expect(server.empty).toBe(true)
    server.pushes = []
    await sync()
    expect(server.pushes).toEqual([])
  })
  it('offers a photo before the entry that names it, and never one that nothing names', async () => {
    const [named, unnamed] = [sha256Hex('named'), sha256Hex('unnamed')]
    for (const digest of [named, unnamed]) await keepPhoto(db, { digest, jobId: JOB, bytes: new Uint8Array(3), writtenAt: 0 })
    await write({ photos: [named] })
    await sync()
    expect(server.missingPhotos).toEqual([])
    expect([...server.photos]).toEqual([named])
  })
  it('lets danger go ahead of everything, with its reading and nothing else', async () => {
    const ahead = await write()
    const reading = await write({ kind: 'reading', check: 'gate-latch', payload: { value: { method: 'look', found: 'finding', finding: 'other' }, photos: [] } })
    const danger = await write({ kind: 'dangerNow', check: 'gate-latch', answers: [reading.id], payload: { done: 'closed', told: { account: null, name: 'Caretaker' }, toldAt: '2026-12-01T09:00:00.000-05:00', photos: [] } })
    await sync()
    expect(server.pushes.slice(0, 2)).toEqual([[reading.id, danger.id], [ahead.id]])
  })
  it('keeps an entry that the server refuses, tells why, stops offering it, and offers it again when a person asks', async () => {
    const bad = await write()
    const good = await write()
    server.refuse = id => id === bad.id ? { code: 'target', pointer: '/envelope/answers/0', message: 'no' } : null
    await sync()
    expect(await rowOf(bad.id)).toMatchObject({ state: 'heldBack', refusal: { code: 'target', message: 'no' } })
    expect((await rowOf(good.id)).state).toBe('sent')
    expect(server.empty).toBe(false)
    server.pushes = []
    await sync()
    expect(server.pushes.flat()).toEqual([])
    server.refuse = () => null
    await offerAgain(db, JOB)
    await sync()
    expect((await rowOf(bad.id)).state).toBe('sent')
    expect(server.empty).toBe(true)
  })
  it('finds the one entry that a whole push is refused for', async () => {
    const rows = [await write(), await write(), await write(), await write(), await write()]
    server.tooLarge = ids => ids.includes(rows[3]!.id)
    await sync()
    expect(await Promise.all(rows.map(async row => (await rowOf(row.id)).state))).toEqual(['sent', 'sent', 'sent', 'heldBack', 'sent'])
  })
  it('offers again what was held for want of what another wrote, once that is here', async () => {
    const theirs = makeRow({ author: OTHER })
    const answer = await write({ answers: [theirs.id] })
    await sync()
    expect((await rowOf(answer.id)).state).toBe('held')
    expect((await tallyOf(db, JOB)).waiting).toBe(1)
    server.accept(theirs)
    await sync()
    expect(await rowOf(answer.id)).toMatchObject({ state: 'sent', number: 2 })
  })
  it('sends nothing as somebody else, and holds nothing against the entries', async () => {
    await write()
    server.me = { ...server.me!, account: { ...server.me!.account, id: OTHER } }
    expect(await sync()).toEqual({ state: 'pause', why: 'otherPerson' })
    server.me = null
    expect(await sync()).toEqual({ state: 'pause', why: 'signIn' })
    expect(server.pushes).toEqual([])
    expect((await tallyOf(db, JOB)).waiting).toBe(1)
  })
  it('offers everything of this person again to a store that was brought back, and pulls it from the start', async () => {
    const rows = [await write(), await write()]
    server.accept(makeRow({ author: OTHER }))
    await sync()
    server.entries.clear()
    server.photos.clear()
    server.epoch = 'epoch 2'
    await sync()
    await sync()
    expect([...server.entries.keys()].sort()).toEqual(rows.map(row => row.id).sort())
    expect((await db.rounds.get(ROUND))!.storeEpoch).toBe('epoch 2')
    // What the other one wrote stays here, without a number until the store has it again.
    expect((await db.entries.filter(row => row.own === 0).toArray()).map(row => row.number)).toEqual([null])
  })
})

/** Any interleaving of writing, taking back, sending, losing signal and dying: what a person wrote is at the server exactly once, or still here. */
describe('nothing is lost and nothing is doubled', () => {
  type Step = { do: 'write', photo: boolean, answersOwn: boolean, answersTheirs: boolean } | { do: 'takeBack' } | { do: 'theirs' } | { do: 'sync', mishaps: Mishap[] } | { do: 'restore', keep: number }
  const mishap = fc.constantFrom<Mishap>('none', 'none', 'none', 'lost', 'answerLost', 'diesBefore', 'diesAfter', 'status503', 'status401', 'writesMeanwhile')
  const step: fc.Arbitrary<Step> = fc.oneof(
    { weight: 5, arbitrary: fc.record({ do: fc.constant('write' as const), photo: fc.boolean(), answersOwn: fc.boolean(), answersTheirs: fc.boolean() }) },
    { weight: 2, arbitrary: fc.constant({ do: 'takeBack' as const }) },
    { weight: 1, arbitrary: fc.constant({ do: 'theirs' as const }) },
    { weight: 4, arbitrary: fc.record({ do: fc.constant('sync' as const), mishaps: fc.array(mishap, { maxLength: 6 }) }) },
    { weight: 1, arbitrary: fc.record({ do: fc.constant('restore' as const), keep: fc.nat(6) }) },
  )

  it('whatever happens, in whatever order', async () => {
    await fc.assert(fc.asyncProperty(fc.array(step, { maxLength: 14 }), async (steps) => {
      await fresh()
      const written = new Map<string, { envelope: string, payload: string }>()
      const theirs: ReturnType<typeof makeRow>[] = []
      const takenBack: string[] = []
      let photos = 0
      const writeOne = async (more: Parameters<typeof makeRow>[0] = {}) => {
        const row = await write(more)
        written.set(row.id, { envelope: row.envelope, payload: row.payload })
      }
      server.meanwhile = () => writeOne()
      const run = async (mishaps: Mishap[]) => {
        server.mishaps = [...mishaps]
        await sync().catch(async (error) => {
          if (!(error instanceof Died)) throw error
          // The program was killed: a new one opens what is on the disk.
          db.close()
          db = open()
        })
        server.mishaps = []
        const round = await db.rounds.get(ROUND)
        if (round!.toldEmpty) expect((await tallyOf(db, JOB)).waiting).toBe(0)
      }
      for (const one of steps) {
        if (one.do === 'write') {
          const digest = sha256Hex(`photo ${photos++}`)
          if (one.photo) await keepPhoto(db, { digest, jobId: JOB, bytes: new Uint8Array(1), writtenAt: 0 })
          const answers = [...one.answersOwn ? [...written.keys()].slice(-1) : [], ...one.answersTheirs && theirs.length ? [theirs.at(-1)!.id] : []]
          await writeOne({ photos: one.photo ? [digest] : [], answers })
        }
        else if (one.do === 'takeBack') {
          const last = [...written.keys()].at(-1)
          if (last && await takeBackEntries(db, JOB, [last])) {
            written.delete(last)
            takenBack.push(last)
          }
        }
        else if (one.do === 'theirs') {
          theirs.push(makeRow({ author: OTHER }))
          server.accept(theirs.at(-1)!)
        }
        else if (one.do === 'sync') await run(one.mishaps)
        else {
          // A backup knows what it knew then; what other devices hold they offer again themselves.
          const kept = [...server.entries.values()].slice(0, one.keep)
          server.entries = new Map()
          server.held = new Map()
          server.epoch += '+'
          for (const wire of kept) server.accept(wire)
          for (const wire of theirs) if (!server.entries.has(wire.id)) server.accept(wire)
        }
      }
      for (let n = 0; n < 3; n++) await run([])
      expect(server.missingPhotos).toEqual([])
      const mine = [...server.entries.entries()].filter(([id]) => !theirs.some(one => one.id === id))
      expect(new Map(mine.map(([id, { envelope, payload }]) => [id, { envelope, payload }]))).toEqual(written)
      for (const id of takenBack) expect(server.entries.has(id)).toBe(false)
      const rows = await db.entries.toArray()
      expect(rows.length).toBe(new Set(rows.map(row => row.id)).size)
      expect(new Map(rows.map(row => [row.id, row.number]))).toEqual(new Map([...server.entries].map(([id, { number }]) => [id, number])))
      expect(rows.every(row => row.state === 'sent')).toBe(true)
      expect(server.empty).toBe(true)
    }), { numRuns: 80 })
  }, 180_000)
})
