import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { linkIn } from '../helpers/demoGround'
import { ORGANISATION, PEOPLE } from '../helpers/roundStory'
import { layStoryGround, STORY_PASSWORD, type StoryGround } from '../helpers/storyGround'
import { Visitor } from '../helpers/visitor'

let story: StoryGround
beforeAll(async () => {
  story = await layStoryGround()
  await story.admin.query(`update membership set role = 'administrator' where account_id = $1`, [PEOPLE.bo])
}, 120_000)
afterAll(() => story.end())

const nobody = () => new Visitor(story.server.baseURL)
const me = async (visitor: Visitor) => (await visitor.send('GET', '/api/account/me')).status
const counts = async () => (await story.admin.query('select (select count(*) from session)::int as sessions, (select count(*) from link where redeemed_at is not null)::int as redeemed, (select count(*) from account)::int as accounts, (select count(*) from membership)::int as memberships')).rows[0]
const mailedTo = async (address: string) => linkIn((await story.ground.mailThat(mail => mail.envelope.to.includes(address))).text)

describe('signing in', () => {
  it('opens a session that no script reads and no other site sends', async () => {
    const visitor = nobody()
    const answer = await visitor.signIn('ana@story.example', STORY_PASSWORD)
    expect(answer).toMatchObject({ status: 200, json: { signedIn: true } })
    expect(answer.headers.getSetCookie().join(';')).toMatch(/HttpOnly.*SameSite=Lax/i)
    expect((await visitor.send('GET', '/api/account/me')).json).toMatchObject({ account: { email: 'ana@story.example' }, standing: 'staff', role: 'inspector', organisation: { id: ORGANISATION } })
  })

  it('takes the address in any case and with spaces around it', async () => {
    expect((await nobody().signIn('  Ana@Story.Example ', STORY_PASSWORD)).status).toBe(200)
  })

  it('answers an unknown address and a wrong password alike', async () => {
    const [unknown, wrong] = [await nobody().signIn('who@story.example', 'never was one'), await nobody().signIn('ana@story.example', 'never was one')]
    expect(unknown.status).toBe(401)
    expect(unknown.json).toEqual(wrong.json)
    expect([...unknown.headers.keys()].sort()).toEqual([...wrong.headers.keys()].sort())
  })

  it('slows after ten wrong passwords for an address, says how long, and even the right one waits', async () => {
    for (let at = 0; at < 10; at++) expect((await nobody().signIn('crew@story.example', `wrong ${at}`)).status).toBe(401)
    const answer = await nobody().signIn('crew@story.example', STORY_PASSWORD)
    expect(answer).toMatchObject({ status: 429, type: 'application/problem+json', json: { type: '/problems/tooOften' } })
    expect(Number(answer.headers.get('retry-after'))).toBeGreaterThan(60)
    expect(Number(answer.headers.get('retry-after'))).toBeLessThanOrEqual(900)
    // Another address is none the slower.
    expect((await nobody().signIn('ana@story.example', STORY_PASSWORD)).status).toBe(200)
    await story.admin.query('delete from limiter')
  })

  it('forgets wrong tries after a right one', async () => {
    for (let round = 0; round < 2; round++) {
      for (let at = 0; at < 9; at++) await nobody().signIn('ana@story.example', 'wrong')
      expect((await nobody().signIn('ana@story.example', STORY_PASSWORD)).status).toBe(200)
    }
    await story.admin.query('delete from limiter')
  })

  it('takes no cookie that was changed or made by another', async () => {
    const visitor = await story.signedIn('ana')
    const cookies = (visitor as unknown as { cookies: Map<string, string> }).cookies
    const [name, value] = [...cookies][0]!
    cookies.set(name, `${value.slice(0, -6)}AAAAAA`)
    expect(await me(visitor)).toBe(401)
    cookies.set(name, 'nothing')
    expect(await me(visitor)).toBe(401)
  })
})

