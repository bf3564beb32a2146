import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { readPhoto } from '../../server/services/photo/readPhoto'
import { storePhoto } from '../../server/services/photo/storePhoto'
import { finalPhoto } from '../helpers/routeTable'
import { makeSealingScene, type SealingScene } from '../helpers/signedRound'

let scene: SealingScene
const secondJob = randomUUID()
beforeAll(async () => {
  scene = await makeSealingScene()
  const { id, siteId, clientId, accounts } = scene.one
  await scene.admin.query(`insert into job (organisation_id, id, number, site_id, client_id, title, system, language, checklists, created_by) values ($1, $2, 7, $3, $4, 'Second', 'imperial', 'en', '[]', $5)`, [id, secondJob, siteId, clientId, accounts.manager])
  await scene.admin.query(`insert into job_given (organisation_id, job_id, account_id, given_as) values ($1, $2, $3, 'crew')`, [id, secondJob, accounts.crew])
}, 60_000)
afterAll(() => scene.end())

const sender = () => scene.one.as('inspector') as ReturnType<SealingScene['one']['as']> & { organisationId: string }

describe('the same picture in two jobs', () => {
  it('is seen by the crew of either, and by nobody who has neither', async () => {
    const { bytes, digest } = await finalPhoto()
    await storePhoto(sender(), scene.one.jobId, digest, bytes)
    await expect(readPhoto(scene.one.as('crew'), digest, false)).rejects.toMatchObject({ code: 'notFound' })
    await storePhoto(sender(), secondJob, digest, bytes)
    await storePhoto(sender(), secondJob, digest, bytes)
    expect(await readPhoto(scene.one.as('crew'), digest, false)).toEqual(bytes)
    expect(await readPhoto(sender(), digest, false)).toEqual(bytes)
    await expect(readPhoto(scene.other.as('manager'), digest, false)).rejects.toMatchObject({ code: 'notFound' })
    expect((await scene.admin.query('select job_id from photo where digest = $1 order by job_id', [digest])).rows.map(row => row.job_id as string)).toEqual([scene.one.jobId, secondJob].sort())
  })
})
