import { z } from 'zod'
import type { DeficiencyClass } from '../checklist/check'
import type { Place, ReadingValue } from '../entry/entry'
import { digestSchema, strokeSchema } from '../entry/entry'
import type { Limit, Unit } from '../limit/limit'
import { ACCEPTANCE_MEANINGS } from '../record/acceptanceSheet'
import type { RecordDocument } from '../record/record'
import type { DeficiencyState } from '../round/outcome'
import type { RecordRow } from './record'

const uuid = z.string().uuid()
export const portalSiteParamsSchema = z.object({ siteId: uuid }).strict()

/** Body of POST /api/records/:recordId/acceptances. The id is made by the caller, so that a second press signs nothing twice. */
export const acceptanceInputSchema = z.object({
  id: uuid,
  meaning: z.enum(ACCEPTANCE_MEANINGS),
  /** Digest of the record's document as it was read. */
  document: digestSchema,
  /** Language in which the consent was read. */
  language: z.enum(['en', 'es']),
  /** The deviation that is answered, and the very offer that was read. */
  deviation: z.object({ deficiency: uuid, offer: uuid }).strict().nullable(),
  /** The person says that the owner named them; needed for all but a receipt. */
  named: z.boolean(),
  typed: z.string().trim().min(1).max(120).nullable(),
  strokes: z.array(strokeSchema).min(1).max(200).nullable(),
  words: z.string().trim().min(1).max(2000).nullable(),
}).strict()
  .refine(input => (input.typed === null) !== (input.strokes === null), { path: ['typed'], message: 'Sign with the name or by hand, one of the two.' })
  .refine(input => (input.deviation !== null) === input.meaning.endsWith('Deviation'), { path: ['deviation'], message: 'Name the deviation that is answered, and only then.' })
export type AcceptanceInput = z.infer<typeof acceptanceInputSchema>

/** A deviation as it is offered to the owner. */
export interface OfferedDeviation {
  deficiency: string
  /** The entry that offers it. */
  offer: string
  state: DeficiencyState
  class: DeficiencyClass
  tag: string
  element: string
  elementTag: string
  check: string
  title: { en: string, es: string }
  place: Place | null
  unit: Unit | null
  value: ReadingValue | null
  margin: number | null
  limit: Limit | null
  words: string
  condition: string | null
  until: string | null
  /** Readings that stand at its place; one, or they disagree and nothing can be accepted. */
  readings: string[]
  basis: string
}

/** A site as the client's list shows it: what the newest record of each of its jobs says of the elements. */
export interface PortalSiteRow {
  id: string, name: string, address: string, organisationName: string, clientName: string
  released: number, held: number, total: number, records: number, offers: number
  newestAt: string | null
}

/** One job of a site with its records, current first. */
export interface PortalJob {
  jobId: string
  title: string
  system: RecordDocument['system']
  records: RecordRow[]
  /** The newest record that holds, cut to what this page shows; null when all are withdrawn. */
  newest: RecordDocument | null
  offers: OfferedDeviation[]
}

/** Answer of GET /api/portal/sites/:siteId. */
export interface PortalSite {
  site: { id: string, name: string, address: string, timeZone: string }
  organisation: { name: string, phone: string }
  clientName: string
  /** This person as the contact of that client; null where only the site is theirs to see. */
  contact: { id: string, name: string, accepts: boolean } | null
  jobs: PortalJob[]
}
