import { pushSchema, roundParamsSchema } from '#shared/sync/sync'
import { defineRoute } from '../../../../../http/defineRoute'
import { pushEntries } from '../../../../../services/entry/pushEntries'

/** Takes what a device offers; one result an entry. Sending the same again gives the same answer. */
export default defineRoute({ permission: 'entry.send', params: roundParamsSchema, body: pushSchema, maxBytes: 25_000_000, anyText: true }, ({ session, params, body }) => pushEntries(session, params.roundId, body))
