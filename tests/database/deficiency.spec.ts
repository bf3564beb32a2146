import { randomUUID } from 'node:crypto'
import { Workbook } from 'exceljs'
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest'
import { withSession } from '../../server/database/withSession'
import { tagListSchema, type TagListQuery } from '#shared/api/deficiency'
import { assignTags } from '../../server/services/deficiency/assignTags'
import { listTags } from '../../server/services/deficiency/listTags'
import { tagTable } from '../../server/services/table/listTables'
import { writeTable } from '../../server/services/table/writeTable'
import { readTag } from '../../server/services/deficiency/readTag'
import { acceptEntries } from '../../server/services/entry/acceptEntries'
import { makeRound, makeStoryOrganisation, senderOf, type StoryAt } from '../helpers/roundAt'
import { bay, gap, GATE, look, ORGANISATION, PEOPLE, RUN, RUN2, trial } from '../helpers/roundStory'
import { makeScene, type Scene } from '../helpers/scene'

vi.setConfig({ testTimeout: 120_000 })
let scene: Scene
let one: StoryAt
let two: StoryAt
const ids: Record<string, string> = {}
const SECOND = randomUUID()
const manager = { ...senderOf(PEOPLE.manager), accountId: PEOPLE.manager, organisationId: ORGANISATION }

/** Sends what a story holds, each entry by its author. */
async function send(story: StoryAt, from = 0): Promise<void> {
  for (const entry of story.entries.slice(from)) {
    const { results } = await acceptEntries(senderOf(entry.envelope.author), story.round, story.wires().filter((_, at) => story.entries[at] === entry))
    expect(results.map(result => result.state)).toEqual(['accepted'])
  }
}
const query = (more: Partial<Record<keyof TagListQuery, unknown>> = {}) => tagListSchema.parse(more)
const tagsOf = async (more: Parameters<typeof query>[0] = {}, who: Parameters<typeof listTags>[0] = manager) => (await listTags(who, query(more))).rows.map(row => row.tag)

beforeAll(async () => {
  scene = await makeScene()
  const ground = await makeStoryOrganisation(scene.admin)
  one = await makeRound(scene.admin, ground)
  two = await makeRound(scene.admin, ground)
  const found = (story: StoryAt, tag: string, element: string, check: string) => ids[tag] = story.reading({ element, check, place: bay(1) }, check === 'gap-below' ? gap(3) : check === 'self-closing' ? trial(1) : look('finding'), { tag })
  found(one, 'A1', RUN, 'gap-below')
  found(one, 'A2', GATE, 'self-closing')
  found(one, 'A3', RUN2, 'post-spacing')
  found(one, 'A4', RUN2, 'tie-ends')
  one.write('assignment', { to: { account: null, name: 'Helper Jo' }, due: '2020-01-02T15:00:00-05:00' }, { author: PEOPLE.manager, ...one.about([ids.A2!]) })
  one.write('cannot', { waitsFor: 'a post' }, { author: PEOPLE.crew, ...one.about([ids.A3!]) })
  one.inError(ids.A4!)
  found(two, 'B1', RUN, 'tie-ends')
  one.correct([ids.A1!])
  await send(one)
  await send(two)
  await scene.admin.query('insert into element (organisation_id, id, site_id, kind, tag) values ($1, $2, $3, $4, $5)', [ORGANISATION, RUN, ground.siteId, 'run', 'R1'])
})
afterAll(() => scene.end())

