import { numbersOfSchema } from '#shared/api/numbers'
import { tableParamsSchema } from '#shared/api/table'
import { defineRoute } from '../../../http/defineRoute'
import { sendTable } from '../../../http/sendTable'
import { numberTable } from '../../../services/table/listTables'

/** The numbers in force of one source as a table file. */
export default defineRoute({ permission: 'numbers.read', params: tableParamsSchema, query: numbersOfSchema }, async ({ event, session, params, query }) => sendTable(event, await numberTable(session, query), params.as))
