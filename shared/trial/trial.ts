import { z } from 'zod'
import { limitSchema, basisSchema, type Limit } from '../limit/limit'
import { LONGEST, SYSTEMS } from '../measure/length'

/**
 * A trial calculation: what somebody tried out on the workbench before or beside the fence. It is no reading: nothing was measured for a check, no verdict hangs on it.
 * Only what was put in is kept; answers are worked out from it each time by the same functions. Formats as contracts.md: a new version stands beside the old one.
 */
const length = z.number().int().safe().min(-LONGEST).max(LONGEST)
const size = length.positive()
const amount = length.nonnegative()
/** Rise over run, as a tape and a level give it. */
const slope = z.object({ rise: length, over: size }).strict()
const angle = z.number().int().min(0).max(180_000)
const opening = angle.positive()

/** A limit that a trial is held to. Without a basis it was typed for the trial and is nobody's. */
export const trialLimitSchema = limitSchema.extend({ basis: basisSchema.nullable() }).strict()
export type TrialLimit = z.infer<typeof trialLimitSchema>

/** At most what the drawing of the arc can still tell apart. */
export const MOST_HEIGHTS = 24
export const MOST_POSITIONS = 60

const swing = z.object({
  kind: z.literal('swing'), version: z.literal(1), system: z.enum(SYSTEMS),
  leaf: z.object({ width: size, clearance: amount, rake: slope }).strict(),
  /** Two leaves of that width, one hung at each end. */
  pair: z.boolean(),
  /** At which end of the opening the leaf hangs, as one walks the line; of a pair, which one is looked at. */
  hinge: z.enum(['start', 'end']),
  ground: z.discriminatedUnion('by', [
    /** Along the opening from its start to its end, and across to the side that the gate opens to. */
    z.object({ by: z.literal('slope'), along: slope, across: slope }).strict(),
    /** Under the latch end, over the ground at the hinge. */
    z.object({ by: z.literal('heights'), arc: z.array(z.object({ angle, height: length }).strict()).min(2).max(MOST_HEIGHTS) }).strict(),
  ]),
  to: opening,
  /** Least gap asked through the swing, and largest gap allowed under the closed leaf. */
  margin: trialLimitSchema.nullable(), closed: trialLimitSchema.nullable(),
}).strict()

const path = z.object({
  kind: z.literal('path'), version: z.literal(1), system: z.enum(SYSTEMS),
  leaf: z.object({ width: size, thickness: size }).strict(),
  obstacle: z.discriminatedUnion('kind', [
    z.object({ kind: z.literal('post'), along: length, across: length, diameter: size }).strict(),
    z.object({ kind: z.literal('facingWall'), across: size }).strict(),
    z.object({ kind: z.literal('wallBehind'), back: size }).strict(),
    z.object({ kind: z.literal('box'), along: z.tuple([length, length]), across: z.tuple([length, length]) }).strict(),
    z.object({ kind: z.literal('clearSpace'), along: z.tuple([length, length]), across: z.tuple([length, length]) }).strict(),
  ]),
  to: opening,
}).strict()

const frame = z.object({ kind: z.literal('frame'), version: z.literal(1), system: z.enum(SYSTEMS), width: size, height: size, first: size, second: size, error: amount }).strict()

const drop = z.object({ kind: z.literal('drop'), version: z.literal(1), system: z.enum(SYSTEMS), width: size, out: length, apart: size, opened: angle }).strict()

const leaves = z.object({
  kind: z.literal('leaves'), version: z.literal(1), system: z.enum(SYSTEMS),
  first: z.object({ width: size, clearance: amount }).strict(), second: z.object({ width: size, clearance: amount }).strict(),
  opening: size, thickness: size, hingeRise: length,
}).strict()

const openingOf = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('mesh'), dimension: z.enum(['side', 'diagonal', 'width']), measured: size }).strict(),
  z.object({ kind: z.literal('rhombus'), width: size, height: size }).strict(),
  z.object({ kind: z.literal('pulledSquare'), side: size, width: size }).strict(),
  z.object({ kind: z.literal('bars'), gap: size }).strict(),
  z.object({ kind: z.literal('rightTriangle'), base: size, height: size }).strict(),
  z.object({ kind: z.literal('triangle'), sides: z.tuple([size, size, size]) }).strict(),
  z.object({ kind: z.literal('underRail'), between: size, first: amount, second: amount, railRise: length }).strict(),
])
const openings = z.object({ kind: z.literal('opening'), version: z.literal(1), system: z.enum(SYSTEMS), opening: openingOf, limits: z.array(trialLimitSchema).max(8) }).strict()

const fasteners = z.object({
  kind: z.literal('fasteners'), version: z.literal(1), system: z.enum(SYSTEMS),
  of: z.enum(['ties', 'bands']), length: size,
  /** The largest distances; whose they are stands in `basis`, null where they were typed. */
  rule: z.object({ spacing: size, start: amount, end: amount }).strict(), basis: basisSchema.nullable(),
  /** Where they stand, from the start; empty where only the fewest are asked. */
  positions: z.array(amount).max(MOST_POSITIONS),
}).strict()

export const trialSchema = z.discriminatedUnion('kind', [swing, path, frame, drop, leaves, openings, fasteners])
export type Trial = z.infer<typeof trialSchema>
export type TrialKind = Trial['kind']
export type TrialOf<Kind extends TrialKind> = Extract<Trial, { kind: Kind }>
export const TRIAL_KINDS = ['swing', 'path', 'frame', 'drop', 'leaves', 'opening', 'fasteners'] as const satisfies readonly TrialKind[]

/** A trial's limit as the rest of the program takes limits; one that was typed is named by `typed`, in the reader's language. */
export function limitOf({ basis, ...limit }: TrialLimit, typed: string): Limit {
  return { ...limit, basis: basis ?? { kind: 'organisation', name: typed } }
}
