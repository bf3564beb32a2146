import { instrumentEndSchema } from '#shared/api/instrument'
import { defineRoute } from '../../http/defineRoute'
import { endInstrument } from '../../services/instrument/keepInstruments'

/** Ends an instrument: it is no longer offered for readings. */
export default defineRoute({ permission: 'instrument.write', params: instrumentEndSchema }, async ({ session, params }) => {
  await endInstrument(session, params.id)
  return { ended: true }
})
