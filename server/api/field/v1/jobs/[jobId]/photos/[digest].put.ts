import { z } from 'zod'
import { digestSchema } from '#shared/entry/entry'
import { defineRoute } from '../../../../../../http/defineRoute'
import { readBytes } from '../../../../../../http/readChecked'
import { Failure } from '../../../../../../services/failure'
import { PHOTO_MOST, storePhoto } from '../../../../../../services/photo/storePhoto'

/** Takes a photo's final bytes under their SHA-256. */
export default defineRoute({ permission: 'photo.send', params: z.object({ jobId: z.string().uuid(), digest: digestSchema }).strict() }, async ({ event, session, params }) => {
  const bytes = await readBytes(event, PHOTO_MOST, 'A photo may have 25 MB at most. Take it again with a smaller size.')
  if (!bytes) throw new Failure('wrongType', 'No photo came with this. Choose a photo.')
  return await storePhoto({ ...session, organisationId: session.organisationId! }, params.jobId, params.digest, bytes)
})
