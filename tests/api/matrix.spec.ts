import { readdirSync, readFileSync } from 'node:fs'
import { join, relative, resolve } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { may } from '#shared/permission/permission'
import { DEMO_PASSWORD } from '../../server/demo/people'
import { CLIENT_OF, emailOf, layDemoGround, type DemoActor, type DemoGround } from '../helpers/demoGround'
import { ROUTES, statusFor, type Call, type RouteRow, type Side } from '../helpers/routeTable'
import { Visitor, type Answer } from '../helpers/visitor'

const ACTORS = ['inspector', 'crew', 'manager', 'administrator', 'client'] as const
const server = resolve(import.meta.dirname, '../../server')
const files = ['api', 'routes'].flatMap(room => readdirSync(join(server, room), { recursive: true, withFileTypes: true }).filter(one => one.isFile()).map(one => relative(server, join(one.parentPath, one.name)))).sort()

let demo: DemoGround
let one: Side
let other: Side
const visitors = new Map<string, Visitor>()

async function sideOf(key: Side['key']): Promise<Side> {
  const first = async (sql: string, ...values: unknown[]) => (await demo.admin.query<{ id: string }>(sql, values)).rows[0]?.id ?? ''
  const id = await first('select id from organisation where code = $1', key === 'tarnbeck' ? 'TFG' : 'OWP')
  const jobId = await first(`select id from job where organisation_id = $1 and title in ('Upper lawn', 'Bus loop')`, id)
  const recordId = await first('select id from record where organisation_id = $1', id)
  const accounts = Object.fromEntries(await Promise.all(ACTORS.map(async actor => [actor, await first('select id from account where email = $1', actor === 'client' ? CLIENT_OF[key] : emailOf(key, actor))]))) as Side['accounts']
  return {
    key, id, jobId, recordId, accounts,
    signedJobId: await first(`select id from job where organisation_id = $1 and title in ('Deck gates', 'Bus loop')`, id),
    roundId: await first('select id from round where job_id = $1 and state = $2', jobId, 'open'),
    clientId: await first('select client_id as id from job where id = (select job_id from record where id = $1)', recordId),
    contactId: await first('select contact_id as id from recipient where record_id = $1 and email = $2', recordId, CLIENT_OF[key]),
    siteId: await first('select site_id as id from job where id = $1', jobId),
    deficiencyId: await first(`select id from deficiency_state where organisation_id = $1 and state in ('open', 'assigned') limit 1`, id),
    authorityId: await first(`select id from authority where organisation_id = $1 and name = 'Velmor County'`, id),
    photo: await first('select digest as id from photo where organisation_id = $1 order by digest limit 1', id),
    recordPhoto: ((await visitors.get(`${key} manager`)!.send('GET', `/api/records/${recordId}`)).json.document.photos as { digest: string }[])[0]?.digest ?? '',
  }
}

/** Not all jobs are given to the crew, or what is given and what is there would be the same. */
const takeFromCrew = () => demo.admin.query(`delete from job_given g using job j where j.id = g.job_id and g.account_id = $1 and j.title in ('Plant yard', 'Ball court')`, [one.accounts.crew])

async function signAllIn(): Promise<void> {
  for (const key of ['tarnbeck', 'osprey'] as const) for (const actor of ACTORS) visitors.set(`${key} ${actor}`, await demo.visitor(key, actor))
}

beforeAll(async () => {
  demo = await layDemoGround()
  await signAllIn()
  ;[one, other] = [await sideOf('tarnbeck'), await sideOf('osprey')]
  await takeFromCrew()
}, 300_000)
afterAll(() => demo.end())

const nobody = () => new Visitor(demo.server.baseURL)
const visitorFor = async (row: RouteRow, key: Side['key'], actor: DemoActor) => row.ownSession ? demo.visitor(key, actor) : visitors.get(`${key} ${actor}`)!

/** Every refusal is a problem document that tells nothing of the inside. */
function expectProblem(answer: Answer, what: string): void {
  expect(answer.type, what).toBe('application/problem+json')
  expect(Object.keys(answer.json).sort().filter(key => key !== 'errors'), what).toEqual(['detail', 'status', 'title', 'type'])
  expect(answer.json.status, what).toBe(answer.status)
  expect(answer.json.type, what).toMatch(/^\/problems\/[a-zA-Z]+$/)
  expect(answer.json.detail.length, what).toBeGreaterThan(10)
  expect(answer.bytes.toString(), what).not.toMatch(/node_modules|\.m?js\b|\.ts\b|select |insert |violates|relation|stack|syntax error|at Object/)
}