describe('the list of tags', () => {
  it('holds those of all jobs that are open, what is due first', async () => {
    expect(await tagsOf()).toEqual(['A2', ...(await tagsOf()).slice(1)])
    expect((await tagsOf()).sort()).toEqual(['A1', 'A2', 'A3', 'B1'])
    const { counts } = await listTags(manager, query())
    expect(counts).toEqual({ open: 4, toCorrect: 2, waiting: 1, offered: 0, corrected: 1, settled: 1, overdue: 1 })
  })

  it('is narrowed by state, class, person, job, date and words', async () => {
    expect(await tagsOf({ filter: 'waiting' })).toEqual(['A3'])
    expect(await tagsOf({ filter: 'settled' })).toEqual(['A4'])
    expect(await tagsOf({ class: 'outOfUse' })).toEqual(['A2'])
    expect(await tagsOf({ given: 'nobody' })).toEqual(['B1'])
    expect(await tagsOf({ jobId: two.job })).toEqual(['B1'])
    expect(await tagsOf({ overdue: 'yes' })).toEqual(['A2'])
    expect((await tagsOf({ find: 'r1' })).sort()).toEqual(['A1', 'B1'])
    expect(await tagsOf({ find: 'spacing' })).toEqual(['A3'])
    expect(await tagsOf({ find: '%' })).toEqual([])
  })

  it('names the element by the register, or by the line as built where the field added it', async () => {
    const { rows } = await listTags(manager, query({ sort: 'tag' }))
    expect(rows.map(row => [row.tag, row.elementTag])).toEqual([['A1', 'R1'], ['A2', 'G1'], ['A3', 'R2'], ['B1', 'R1']])
  })

  it('says who has a tag, also somebody without an account', async () => {
    const { rows } = await listTags(manager, query({ find: 'a2' }))
    expect(rows[0]).toMatchObject({ tag: 'A2', class: 'outOfUse', state: 'assigned', givenTo: 'Helper Jo', jobId: one.job, siteName: 'Story yard' })
    expect(new Date(rows[0]!.due!).toISOString()).toBe('2020-01-02T20:00:00.000Z')
  })

  it.each(['due', 'job', 'tag', 'class', 'state'] as const)('comes whole and once a page at a time, by %s both ways', async (sort) => {
    for (const descending of [undefined, 'yes']) {
      const whole = await tagsOf({ sort, descending })
      const paged: string[] = []
      for (let after: string | undefined; ;) {
        const page = await listTags(manager, query({ sort, descending, after, most: 1 }))
        paged.push(...page.rows.map(row => row.tag))
        if (!page.next) break
        after = page.next
      }
      expect(paged).toEqual(whole)
      expect(new Set(paged).size).toBe(4)
    }
    if (sort === 'tag') expect(await tagsOf({ sort, descending: 'yes' })).toEqual(['B1', 'A3', 'A2', 'A1'])
  })

  it('shows nothing of it to another organisation', async () => {
    expect(await tagsOf({}, scene.one.as('manager'))).toEqual([])
    await expect(readTag(scene.one.as('manager'), ids.A1!)).rejects.toMatchObject({ code: 'notFound' })
  })

  it('goes out as a table, with nothing that a table program would run', async () => {
    await scene.admin.query(`update job set title = '=cmd()' where id = $1`, [two.job])
    const table = await tagTable(manager, query({ sort: 'tag' }))
    const lines = (await writeTable(table, 'csv')).toString('utf8').split('\r\n')
    expect(lines).toHaveLength(5)
    expect(lines[0]).toBe('tag,check,job,title,site,element,bay,class,state,with,due,waits for,held,until')
    expect(lines[4]).toContain(`,'=cmd(),`)
    // A workbook is a zip of XML (ISO/IEC 29500).
    const bytes = await writeTable(table, 'xlsx')
    const book = new Workbook()
    await book.xlsx.load(bytes as unknown as ArrayBuffer)
    const sheet = book.getWorksheet('tags')!
    expect(sheet.rowCount).toBe(5)
    expect(sheet.getRow(5).values).toContain(`'=cmd()`)
    expect(sheet.getRow(5).getCell(7).value).toBe(1)
  })
})

describe('one tag', () => {
  it('tells what happened in its order, with who wrote it', async () => {
    const { row, entries, people } = await readTag(manager, ids.A1!)
    expect(row.tag).toBe('A1')
    expect(entries.map(entry => entry.envelope.kind)).toEqual(['reading', 'correction'])
    expect(people).toEqual({ [PEOPLE.ana]: 'ana', [PEOPLE.crew]: 'crew' })
  })
})

