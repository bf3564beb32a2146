import { readdirSync } from 'node:fs'
import path from 'node:path'
import AxeBuilder from '@axe-core/playwright'
import pg from 'pg'
import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { DEMO_PASSWORD, ORGANISATIONS } from '../../server/demo/people'
import { faultsOf, keepPicture, launchBrowser, visit, type Visit } from '../helpers/browser'
import { linkIn } from '../helpers/demoGround'
import { layServerGround, runOnce, startServer, type RunningServer, type ServerGround } from '../helpers/server'
import { wordsOf } from '../helpers/words'

type Actor = 'nobody' | 'manager' | 'administrator' | 'inspector' | 'crew' | 'client'
/** What the demo holds that pages are about. */
interface Ids { job: string, element: string, gate: string, check: string, tag: string, record: string, clientRecord: string, clientSite: string, link: string, code: string }
interface Row { as: Actor, at: (ids: Ids) => string, /** What is not there: the browser itself tells of the 404. */ unknown?: true }

/** axe is slow: it reads each language once, and each size once; colours of dusk are read at a desk. */
const LOOKS = [{ size: 'phone', language: 'es' }, { size: 'desk', language: 'en' }] as const
type Look = (typeof LOOKS)[number]

const folder = path.resolve(import.meta.dirname, '../../app/pages')
const files = readdirSync(folder, { recursive: true, encoding: 'utf8' }).filter(file => file.endsWith('.vue')).map(file => file.replaceAll(path.sep, '/')).sort()

/** Every page of app/pages with who looks at it and where; a page that is not here fails. */
const ROWS: Record<string, Row> = {
  'index.vue': { as: 'manager', at: () => '/' },
  'sign-in.vue': { as: 'nobody', at: () => '/sign-in' },
  'reset.vue': { as: 'nobody', at: () => '/reset' },
  'link/[token].vue': { as: 'nobody', at: ({ link }) => `/link/${link}` },
  'parts.vue': { as: 'nobody', at: () => '/parts' },
  'check/[[code]].vue': { as: 'nobody', at: ({ code }) => `/check/${code}` },
  'jobs/index.vue': { as: 'manager', at: () => '/jobs' },
  'jobs/new.vue': { as: 'manager', at: () => '/jobs/new' },
  'jobs/[jobId]/index.vue': { as: 'manager', at: ({ job }) => `/jobs/${job}` },
  'jobs/[jobId]/change.vue': { as: 'manager', at: ({ job }) => `/jobs/${job}/change` },
  'jobs/[jobId]/line.vue': { as: 'manager', at: ({ job }) => `/jobs/${job}/line` },
  'jobs/[jobId]/erase.vue': { as: 'manager', at: ({ job }) => `/jobs/${job}/erase` },
  'jobs/try/index.vue': { as: 'manager', at: () => '/jobs/try' },
  'jobs/try/[tool].vue': { as: 'manager', at: ({ job, gate }) => `/jobs/try/swing?job=${job}&element=${gate}` },
  'sites/index.vue': { as: 'manager', at: () => '/sites' },
  'tags.vue': { as: 'manager', at: () => '/tags' },
  'instruments.vue': { as: 'manager', at: () => '/instruments' },
  'numbers.vue': { as: 'administrator', at: () => '/numbers' },
  'people.vue': { as: 'administrator', at: () => '/people' },
  'log.vue': { as: 'administrator', at: () => '/log' },
  'you.vue': { as: 'manager', at: () => '/you' },
  'records/index.vue': { as: 'manager', at: () => '/records' },
  'records/[recordId].vue': { as: 'manager', at: ({ record }) => `/records/${record}` },
  'w/index.vue': { as: 'inspector', at: () => '/w' },
  'w/[jobId].vue': { as: 'inspector', at: () => '/w/0190a0de-0000-7000-8000-000000000000', unknown: true },
  'w/[jobId]/index.vue': { as: 'inspector', at: ({ job }) => `/w/${job}` },
  'w/[jobId]/line.vue': { as: 'inspector', at: ({ job, gate }) => `/w/${job}/line?element=${gate}` },
  'w/[jobId]/tags.vue': { as: 'crew', at: ({ job }) => `/w/${job}/tags` },
  'w/[jobId]/sign/index.vue': { as: 'inspector', at: ({ job }) => `/w/${job}/sign` },
  'w/[jobId]/sign/entries.vue': { as: 'inspector', at: ({ job }) => `/w/${job}/sign/entries` },
  'w/[jobId]/sign/pictures.vue': { as: 'inspector', at: ({ job }) => `/w/${job}/sign/pictures` },
  'w/[jobId]/sign/signer.vue': { as: 'inspector', at: ({ job }) => `/w/${job}/sign/signer` },
  'w/[jobId]/check/line.vue': { as: 'inspector', at: ({ job }) => `/w/${job}/check/line` },
  'w/[jobId]/check/index.vue': { as: 'inspector', at: ({ job }) => `/w/${job}/check` },
  'w/[jobId]/check/[elementId]/index.vue': { as: 'inspector', at: ({ job, gate }) => `/w/${job}/check/${gate}` },
  'w/[jobId]/check/[elementId]/[checkId].vue': { as: 'inspector', at: ({ job, gate, check }) => `/w/${job}/check/${gate}/${check}` },
  'w/[jobId]/finding/[elementId].vue': { as: 'inspector', at: ({ job, element }) => `/w/${job}/finding/${element}?kind=tie&face=outer&bay=1` },
  'w/[jobId]/tag/[readingId].vue': { as: 'inspector', at: ({ job, tag }) => `/w/${job}/tag/${tag}` },
  'w/[jobId]/danger/[readingId].vue': { as: 'inspector', at: ({ job, tag }) => `/w/${job}/danger/${tag}` },
  'site/index.vue': { as: 'client', at: () => '/site' },
  'site/[siteId].vue': { as: 'client', at: ({ clientSite }) => `/site/${clientSite}` },
}