async function send(visitor: Visitor, { method, path, body, headers }: Call): Promise<Answer> {
  const answer = await visitor.send(method, path, body, headers)
  if (answer.status >= 400) expectProblem(answer, `${method} ${path}`)
  expect(answer.status, `${method} ${path}: ${answer.bytes.toString('utf8', 0, 300)}`).toBeLessThan(500)
  return answer
}

describe('the table of routes', () => {
  it('has a row for every route of the server, and no other', () => {
    expect(ROUTES.map(row => row.file).sort()).toEqual(files)
  })

  it('names the permission that the route itself names', () => {
    const named = (file: string) => /permission: '([\w.]+)'/.exec(readFileSync(join(server, file), 'utf8'))?.[1] ?? 'public'
    expect(ROUTES.filter(row => named(row.file) !== row.permission).map(row => `${row.file}: ${named(row.file)}`)).toEqual([])
  })
})

describe.each(ROUTES)('$file', (row) => {
  // What is for all asks nothing about the person: one stands for them.
  const actors = row.permission === 'public' ? ['manager'] as const : ACTORS
  const allowed = actors.filter(actor => row.permission === 'public' || may(actor, row.permission))

  it('answers each role of its own organisation as the permission table says, and a repeat alike', async () => {
    for (const actor of actors) {
      const visitor = await visitorFor(row, 'tarnbeck', actor)
      const call = await row.call(one, demo, actor)
      const answer = await send(visitor, call)
      if (!allowed.includes(actor)) {
        expect({ actor, status: answer.status, type: answer.json.type }).toEqual({ actor, status: 403, type: '/problems/notAllowed' })
        continue
      }
      expect({ actor, status: answer.status, body: answer.status >= 400 ? answer.json : null }).toMatchObject({ actor, status: statusFor(row.ok, actor, 200) })
      if (answer.status < 400 && row.file.startsWith('api/')) expect(answer.headers.get('cache-control')).toMatch(/^private/)
      const repeat = await send(visitor, call)
      expect({ actor, status: repeat.status }).toEqual({ actor, status: statusFor(row.again ?? undefined, actor, answer.status) })
      if (row.again === undefined && row.sameBody !== false) expect(repeat.bytes.equals(answer.bytes), `${actor} gets the same body again`).toBe(true)
    }
  })

  it('answers nobody with 401, unless it is for all', async () => {
    const answer = await send(nobody(), await row.call(one, demo, 'manager'))
    if (row.permission === 'public') expect(answer.status).toBe(statusFor(row.ok, 'manager', 200))
    else expect({ status: answer.status, type: answer.json.type }).toEqual({ status: 401, type: '/problems/signInNeeded' })
  })

  if (row.foreign !== null) it('shows the other organisation\'s people nothing', async () => {
    for (const actor of allowed) {
      const answer = await send(await visitorFor(row, 'osprey', actor), await row.call(one, demo, actor))
      expect({ actor, status: answer.status }).toEqual({ actor, status: statusFor(row.foreign ?? undefined, actor, 404) })
    }
  })

  if (row.rows) it('answers with exactly the rows that are theirs', async () => {
    for (const [key, side] of [['tarnbeck', one], ['osprey', other]] as const) {
      for (const actor of allowed) {
        const answer = await send(await visitorFor(row, key, actor), await row.call(side, demo, actor))
        const sql = actor === 'client' ? row.rows!.client! : actor === 'crew' ? row.rows!.crew ?? row.rows!.staff : row.rows!.staff
        const theirs = await demo.admin.query<{ id: string }>(sql, [side.id, side.accounts[actor]].slice(0, sql.includes('$2') ? 2 : 1))
        expect({ key, actor, ids: row.rows!.ids(answer.json as never, answer.bytes.toString()).sort() }).toEqual({ key, actor, ids: theirs.rows.map(each => each.id).sort() })
      }
    }
  })

  it('refuses what is malformed, before anything is done', async () => {
    const actor = allowed.find(each => statusFor(row.ok, each, 200) < 300) ?? allowed[0]!
    const call = await row.call(one, demo, actor)
    const visitor = row.permission === 'public' ? nobody() : await visitorFor(row, 'tarnbeck', actor)
    const refused = async (status: number, type: string, change: Partial<Call>) => {
      const answer = await send(visitor, { ...call, ...change })
      expect({ change, status: answer.status, type: answer.json?.type }).toEqual({ change, status, type: `/problems/${type}` })
      return answer.json.errors as { pointer: string }[] | undefined
    }
    if (call.method !== 'GET') {
      await refused(403, 'foreignOrigin', { headers: { ...call.headers, origin: 'https://elsewhere.example' } })
      await refused(403, 'foreignOrigin', { headers: { ...call.headers, 'sec-fetch-site': 'cross-site' } })
    }
    if (/\[\w+\]/.test(row.file)) {
      await refused(404, 'notFound', { path: call.path.replace(/[\da-f]{8}-[\da-f-]{27}|[\da-f]{64}|a{43}|csv(?=\?|$)/g, 'x') })
    }
    if (call.body === undefined || call.body instanceof Uint8Array) return
    const max = row.maxBytes ?? 1_000_000
    await refused(400, 'unreadable', { body: '{"a":' })
    await refused(400, 'unreadable', { body: '' })
    await refused(415, 'wrongType', { headers: { 'content-type': 'text/plain' } })
    await refused(413, 'tooLarge', { body: JSON.stringify(call.body) + ' '.repeat(max) })
    expect(await refused(422, 'invalid', { body: [] })).toHaveLength(1)
    expect(await refused(422, 'invalid', { body: { ...call.body as object, surplus: 1 } })).toEqual([expect.objectContaining({ pointer: '/surplus', code: 'unknown' })])
    for (const key of Object.keys(call.body as object)) {
      const errors = await refused(422, 'invalid', { body: { ...call.body as object, [key]: { never: true } } })
      expect(errors?.map(error => error.pointer.split('/')[1]), key).toContain(key)
    }
    const text = Object.entries(call.body as object).find(([key, value]) => typeof value === 'string' && ['name', 'title', 'message', 'reason', 'why', 'password', 'now'].includes(key))
    if (text) {
      for (const bad of ['a\u0000b', 'a\ud800b']) expect(await refused(422, 'invalid', { body: { ...call.body as object, [text[0]]: bad } }), JSON.stringify(bad)).toEqual([expect.objectContaining({ pointer: `/${text[0]}` })])
    }
  })

  it('knows no other method', async () => {
    const call = await row.call(one, demo, 'manager')
    const base = row.file.replace(/\.\w+\.ts$/, '')
    const taken = files.filter(file => file.replace(/\.\w+\.ts$/, '') === base).map(file => /\.(\w+)\.ts$/.exec(file)![1]!.toUpperCase())
    const visitor = visitors.get('tarnbeck manager')!
    for (const method of ['PUT', 'POST', 'PATCH', 'DELETE', 'GET'].filter(each => !taken.includes(each))) {
      const answer = await send(visitor, { method, path: call.path })
      expect([404, 405], `${method} ${call.path}: ${answer.status}`).toContain(answer.status)
    }
  })
})