describe('giving tags from the desk', () => {
  const to = { account: PEOPLE.crew, name: 'crew' }
  const wanted = (...tags: string[]) => tags.map(tag => ({ deficiencyId: ids[tag] ?? randomUUID(), entryId: randomUUID() }))

  it('writes one entry for each over several jobs, once, and names those that cannot be given', async () => {
    const body = { tags: [...wanted('A3', 'B1', 'A4'), { deficiencyId: randomUUID(), entryId: randomUUID() }], to, due: '2027-03-05T15:00:00-05:00', words: 'Bring the puller' }
    const answer = await assignTags(manager, body)
    expect(answer).toEqual({ written: [ids.A3, ids.B1], refused: [{ deficiencyId: ids.A4, code: 'ended' }, { deficiencyId: body.tags[3]!.deficiencyId, code: 'notFound' }] })
    const { rows } = await listTags(manager, query({ given: PEOPLE.crew, sort: 'tag' }))
    // What waited for a post does no longer: it was given anew.
    expect(rows.map(row => [row.tag, row.state, row.givenTo])).toEqual([['A3', 'assigned', 'crew'], ['B1', 'assigned', 'crew']])
    const before = (await scene.admin.query('select count(*)::int as n from entry')).rows[0].n
    expect(await assignTags(manager, body)).toEqual(answer)
    expect((await scene.admin.query('select count(*)::int as n from entry')).rows[0].n).toBe(before)
  })

  it('lets whoever of the crew gets a tag see its job', async () => {
    const seen = () => withSession(senderOf(PEOPLE.crew), async tx => (await tx.client.query<{ tag: string }>('select tag from deficiency_state order by tag')).rows.map(row => row.tag))
    await scene.admin.query('delete from job_given where job_id = $1', [two.job])
    expect(await seen()).not.toContain('B1')
    await assignTags(manager, { tags: wanted('B1'), to, due: null })
    expect(await seen()).toContain('B1')
    // Whoever is no crew sees every job of the organisation already.
    await assignTags(manager, { tags: wanted('B1'), to: { account: PEOPLE.bo, name: 'bo' }, due: null })
    expect((await scene.admin.query('select account_id from job_given where job_id = $1', [two.job])).rows).toEqual([{ account_id: PEOPLE.crew }])
  })

  it('in the field lets them see its job too, also where the crew\'s own push lets the assignment in', async () => {
    const seen = () => withSession(senderOf(PEOPLE.crew), async tx => (await tx.client.query('select from job where id = $1', [two.job])).rowCount === 1)
    await scene.admin.query('delete from job_given where job_id = $1', [two.job])
    two.assign([ids.B1!], { author: PEOPLE.ana })
    await send(two, two.entries.length - 1)
    expect(await seen()).toBe(true)
    await scene.admin.query('delete from job_given where job_id = $1 and account_id <> $2', [two.job, PEOPLE.crew])
    // Bo's assignment names a word of the crew that is still on its way; it is held, and let in by whoever brings that word.
    const cannot = two.write('cannot', { waitsFor: 'a tie' }, { author: PEOPLE.crew, ...two.about([ids.B1!]) })
    await scene.admin.query(`insert into account (id, email, name) values ($1, 'second@story.example', 'second')`, [SECOND])
    await scene.admin.query(`insert into membership (organisation_id, account_id, role) values ($1, $2, 'crew')`, [ORGANISATION, SECOND])
    two.write('assignment', { to: { account: SECOND, name: 'second' }, due: null }, { author: PEOPLE.bo, ...two.about([ids.B1!]), answers: [ids.B1!, cannot] })
    const [word, assignment] = two.wires(two.entries.length - 2)
    expect((await acceptEntries(senderOf(PEOPLE.bo), two.round, [assignment!])).results[0]!.state).toBe('held')
    expect((await acceptEntries(senderOf(PEOPLE.crew), two.round, [word!])).results[0]!.state).toBe('accepted')
    expect((await scene.admin.query('select account_id from job_given where job_id = $1 order by 1', [two.job])).rows.map(row => row.account_id as string)).toEqual([PEOPLE.crew, SECOND].sort())
  })

  it('gives no tag of another organisation', async () => {
    const stranger = { ...scene.one.as('manager'), organisationId: scene.one.id }
    const answer = await assignTags(stranger, { tags: wanted('B1'), to: { account: null, name: 'X' }, due: null })
    expect(answer.written).toEqual([])
    expect(answer.refused.map(refused => refused.code)).toEqual(['notFound'])
  })

  it('refuses a round that is sealed, and says so', async () => {
    await scene.admin.query(`update round set state = 'sealed' where id = $1`, [two.round])
    expect((await assignTags(manager, { tags: wanted('B1'), to, due: null })).refused.map(refused => refused.code)).toEqual(['sealed'])
  })
})
