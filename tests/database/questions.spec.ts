import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { withSession } from '../../server/database/withSession'
import { listProvisions, putProvision, readNumbersPage } from '../../server/services/provision/keepProvisions'
import { answerQuestion, readJobLimits, withdrawQuestion, writeQuestion } from '../../server/services/question/keepQuestions'
import { mailSheet, putQuestions, readSheetFile } from '../../server/services/question/putQuestions'
import { renewBasis } from '../../server/services/job/saveLine'
import { readRecord } from '../../server/services/record/readRecord'
import { sealRecord } from '../../server/services/record/sealRecord'
import { putAuthority } from '../../server/services/site/keepSites'
import { questionsUntil } from '../../server/database/queries/question'
import { drawLineOf, makeSealingScene, signAndRequest, walkAll, type SealingScene } from '../helpers/signedRound'

let scene: SealingScene
beforeAll(async () => { scene = await makeSealingScene() })
afterAll(() => scene.end())

const INCH = 8_128_000
const about = { title: { en: 'Latch release', es: 'Pestillo' }, tags: ['G3'], measurand: 'latch-release-height', unit: 'length' as const, datum: 'ground', setting: 'pool' as const, limits: [], gap: null }
const answer = { name: 'R. Tamm', role: 'Building official', on: '2026-11-20', document: 'Letter BD-118', words: 'From the ground, 54 in.' }
const manager = () => ({ ...scene.one.as('manager'), organisationId: scene.one.id, name: 'manager of AA', email: 'manager.aa@test.example' })
const written = async () => {
  const id = randomUUID()
  await writeQuestion(manager(), scene.one.jobId, { id, about, words: 'Which of the two holds?' })
  return id
}
const standing = async (id: string) => (await readJobLimits(manager(), scene.one.jobId)).questions.find(one => one.id === id)
const sheet = (questions: string[], email: string | null = null) => ({ id: randomUUID(), questions, name: 'Velmor County', email, message: '', language: 'en' as const })

