import { z } from 'zod'
import { SETTINGS } from '../line/line'
import type { SettingMeasurand } from '../provision/measurandsOfSetting'
import type { Provision } from '../provision/provision'
import { provisionSchema } from '../provision/provision'

/** Whose numbers: an authority's, or a client's standing specification, or (neither) the organisation's own. */
export const numbersOfSchema = z.object({ authorityId: z.string().uuid().optional(), clientId: z.string().uuid().optional() }).strict()
  .refine(of => !(of.authorityId && of.clientId), 'Numbers are an authority\'s or a client\'s, not both.')
export const numberInputSchema = z.object({ authorityId: z.string().uuid().nullable(), clientId: z.string().uuid().nullable(), provision: provisionSchema }).strict()
  .refine(({ provision }) => z.string().uuid().safeParse(provision.id).success, { path: ['provision', 'id'], message: 'The id has to be a UUID made by the caller.' })
  .refine(({ authorityId, clientId, provision }) => provision.kind === (authorityId ? 'authority' : clientId ? 'specification' : 'organisation'), { path: ['provision', 'kind'], message: 'The kind has to fit whose number it is.' })
export const numberEndSchema = z.object({ id: z.string().uuid() }).strict()
export const settingSchema = z.enum(SETTINGS)

/** Query of GET /api/numbers/page: one setting, and whose numbers. */
export const numbersPageSchema = z.object({ setting: settingSchema, authorityId: z.string().uuid().optional(), clientId: z.string().uuid().optional() }).strict()
/** Answer: every measurand of the setting on one page, the numbers in force of that source, and all numbers of the organisation that are to be asked after again. */
export interface NumbersPage { rows: SettingMeasurand[], provisions: Provision[], reviews: { provision: Provision, authorityId: string | null, clientId: string | null }[] }
