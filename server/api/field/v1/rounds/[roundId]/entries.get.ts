import { pullSchema, roundParamsSchema } from '#shared/sync/sync'
import { defineRoute } from '../../../../../http/defineRoute'
import { pullEntries } from '../../../../../services/entry/pullEntries'

/** Gives the round's entries after a number, in the order in which they were accepted. */
export default defineRoute({ permission: 'round.read', params: roundParamsSchema, query: pullSchema }, ({ session, params, query }) => pullEntries(session, params.roundId, query.after))
