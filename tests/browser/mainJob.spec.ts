import { createHash, randomUUID } from 'node:crypto'
import { readFileSync } from 'node:fs'
import pg from 'pg'
import type { Browser, Locator, Page } from 'playwright-core'
import sharp from 'sharp'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { hashPassword } from '../../server/services/account/password'
import { readBuiltIn } from '../../server/services/checklist/readBuiltIn'
import { TOOLS } from '../../shared/round/walkPlan'
import { keepFile, keepPicture, launchBrowser, visit, type Size, type Visit } from '../helpers/browser'
import { linkIn } from '../helpers/demoGround'
import { run, testFolder, tryRun } from '../helpers/outsideTools'
import { layServerGround, startServer, type RunningServer, type ServerGround } from '../helpers/server'
import { wordsOf } from '../helpers/words'

/**
 * The main job as people do it, on an installation with nothing but one administrator: a fence is drawn, walked with a gap in the signal, corrected, signed,
 * sealed and sent; the client opens it by its link, and tools that know nothing of Smoothside open the PDF.
 */
const PASSWORD = 'a hand on the top rail'
const ADMINISTRATOR = { name: 'Orla Penhallow', email: 'orla@penhallow.example' }
const INSPECTOR = { name: 'Idris Vane', email: 'idris@penhallow.example' }
const CONTACT = { name: 'Maud Ferrow', email: 'maud@lindenhall.example' }
const SITE = 'Lindenhall Nursery'
const GAP = readBuiltIn().flatMap(checklist => checklist.checks).find(check => check.measurand === 'gap-below')!.title.en
const LINE = 'all 4 ft high, mesh 1 1/4 in, outer playground\nA Path side\nrun 20 ft, 2 bays\ngate 4 ft, self-closing'

/** Who holds what: the way people mostly do, and the other way round. */
const HANDS: { name: string, office: Size, field: Size, client: Size }[] = [
  { name: 'a desk in the office and a phone at the fence', office: 'desk', field: 'phone', client: 'desk' },
  { name: 'a phone in the office and a wide screen at the fence', office: 'phone', field: 'desk', client: 'phone' },
]

const say = wordsOf('en')
const files = testFolder()
let ground: ServerGround
let server: RunningServer
let browser: Browser
let admin: pg.Pool
let office: Visit
let field: Visit
let client: Visit
let pdf: Buffer
let broken: string | null = null
let keep: (page: Page, name: string) => Promise<void>

/** Each step stands on the one before; after one that did not come through, the others say so and do nothing. */
const step = (name: string, work: () => Promise<void>) => it(name, async () => {
  if (broken) throw new Error(`not tried, since this did not come through: ${broken}`)
  broken = name
  try {
    await work()
  }
  catch (error) {
    for (const [who, one] of Object.entries({ office, field, client })) if (one) await keep(one.page, `broken-${who}`).catch(() => undefined)
    throw error
  }
  broken = null
}, 300_000)

const within = (page: Page | Locator, role: 'button' | 'link', key: string, parameters?: Record<string, string | number>, count?: number) => page.getByRole(role, { name: say(key, parameters, count), exact: true })
const press = (page: Page | Locator, key: string, parameters?: Record<string, string | number>, count?: number) => within(page, 'button', key, parameters, count).click()
/** A choice is pressed on its words, as a finger does; the control itself is drawn over. */
const choose = (page: Page | Locator, words: string) => page.locator('label').filter({ hasText: words }).first().click()
const heading = (page: Page, words: string | RegExp) => page.getByRole('heading', { name: words }).first().waitFor({ timeout: 30_000 })
const alive = (page: Page) => page.waitForFunction(() => (window as unknown as { useNuxtApp?: () => { isHydrating?: boolean } }).useNuxtApp?.().isHydrating === false)
const open = async (page: Page, path: string) => {
  await page.goto(path)
  await alive(page)
}

/** The key at the end of an element: how many looks it confirms, or that there is none. */
const groupKey = new RegExp(`^(\\d+ ${say('walk.group.confirm', { count: '' }, 2).trim()}|${say('walk.group.endPass')}|${say('walk.group.goOn')})$`)

