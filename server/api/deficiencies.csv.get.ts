import { setResponseHeaders } from 'h3'
import { tagListSchema } from '#shared/api/deficiency'
import { defineRoute } from '../http/defineRoute'
import { exportTags } from '../services/deficiency/exportTags'

/** The list of tags as a table file, as it is filtered and sorted on the screen, whole. */
export default defineRoute({ permission: 'deficiency.assign', query: tagListSchema }, async ({ event, session, query }) => {
  setResponseHeaders(event, { 'content-type': 'text/csv; charset=utf-8', 'content-disposition': 'attachment; filename="tags.csv"' })
  return await exportTags(session, query)
})