describe('queries', () => {
  beforeAll(signAllIn)
  const manager = () => visitors.get('tarnbeck manager')!

  it.each([
    ['/api/jobs?surplus=1', '/query/surplus'], ['/api/jobs?filter=mine', '/query/filter'], ['/api/jobs?most=0', '/query/most'], ['/api/jobs?siteId=7', '/query/siteId'], ['/api/jobs?find=%00', '/query/find'],
    ['/api/jobs?after=garbage', '/query/after'], ['/api/jobs?after=00000000-0000-4000-8000-000000000000.2026-99-99', '/query/after'], ['/api/jobs?sort=number&after=00000000-0000-4000-8000-000000000000.99999999999', '/query/after'],
    ['/api/tables/jobs/csv?find=a%00b', '/query/find'], ['/api/deficiencies?after=garbage', '/query/after'], ['/api/deficiencies?sort=job&after=00000000-0000-4000-8000-000000000000.x', '/query/after'], ['/api/records?most=x', '/query/most'], ['/api/records?find=%00', '/query/find'], ['/api/numbers?authorityId=1', '/query/authorityId'], ['/api/numbers/page', '/query/setting'],
  ])('%s is refused with a pointer', async (path, pointer) => {
    const answer = await send(manager(), { method: 'GET', path })
    expect({ status: answer.status, pointers: answer.json.errors?.map((error: { pointer: string }) => error.pointer) }).toEqual({ status: 422, pointers: [pointer] })
  })

  it('refuses numbers past what the database holds, and bytes that are no text', async () => {
    for (const after of ['-1', '2147483648', '1e99', 'NaN']) expect((await send(manager(), { method: 'GET', path: `/api/field/v1/rounds/${one.roundId}/entries?after=${after}` })).status, after).toBe(422)
    for (const path of ['/api/jobs/%E0%A4%A', '/api/jobs/%00', '/records/%ff.pdf', '/api/photos/..%2f..%2fetc%2fpasswd']) expect((await send(manager(), { method: 'GET', path })).status, path).toBe(404)
  })

  it('takes no day that is not in the calendar', async () => {
    const { body } = await ROUTES.find(row => row.file === 'api/jobs/index.post.ts')!.call(one, demo, 'manager')
    for (const neededBy of ['2026-02-30', '2026-13-01', '0000-01-01', '2026-00-10']) {
      const answer = await send(manager(), { method: 'POST', path: '/api/jobs', body: { ...body as object, neededBy } })
      expect({ neededBy, status: answer.status, pointer: answer.json.errors?.[0]?.pointer }).toEqual({ neededBy, status: 422, pointer: '/neededBy' })
    }
  })
})

