import { setResponseHeaders } from 'h3'
import { z } from 'zod'
import { defineRoute } from '../../../../http/defineRoute'
import { readRecordPhoto } from '../../../../services/record/readRecord'

/** A photo that a record shows: GET /records/:recordId/photos/:digest.jpg. Only photos of that record, for whoever may read it. */
export default defineRoute({ permission: 'record.read', params: z.object({ recordId: z.string().uuid(), photoFile: z.string().regex(/^[0-9a-f]{64}\.jpg$/) }).strict() }, async ({ event, session, params }) => {
  const bytes = await readRecordPhoto(session, params.recordId, params.photoFile.slice(0, 64))
  setResponseHeaders(event, { 'content-type': 'image/jpeg', 'cache-control': 'private, max-age=604800, immutable', 'x-content-type-options': 'nosniff' })
  return bytes
})
