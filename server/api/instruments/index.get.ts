import { defineRoute } from '../../http/defineRoute'
import { listInstruments } from '../../services/instrument/keepInstruments'

/** Lists the instruments in use. */
export default defineRoute({ permission: 'instrument.read' }, ({ session }) => listInstruments(session))
