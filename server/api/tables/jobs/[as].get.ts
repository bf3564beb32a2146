import { jobListSchema } from '#shared/api/job'
import { tableParamsSchema } from '#shared/api/table'
import { defineRoute } from '../../../http/defineRoute'
import { sendTable } from '../../../http/sendTable'
import { jobTable } from '../../../services/table/listTables'

/** The list of jobs as a table file, as it is filtered and sorted on the screen, whole. */
export default defineRoute({ permission: 'job.read', params: tableParamsSchema, query: jobListSchema }, async ({ event, session, params, query }) => sendTable(event, await jobTable(session, query), params.as))