describe('signing out', () => {
  it('ends this session alone, at once, whoever keeps its cookie', async () => {
    const [here, there] = [await story.signedIn('ana'), await story.signedIn('ana')]
    const copy = here.twin()
    expect((await here.send('POST', '/api/account/sign-out', {})).status).toBe(200)
    expect([await me(here), await me(copy), await me(there)]).toEqual([401, 401, 200])
  })

  it('everywhere ends every session of the person at once, and nobody else\'s', async () => {
    const [one, two, other] = [await story.signedIn('ana'), await story.signedIn('ana'), await story.signedIn('bo')]
    expect((await one.send('POST', '/api/account/sign-out', { everywhere: true })).status).toBe(200)
    expect([await me(one), await me(two), await me(other)]).toEqual([401, 401, 200])
  })

  it('comes with the end of a role, at once', async () => {
    const [crew, bo] = [await story.signedIn('crew'), await story.signedIn('bo')]
    expect(await me(crew)).toBe(200)
    expect((await bo.send('PATCH', `/api/people/${PEOPLE.crew}`, { role: null })).status).toBe(200)
    expect(await me(crew)).toBe(401)
    expect((await nobody().signIn('crew@story.example', STORY_PASSWORD)).json).toMatchObject({ status: 403 })
    expect((await bo.send('PATCH', `/api/people/${PEOPLE.crew}`, { role: 'crew' })).status).toBe(200)
    expect(await me(await story.signedIn('crew'))).toBe(200)
  })

  it('is not how the last administrator goes', async () => {
    const bo = await story.signedIn('bo')
    expect(await bo.send('PATCH', `/api/people/${PEOPLE.bo}`, { role: 'inspector' })).toMatchObject({ status: 409, json: { type: '/problems/conflict' } })
    expect(await me(bo)).toBe(200)
  })
})

describe('a mailed link', () => {
  it('changes nothing when it is looked at, as often as a mail filter likes', async () => {
    const bo = await story.signedIn('bo')
    expect((await bo.send('POST', '/api/people', { email: 'new@story.example', name: 'New Hand', role: 'inspector' })).status).toBe(202)
    const token = await mailedTo('new@story.example')
    const before = await counts()
    for (let at = 0; at < 3; at++) expect(await nobody().send('GET', `/api/account/links/${token}`)).toMatchObject({ status: 200, json: { purpose: 'invitation', email: 'new@story.example', role: 'inspector', hasPassword: false } })
    for (const path of [`/api/account/links/${token}`, `/link/${token}`]) for (const method of ['HEAD', 'GET']) await nobody().send(method, path)
    expect(await counts()).toEqual(before)
    const visitor = nobody()
    expect(await visitor.send('POST', `/api/account/links/${token}`, {})).toMatchObject({ status: 422, json: { errors: [{ pointer: '/password' }] } })
    expect(await visitor.send('POST', `/api/account/links/${token}`, { password: 'too short' })).toMatchObject({ status: 422 })
    expect(await visitor.send('POST', `/api/account/links/${token}`, { password: 'a dozen letters' })).toMatchObject({ status: 200, json: { signedIn: true } })
    expect((await visitor.send('GET', '/api/account/me')).json).toMatchObject({ role: 'inspector', organisation: { id: ORGANISATION } })
    expect((await nobody().signIn('new@story.example', 'a dozen letters')).status).toBe(200)
  })

  it('is redeemed once, also by two presses at the same moment', async () => {
    const bo = await story.signedIn('bo')
    await bo.send('POST', '/api/people', { email: 'twice@story.example', name: 'Two Hands', role: 'crew' })
    const token = await mailedTo('twice@story.example')
    const press = () => nobody().send('POST', `/api/account/links/${token}`, { password: 'a dozen letters' })
    const [one, two] = await Promise.all([press(), press()])
    expect([one!.status, two!.status].sort()).toEqual([200, 410])
    expect((await press()).json).toMatchObject({ status: 410, type: '/problems/linkSpent' })
    expect((await nobody().send('GET', `/api/account/links/${token}`)).status).toBe(410)
  })

  it('is not known when one letter differs, and not good when it is old', async () => {
    const bo = await story.signedIn('bo')
    await bo.send('POST', '/api/people', { email: 'late@story.example', name: 'Late Hand', role: 'crew' })
    const token = await mailedTo('late@story.example')
    expect((await nobody().send('GET', `/api/account/links/${token.slice(0, -1)}${token.endsWith('A') ? 'B' : 'A'}`)).status).toBe(404)
    await story.admin.query(`update link set expires_at = now() - interval '1 second' where email = 'late@story.example'`)
    expect((await nobody().send('POST', `/api/account/links/${token}`, { password: 'a dozen letters' })).status).toBe(410)
  })

  it('is kept as a hash alone', async () => {
    const bo = await story.signedIn('bo')
    await bo.send('POST', '/api/people', { email: 'hash@story.example', name: 'Hash', role: 'crew' })
    const token = await mailedTo('hash@story.example')
    const { rows } = await story.admin.query('select count(*)::int as n from link l where l::text like $1', [`%${token}%`])
    expect(rows).toEqual([{ n: 0 }])
  })
})

