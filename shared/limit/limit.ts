import { z } from 'zod'

/**
 * What an amount counts, each with an integer unit (contracts.md 1): length in 1/320,000 mm, time in 1/1000 s, angle in 1/1000 degree,
 * force in 1/1000 lbf (`imperial`) or 1/1000 N (`metric`), count in ones.
 */
export const UNITS = ['length', 'count', 'time', 'angle', 'force'] as const
export type Unit = (typeof UNITS)[number]

/**
 * One end of a limit, as its source prints it. Lengths and forces carry the figure of each system that the source prints, never a computed one;
 * counts, times and angles stand in `plain`. At least one figure is there.
 */
export const boundSchema = z.object({
  imperial: z.number().int().safe().optional(),
  metric: z.number().int().safe().optional(),
  plain: z.number().int().safe().optional(),
  /** Whether the figure itself still conforms ("at least", "at most"); false for "over", "under". */
  inclusive: z.boolean(),
}).strict()
export type Bound = z.infer<typeof boundSchema>

/** Whose a limit is, weakest first. A stricter basis never hides a weaker one: limits are combined, none is picked silently. */
export const BASIS_KINDS = ['builtIn', 'organisation', 'specification', 'authority'] as const

/** Where a limit comes from; shown wherever the limit is shown. */
export const basisSchema = z.object({
  kind: z.enum(BASIS_KINDS),
  /** Whose: the document, the authority, the client's specification. */
  name: z.string().min(1).max(200),
  citation: z.string().max(200).optional(),
  edition: z.string().max(200).optional(),
  /** How well a built-in limit is based: 'read at the issuer', 'read in a copy', 'read in a summary'. */
  read: z.string().max(60).optional(),
  /** Id in templates/facts of the published statement, for built-in limits. */
  fact: z.string().regex(/^[A-H]\d\d$/).optional(),
  confirmedBy: z.string().max(120).optional(),
  /** ISO date, no time. */
  confirmedOn: z.string().regex(/^\d{4}-\d\d-\d\d$/).optional(),
}).strict()
export type Basis = z.infer<typeof basisSchema>

/** One limit on one measurand, in one datum, from one source. */
export const limitSchema = z.object({
  id: z.string().min(1).max(80),
  /** What is measured, e.g. `latch-release-height`; limits on the same measurand are combined. */
  measurand: z.string().min(1).max(80),
  /** From where, e.g. `bottom-of-leaf`, `ground`; combined only after being brought to one datum. */
  datum: z.string().min(1).max(80),
  unit: z.enum(UNITS),
  low: boundSchema.nullable(),
  high: boundSchema.nullable(),
  /** A band to stay out of, ends allowed unless `inclusive` (then the end itself is still inside the band and does not conform). */
  avoid: z.object({ low: boundSchema, high: boundSchema }).strict().nullable(),
  basis: basisSchema,
}).strict()
export type Limit = z.infer<typeof limitSchema>
