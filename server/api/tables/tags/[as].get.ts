import { tagListSchema } from '#shared/api/deficiency'
import { tableParamsSchema } from '#shared/api/table'
import { defineRoute } from '../../../http/defineRoute'
import { sendTable } from '../../../http/sendTable'
import { tagTable } from '../../../services/table/listTables'

/** The list of tags as a table file, as it is filtered and sorted on the screen, whole. */
export default defineRoute({ permission: 'deficiency.assign', params: tableParamsSchema, query: tagListSchema }, async ({ event, session, params, query }) => sendTable(event, await tagTable(session, query), params.as))
