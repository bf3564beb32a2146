import { createHash, randomBytes } from 'node:crypto'
import fs from 'node:fs'
import os from 'node:os'
import path from 'node:path'
import sharp from 'sharp'
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest'
import { canonicalJson } from '#shared/record/canonicalJson'
import { readEntry } from '#shared/entry/readEntry'
import { fold } from '#shared/round/fold'
import type { PullAnswer, PushAnswer } from '#shared/sync/sync'
import { PULL_MOST } from '#shared/sync/sync'
import { makeCluster, startCluster, stopCluster } from '../../scripts/lib/cluster.mjs'
import { databaseUrl } from '../../scripts/lib/migration.mjs'
import type { StoryAt } from '../helpers/roundAt'
import { bay, gap, RUN } from '../helpers/roundStory'
import { startServer } from '../helpers/server'
import { layStoryGround, type StoryGround } from '../helpers/storyGround'
import type { Answer, Visitor } from '../helpers/visitor'

vi.setConfig({ testTimeout: 180_000 })
const pause = (milliseconds: number) => new Promise(resolve => setTimeout(resolve, milliseconds))

// A cluster of this file's own, as durable as a real one: the shared one of the tests forgets on purpose, and others use it.
const folder = fs.mkdtempSync(path.join(os.tmpdir(), 'smoothside-crash-'))
const cluster = path.join(folder, 'postgres')
const password = randomBytes(16).toString('hex')
let port: number
let story: StoryGround
beforeAll(async () => {
  fs.chmodSync(folder, 0o711)
  makeCluster(cluster, password)
  port = await startCluster(cluster)
  process.env.TEST_PG_URL = databaseUrl({ port, user: 'postgres', password, database: 'postgres' })
  story = await layStoryGround()
}, 180_000)
afterAll(async () => {
  await story.end()
  stopCluster(cluster)
  fs.rmSync(folder, { recursive: true, force: true })
})

/** What a device knows to be kept. */
interface Acknowledged { entries: Map<string, number>, photos: Map<string, Buffer> }

/** A device that offers its entries and photos again and again until all are taken, as the outbox does; what is refused for good is a fault. */
async function device(who: Visitor, round: StoryAt, wires: { envelope: string, payload: string }[], photos: Buffer[], known: Acknowledged, told: number[]): Promise<void> {
  const until = async (work: () => Promise<Answer>): Promise<Answer> => {
    for (;;) {
      const answer = await work().catch(() => null)
      if (answer) told.push(answer.status)
      if (answer && answer.status < 500) return answer
      await pause(60)
    }
  }
  const id = '019a0005-0000-7000-8000-00000000000a'
  for (let at = 0; at < wires.length; at += 5) {
    const part = wires.slice(at, at + 5)
    const answer = await until(() => who.send('POST', `/api/field/v1/rounds/${round.round}/entries`, { device: id, entries: part, empty: false }))
    if (answer.status !== 200) throw new Error(`a push was refused: ${answer.bytes.toString()}`)
    for (const one of (answer.json as PushAnswer).results) known.entries.set(one.id!, one.number!)
    const photo = photos[at / 5]
    if (!photo) continue
    const digest = createHash('sha256').update(photo).digest('hex')
    const put = await until(() => who.send('PUT', `/api/field/v1/jobs/${round.job}/photos/${digest}`, new Uint8Array(photo), { 'content-type': 'image/jpeg' }))
    if (put.status !== 200) throw new Error(`a photo was refused: ${put.bytes.toString()}`)
    known.photos.set(digest, photo)
  }
}

const picture = () => sharp(randomBytes(320 * 240 * 3), { raw: { width: 320, height: 240, channels: 3 } }).jpeg().toBuffer()

