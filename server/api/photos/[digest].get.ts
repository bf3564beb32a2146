import { setResponseHeaders } from 'h3'
import { z } from 'zod'
import { digestSchema } from '#shared/entry/entry'
import { defineRoute } from '../../http/defineRoute'
import { readPhoto } from '../../services/photo/readPhoto'

/** A photo, or with `small` its thumbnail. The digest names its bytes for ever, so the browser may keep it for itself. */
export default defineRoute({ permission: 'photo.read', params: z.object({ digest: digestSchema }).strict(), query: z.object({ small: z.literal('1').optional() }).strict() }, async ({ event, session, params, query }) => {
  const bytes = await readPhoto(session, params.digest, query.small === '1')
  setResponseHeaders(event, { 'content-type': 'image/jpeg', 'cache-control': 'private, max-age=604800, immutable', 'content-disposition': 'inline', 'x-content-type-options': 'nosniff' })
  return bytes
})
