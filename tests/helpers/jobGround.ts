import { randomUUID } from 'node:crypto'
import pg from 'pg'
import type { Browser } from 'playwright-core'
import { readQuickLine } from '#shared/line/readQuickLine'
import { setPool } from '../../server/database/client'
import { entrance } from '../../server/database/entrance'
import { hashPassword } from '../../server/services/account/password'
import { createJob } from '../../server/services/job/saveJob'
import { saveLine } from '../../server/services/job/saveLine'
import { putClient, putSite } from '../../server/services/site/keepSites'
import { stopQueue } from '../../server/tasks/queue'
import { visit, type Visit } from './browser'
import { layServerGround, type ServerGround } from './server'
import { wordsOf } from './words'

/** A ground with one job whose line is drawn, given to an inspector; made through the services that screens use. */
export interface JobGround { ground: ServerGround, admin: pg.Pool, jobId: string, siteName: string, inspector: { email: string, password: string }, end: () => Promise<void> }

export async function layJobGround(): Promise<JobGround> {
  const ground = await layServerGround()
  Object.assign(process.env, ground.environment, { LOG_LEVEL: 'silent' })
  const app = new pg.Pool({ connectionString: ground.database.appUrl, max: 3 })
  setPool(app)
  const [organisationId, clientId, siteId, jobId] = [randomUUID(), randomUUID(), randomUUID(), randomUUID()]
  const [siteName, password] = ['Corran Day Care', 'a dog barks at the fence']
  await entrance.makeOrganisation({ id: organisationId, name: 'Corran Wire', code: 'CW', timeZone: 'America/Chicago', system: 'imperial', language: 'en' })
  const member = async (email: string, name: string, role: 'manager' | 'inspector') => {
    const accountId = await entrance.makeAccount(randomUUID(), email, name, 'en')
    await entrance.changeAccount(accountId, { passwordHash: await hashPassword(password) })
    await entrance.takeMembership(organisationId, accountId, role)
    return { accountId, organisationId, organisationName: 'Corran Wire', standing: 'staff' as const, role }
  }
  const manager = await member('manager@corran.example', 'Tilda Corran', 'manager')
  const inspector = await member('inspector@corran.example', 'Rafe Alder', 'inspector')
  await putClient(manager, { id: clientId, name: 'Corran Board', address: '' })
  await putSite(manager, { id: siteId, clientId, name: siteName, address: '', timeZone: 'America/Chicago', authorityId: null })
  await createJob(manager, {
    id: jobId, siteId, title: 'Yard', neededBy: null, onsiteName: '', onsitePhone: '', emergencyName: '', emergencyPhone: '', contract: '', permit: '', buildingCode: '', gateTag: '',
    system: 'imperial', language: 'en', checklists: ['playground'], given: [{ accountId: inspector.accountId, as: 'inspector' }],
  })
  const read = readQuickLine('all 4 ft high, mesh 1 1/4 in, outer playground\nA\nrun 40 ft, 4 bays; gate 4 ft', { system: 'imperial', newId: randomUUID })
  if ('errors' in read) throw new Error(JSON.stringify(read.errors))
  await saveLine(manager, jobId, 0, read.line, 'First line')
  await stopQueue()
  await app.end()
  const admin = new pg.Pool({ connectionString: ground.database.adminUrl, max: 2 })
  admin.on('error', () => undefined)
  return { ground, admin, jobId, siteName, inspector: { email: 'inspector@corran.example', password }, async end() { await admin.end(); await ground.remove() } }
}

/** The inspector on a phone of their own, with the job taken along and a pass begun; the program is on the phone for when there is no signal. */
export async function walkOut(browser: Browser, baseURL: string, of: JobGround): Promise<Visit> {
  const say = wordsOf('en')
  const phone = await visit(browser, baseURL, 'phone')
  const { context, page } = phone
  const answer = await context.request.post('/api/account/sign-in', { data: of.inspector })
  if (!answer.ok()) throw new Error(`the inspector could not sign in: ${answer.status()}`)
  await page.goto('/w')
  await page.getByRole('button', { name: say('walk.home.take') }).click()
  await page.getByRole('link', { name: of.siteName }).click()
  await page.evaluate(async () => { await navigator.serviceWorker.ready })
  await page.getByRole('button', { name: say('walk.pass.start'), exact: true }).click()
  await page.getByRole('button', { name: say('walk.pass.finding.tieEnd'), exact: true }).waitFor()
  return phone
}
