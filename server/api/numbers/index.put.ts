import { numberInputSchema } from '#shared/api/numbers'
import { defineRoute } from '../../http/defineRoute'
import { putProvision } from '../../services/provision/keepProvisions'

/** Writes a local number; the one before it ends and stays readable. */
export default defineRoute({ permission: 'numbers.write', body: numberInputSchema }, async ({ session, body }) => {
  await putProvision(session, body)
  return { id: body.provision.id }
})