describe('what is asked for by another\'s id', () => {
  it('gives crew nothing of a job that was not given to them, on any path', async () => {
    // Tags that were assigned above gave them the job of each.
    await takeFromCrew()
    const { rows: [{ id: jobId, round }] } = await demo.admin.query(`select j.id, r.id as round from job j join round r on r.job_id = j.id where j.title = 'Ball court'`)
    const closed = { ...one, jobId, roundId: round }
    for (const row of ROUTES.filter(each => /\[(jobId|roundId)\]/.test(each.file) && each.permission !== 'public' && may('crew', each.permission))) {
      expect((await send(visitors.get('tarnbeck crew')!, await row.call(closed, demo, 'crew'))).status, row.file).toBe(404)
      expect((await send(visitors.get('tarnbeck inspector')!, await row.call(closed, demo, 'inspector'))).status, row.file).toBe(200)
    }
  })

  it('writes a row of one\'s own under an id that another organisation uses, and leaves theirs alone', async () => {
    const theirs = (await demo.admin.query('select name, address from client where organisation_id = $1 and id = $2', [one.id, one.clientId])).rows
    const answer = await send(visitors.get('osprey manager')!, { method: 'PUT', path: '/api/clients', body: { id: one.clientId, name: 'Somebody else', address: '1 Other Road' } })
    expect(answer.status).toBe(200)
    expect((await demo.admin.query('select name, address from client where organisation_id = $1 and id = $2', [one.id, one.clientId])).rows).toEqual(theirs)
  })

  it('gives another organisation\'s tag to nobody, and says that it is not there', async () => {
    const call = await ROUTES.find(row => row.file === 'api/deficiencies/assignments.post.ts')!.call(one, demo, 'manager')
    const answer = await send(visitors.get('osprey manager')!, call)
    expect(answer.json).toEqual({ written: [], refused: [{ deficiencyId: one.deficiencyId, code: 'notFound' }] })
    expect((await demo.admin.query('select from entry where id = $1', [(call.body as { tags: { entryId: string }[] }).tags[0]!.entryId])).rowCount).toBe(0)
  })

  it('narrows a list by another organisation\'s id to nothing', async () => {
    const manager = visitors.get('osprey manager')!
    expect((await send(manager, { method: 'GET', path: `/api/jobs?siteId=${one.siteId}` })).json.rows).toEqual([])
    expect((await send(manager, { method: 'GET', path: `/api/numbers?authorityId=${one.authorityId}` })).json).toEqual([])
  })
})

describe('a fault of ours', () => {
  it('is told without the inside, and logged by its code without a text', async () => {
    await demo.admin.query('alter table site rename column address to address_elsewhere')
    try {
      const answer = await visitors.get('tarnbeck manager')!.send('GET', '/api/sites')
      expectProblem(answer, 'a broken query')
      expect(answer).toMatchObject({ status: 500, json: { type: '/problems/ours' } })
      // 42703 is PostgreSQL's "undefined column".
      await expect.poll(() => demo.server.log(), { timeout: 20_000 }).toContain('"code":"42703"')
    }
    finally { await demo.admin.query('alter table site rename column address_elsewhere to address') }
  })
})

// Last: the log of everything above.
describe('the server\'s log', () => {
  it('holds ids alone: no name, address, e-mail, telephone, word of anybody, password or token', async () => {
    const log = demo.server.log()
    expect(log.split('\n').length).toBeGreaterThan(2)
    const { rows } = await demo.admin.query<{ text: string }>(`
      select name as text from account union select email from account union select name from contact union select email from contact union select phone from contact union select name from client
      union select name from site union select address from site union select name from organisation union select phone from organisation union select title from job union select onsite_name from job
      union select permit from job union select payload->>'words' from entry where payload ? 'words' union select payload->>'note' from entry where payload ? 'note' union select reason from (select standing_reason as reason from record) r`)
    const texts = rows.map(row => row.text).filter(text => text && text.length > 3)
    expect(texts.length).toBeGreaterThan(60)
    const secrets = [DEMO_PASSWORD, ...[...visitors.values()].flatMap(visitor => visitor.secrets()), ...(await demo.ground.mails()).flatMap(mail => [...mail.text.matchAll(/\/link\/([\w-]{43})/g)].map(found => found[1]!))]
      // A cookie may also hold a plain word, as the language's "en".
      .filter(secret => secret.length > 8)
    expect(secrets.length).toBeGreaterThan(10)
    expect([...texts, ...secrets].filter(text => log.includes(text))).toEqual([])
    expect(log).not.toMatch(/[\w.+-]+@[\w-]+\.\w+/)
  })
})
