import { numberEndSchema } from '#shared/api/numbers'
import { defineRoute } from '../../http/defineRoute'
import { endProvision } from '../../services/provision/keepProvisions'

/** Ends a local number: walk lists pinned before keep it, later ones do without. */
export default defineRoute({ permission: 'numbers.write', params: numberEndSchema }, async ({ session, params }) => {
  await endProvision(session, params.id)
  return { ended: true }
})
