import { recordListSchema } from '#shared/api/record'
import { defineRoute } from '../../http/defineRoute'
import { listRecords } from '../../services/record/readRecord'

/** Lists the records that the session may see: of its organisation, or what every contractor sent to this person. */
export default defineRoute({ permission: 'record.read', query: recordListSchema }, ({ session, query }) => listRecords(session, query))