describe('a new password', () => {
  it('is set by a mailed link, and every session of before ends', async () => {
    const before = await story.signedIn('manager')
    expect(await nobody().send('POST', '/api/account/reset', { email: 'manager@story.example' })).toMatchObject({ status: 202 })
    const token = await mailedTo('manager@story.example')
    expect(await me(before)).toBe(200)
    const visitor = nobody()
    expect((await visitor.send('POST', `/api/account/links/${token}`, { password: 'another dozen letters' })).status).toBe(200)
    expect([await me(before), await me(visitor)]).toEqual([401, 200])
    expect((await nobody().signIn('manager@story.example', STORY_PASSWORD)).status).toBe(401)
    expect((await nobody().signIn('manager@story.example', 'another dozen letters')).status).toBe(200)
  })

  it('is asked for without telling who is there', async () => {
    const [known, unknown] = [await nobody().send('POST', '/api/account/reset', { email: 'ana@story.example' }), await nobody().send('POST', '/api/account/reset', { email: 'none@story.example' })]
    expect([known.status, known.json]).toEqual([unknown.status, unknown.json])
    expect((await story.ground.mails()).some(mail => mail.envelope.to.includes('none@story.example'))).toBe(false)
  })

  it('is asked for five times an hour at most', async () => {
    for (let at = 0; at < 5; at++) expect((await nobody().send('POST', '/api/account/reset', { email: 'often@story.example' })).status).toBe(202)
    const answer = await nobody().send('POST', '/api/account/reset', { email: 'often@story.example' })
    expect(answer.status).toBe(429)
    expect(Number(answer.headers.get('retry-after'))).toBeGreaterThan(0)
  })

  it('needs the one of now, and ends the other sessions', async () => {
    const [here, there] = [await story.signedIn('ana'), await story.signedIn('ana')]
    expect(await here.send('POST', '/api/account/password', { now: 'not this', next: 'a third dozen letters' })).toMatchObject({ status: 422, json: { errors: [{ pointer: '/now' }] } })
    expect(await me(there)).toBe(200)
    expect((await here.send('POST', '/api/account/password', { now: STORY_PASSWORD, next: 'a third dozen letters' })).status).toBe(200)
    expect([await me(here), await me(there)]).toEqual([200, 401])
    expect((await here.send('POST', '/api/account/password', { now: 'a third dozen letters', next: STORY_PASSWORD })).status).toBe(200)
  })
})

describe('acting for another', () => {
  const other = '019a0001-0000-7000-8000-0000000000ff'
  beforeAll(async () => {
    await story.admin.query(`insert into organisation (id, name, code, time_zone) values ($1, 'Second Fence', 'SEC', 'America/Chicago')`, [other])
    await story.admin.query(`insert into membership (organisation_id, account_id, role) values ($1, $2, 'crew')`, [other, PEOPLE.ana])
  })

  it('is possible where the person has a part, with the role that they have there, and the session of before is over', async () => {
    const ana = await story.signedIn('ana')
    const before = (await ana.send('GET', '/api/account/me')).json
    expect(before.standings.map((one: { organisationId: string, role: string }) => [one.organisationId, one.role]).sort()).toEqual([[ORGANISATION, 'inspector'], [other, 'crew']])
    const copy = ana.twin()
    const [from, to] = before.organisation.id === other ? [other, ORGANISATION] : [ORGANISATION, other]
    expect((await ana.send('POST', '/api/account/act-for', { standing: to === other ? 'crew' : 'staff', organisationId: to })).status).toBe(200)
    expect((await ana.send('GET', '/api/account/me')).json).toMatchObject({ organisation: { id: to } })
    expect(await me(copy)).toBe(401)
    expect((await ana.send('POST', '/api/account/act-for', { standing: from === other ? 'crew' : 'staff', organisationId: from })).status).toBe(200)
  })

  it('is refused where they have none, or not that one', async () => {
    const ana = await story.signedIn('ana')
    for (const body of [{ standing: 'staff', organisationId: other }, { standing: 'crew', organisationId: ORGANISATION }, { standing: 'client', organisationId: null }, { standing: 'staff', organisationId: null }])
      expect(await ana.send('POST', '/api/account/act-for', body), JSON.stringify(body)).toMatchObject({ status: 403 })
    expect(await me(ana)).toBe(200)
  })
})
