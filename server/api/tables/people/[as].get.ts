import { tableParamsSchema } from '#shared/api/table'
import { defineRoute } from '../../../http/defineRoute'
import { sendTable } from '../../../http/sendTable'
import { peopleTable } from '../../../services/table/listTables'

/** The people of the organisation as a table file. */
export default defineRoute({ permission: 'people.read', params: tableParamsSchema }, async ({ event, session, params }) => sendTable(event, await peopleTable(session), params.as))