describe('questions to the authority', () => {
  it('are open, then asked of somebody on a day, then answered with name, date and document', async () => {
    const id = await written()
    expect(await standing(id)).toMatchObject({ state: 'open', askedOf: null, answer: null, about })
    await putQuestions(manager(), scene.one.jobId, sheet([id]))
    expect(await standing(id)).toMatchObject({ state: 'asked', askedOf: 'Velmor County' })
    await answerQuestion(manager(), id, { answer, number: null })
    expect(await standing(id)).toMatchObject({ state: 'answered', askedOf: 'Velmor County', answer })
  })

  it('are written, put and mailed once however often they are sent', async () => {
    const id = await written()
    await writeQuestion(manager(), scene.one.jobId, { id, about, words: 'Another wording.' })
    expect((await standing(id))!.words).toBe('Which of the two holds?')
    const one = sheet([id], 'division@county.example')
    await putQuestions(manager(), scene.one.jobId, one)
    await putQuestions(manager(), scene.one.jobId, one)
    const { rows } = await scene.admin.query(`select count(*)::int as tasks from pgboss.job where name = 'ask' and data->>'id' = $1`, [one.id])
    expect(rows).toEqual([{ tasks: 1 }])
    await mailSheet(scene.one.id, one.id)
    await mailSheet(scene.one.id, one.id)
    expect(scene.mail.taken).toHaveLength(1)
    expect(scene.mail.taken[0]).toMatch(/Subject: Fence crew AA: questions about School AA \(AA-0001\)/)
    expect(scene.mail.taken[0]).toContain('filename=AA-0001-questions-')
    expect((await readJobLimits(manager(), scene.one.jobId)).sheets.filter(each => each.id === one.id)).toMatchObject([{ email: 'division@county.example', questions: 1, events: [{ kind: 'queued' }, { kind: 'handed' }] }])
  })

  it('say in their log when the mail server does not take the address', async () => {
    const one = sheet([await written()], 'nobody@county.example')
    scene.mail.refuse = true
    await putQuestions(manager(), scene.one.jobId, one)
    await mailSheet(scene.one.id, one.id)
    scene.mail.refuse = false
    expect((await readJobLimits(manager(), scene.one.jobId)).sheets.find(each => each.id === one.id)!.events.map(event => event.kind)).toEqual(['queued', 'returned'])
  })

  it('stand as they were answered: nothing settles, withdraws or rewrites them again, not even the owner', async () => {
    const id = await written()
    await answerQuestion(manager(), id, { answer, number: null })
    await expect(answerQuestion(manager(), id, { answer: { ...answer, words: 'From the leaf.' }, number: null })).rejects.toMatchObject({ code: 'conflict' })
    await expect(withdrawQuestion(manager(), id)).rejects.toMatchObject({ code: 'conflict' })
    await expect(putQuestions(manager(), scene.one.jobId, sheet([id]))).rejects.toMatchObject({ code: 'stale' })
    await expect(scene.admin.query(`update question set words = 'x' where id = $1`, [id])).rejects.toMatchObject({ code: '42501' })
    await expect(scene.admin.query('delete from question where id = $1', [id])).rejects.toMatchObject({ code: '42501' })
  })

  it('leave the list when withdrawn, and are kept', async () => {
    const id = await written()
    await withdrawQuestion(manager(), id)
    expect(await standing(id)).toBeUndefined()
    expect((await scene.admin.query('select state from question where id = $1', [id])).rows).toEqual([{ state: 'withdrawn' }])
    await expect(answerQuestion(manager(), id, { answer, number: null })).rejects.toMatchObject({ code: 'conflict' })
  })

  it('set a number of the site\'s authority where the answer has one, and refuse where the site has none', async () => {
    const number = { id: randomUUID(), effect: 'replace' as const, limit: { datum: 'ground', unit: 'length' as const, low: { imperial: 54 * INCH, inclusive: true }, high: null, avoid: null } }
    const early = await written()
    await expect(answerQuestion(manager(), early, { answer, number })).rejects.toMatchObject({ code: 'invalid', errors: [{ pointer: '/number' }] })
    expect(await standing(early)).toMatchObject({ state: 'open', answer: null })

    const authorityId = randomUUID()
    await putAuthority(manager(), { id: authorityId, name: 'Velmor County' })
    await scene.admin.query('update site set authority_id = $1 where id = $2', [authorityId, scene.one.siteId])
    await expect(answerQuestion(manager(), early, { answer, number: { ...number, limit: { ...number.limit, datum: 'bottom-of-leaf' } } })).rejects.toMatchObject({ code: 'invalid' })
    await answerQuestion(manager(), early, { answer, number })
    expect(await listProvisions(manager(), { authorityId })).toMatchObject([{ id: number.id, kind: 'authority', name: 'Velmor County', citation: 'Letter BD-118', confirmedBy: 'R. Tamm', confirmedOn: '2026-11-20', setting: 'pool', effect: 'replace', limit: number.limit, note: answer.words }])
  })

  it('are one contractor\'s own, and no crew\'s or client\'s', async () => {
    const id = await written()
    const other = { ...scene.other.as('manager'), organisationId: scene.other.id, name: 'x', email: 'x@test.example' }
    await expect(readJobLimits(other, scene.one.jobId)).rejects.toMatchObject({ code: 'notFound' })
    await expect(withdrawQuestion(other, id)).rejects.toMatchObject({ code: 'notFound' })
    for (const actor of ['crew', 'client'] as const) {
      await expect(withSession(scene.one.as(actor), tx => tx.client.query('select from question'))).rejects.toMatchObject({ code: '42501' })
      await expect(withSession(scene.one.as(actor), tx => tx.client.query('select from question_sheet'))).rejects.toMatchObject({ code: '42501' })
    }
    expect(await withSession(other, async tx => (await tx.client.query('select from question')).rowCount)).toBe(0)
  })

  it('are told to a record as they stood at its instant', async () => {
    const id = await written()
    const before = new Date()
    await new Promise(resolve => setTimeout(resolve, 20))
    await putQuestions(manager(), scene.one.jobId, sheet([id]))
    await answerQuestion(manager(), id, { answer, number: null })
    const at = async (instant: Date) => (await withSession(manager(), tx => questionsUntil(tx, scene.one.jobId, instant))).at(-1)
    expect(await at(before)).toMatchObject({ askedOf: null, answer: null })
    expect(await at(new Date(Date.now() + 1000))).toMatchObject({ askedOf: 'Velmor County', answer })
  })

  it('are printed as they were put, the same bytes on any day', async () => {
    const id = await written()
    const one = sheet([id])
    await putQuestions(manager(), scene.one.jobId, one)
    const [first, second] = [await readSheetFile(manager(), one.id), await readSheetFile(manager(), one.id)]
    expect(Buffer.from(first.bytes).equals(Buffer.from(second.bytes))).toBe(true)
    expect(first.name).toMatch(/^AA-0001-questions-\d{4}-\d\d-\d\d\.pdf$/)
    await expect(readSheetFile({ ...scene.other.as('manager'), organisationId: scene.other.id }, one.id)).rejects.toMatchObject({ code: 'notFound' })
  })
})

