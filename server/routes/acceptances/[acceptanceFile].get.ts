import { setResponseHeaders } from 'h3'
import { z } from 'zod'
import { defineRoute } from '../../http/defineRoute'
import { readAcceptanceFile } from '../../services/acceptance/readAcceptance'

/** Downloads a client's acceptance: GET /acceptances/:acceptanceId.pdf, for whoever may read its record. */
export default defineRoute({ permission: 'record.read', params: z.object({ acceptanceFile: z.string().regex(/^[0-9a-f-]{36}\.pdf$/) }).strict() }, async ({ event, session, params }) => {
  const { bytes, name } = await readAcceptanceFile(session, params.acceptanceFile.slice(0, 36))
  setResponseHeaders(event, { 'content-type': 'application/pdf', 'content-disposition': `attachment; filename="${name}"`, 'x-content-type-options': 'nosniff' })
  return bytes
})
