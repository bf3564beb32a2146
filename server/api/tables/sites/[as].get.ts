import { tableParamsSchema } from '#shared/api/table'
import { defineRoute } from '../../../http/defineRoute'
import { sendTable } from '../../../http/sendTable'
import { siteTable } from '../../../services/table/listTables'

/** The sites as a table file. */
export default defineRoute({ permission: 'site.read', params: tableParamsSchema }, async ({ event, session, params }) => sendTable(event, await siteTable(session), params.as))
