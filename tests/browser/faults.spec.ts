import { createHash } from 'node:crypto'
import { readdirSync, readFileSync, statSync } from 'node:fs'
import path from 'node:path'
import type { Browser, Page } from 'playwright-core'
import sharp from 'sharp'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { launchBrowser, type Visit } from '../helpers/browser'
import { layJobGround, walkOut, type JobGround } from '../helpers/jobGround'
import { runOnce, startServer, type RunningServer } from '../helpers/server'
import { wordsOf } from '../helpers/words'

/** What a person at the fence loses when machines fail: nothing that was written down. */
const say = wordsOf('en')
let job: JobGround
let server: RunningServer
let browser: Browser
let phone: Visit

const picture = () => sharp({ create: { width: 4000, height: 3000, channels: 3, background: '#7a8f6a', noise: { type: 'gaussian', mean: 120, sigma: 40 } } }).jpeg({ quality: 92 }).toBuffer()
const key = (page: Page, words: string) => page.getByRole('button', { name: words, exact: true })
const waiting = (page: Page, count: number) => page.getByText(say('base.tally.waiting', { count }), { exact: true }).waitFor({ timeout: 30_000 })
const allSent = (page: Page) => page.getByText(new RegExp(`^${say('base.tally.sent')}`)).first().waitFor({ timeout: 150_000 })
const entries = async () => (await job.admin.query<{ id: string, number: number, kind: string }>('select id, number, kind from entry order by number')).rows
/** Without gaps and without doubles, as the server numbers what it has accepted. */
const gapless = (rows: { number: number }[]) => expect(rows.map(row => row.number)).toEqual(rows.map((_, at) => at + 1))

/** Opens the form of a finding at the place in hand. */
async function openFinding(page: Page) {
  await key(page, say('walk.pass.finding.sharpEdge')).click()
  const pick = page.getByRole('heading', { name: say('walk.pass.whichCheck') })
  await pick.or(key(page, say('walk.pass.writeFinding'))).first().waitFor()
  if (await pick.isVisible()) await page.getByRole('main').getByRole('listitem').getByRole('button').first().click()
  await key(page, say('walk.pass.writeFinding')).waitFor()
}
/** Writes a finding and comes back to the pass. */
async function writeFinding(page: Page) {
  await key(page, say('walk.pass.writeFinding')).click()
  await page.getByText(say('walk.pass.writeOnTape')).waitFor()
  await key(page, say('walk.pass.onWithWalk')).click()
  await key(page, say('walk.pass.finding.sharpEdge')).waitFor()
}

beforeAll(async () => {
  job = await layJobGround()
  server = await startServer({ ground: job.ground })
  browser = await launchBrowser()
  phone = await walkOut(browser, server.baseURL, job)
  await allSent(phone.page)
}, 240_000)

afterAll(async () => {
  await browser?.close()
  await server?.stop()
  await job?.end()
})

