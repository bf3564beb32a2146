import { setResponseHeaders } from 'h3'
import { z } from 'zod'
import { defineRoute } from '../../../http/defineRoute'
import { readRecordFile } from '../../../services/record/readRecord'

/** Downloads a sealed record; a client's download is noted in the delivery log. Public at /records/:recordId.pdf (server/middleware/recordFile.ts). */
export default defineRoute({ permission: 'record.read', params: z.object({ recordFile: z.string().regex(/^[0-9a-f-]{36}\.pdf$/) }).strict() }, async ({ event, session, params }) => {
  const { bytes, name } = await readRecordFile(session, params.recordFile.slice(0, 36))
  setResponseHeaders(event, { 'content-type': 'application/pdf', 'content-disposition': `attachment; filename="${name}"`, 'x-content-type-options': 'nosniff' })
  return bytes
})