/** Screens that share a page with another. */
const MORE: Record<string, Row> = Object.fromEntries(['around', 'opening', 'fasteners'].map(tool => [`jobs/try/${tool}`, { as: 'manager', at: ({ job, element }: Ids) => `/jobs/try/${tool}?job=${job}&element=${element}` } as Row]))

let ground: ServerGround
let server: RunningServer
let browser: Browser
let admin: pg.Pool
let ids: Ids
const visits = new Map<string, Promise<Visit>>()

async function one<T extends Record<string, string>>(sql: string): Promise<T> {
  const { rows } = await admin.query<T>(sql)
  if (!rows[0]) throw new Error(`the demo has nothing for: ${sql}`)
  return rows[0]
}

/** The same person at the same size keeps their browser from page to page. */
function visitOf(actor: Actor, look: Look): Promise<Visit> {
  const key = `${actor} ${look.size}`
  const known = visits.get(key)
  if (known) return known
  const made = comeIn(actor, look)
  visits.set(key, made)
  return made
}

async function comeIn(actor: Actor, { size, language }: Look): Promise<Visit> {
  const made = await visit(browser, server.baseURL, size)
  await made.context.addCookies([{ name: 'smoothside-language', value: language, url: server.baseURL }])
  if (actor === 'nobody') return made
  const email = actor === 'client' ? 'ruth@wrenfold.example' : ORGANISATIONS[0]!.people.find(person => person.role === actor)!.email
  const answer = await made.context.request.post('/api/account/sign-in', { data: { email, password: DEMO_PASSWORD } })
  expect(answer.status(), `${email} signs in`).toBe(200)
  if (actor === 'inspector' || actor === 'crew') {
    const say = wordsOf(language)
    await made.page.goto('/w')
    await made.page.getByRole('button', { name: say('walk.home.take') }).filter({ hasText: 'Pool yard' }).click()
    await made.page.getByRole('link', { name: 'Wrenfold Elementary' }).waitFor({ timeout: 60_000 })
  }
  return made
}

/** Looked at by a person: the page has arrived, is alive, and nothing is on its way. */
async function settled(page: Page) {
  await page.waitForFunction(() => (window as unknown as { useNuxtApp?: () => { isHydrating?: boolean } }).useNuxtApp?.().isHydrating === false)
  await page.locator('h1').first().waitFor()
  await page.waitForFunction(opening => ![...document.querySelectorAll('h1, h2')].some(head => opening.includes(head.textContent?.trim() ?? '')), (['en', 'es'] as const).flatMap(language => ['walk.home.opening', 'walk.home.loading'].map(key => wordsOf(language)(key))))
}

