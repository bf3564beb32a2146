import { createHash } from 'node:crypto'
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { execFileSync } from 'node:child_process'
import { tmpdir } from 'node:os'
import path from 'node:path'
import AxeBuilder from '@axe-core/playwright'
import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { DEMO_PASSWORD } from '../../server/demo/people'
import { keepPicture, launchBrowser, visit, type Visit } from '../helpers/browser'
import { CLIENT_OF, emailOf, layDemoGround, linkIn, type DemoGround } from '../helpers/demoGround'
import { wordsOf } from '../helpers/words'

const say = wordsOf('en')
let demo: DemoGround
let browser: Browser
let desk: Visit
let client: Visit
const folder = mkdtempSync(path.join(tmpdir(), 'smoothside-hands-'))

beforeAll(async () => {
  demo = await layDemoGround()
  browser = await launchBrowser()
  desk = await visit(browser, demo.server.baseURL, 'desk')
  client = await visit(browser, demo.server.baseURL, 'phone')
  for (const { page } of [desk, client]) page.setDefaultTimeout(120_000)
}, 300_000)
afterAll(async () => {
  await browser?.close()
  await demo?.end()
  rmSync(folder, { recursive: true, force: true })
})

async function axeFinds(page: Page) {
  const { violations } = await new AxeBuilder({ page }).setLegacyMode(true).analyze()
  return violations.flatMap(({ id, nodes }) => nodes.slice(0, 3).map(node => `${id}: ${node.html.slice(0, 160)}`))
}

/** The page is alive: before that nobody listens to its fields and buttons. */
const alive = (page: Page) => page.waitForFunction(() => (window as unknown as { useNuxtApp?: () => { isHydrating?: boolean } }).useNuxtApp?.().isHydrating === false)

async function drop(page: Page, file: string) {
  await page.goto('/check')
  await alive(page)
  await page.locator('input[type=file]').setInputFiles(file)
}

describe('a manager at the desk', () => {
  it('is told in words when the password is wrong, and comes in with the right one', async () => {
    const { page } = desk
    await page.goto('/jobs')
    await page.getByRole('heading', { level: 1, name: say('account.signIn.title') }).waitFor()
    await alive(page)
    await page.getByLabel(say('account.email')).fill(emailOf('tarnbeck', 'manager'))
    await page.getByLabel(say('account.password')).fill('not this one')
    await page.getByRole('button', { name: say('account.signIn.button') }).click()
    await page.getByRole('alert').waitFor()
    await page.getByLabel(say('account.password')).fill(DEMO_PASSWORD)
    await page.getByRole('button', { name: say('account.signIn.button') }).click()
    await page.getByRole('link', { name: 'Wrenfold Elementary' }).first().waitFor()
    expect(new URL(page.url()).pathname).toBe('/jobs')
  })

  it('sees the jobs, and a job as its fence', async () => {
    const { page } = desk
    await keepPicture(page, 'hands-01-jobs')
    expect(await axeFinds(page)).toEqual([])
    await page.getByRole('link', { name: 'Wrenfold Elementary' }).first().click()
    await page.getByRole('heading', { level: 1, name: 'Wrenfold Elementary' }).waitFor()
    await page.getByRole('button', { name: /^G3/ }).first().click()
    await page.getByRole('heading', { level: 2, name: /^G3/ }).waitFor()
    await keepPicture(page, 'hands-02-job')
    expect(await axeFinds(page)).toEqual([])
  })
})

describe('a client with a mail in their hands', () => {
  let file: string

  it('opens the link, which changes nothing until its button is pressed, and reads the record', async () => {
    const { page } = client
    const token = linkIn((await demo.ground.mailThat(mail => mail.envelope.to.includes(CLIENT_OF.tarnbeck))).text)
    for (let time = 0; time < 2; time++) {
      await page.goto(`/link/${token}`)
      await page.getByRole('button', { name: say('account.link.contact.button') }).waitFor()
      await alive(page)
    }
    expect((await demo.admin.query('select 1 from link where redeemed_at is not null')).rowCount).toBe(0)
    await page.getByRole('button', { name: say('account.link.contact.button') }).click()
    await page.waitForURL(/\/records\//, { waitUntil: 'commit' })
    // The page before stays until this one has come: its own sign is the way to the file.
    await page.locator('a[href$=".pdf"]').first().waitFor()
    await keepPicture(page, 'hands-03-record')
    expect(await axeFinds(page)).toEqual([])
  })

  it('downloads a PDF that outside tools find whole, signed and readable', async () => {
    const { page } = client
    const id = /\/records\/([\w-]{36})/.exec(page.url())![1]!
    const answer = await client.context.request.get(`/records/${id}.pdf`)
    expect(answer.status()).toBe(200)
    file = path.join(folder, 'record.pdf')
    writeFileSync(file, await answer.body())
    expect(execFileSync('qpdf', ['--check', file], { encoding: 'utf8' })).toMatch(/No syntax or stream encoding errors found/)
    expect(execFileSync('pdftotext', [file, '-'], { encoding: 'utf8' })).toMatch(/Quillfeather Park/)
    execFileSync('pdfdetach', ['-saveall', '-o', folder, file])
    const { rows } = await demo.admin.query<{ document_digest: string }>('select document_digest from record where id = $1', [id])
    expect(createHash('sha256').update(readFileSync(path.join(folder, 'record.json'))).digest('hex')).toBe(rows[0]!.document_digest)
    expect((await demo.admin.query(`select 1 from delivery_event where kind = 'downloaded'`)).rowCount).toBe(1)
  })

  it('lets a stranger check it: genuine as it is, altered by one byte', async () => {
    const stranger = await visit(browser, demo.server.baseURL, 'desk')
    const { page } = stranger
    await drop(page, file)
    await page.getByText(say('check.head.genuine')).first().waitFor()
    await keepPicture(page, 'hands-04-genuine')
    expect(await axeFinds(page)).toEqual([])
    const bytes = readFileSync(file)
    const at = Math.floor(bytes.length / 3)
    bytes[at] = bytes[at]! ^ 1
    const altered = path.join(folder, 'altered.pdf')
    writeFileSync(altered, bytes)
    await drop(page, altered)
    await page.getByRole('button', { name: say('check.look.button') }).click()
    await page.getByText(say('check.head.altered')).first().waitFor()
  })
})
