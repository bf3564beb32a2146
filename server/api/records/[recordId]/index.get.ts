import { recordParamsSchema } from '#shared/api/record'
import { defineRoute } from '../../../http/defineRoute'
import { readRecord } from '../../../services/record/readRecord'

/** A record with its document and delivery log; for a client also notes that it was opened. */
export default defineRoute({ permission: 'record.read', params: recordParamsSchema }, ({ session, params }) => readRecord(session, params.recordId))