async function faultsOfAxe(page: Page, onlyContrast = false) {
  const axe = new AxeBuilder({ page }).setLegacyMode(true).options({ resultTypes: ['violations'] })
  const { violations } = await (onlyContrast ? axe.withRules(['color-contrast']) : axe).analyze()
  return violations.flatMap(({ id, nodes }) => nodes.slice(0, 4).map(node => `${id}: ${node.html.slice(0, 160)} ${(node.any[0] ?? node.all[0] ?? node.none[0])?.message ?? ''}`))
}

beforeAll(async () => {
  ground = await layServerGround()
  await runOnce(ground, 'demo')
  server = await startServer({ ground })
  browser = await launchBrowser()
  admin = new pg.Pool({ connectionString: ground.database.adminUrl, max: 2 })
  admin.on('error', () => undefined)
  const { job, line } = await one<{ job: string, line: string }>(`select j.id as job, l.line::text as line from job j join line_version l on l.job_id = j.id where j.title like 'Pool yard%' order by l.version desc`)
  const elements = (JSON.parse(line) as { sides: { elements: { id: string, kind: string }[] }[] }).sides.flatMap(side => side.elements)
  const gate = elements.find(element => element.kind === 'gate')!.id
  ids = {
    job, gate, element: elements[0]!.id,
    check: (await one<{ id: string }>(`select check_id as id from entry where job_id = '${job}' and element_id = '${gate}' and payload->'value'->>'method' = 'measure' limit 1`)).id,
    tag: (await one<{ id: string }>(`select id from deficiency_state where job_id = '${job}' limit 1`)).id,
    record: (await one<{ id: string }>(`select r.id from record r join job j on j.id = r.job_id where j.title = 'Tot lot' and r.scope = 'interim'`)).id,
    ...await one<{ clientRecord: string, clientSite: string, code: string }>(`select r.id as "clientRecord", j.site_id as "clientSite", r.code from record r join job j on j.id = r.job_id where j.title = 'Track and field'`),
    link: linkIn((await ground.mailThat(mail => mail.envelope.to.includes('abel@quillfeather.example'))).text),
  }
}, 240_000)

afterAll(async () => {
  await browser?.close()
  await server?.stop()
  await admin?.end()
  await ground?.remove()
})

it('every page has its row, and every row its page', () => {
  expect(Object.keys(ROWS).sort()).toEqual(files)
})

describe.each(LOOKS)('every page reads well for everybody, $size in $language', (look) => {
  const { size, language } = look
  beforeAll(async () => { await admin.query('update account set language = $1', [language]) })

  // Two at a time, as many as the machine has processors.
  it.concurrent.each([...files.filter(file => ROWS[file]), ...Object.keys(MORE)])('%s', async (file) => {
    const { as, at, unknown } = (ROWS[file] ?? MORE[file])!
    const found: string[] = []
    const { context, faults: ofAll } = await visitOf(as, look)
    const page = await context.newPage()
    const faults = faultsOf(page)
    await page.goto(at(ids))
    await settled(page)
    if (!/\S/.test((await page.title()).replace(/·? ?Smoothside/, '')) && (await page.title()) !== 'Smoothside') found.push('no title')
    if (await page.locator('h1').count() !== 1) found.push(`${await page.locator('h1').count()} headings of the first level`)
    if (!(await page.locator('html').getAttribute('lang'))?.startsWith(language)) found.push(`lang is ${await page.locator('html').getAttribute('lang')}`)
    const beyond = await page.evaluate(width => document.documentElement.scrollWidth > Math.min(width, document.documentElement.clientWidth), page.viewportSize()!.width)
    if (beyond) found.push('scrolls sideways')
    await keepPicture(page, `page-${file.replace(/\.vue$/, '').replace(/[^\w-]+/g, '_')}-${size}-${language}`, true)
    found.push(...await faultsOfAxe(page))
    if (size === 'desk') {
      await page.evaluate(() => { document.documentElement.dataset.theme = 'dusk' })
      found.push(...(await faultsOfAxe(page, true)).map(fault => `dusk: ${fault}`))
    }
    // What any page of this person asked for elsewhere.
    found.push(...ofAll.splice(0), ...faults.filter(fault => !unknown || !fault.includes('404')))
    await page.close()
    expect(found).toEqual([])
  })
})
