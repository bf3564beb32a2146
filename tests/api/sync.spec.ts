import { createHash } from 'node:crypto'
import { connect } from 'node:net'
import sharp from 'sharp'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { PullAnswer, PushAnswer } from '#shared/sync/sync'
import { PULL_MOST, PUSH_MOST } from '#shared/sync/sync'
import type { StoryAt } from '../helpers/roundAt'
import { bay, gap, RUN } from '../helpers/roundStory'
import { layStoryGround, type StoryGround } from '../helpers/storyGround'
import type { Visitor } from '../helpers/visitor'

let story: StoryGround
let ana: Visitor
let crew: Visitor
beforeAll(async () => {
  story = await layStoryGround()
  ;[ana, crew] = [await story.signedIn('ana'), await story.signedIn('crew')]
}, 120_000)
afterAll(() => story.end())

const DEVICE = '019a0005-0000-7000-8000-000000000001'
const walk = (round: StoryAt, count: number) => { for (let at = 0; at < count; at++) round.reading({ element: RUN, check: 'gap-below', place: bay(at % 4 + 1, at) }, gap(1)) }
const push = (who: Visitor, round: StoryAt, entries: { envelope: string, payload: string }[], empty = false) => who.send('POST', `/api/field/v1/rounds/${round.round}/entries`, { device: DEVICE, entries, empty })

async function pullAll(who: Visitor, round: StoryAt): Promise<PullAnswer['entries']> {
  const all: PullAnswer['entries'] = []
  for (let more = true; more;) {
    const answer = await who.send('GET', `/api/field/v1/rounds/${round.round}/entries?after=${all.at(-1)?.number ?? 0}`)
    expect(answer.status).toBe(200)
    const page = answer.json as PullAnswer
    all.push(...page.entries)
    more = page.more
  }
  return all
}

describe('pushing and pulling', () => {
  it('numbers eight devices\' pushes without a gap, and gives every entry back letter by letter', async () => {
    const round = await story.newRound()
    walk(round, 400)
    const wires = round.wires()
    const answers = await Promise.all(Array.from({ length: 8 }, (_, device) => push(ana, round, wires.filter((_, at) => at % 8 === device))))
    expect(answers.map(answer => answer.status)).toEqual(Array(8).fill(200))
    const pulled = await pullAll(crew, round)
    expect(pulled.map(one => one.number)).toEqual(Array.from({ length: 400 }, (_, at) => at + 1))
    expect(new Set(pulled.map(({ envelope, payload }) => `${envelope}${payload}`))).toEqual(new Set(wires.map(({ envelope, payload }) => `${envelope}${payload}`)))
  })

  it('gives pages by cursor and says when there is more', async () => {
    const round = await story.newRound()
    walk(round, PULL_MOST + 3)
    for (let at = 0; at < round.entries.length; at += PUSH_MOST) expect((await push(ana, round, round.wires().slice(at, at + PUSH_MOST))).status).toBe(200)
    const first = (await ana.send('GET', `/api/field/v1/rounds/${round.round}/entries`)).json as PullAnswer
    expect(first).toMatchObject({ more: true, round: { accepted: PULL_MOST + 3 } })
    expect(first.entries).toHaveLength(PULL_MOST)
    expect(await pullAll(ana, round)).toHaveLength(PULL_MOST + 3)
  })

  it('answers a resend alike, and names the epoch of the store', async () => {
    const round = await story.newRound()
    walk(round, 3)
    const [first, again] = [await push(ana, round, round.wires()), await push(ana, round, round.wires())].map(answer => answer.json as PushAnswer)
    expect(again!.results).toEqual(first!.results.map(one => ({ ...one, state: 'resent' })))
    expect(again).toMatchObject({ storeEpoch: first!.storeEpoch, accepted: 3 })
    const { rows } = await story.admin.query('select store_epoch from installation')
    expect(first!.storeEpoch).toBe(rows[0].store_epoch)
  })

  it('takes the good ones beside any bad text that JSON can carry', async () => {
    const round = await story.newRound()
    walk(round, 3)
    const [a, b, good] = round.wires()
    const answer = await push(ana, round, [{ ...a!, envelope: `${a!.envelope}\u0000` }, { ...b!, payload: `${b!.payload}\ud800` }, good!, { envelope: '', payload: '' }, { envelope: 'x'.repeat(30_000), payload: '{}' }])
    expect(answer.status).toBe(200)
    expect((answer.json as PushAnswer).results.map(one => one.state)).toEqual(['refused', 'refused', 'accepted', 'refused', 'refused'])
  })

  it('refuses a push of more entries than it says it takes', async () => {
    const round = await story.newRound()
    walk(round, PUSH_MOST + 1)
    const answer = await push(ana, round, round.wires())
    expect({ status: answer.status, pointer: answer.json.errors[0].pointer }).toEqual({ status: 422, pointer: '/entries' })
    expect(await pullAll(ana, round)).toEqual([])
  })

  it('notes that nothing waits on a device only when all of its entries were taken', async () => {
    const round = await story.newRound()
    expect((await ana.send('POST', `/api/field/v1/jobs/${round.job}/take`, { device: DEVICE, name: 'Phone' })).status).toBe(200)
    const emptyAt = async () => (await story.admin.query('select empty_at from round_device where round_id = $1', [round.round])).rows[0].empty_at as Date | null
    walk(round, 2)
    const [first, second] = round.wires()
    await push(ana, round, [first!, { ...second!, envelope: '{}' }], true)
    expect(await emptyAt()).toBeNull()
    await push(ana, round, [second!], true)
    expect(await emptyAt()).toBeInstanceOf(Date)
    await push(ana, round, [], false)
    expect(await emptyAt()).toBeNull()
    // Whoever else knows the device's id does not speak for it.
    await push(await story.signedIn('bo'), round, [], true)
    expect(await emptyAt()).toBeNull()
  })
})