/** A picture as a camera makes it: large, turned by its EXIF, with the camera's name in it. */
const photo = async (hue: number) => ({
  name: 'IMG_0001.JPG', mimeType: 'image/jpeg',
  buffer: await sharp({ create: { width: 3000, height: 2000, channels: 3, background: { r: hue, g: 140, b: 120 } } }).composite([{ input: Buffer.from('<svg xmlns="http://www.w3.org/2000/svg" width="900" height="900"><path d="M0 0l900 900M900 0L0 900" stroke="#eee" stroke-width="60"/></svg>') }])
    .withMetadata({ orientation: 6 }).withExifMerge({ IFD0: { Make: 'Penhallow Optics', Artist: 'Idris Vane' } }).jpeg().toBuffer(),
})

/** Answers the check on the screen as a fence in order answers it; false where it wants an instrument that is not at hand. */
async function answer(page: Page): Promise<boolean> {
  const keys = { look: within(page, 'button', 'walk.check.clear'), trial: within(page, 'button', 'walk.check.good'), other: page.getByRole('button', { name: say('walk.check.moreShort') }).or(page.locator('[data-pad]')) }
  await keys.look.or(keys.trial).or(keys.other).first().waitFor()
  if (await keys.look.isVisible()) await keys.look.click()
  else if (await keys.trial.isVisible()) {
    const write = page.getByRole('button', { name: /^Write down/ })
    for (let n = 0; n < 40 && !(await write.isVisible() && await write.isEnabled()); n++) await keys.trial.click()
    await write.click()
  }
  else return false
  return true
}
/** Draws with a mouse over the pad, two strokes. */
async function draw(page: Page, name: string) {
  const pad = page.getByRole('img', { name: say('signature.pad.empty', { name }) })
  await pad.scrollIntoViewIfNeeded()
  const box = (await pad.boundingBox())!
  for (const [from, to] of [[0.2, 0.5], [0.4, 0.75]] as const) {
    await page.mouse.move(box.x + box.width * from, box.y + box.height * 0.35)
    await page.mouse.down()
    for (let n = 1; n <= 12; n++) await page.mouse.move(box.x + box.width * (from + (to - from) * n / 12), box.y + box.height * (0.35 + 0.3 * Math.abs(Math.sin(n))))
    await page.mouse.up()
  }
  await page.getByRole('img', { name: say('signature.pad.drawn', {}, 2) }).waitFor()
}
const bare = (text: string) => text.replace(/\s/g, '')

afterAll(() => files.remove())

