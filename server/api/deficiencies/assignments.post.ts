import { assignTagsSchema } from '#shared/api/deficiency'
import { defineRoute } from '../../http/defineRoute'
import { assignTags } from '../../services/deficiency/assignTags'

/** Gives several tags to somebody, one entry for each. */
export default defineRoute({ permission: 'deficiency.assign', body: assignTagsSchema }, ({ session, body }) => assignTags({ ...session, organisationId: session.organisationId! }, body))
