import { tagIdSchema } from '#shared/api/deficiency'
import { defineRoute } from '../../http/defineRoute'
import { readTag } from '../../services/deficiency/readTag'

/** One tag with everything that was written on it. */
export default defineRoute({ permission: 'deficiency.assign', params: tagIdSchema }, ({ session, params }) => readTag(session, params.deficiencyId))
