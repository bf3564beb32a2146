import type { InstrumentInput, InstrumentRow } from '../../../shared/api/instrument'
import * as instruments from '../../database/queries/instrument'
import type { Session } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { Failure, notFound } from '../failure'

/** The instruments in use, by name. */
export const listInstruments = (who: Session): Promise<InstrumentRow[]> => withSession(who, instruments.listInstruments)

/** Keeps an instrument; a repeat is the same one. */
export const keepInstrument = (who: Session & { accountId: string }, input: InstrumentInput): Promise<unknown> => withSession(who, tx => instruments.insertInstrument(tx, input, who.accountId))
  .catch((error: { code?: string, constraint?: string }) => {
    if (error.code !== '23505' || error.constraint !== 'instrument_name') throw error
    const words = 'There is an instrument of this name already. Give this one a number, or end the other first.'
    throw new Failure('taken', words, [{ pointer: '/name', code: 'taken', detail: words }])
  })

/** Ends an instrument: it is no longer offered; readings that were taken with it keep its name and uncertainty. */
export const endInstrument = (who: Session, id: string) => withSession(who, async (tx) => {
  if (!await instruments.endInstrument(tx, id)) throw notFound('instrument')
})
