import { z } from 'zod'
import { limitSchema } from '../limit/limit'
import { SETTINGS } from '../line/line'

/** Who can set a number or a note of their own, weakest first. */
export const PROVISION_KINDS = ['organisation', 'specification', 'authority'] as const

/** What a local number does to the others: stand in their place, stand beside them, or let only the stricter of each pair stand. */
export const PROVISION_EFFECTS = ['replace', 'add', 'stricterOf'] as const

const date = z.string().regex(/^\d{4}-\d\d-\d\d$/)

/** A local number (or a note without one) that the authority, the client's specification or the organisation sets on a measurand. */
export const provisionSchema = z.object({
  id: z.string().min(1).max(80),
  kind: z.enum(PROVISION_KINDS),
  /** What it is set on; {@link measurandsOfSetting} lists what can be. */
  measurand: z.string().min(1).max(80),
  /** The setting it holds for; null for all. */
  setting: z.enum(SETTINGS).nullable(),
  /** CEL over the facts of job, element and face, where it holds only in part. */
  when: z.string().max(400).optional(),
  effect: z.enum(PROVISION_EFFECTS),
  /** The number; null when there is only a note ("ask before drilling"). */
  limit: limitSchema.pick({ datum: true, unit: true, low: true, high: true, avoid: true }).strict().nullable(),
  note: z.string().trim().min(1).max(2000).optional(),
  /** Whose: the authority or the document. */
  name: z.string().trim().min(1).max(200),
  citation: z.string().trim().min(1).max(200),
  edition: z.string().max(200).optional(),
  /** Where it was read: a web page, a letter, a counter. */
  readAt: z.string().max(300).optional(),
  confirmedBy: z.string().trim().min(1).max(120),
  confirmedOn: date,
  /** When somebody should ask again. */
  reviewOn: date.optional(),
}).strict().superRefine((provision, context) => {
  const refuse = (path: string, message: string) => context.addIssue({ code: 'custom', path: [path], message })
  const { limit, note, reviewOn, confirmedOn } = provision
  if (!limit && !note) refuse('limit', 'Give a number or a note.')
  if (!limit && provision.effect !== 'add') refuse('effect', 'A note alone stands beside the other limits: choose "add".')
  if (limit && !limit.low && !limit.high && !limit.avoid) refuse('limit', 'Give a low end, a high end or a band to stay out of.')
  if (reviewOn && reviewOn < confirmedOn) refuse('reviewOn', 'The review comes after the confirmation.')
})
export type Provision = z.infer<typeof provisionSchema>