describe.each(HANDS)('the main job, $name', (hands) => {
  beforeAll(async () => {
    broken = null
    keep = (page, name) => keepPicture(page, `main-${hands.field}-${name}`)
    ground = await layServerGround()
    admin = new pg.Pool({ connectionString: ground.database.adminUrl, max: 2 })
    admin.on('error', () => undefined)
    const [organisation, account] = [randomUUID(), randomUUID()]
    await admin.query(`insert into organisation (id, name, code, time_zone) values ($1, 'Penhallow Fencing', 'PF', 'America/Chicago')`, [organisation])
    await admin.query('insert into account (id, email, name, password_hash) values ($1, $2, $3, $4)', [account, ADMINISTRATOR.email, ADMINISTRATOR.name, await hashPassword(PASSWORD)])
    await admin.query(`insert into membership (organisation_id, account_id, role) values ($1, $2, 'administrator')`, [organisation, account])
    server = await startServer({ ground })
    browser = await launchBrowser()
    office = await visit(browser, server.baseURL, hands.office)
    field = await visit(browser, server.baseURL, hands.field)
    client = await visit(browser, server.baseURL, hands.client)
  }, 180_000)

  afterAll(async () => {
    await browser?.close()
    await server?.stop()
    await admin?.end()
    await ground?.remove()
  })

  step('the administrator signs in', async () => {
    const { page } = office
    await open(page, '/sign-in')
    await page.getByLabel(say('account.email')).fill(ADMINISTRATOR.email)
    await page.getByLabel(say('account.password')).fill(PASSWORD)
    await press(page, 'account.signIn.button')
    await page.waitForURL('**/jobs')
    await keep(page, '01-jobs-empty')
  })

  step('invites an inspector, who takes part by the link in the mail', async () => {
    const { page } = office
    await open(page, '/people')
    await press(page, 'people.invite')
    const dialog = page.getByRole('dialog')
    await dialog.getByLabel(say('people.name')).fill(INSPECTOR.name)
    await dialog.getByLabel(say('account.email')).fill(INSPECTOR.email)
    await choose(dialog, say('people.does.inspector'))
    await keep(page, '02-invite')
    await press(dialog, 'people.send')
    await page.getByText(say('people.invited', { email: INSPECTOR.email })).waitFor()

    const mail = await ground.mailThat(one => one.envelope.to.includes(INSPECTOR.email))
    await open(field.page, `/link/${linkIn(mail.text)}`)
    await field.page.getByLabel(say('account.newPassword')).fill(PASSWORD)
    await keep(field.page, '03-invitation')
    await press(field.page, 'account.link.invitation.button')
    await field.page.waitForURL('**/w')
    await heading(field.page, say('walk.home.title'))
  })

  step('the office makes client, contact and site', async () => {
    const { page } = office
    await open(page, '/sites')
    await page.getByRole('button', { name: say('site.client.add') }).first().click()
    await page.getByRole('dialog').getByLabel(say('site.client.name')).fill('Lindenhall School Board')
    await press(page.getByRole('dialog'), 'site.save')
    await heading(page, /Lindenhall School Board/)

    await press(page, 'site.contact.add')
    const dialog = page.getByRole('dialog')
    await dialog.getByLabel(say('site.contact.name'), { exact: true }).fill(CONTACT.name)
    await dialog.getByLabel(say('site.contact.email')).fill(CONTACT.email)
    await dialog.getByLabel(say('site.contact.title')).fill('Clerk of works')
    await choose(dialog, say('site.contact.accepts'))
    await press(dialog, 'site.save')
    await page.getByText(CONTACT.name).first().waitFor()

    await press(page, 'site.add')
    await dialog.getByLabel(say('site.name')).fill(SITE)
    await dialog.getByLabel(say('site.address')).fill('9 Linden Row, Marl')
    await dialog.getByLabel(say('site.newAuthority')).fill('Marl Township')
    await dialog.getByLabel(say('site.timeZone')).selectOption('America/Chicago')
    await press(dialog, 'site.save')
    await page.getByRole('link', { name: SITE }).waitFor()
    await keep(page, '04-sites')
  })

  step('sets a number that the authority enforces', async () => {
    const { page } = office
    await open(page, '/numbers?setting=playground')
    await heading(page, say('numbers.heading', { name: 'Marl Township' }))
    await press(page, 'numbers.setIt', { what: GAP })
    const dialog = page.getByRole('dialog')
    await dialog.getByLabel(say('numbers.form.atMost')).fill('2 in')
    await dialog.getByLabel(say('numbers.form.citation')).fill('Ordinance 14, section 6')
    await keep(page, '05-number')
    await press(dialog, 'numbers.form.save')
    await page.getByText('Ordinance 14, section 6').first().waitFor()
    await keep(page, '06-numbers')
  })

  step('makes the job and types its line', async () => {
    const { page } = office
    await open(page, '/jobs/new')
    await page.getByLabel(say('job.form.site'), { exact: true }).selectOption({ label: SITE })
    await page.getByLabel(say('job.form.jobTitle')).fill('Play yard')
    await page.getByLabel(say('job.form.neededBy')).first().fill('24 Dec 2026')
    await choose(page.getByRole('group', { name: say('job.form.checklists') }), 'Playground')
    await choose(page.getByRole('group', { name: say('job.form.inspectors') }), INSPECTOR.name)
    await page.getByRole('group', { name: say('job.form.onsite') }).getByLabel(say('job.form.name')).fill('Bram Tolle')
    await keep(page, '07-job-form')
    await press(page, 'job.form.save')
    await page.waitForURL('**/line')
    await page.getByLabel(say('line.quick.label')).fill(LINE)
    await page.getByLabel(say('line.quick.label')).blur()
    await page.getByRole('button', { name: /R1/ }).first().waitFor()
    await keep(page, '08-line-typed')
    await press(page, 'job.line.save')
    await page.waitForURL(/\/jobs\/[^/]+$/)
    await heading(page, SITE)
    await page.getByRole('link', { name: say('job.changeLine') }).waitFor()
    await keep(page, '09-job')
  })

  step('the inspector takes it along and starts the walk', async () => {
    const { page } = field
    await open(page, '/w')
    await page.getByRole('button', { name: say('walk.home.take') }).click()
    await page.getByRole('link', { name: SITE }).click()
    await heading(page, SITE)
    await keep(page, '10-walk-start')
    await press(page, 'walk.pass.start')
    await within(page, 'button', 'walk.pass.finding.tieEnd').waitFor()
    await keep(page, '11-walk-pass')
  })

  step('finds a tie end and photographs it', async () => {
    const { page } = field
    await press(page, 'walk.pass.finding.tieEnd')
    const pick = page.getByRole('heading', { name: say('walk.pass.whichCheck') })
    await pick.or(within(page, 'button', 'walk.pass.writeFinding')).first().waitFor()
    if (await pick.isVisible()) await page.getByRole('main').getByRole('listitem').getByRole('button').first().click()
    await page.locator('input[type=file][capture]').first().setInputFiles(await photo(90))
    await page.getByRole('img', { name: say('walk.sync.photo.alt', { n: 1 }) }).waitFor({ timeout: 60_000 })
    await keep(page, '12-finding')
    await press(page, 'walk.pass.writeFinding')
    await page.getByText(say('walk.pass.writeOnTape')).waitFor()
    await keep(page, '13-tag')
    await press(page, 'walk.pass.onWithWalk')
    await within(page, 'button', 'walk.pass.finding.tieEnd').waitFor()
  })

  step('loses the signal, reloads, and goes on writing', async () => {
    const { page, context } = field
    await page.evaluate(async () => { await navigator.serviceWorker.ready })
    await context.setOffline(true)
    await page.reload()
    await within(page, 'button', 'walk.pass.oneOn').click()
    await keep(page, '14-offline')
    await press(page, 'walk.pass.endOf', { tag: 'R1' })
    await heading(page, say('walk.group.endOfRun', { tag: 'R1' }))
    // One of them was not looked at: it is unticked, and stays to be read.
    const covered = Number(/\d+/.exec(await page.getByRole('button', { name: groupKey }).innerText()))
    expect(covered).toBeGreaterThan(2)
    const kinds = page.getByRole('button', { expanded: false, name: new RegExp(say('walk.group.kind.other')) })
    await kinds.last().click()
    await page.getByRole('checkbox').last().uncheck({ force: true })
    await keep(page, '15-group')
    await press(page, 'walk.group.confirm', {}, covered - 1)
    await press(page, 'walk.pass.endOf', { tag: 'G1' })
    await page.getByRole('button', { name: groupKey }).click()
    await page.getByText(say('walk.pass.passDone', { n: 1 })).waitFor()
    await keep(page, '16-pass-done')
  })

  step('reads the tape where the authority has a number, still without a signal', async () => {
    const { page } = field
    await page.getByRole('link', { name: say('walk.pass.seeLeft') }).click()
    await page.getByRole('link', { name: /R1/ }).click()
    await keep(page, '17-checks')
    await page.getByRole('link').filter({ hasText: 'Marl Township' }).first().click()
    for (const digit of ['3']) await page.getByRole('button', { name: digit, exact: true }).click()
    await page.getByRole('button', { name: say('base.pad.fraction', { fraction: '1/4' }), exact: true }).click()
    await page.getByRole('status').filter({ hasText: say('base.verdict.doesNotConform') }).waitFor()
    await keep(page, '18-tape')
    await page.getByRole('button', { name: say('base.pad.write', { figure: '3 1/4 in' }) }).click()
    await press(page, 'walk.pass.writeFinding')
    await page.getByText(say('walk.pass.writeOnTape')).waitFor()
    await press(page, 'walk.pass.onWithWalk')
  })

  step('walks the other face as well, still without a signal', async () => {
    const { page } = field
    await press(page, 'walk.pass.startNext')
    for (let n = 0; n < 2; n++) await within(page, 'button', n === 0 ? 'walk.pass.oneOn' : 'walk.pass.endOf', { tag: 'R1' }).click()
    await page.getByRole('button', { name: groupKey }).click()
    await press(page, 'walk.pass.endOf', { tag: 'G1' })
    await page.getByRole('button', { name: groupKey }).click()
    await page.getByText(say('walk.pass.passDone', { n: 2 })).waitFor()
  })

  step('sends everything once the signal is back', async () => {
    const { page, context } = field
    await page.getByText(/^\d+ waiting$/).waitFor()
    const { rows: [before] } = await admin.query('select count(*)::int as n from entry')
    await context.setOffline(false)
    await page.getByText(new RegExp(`^${say('base.tally.sent')}`)).first().waitFor({ timeout: 60_000 })
    const { rows: [after] } = await admin.query('select count(*)::int as n from entry')
    expect(after.n).toBeGreaterThan(before.n)
    expect((await admin.query('select count(*)::int as n from entry_aside')).rows[0].n).toBe(0)
    // The photo came with it, in final form: upright, small enough, without what the camera wrote into it.
    const { rows: photos } = await admin.query('select digest from photo')
    expect(photos).toHaveLength(1)
    await keep(page, '19-all-sent')
  })

  step('corrects both with a photo, and reads them again', async () => {
    const { page } = field
    // A pad hides the rail: one goes back from it, then along the rail.
    const tags = page.getByRole('link', { name: say('base.place.tags'), exact: true })
    if (!await tags.isVisible()) await within(page, 'link', 'walk.pass.backThere').click()
    await tags.click()
    for (const reading of ['clear', '1 1/2'] as const) {
      await heading(page, say('deficiency.part.toCorrect'))
      await page.locator('.tag-item input[type=file][capture]').first().setInputFiles(await photo(reading === 'clear' ? 60 : 160))
      const dialog = page.getByRole('dialog')
      await dialog.getByRole('img').first().waitFor({ timeout: 60_000 })
      await keep(page, `20-correct-${reading === 'clear' ? 'first' : 'second'}`)
      await press(dialog, 'deficiency.correct.save', {}, 1)
      await page.getByRole('link', { name: new RegExp(`^${say('deficiency.readAgain', { tag: '' }).replace(/\s+/g, '.+')}`) }).first().click()
      const clear = within(page, 'button', 'walk.check.clear')
      await clear.or(page.getByRole('button', { name: '1', exact: true })).first().waitFor()
      if (await clear.isVisible()) await clear.click()
      else {
        await page.getByRole('button', { name: '1', exact: true }).click()
        await page.getByRole('button', { name: say('base.pad.fraction', { fraction: '1/2' }), exact: true }).click()
        await page.getByRole('status').filter({ hasText: say('base.verdict.conforms') }).waitFor()
        await keep(page, '21-read-again')
        await page.getByRole('button', { name: say('base.pad.write', { figure: '1 1/2 in' }) }).click()
      }
      // Whoever came from the tags is back among them, and is told what was read.
      await page.waitForURL(/\/tags/)
      await page.getByRole('status').filter({ hasText: say('base.verdict.conforms') }).first().waitFor()
    }
    await heading(page, say('deficiency.part.settled'))
    await keep(page, '22-tags-settled')
  })

  step('answers some of what is left one by one, and sets the rest aside with a reason', async () => {
    const { page } = field
    const job = page.url().replace(/(\/w\/[^/]+).*/, '$1')
    for (const tag of ['R1', 'G1']) {
      await open(page, `${job}/check`)
      await page.getByRole('main').getByRole('listitem').getByRole('link', { name: new RegExp(tag) }).click()
      await page.waitForURL(/\/check\/[^/]+$/)
      const element = page.url()
      const left = () => page.getByRole('region').or(page.locator('section')).filter({ has: page.getByRole('heading', { name: new RegExp(`^(${[...TOOLS.map(tool => say(`walk.check.tool.${tool}`)), say('walk.check.byGroup')].join('|')})`) }) }).getByRole('link')
      const tried = new Set<string>()
      for (let n = 0; n < (hands.field === 'phone' ? 3 : 1); n++) {
        await open(page, element)
        await page.getByRole('link', { name: say('walk.check.allElements') }).waitFor()
        const hrefs = await left().evaluateAll(links => links.map(link => link.getAttribute('href')!))
        const next = hrefs.find(href => !tried.has(href))
        if (!next) break
        tried.add(next)
        await open(page, next)
        if (n === 0) await keep(page, `23-one-check-${tag}`)
        if (await answer(page)) await page.waitForURL(url => url.pathname !== new URL(next, server.baseURL).pathname || url.search !== new URL(next, server.baseURL).search)
      }
      await open(page, element)
      await press(page, 'walk.aside.element', { tag })
      const dialog = page.getByRole('dialog')
      await choose(dialog, say('walk.aside.whys.outOfScope'))
      await dialog.getByLabel(say('walk.aside.words')).fill('Read by the township at its own visit.')
      await keep(page, `24-aside-${tag}`)
      await press(dialog, 'walk.aside.write')
      await page.getByText(say('walk.aside.written')).waitFor()
    }
    await open(page, `${job}/check`)
    await page.getByText(say('walk.check.allDone')).waitFor()
  })

  step('the inspector and the client’s person sign on the device', async () => {
    const { page } = field
    await page.getByRole('link', { name: say('base.place.sign'), exact: true }).click()
    await choose(page, say('signature.scopeHint.final'))
    await keep(page, '25-sign')
    const look = page.getByRole('link', { name: /^Look at \d+ picture/ })
    const pictures = Number(/\d+/.exec(await look.innerText())![0])
    await look.click()
    for (let n = 0; n < pictures; n++) {
      await page.getByText(say('signature.pictures.of', { n: n + 1, of: pictures })).first().waitFor()
      if (n === 0) await keep(page, '26-sign-pictures')
      await press(page, 'signature.pictures.nobody')
    }
    for (const [name, meaning, picture] of [[INSPECTOR.name, 'present', '27-sign-inspector'], [CONTACT.name, 'acceptsWork', '28-sign-contact']] as const) {
      await page.getByRole('link', { name: new RegExp(`^${name}`) }).click()
      await heading(page, say('signature.signs', { name }))
      await choose(page, say(`signature.meaning.${meaning}`))
      await draw(page, name)
      await keep(page, picture)
      await press(page, `signature.sign.${meaning}`)
      await page.getByText(say('signature.written', { name })).waitFor()
    }
    await keep(page, '29-signed')
    await page.getByText(new RegExp(`^${say('base.tally.sent')}`)).first().waitFor({ timeout: 90_000 })
  })

  step('the office seals it, and sees its five steps', async () => {
    const { page } = office
    await expect.poll(async () => (await admin.query('select count(*)::int as n from round_device where empty_at is not null')).rows[0].n, { timeout: 90_000 }).toBe(1)
    await open(page, '/jobs')
    await page.getByRole('link', { name: new RegExp(SITE) }).first().click()
    await heading(page, SITE)
    await keep(page, '30-job-signed')
    await press(page, 'job.seal.title')
    const dialog = page.getByRole('dialog')
    await keep(page, '31-seal')
    await press(dialog, 'job.seal.button.final')
    await page.waitForURL('**/records/*')
    await keep(page, '32-sealing')
    await within(page, 'button', 'record.send.open').waitFor({ timeout: 120_000 })
    await keep(page, '33-record')
  })

  step('sends it, and the client reads the mail and opens its link', async () => {
    const { page } = office
    await press(page, 'record.send.open')
    const dialog = page.getByRole('dialog')
    await dialog.getByText(CONTACT.name).waitFor()
    await dialog.getByLabel(say('record.send.message')).fill('Thank you for the early start.')
    await keep(page, '34-send')
    await press(dialog, 'record.send.button', {}, 1)
    const mail = await ground.mailThat(one => one.envelope.to.includes(CONTACT.email))
    expect(mail.subject).toContain(SITE)
    expect(mail.text).toContain('Thank you for the early start.')
    expect(mail.attachments.map(one => one.contentType)).toEqual(['application/pdf'])
    await page.getByText(say('record.delivery.handed')).first().waitFor({ timeout: 60_000 })
    await keep(page, '35-delivery-log')

    const path = `/link/${linkIn(mail.text)}`
    const before = await admin.query('select redeemed_at from link where email = $1', [CONTACT.email])
    for (let n = 0; n < 2; n++) await open(client.page, path)
    await keep(client.page, '36-client-link')
    expect((await admin.query('select redeemed_at from link where email = $1', [CONTACT.email])).rows).toEqual(before.rows)
    await press(client.page, 'account.link.contact.button')
    await client.page.waitForURL('**/records/*')
    await heading(client.page, say('record.scope.final', { n: 1 }))
    await keep(client.page, '37-client-record')
    await open(client.page, '/site')
    await keep(client.page, '38-client-site')
    await client.page.goBack()
  })

  step('downloads the PDF, which outside tools find whole', async () => {
    const { page } = client
    await heading(page, say('record.scope.final', { n: 1 }))
    const [download] = await Promise.all([page.waitForEvent('download'), within(page, 'link', 'record.download').first().click()])
    const file = files.path('record.pdf')
    await download.saveAs(file)
    pdf = readFileSync(file)
    keepFile('main-record.pdf', pdf)

    const text = run('pdftotext', '-layout', file, '-')
    expect(text).toContain(SITE)
    expect(text).toContain('Play yard')
    expect(text).toContain('Marl Township')
    expect(text).toContain(CONTACT.name)
    // Its fraction is drawn as one: what was read and what was read again stand in the plain text of the pages.
    const plain = run('pdftotext', file, '-')
    for (const figure of [/3\s?1[⁄/]4\s?in/, /1\s?1[⁄/]2\s?in/]) expect(plain).toMatch(figure)
    const shown = await page.getByRole('main').innerText()
    expect(tryRun('qpdf', '--check', file)).toMatchObject({ code: 0 })
    expect(run('pdfdetach', '-list', file)).toContain('record.json')
    run('pdfdetach', '-save', '1', '-o', files.path('record.json'), file)
    const digest = createHash('sha256').update(readFileSync(files.path('record.json'))).digest('hex')
    // What the page shows is what the file holds: the same digest, and the outcome in the same words in all three.
    expect(bare(shown)).toContain(digest)
    const { sentence } = JSON.parse(readFileSync(files.path('record.json'), 'utf8')) as { sentence: { lead: string } }
    expect(sentence.lead.length).toBeGreaterThan(10)
    expect(bare(text)).toContain(bare(sentence.lead))
    expect(bare(shown)).toContain(bare(sentence.lead))
    const { rows: [row] } = await admin.query('select document_digest from record')
    expect(row.document_digest).toBe(digest)
    const signatures = tryRun('pdfsig', '-nocert', file).printed
    expect(signatures).toContain('Signature is Valid.')
    expect(signatures).toContain('Total document signed')
  })

  step('anybody can check the file, and a changed byte is told', async () => {
    const stranger = await visit(browser, server.baseURL, 'desk')
    const { page } = stranger
    await open(page, '/check')
    await keep(page, '39-check')
    const file = page.getByLabel(say('check.drop.choose'))
    await file.setInputFiles({ name: 'record.pdf', mimeType: 'application/pdf', buffer: pdf })
    await heading(page, new RegExp(`${say('check.head.genuine')} ${say('check.stands.current')}`))
    await page.getByText(say('check.did.bytes')).waitFor()
    await keep(page, '40-check-genuine')

    const changed = Buffer.from(pdf)
    const at = changed.indexOf('stream') + 40
    changed[at] = changed[at]! ^ 1
    await file.setInputFiles({ name: 'changed.pdf', mimeType: 'application/pdf', buffer: changed })
    await press(page, 'check.look.button')
    await heading(page, new RegExp(`${say('check.head.altered')} ${say('check.headStrong.altered')}`))
    await keep(page, '41-check-altered')
    expect(stranger.faults).toEqual([])
    await stranger.context.close()
  })

  step('nobody met a fault on the way', async () => {
    // While the signal was off, requests that failed are no fault of the page.
    const own = (faults: string[]) => faults.filter(fault => !/ERR_INTERNET_DISCONNECTED|Failed to fetch/.test(fault))
    expect({ office: own(office.faults), field: own(field.faults), client: own(client.faults) }).toEqual({ office: [], field: [], client: [] })
  })
})
