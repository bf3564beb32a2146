import { instrumentInputSchema } from '#shared/api/instrument'
import { defineRoute } from '../../http/defineRoute'
import { keepInstrument } from '../../services/instrument/keepInstruments'

/** Keeps an instrument with its uncertainty. */
export default defineRoute({ permission: 'instrument.write', body: instrumentInputSchema }, async ({ session, body }) => {
  await keepInstrument(session, body)
  return { id: body.id }
})