describe('when machines fail', () => {
  it('a server that is killed keeps nobody from writing, and gets everything once it is back', async () => {
    const { page } = phone
    const before = (await entries()).length
    await server.kill()
    for (let n = 1; n <= 3; n++) {
      await openFinding(page)
      await writeFinding(page)
      await waiting(page, n)
    }
    await page.reload()
    await waiting(page, 3)
    server = await startServer({ ground: job.ground })
    await allSent(page)
    const after = await entries()
    expect(after.length - before).toBe(3)
    gapless(after)
  })

  it('a server that dies after it has taken something in, before it could say so, holds it once', async () => {
    const { page, context } = phone
    const before = (await entries()).length
    let taken = 0
    // The answer is lost on the way and the server with it: the phone cannot know that it was taken in.
    await context.route('**/entries', async (route) => {
      if (route.request().method() !== 'POST' || taken > 0) return route.fallback()
      const answer = await route.fetch()
      taken = answer.status()
      await server.kill()
      await route.abort('connectionreset')
    })
    await openFinding(page)
    await writeFinding(page)
    await expect.poll(() => taken, { timeout: 60_000 }).toBe(200)
    expect((await entries()).length - before).toBe(1)
    await waiting(page, 1)
    await context.unroute('**/entries')
    server = await startServer({ ground: job.ground })
    await allSent(page)
    const after = await entries()
    expect(after.length - before).toBe(1)
    gapless(after)
  })

  it('a tab that is killed in the middle of a photo leaves nothing half', async () => {
    const { context } = phone
    const before = (await entries()).length
    await openFinding(phone.page)
    const bytes = await picture()
    await phone.page.locator('input[type=file][capture]').first().setInputFiles({ name: 'IMG_0002.JPG', mimeType: 'image/jpeg', buffer: bytes })
    const gone = new Promise(resolve => phone.page.once('crash', resolve))
    const session = await context.newCDPSession(phone.page)
    void session.send('Page.crash').catch(() => undefined)
    await gone
    await phone.page.close()

    const page = await context.newPage()
    phone = { ...phone, page }
    await page.goto(`/w/${job.jobId}`)
    await allSent(page)
    expect((await entries()).length).toBe(before)
    // Every picture on the phone is whole: its bytes are those of its name.
    const kept = await page.evaluate(async () => {
      const name = (await indexedDB.databases()).map(one => one.name!).find(one => one.startsWith('smoothside '))!
      const database = await new Promise<IDBDatabase>((resolve, reject) => {
        const opening = indexedDB.open(name)
        opening.onsuccess = () => resolve(opening.result)
        opening.onerror = () => reject(opening.error)
      })
      const rows = await new Promise<{ digest: string, bytes: Uint8Array }[]>((resolve, reject) => {
        const asked = database.transaction('photos').objectStore('photos').getAll()
        asked.onsuccess = () => resolve(asked.result)
        asked.onerror = () => reject(asked.error)
      })
      database.close()
      return Promise.all(rows.map(async row => ({ digest: row.digest, sha256: [...new Uint8Array(await crypto.subtle.digest('SHA-256', new Uint8Array(row.bytes)))].map(byte => byte.toString(16).padStart(2, '0')).join('') })))
    })
    for (const { digest, sha256 } of kept) expect(sha256).toBe(digest)

    // And the same photo goes through afterwards, whole.
    await openFinding(page)
    await page.locator('input[type=file][capture]').first().setInputFiles({ name: 'IMG_0002.JPG', mimeType: 'image/jpeg', buffer: bytes })
    await page.getByRole('img', { name: say('walk.sync.photo.alt', { n: 1 }) }).waitFor({ timeout: 60_000 })
    await writeFinding(page)
    await allSent(page)
    expect((await entries()).length).toBe(before + 1)
    const stored = (await job.admin.query<{ digest: string }>('select digest from photo')).rows
    expect(stored).toHaveLength(1)
    const all = readdirSync(job.ground.dataFolder, { recursive: true, encoding: 'utf8' }).map(name => path.join(job.ground.dataFolder, name)).filter(file => statSync(file).isFile())
    expect(all.filter(file => createHash('sha256').update(readFileSync(file)).digest('hex') === stored[0]!.digest)).not.toHaveLength(0)
  })

  it('a database that was restored from yesterday gets back what phones still hold', async () => {
    const { page } = phone
    const full = await entries()
    // As a restore does: what came in later is gone, and the store says that it is another one.
    await server.stop()
    const yesterday = full.length - 3
    const client = await job.admin.connect()
    await client.query(`set session_replication_role = replica`)
    await client.query('delete from entry where number > $1', [yesterday])
    await client.query('update round set accepted = $1', [yesterday])
    await client.query('update installation set store_epoch = gen_random_uuid()')
    client.release(true)
    await runOnce(job.ground, 'refold')
    expect(await entries()).toHaveLength(yesterday)
    server = await startServer({ ground: job.ground })

    await page.reload()
    await key(page, say('walk.pass.finding.sharpEdge')).waitFor()
    await expect.poll(async () => (await entries()).length, { timeout: 150_000 }).toBe(full.length)
    await allSent(page)
    const after = await entries()
    expect(after.map(row => row.id).sort()).toEqual(full.map(row => row.id).sort())
    gapless(after)
  })
})
