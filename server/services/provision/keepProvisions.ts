import type { z } from 'zod'
import type { numberInputSchema, NumbersPage, numbersOfSchema, numbersPageSchema } from '../../../shared/api/numbers'
import { measurandsOfSetting } from '../../../shared/provision/measurandsOfSetting'
import type { Provision } from '../../../shared/provision/provision'
import * as provisions from '../../database/queries/provision'
import type { Session, Tx } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { readBuiltIn } from '../checklist/readBuiltIn'
import { Failure, notFound } from '../failure'

/** The numbers in force of an authority, a client's specification or the organisation itself. */
export const listProvisions = (who: Session, of: z.infer<typeof numbersOfSchema>): Promise<Provision[]> => withSession(who, tx => provisions.listProvisions(tx, of.authorityId ?? null, of.clientId ?? null))

/** Writes a number. One on the same measurand, setting and condition of the same source ends: numbers are never edited. */
export const putProvision = (who: Session & { accountId: string }, input: z.infer<typeof numberInputSchema>): Promise<void> => withSession(who, tx => keepProvision(tx, who.accountId, input))

/** The same inside a transaction that is open already. */
export async function keepProvision(tx: Tx, writtenBy: string, input: z.infer<typeof numberInputSchema>): Promise<void> {
  if (await provisions.isThere(tx, input.provision.id)) return
  await provisions.endSame(tx, input)
  await provisions.insertProvision(tx, input, writtenBy).catch((error: { code?: string }) => {
    if (error.code === '23503') throw new Failure('invalid', 'Choose whose number it is again: the authority or client is not here.', [{ pointer: '/authorityId', code: 'unknown', detail: 'Choose it again.' }])
    throw error
  })
}

/** The last day whose numbers are to be asked after again by now: 60 days from today. */
const reviewBorder = () => new Date(Date.now() + 60 * 86_400_000).toISOString().slice(0, 10)

/** Numbers that somebody should ask after again: their day has come, or comes within 60 days. The soonest first. */
export function reviewsDue(held: readonly Provision[]): Provision[] {
  const border = reviewBorder()
  return held.filter(one => one.reviewOn !== undefined && one.reviewOn <= border).sort((one, other) => one.reviewOn! < other.reviewOn! ? -1 : 1)
}

export const endProvision = (who: Session, id: string) => withSession(who, async (tx) => {
  if (!await provisions.endOne(tx, id)) throw notFound('number')
})

/** One page of numbers: all measurands that a setting calls for, with the built-in basis, and what this source has set. */
export async function readNumbersPage(who: Session, { setting, ...of }: z.infer<typeof numbersPageSchema>): Promise<NumbersPage> {
  return withSession(who, async (tx) => {
    const held = await provisions.listProvisions(tx, of.authorityId ?? null, of.clientId ?? null)
    return { rows: measurandsOfSetting(setting, readBuiltIn()), provisions: held.filter(one => one.setting === null || one.setting === setting), reviews: await provisions.provisionsToReview(tx, reviewBorder()) }
  })
}