async function expectAllThere(who: Visitor, round: StoryAt, known: Acknowledged): Promise<void> {
  const { entries } = (await who.send('GET', `/api/field/v1/rounds/${round.round}/entries`)).json as PullAnswer
  expect(entries.length).toBeLessThan(PULL_MOST)
  expect(entries.map(one => one.number)).toEqual(entries.map((_, at) => at + 1))
  const numbers = new Map(entries.map(one => [(JSON.parse(one.envelope) as { id: string }).id, one.number]))
  for (const [id, number] of known.entries) expect(numbers.get(id), id).toBe(number)
  for (const [digest, bytes] of known.photos) expect((await who.send('GET', `/api/photos/${digest}`)).bytes.equals(bytes), digest).toBe(true)
  const fresh = fold(entries.map((one) => { const read = readEntry(one, { number: one.number }); if (read.state === 'refused') throw new Error(read.refusal.message); return read.entry }), round.bases, { basis: round.basis })
  const { rows } = await story.admin.query(`select s.outcome || jsonb_build_object('checks', (select jsonb_agg(c.outcome order by c.at) from check_state c where c.round_id = s.round_id)) as outcome, s.accepted, r.accepted as "of" from round_state s join round r on r.id = s.round_id where r.id = $1`, [round.round])
  expect(rows[0].accepted).toBe(rows[0].of)
  expect(canonicalJson(rows[0].outcome)).toBe(canonicalJson(JSON.parse(JSON.stringify(fresh))))
}

/** Four devices at work while `harm` is done three times; then all that was acknowledged has to be there. */
async function workThrough(harm: (known: Acknowledged, told: number[]) => Promise<void>): Promise<number[]> {
  const round = await story.newRound()
  for (let at = 0; at < 240; at++) round.reading({ element: RUN, check: 'gap-below', place: bay(at % 4 + 1, at % 11) }, gap(at % 9 === 0 ? 3 : 1))
  const wires = round.wires()
  const photos = await Promise.all(Array.from({ length: 12 }, picture))
  const known: Acknowledged = { entries: new Map(), photos: new Map() }
  const told: number[] = []
  const ana = await story.signedIn('ana')
  const devices = Promise.all(Array.from({ length: 4 }, (_, at) => device(ana.twin(), round, wires.slice(at * 60, at * 60 + 60), photos.slice(at * 3, at * 3 + 3), known, told)))
  const harms: number[] = []
  for (let times = 0; times < 3; times++) {
    const from = known.entries.size
    while (known.entries.size < Math.min(from + 25, 200)) await pause(5)
    harms.push(known.entries.size)
    await harm(known, told)
  }
  await devices
  // It was in the middle of the work each time, or this would prove nothing.
  expect(harms.every(size => size < wires.length)).toBe(true)
  expect([known.entries.size, known.photos.size]).toEqual([wires.length, photos.length])
  await expectAllThere(ana, round, known)
  return told
}

describe('what was acknowledged', () => {
  it('outlives a server that is killed among pushes and photos', async () => {
    await workThrough(async () => {
      await story.server.kill()
      story.server = await startServer({ ground: story.ground })
    })
  })

  it('outlives a database that is killed; meanwhile devices are told 503 and nothing else', async () => {
    const told = await workThrough(async (_, told) => {
      const [pid] = fs.readFileSync(path.join(cluster, 'postmaster.pid'), 'utf8').split('\n')
      process.kill(Number(pid), 'SIGKILL')
      const until = told.length + 4
      for (let wait = 0; told.length < until && wait < 400; wait++) await pause(50)
      for (let tries = 0; ; tries++) {
        // The backends of the killed one take a moment to see it.
        try { await startCluster(cluster, { port }); break }
        catch (error) { if (tries > 20) throw error }
        await pause(250)
      }
    })
    expect(new Set(told)).toEqual(new Set([200, 503]))
  })

  it('is told as a problem that a device may try again, without a word of the inside', async () => {
    const ana = await story.signedIn('ana')
    stopCluster(cluster)
    try {
      const answer = await ana.send('GET', '/api/jobs')
      expect(answer).toMatchObject({ status: 503, type: 'application/problem+json', json: { type: '/problems/unavailable', status: 503 } })
      expect(answer.bytes.toString()).not.toMatch(/ECONNREFUSED|127\.0\.0\.1|terminat|pg/i)
      expect((await ana.send('GET', '/health/ready')).status).toBe(503)
      expect((await ana.send('GET', '/health/live')).status).toBe(200)
    }
    finally { await startCluster(cluster, { port }) }
    expect((await ana.send('GET', '/api/jobs')).status).toBe(200)
  })
})
