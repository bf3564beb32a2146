import { z } from 'zod'
import { digestSchema, MEANINGS, strokeSchema } from '../entry/entry'
import { RECORD_LANGUAGES } from './record'

const short = z.string().trim().min(1).max(200)
const instant = z.string().datetime({ offset: true })

/**
 * acceptance.json, version 1, for ever: what a client signed about a sealed record, in a short document of its own that is bound to the record by
 * digest (contracts.md 5). The record itself is never rewritten for it. A change is a version 2 beside it.
 */
export const acceptanceSchema = z.object({
  format: z.literal('smoothside-acceptance'),
  version: z.literal(1),
  renderer: z.number().int().min(1),
  id: z.string().uuid(),
  code: z.string().regex(/^[A-Z0-9][A-Z0-9-]{2,39}$/),
  language: z.enum(RECORD_LANGUAGES),
  zones: z.record(z.string(), z.string().min(1).max(8)),
  checkAddress: z.string().url().max(300),
  /** The installation that witnesses the signature. */
  witness: short,
  /** The record that it is about: `document` is the digest of record.json, `range` that of the sealed file's first byte range. */
  record: z.object({ id: z.string().uuid(), code: z.string().min(3).max(40), number: z.number().int().min(1), document: digestSchema, range: digestSchema, sealedAt: instant }).strict(),
  organisation: short,
  client: short,
  site: short,
  job: short,
  meaning: z.enum(MEANINGS),
  /** The meaning in full, as the signer read it. */
  meaningText: z.string().min(1).max(2000),
  signer: z.object({ name: z.string().trim().min(1).max(120), title: z.string().max(120).optional() }).strict(),
  role: short,
  known: z.enum(['ownAccount', 'ownLink', 'onDevice']),
  presence: z.string().nullable(),
  at: instant,
  sheet: z.string().max(2_000_000),
  sheetDigest: digestSchema,
  strokes: z.array(strokeSchema).nullable(),
  typed: z.string().max(120).nullable(),
  words: z.string().max(2000).nullable(),
  /** Deviations that it accepts or declines, where the meaning is `acceptsDeviation`. */
  deviations: z.array(z.object({
    deficiency: z.string().uuid(), tag: short, element: short, title: short, words: z.string().min(1).max(2000), accepted: z.boolean(),
    condition: z.string().nullable(), until: z.string().regex(/^\d{4}-\d\d-\d\d$/).nullable(),
  }).strict()),
}).strict()
export type AcceptanceDocument = z.infer<typeof acceptanceSchema>
