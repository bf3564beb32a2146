import { setResponseHeaders } from 'h3'
import { z } from 'zod'
import { defineRoute } from '../../http/defineRoute'
import { readSheetFile } from '../../services/question/putQuestions'

/** The sheet of questions to print: GET /questions/:sheetId.pdf. */
export default defineRoute({ permission: 'question.read', params: z.object({ sheetFile: z.string().regex(/^[0-9a-f-]{36}\.pdf$/) }).strict() }, async ({ event, session, params }) => {
  const { bytes, name } = await readSheetFile(session, params.sheetFile.slice(0, 36))
  setResponseHeaders(event, { 'content-type': 'application/pdf', 'content-disposition': `inline; filename="${name}"`, 'x-content-type-options': 'nosniff' })
  return Buffer.from(bytes)
})
