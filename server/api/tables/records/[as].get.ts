import { recordListSchema } from '#shared/api/record'
import { tableParamsSchema } from '#shared/api/table'
import { defineRoute } from '../../../http/defineRoute'
import { sendTable } from '../../../http/sendTable'
import { recordTable } from '../../../services/table/listTables'

/** The records as a table file, those that were searched for. */
export default defineRoute({ permission: 'record.read', params: tableParamsSchema, query: recordListSchema }, async ({ event, session, params, query }) => sendTable(event, await recordTable(session, query), params.as))