describe('photos', () => {
  let round: StoryAt
  beforeAll(async () => { round = await story.newRound() })
  const noise = (width: number, height: number) => sharp(Buffer.alloc(width * height * 3, Math.floor(Math.random() * 255)), { raw: { width, height, channels: 3 } })
  const jpeg = (width = 320, height = 240) => noise(width, height).jpeg().toBuffer()
  const digestOf = (bytes: Uint8Array) => createHash('sha256').update(bytes).digest('hex')
  const put = (bytes: Buffer, { who = ana, digest = digestOf(bytes), job = round.job } = {}) => who.send('PUT', `/api/field/v1/jobs/${job}/photos/${digest}`, new Uint8Array(bytes), { 'content-type': 'image/jpeg' })
  const refused = async (answer: Promise<{ status: number, json: { type: string, detail: string } }>) => { const { status, json } = await answer; return `${status} ${json.type}: ${json.detail}` }

  it('are kept under their digest and given back byte by byte, with a thumbnail', async () => {
    const bytes = await jpeg(2048, 1536)
    expect(await put(bytes)).toMatchObject({ status: 200, json: { digest: digestOf(bytes), bytes: bytes.length } })
    const back = await ana.send('GET', `/api/photos/${digestOf(bytes)}`)
    expect(back).toMatchObject({ status: 200, type: 'image/jpeg' })
    expect(back.bytes.equals(bytes)).toBe(true)
    const small = await sharp((await ana.send('GET', `/api/photos/${digestOf(bytes)}?small=1`)).bytes).metadata()
    expect([small.width, small.height]).toEqual([480, 360])
  })

  it('sent twice get the same answer, also at the same moment', async () => {
    const bytes = await jpeg()
    const answers = await Promise.all([put(bytes), put(bytes), put(bytes, { who: crew })])
    answers.push(await put(bytes))
    expect(new Set(answers.map(({ status, bytes: body }) => `${status} ${body.toString()}`)).size).toBe(1)
    expect((await story.admin.query('select count(*)::int as n from photo where digest = $1', [digestOf(bytes)])).rows).toEqual([{ n: 1 }])
  })

  it('are known by their content, not by their name', async () => {
    const pdf = Buffer.from('%PDF-1.7\n1 0 obj\n<<>>\nendobj\ntrailer\n<<>>\n%%EOF\n')
    expect(await refused(put(pdf))).toMatch(/^415 \/problems\/wrongType: This is a PDF file/)
    expect(await refused(put(await noise(20, 20).png().toBuffer()))).toMatch(/^415 \/problems\/wrongType: This is a PNG file/)
    expect(await refused(put(Buffer.from('hello')))).toMatch(/^415 \/problems\/wrongType: This is no picture/)
    expect(await refused(ana.send('PUT', `/api/field/v1/jobs/${round.job}/photos/${digestOf(Buffer.alloc(0))}`, undefined, { 'content-type': 'image/jpeg' }))).toMatch(/^415 \/problems\/wrongType: No photo/)
  })

  it('are refused when they are cut short or damaged', async () => {
    const bytes = await sharp(Buffer.from(Array.from({ length: 640 * 480 * 3 }, (_, at) => at * 7919 % 256)), { raw: { width: 640, height: 480, channels: 3 } }).jpeg().toBuffer()
    expect(await refused(put(bytes.subarray(0, Math.floor(bytes.length * 0.6))))).toMatch(/^415 \/problems\/wrongType: This photo is cut short/)
    expect(await refused(put(Buffer.concat([bytes.subarray(0, 24), Buffer.from('nothing more')])))).toMatch(/^415 \/problems\/wrongType/)
  })

  it('are refused when the digest is another one\'s', async () => {
    expect(await refused(put(await jpeg(), { digest: 'a'.repeat(64) }))).toMatch(/^409 \/problems\/differs/)
  })

  it('are refused when they are not in their final form', async () => {
    expect(await refused(put(await noise(64, 64).withExif({ IFD0: { Copyright: 'Somebody' } }).jpeg().toBuffer()))).toMatch(/^422 \/problems\/invalid: .*metadata/)
    expect(await refused(put(await jpeg(2049, 16)))).toMatch(/^422 \/problems\/invalid: .*2049 by 16 px/)
    expect(await refused(put(await noise(64, 64).toColourspace('cmyk').jpeg().toBuffer()))).toMatch(/^422 \/problems\/invalid: .*not sRGB/)
  })

  it('over 25 MB are refused, whether they say their length or not', async () => {
    const bytes = Buffer.concat([await jpeg(), Buffer.alloc(25_000_001)])
    expect(await refused(put(bytes))).toMatch(/^413 \/problems\/tooLarge/)
    const cookie = (ana as unknown as { cookies: Map<string, string> }).cookies
    const first = await new Promise<string>((resolve, reject) => {
      const socket = connect(Number(new URL(story.server.baseURL).port), '127.0.0.1')
      socket.once('error', reject)
      socket.once('data', (answer) => { socket.destroy(); resolve(answer.toString('latin1')) })
      socket.write(`PUT /api/field/v1/jobs/${round.job}/photos/${'a'.repeat(64)} HTTP/1.1\r\nhost: 127.0.0.1\r\ncookie: ${[...cookie].map(one => one.join('=')).join('; ')}\r\ncontent-type: image/jpeg\r\ntransfer-encoding: chunked\r\n\r\n`)
      // Without an end: the answer has to come before the body is whole.
      for (let at = 0; at < 26; at++) socket.write(`f4240\r\n${'x'.repeat(1_000_000)}\r\n`)
    })
    expect(first).toMatch(/^HTTP\/1\.1 413 /)
    expect(first).toContain('/problems/tooLarge')
  })

  it('of a job that is not theirs are 404, to send and to read', async () => {
    const bytes = await jpeg()
    expect((await put(bytes, { job: '3b9c1f0e-1111-4111-8111-111111111111' })).status).toBe(404)
    const other = await story.newRound()
    await story.admin.query('delete from job_given where job_id = $1', [other.job])
    expect((await put(bytes, { who: crew, job: other.job })).status).toBe(404)
    expect((await put(bytes, { job: other.job })).status).toBe(200)
    expect((await crew.send('GET', `/api/photos/${digestOf(bytes)}`)).status).toBe(404)
    expect((await ana.send('GET', `/api/photos/${digestOf(bytes)}`)).status).toBe(200)
  })
})

describe('what cannot be known from outside', () => {
  it('gives a client\'s session no round, no photo and no job', async () => {
    const round = await story.newRound()
    await story.admin.query(`insert into contact (organisation_id, id, client_id, account_id, name, email) select organisation_id, gen_random_uuid(), id, (select id from account where email = 'client@story.example'), 'C', 'client@story.example' from client`)
    const client = await story.signedIn('client')
    expect((await client.send('GET', '/api/account/me')).json.standing).toBe('client')
    for (const path of [`/api/jobs/${round.job}`, `/api/field/v1/rounds/${round.round}/entries`, '/api/jobs', '/api/sites', '/api/clients']) expect((await client.send('GET', path)).status, path).toBe(403)
  })
})