describe('numbers that somebody should ask after again', () => {
  const in30Days = new Date(Date.now() + 30 * 86_400_000).toISOString().slice(0, 10)
  const number = (id: string, reviewOn: string | undefined, measurand: string) => ({ id, kind: 'specification' as const, measurand, setting: 'school' as const, effect: 'add' as const, limit: { datum: 'ground', unit: 'length' as const, low: null, high: { imperial: 3 * INCH, inclusive: true }, avoid: null }, name: 'School board AA', citation: '32 31 13', confirmedBy: 'C. Clerk', confirmedOn: '2025-01-02', ...(reviewOn && { reviewOn }) })

  it('are told at the jobs of that client alone, and on the page of numbers whoever is looked at; the rest is not', async () => {
    const [due, past, later] = [randomUUID(), randomUUID(), randomUUID()]
    for (const [id, on, measurand] of [[due, in30Days, 'gap-below'], [past, '2025-06-01', 'fence-height'], [later, '2099-01-01', 'opening']] as const)
      await putProvision(manager(), { authorityId: null, clientId: scene.one.clientId, provision: number(id, on, measurand) })
    expect((await readJobLimits(manager(), scene.one.jobId)).reviews.map(one => one.id)).toEqual([past, due])
    expect((await readNumbersPage(manager(), { setting: 'pool' })).reviews).toMatchObject([{ provision: { id: past }, clientId: scene.one.clientId, authorityId: null }, { provision: { id: due } }])

    const elsewhere = randomUUID()
    await scene.admin.query('insert into client (organisation_id, id, name) values ($1, $2, $3)', [scene.one.id, elsewhere, 'Parks'])
    await putProvision(manager(), { authorityId: null, clientId: elsewhere, provision: number(randomUUID(), '2025-06-01', 'gap-below') })
    expect((await readJobLimits(manager(), scene.one.jobId)).reviews).toHaveLength(2)
    expect((await readNumbersPage(scene.other.as('manager'), { setting: 'pool' })).reviews).toEqual([])
  })
})

describe('a walk list and numbers that were set after it', () => {
  it('says that they changed, and is made anew with them as a change that everybody sees', async () => {
    await drawLineOf(scene.other)
    const who = { ...scene.other.as('manager'), organisationId: scene.other.id }
    const limits = () => readJobLimits(who, scene.other.jobId)
    expect((await limits()).numbersChanged).toBe(false)
    await putProvision(who, { authorityId: null, clientId: scene.other.clientId, provision: { id: randomUUID(), kind: 'specification', measurand: 'gap-below', setting: 'school', effect: 'add', limit: { datum: 'ground', unit: 'length', low: null, high: { imperial: 3 * INCH, inclusive: true }, avoid: null }, name: 'School board BB', citation: '32 31 13', confirmedBy: 'C. Clerk', confirmedOn: '2025-01-02' } })
    expect((await limits()).numbersChanged).toBe(true)
    const { basis } = (await renewBasis(who, scene.other.jobId, 'Numbers were set'))!
    expect((await limits()).numbersChanged).toBe(false)
    const { rows } = await scene.admin.query('select kind from entry where job_id = $1', [scene.other.jobId])
    expect(rows).toEqual([{ kind: 'basisChanged' }])
    expect((await scene.admin.query('select basis from round where job_id = $1', [scene.other.jobId])).rows).toEqual([{ basis }])
  })
})

describe('a record and the questions of its job', () => {
  it('is not final while a question waits, and prints in version 2 what was answered', async () => {
    await drawLineOf(scene.one)
    await walkAll(scene.one, false)
    const id = await written()
    await expect(signAndRequest(scene.one, 'final')).rejects.toMatchObject({ code: 'notReady' })
    for (const one of (await readJobLimits(manager(), scene.one.jobId)).questions) if (one.id !== id && one.state !== 'answered') await withdrawQuestion(manager(), one.id)
    await expect(signAndRequest(scene.one, 'final')).rejects.toMatchObject({ code: 'notReady' })
    await answerQuestion(manager(), id, { answer, number: null })
    const record = await signAndRequest(scene.one, 'final')
    await sealRecord(scene.one.id, record)
    const { document } = await readRecord(manager(), record)
    expect(document).toMatchObject({ version: 2, scope: 'final', questions: [], notPut: [] })
    expect(document!.version === 2 && document!.answers.at(-1)).toEqual({ words: 'Which of the two holds?', askedOf: null, askedOn: null, answer })
  })
})
