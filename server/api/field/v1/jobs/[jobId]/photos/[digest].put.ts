import { getRequestHeader, readRawBody } from 'h3'
import { z } from 'zod'
import { digestSchema } from '#shared/entry/entry'
import { defineRoute } from '../../../../../../http/defineRoute'
import { Failure } from '../../../../../../services/failure'
import { PHOTO_MOST, storePhoto } from '../../../../../../services/photo/storePhoto'

/** Takes a photo's final bytes under their SHA-256. */
export default defineRoute({ permission: 'photo.send', params: z.object({ jobId: z.string().uuid(), digest: digestSchema }).strict() }, async ({ event, session, params }) => {
  if (Number(getRequestHeader(event, 'content-length') ?? 0) > PHOTO_MOST) throw new Failure('tooLarge', 'A photo may have 25 MB at most. Take it again with a smaller size.')
  const bytes = await readRawBody(event, false)
  if (!bytes) throw new Failure('wrongType', 'No photo came with this. Choose a photo.')
  return await storePhoto({ ...session, organisationId: session.organisationId! }, params.jobId, params.digest, bytes)
})
