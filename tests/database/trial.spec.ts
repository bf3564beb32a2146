import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { keepTrial, readTrials } from '../../server/services/trial/keepTrials'
import type { TrialInput } from '#shared/api/trial'
import { INCH } from '#shared/measure/length'
import { makeScene, type Scene } from '../helpers/scene'

let scene: Scene
const element = randomUUID()
beforeAll(async () => {
  scene = await makeScene()
  const { rows: [{ site_id: site }] } = await scene.admin.query('select site_id from job where id = $1', [scene.one.jobId])
  await scene.admin.query(`insert into element (organisation_id, id, site_id, kind, tag) values ($1, $2, $3, 'gate', 'G1')`, [scene.one.id, element, site])
})
afterAll(() => scene.end())

const trial = (first = 77 * INCH): TrialInput['trial'] => ({ kind: 'frame', version: 1, system: 'imperial', width: 48 * INCH, height: 60 * INCH, first, second: 76.5 * INCH, error: INCH / 16 })

describe('trials kept with an element', () => {
  const input: TrialInput = { id: randomUUID(), element, trial: trial() }

  it('come back newest first, with who tried and when', async () => {
    await keepTrial(scene.one.as('inspector'), scene.one.jobId, input)
    await keepTrial(scene.one.as('manager'), scene.one.jobId, { id: randomUUID(), element, trial: trial(78 * INCH) })
    const kept = await readTrials(scene.one.as('manager'), scene.one.jobId)
    expect(kept.map(one => one.trial)).toEqual([trial(78 * INCH), trial()])
    expect(kept[1]).toMatchObject({ id: input.id, element, at: expect.stringMatching(/^20\d\d-\d\d-\d\dT.*Z$/) })
    expect(kept[0]!.by).not.toBe(kept[1]!.by)
  })

  it('take a repeat of the same one once, and nothing else under its id', async () => {
    await keepTrial(scene.one.as('inspector'), scene.one.jobId, input)
    expect(await readTrials(scene.one.as('manager'), scene.one.jobId)).toHaveLength(2)
    await expect(keepTrial(scene.one.as('inspector'), scene.one.jobId, { ...input, trial: trial(70 * INCH) })).rejects.toMatchObject({ code: 'differs' })
  })

  it('refuse an element that is not on the job\'s site, and a job of somebody else', async () => {
    await expect(keepTrial(scene.one.as('manager'), scene.one.jobId, { ...input, id: randomUUID(), element: randomUUID() })).rejects.toMatchObject({ code: 'invalid' })
    await expect(keepTrial(scene.other.as('manager'), scene.one.jobId, { ...input, id: randomUUID() })).rejects.toMatchObject({ code: 'notFound' })
    await expect(readTrials(scene.other.as('manager'), scene.one.jobId)).rejects.toMatchObject({ code: 'notFound' })
  })

  it('are never changed or taken away, and no crew reads them', async () => {
    await expect(scene.admin.query('delete from trial where id = $1', [input.id])).rejects.toMatchObject({ code: '42501' })
    await expect(scene.admin.query(`update trial set trial = '{}' where id = $1`, [input.id])).rejects.toMatchObject({ code: '42501' })
    await scene.admin.query(`insert into job_given (organisation_id, job_id, account_id, given_as) values ($1, $2, $3, 'crew')`, [scene.one.id, scene.one.jobId, scene.one.accounts.crew])
    await expect(readTrials(scene.one.as('crew'), scene.one.jobId)).rejects.toMatchObject({ code: '42501' })
  })
})
