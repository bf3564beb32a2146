import { tagListSchema } from '#shared/api/deficiency'
import { defineRoute } from '../../http/defineRoute'
import { listTags } from '../../services/deficiency/listTags'

/** Lists the tags of all jobs that the person may see, a page at a time. */
export default defineRoute({ permission: 'deficiency.assign', query: tagListSchema }, ({ session, query }) => listTags(session, query))
