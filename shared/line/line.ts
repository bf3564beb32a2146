import { z } from 'zod'
import { SYSTEMS } from '../measure/length'

/** Why people are at risk at a face. */
export const SETTINGS = ['school', 'playground', 'pool', 'athletic', 'walkway', 'accessibleRoute', 'egress', 'driveway'] as const
export type Setting = (typeof SETTINGS)[number]

export const ELEMENT_KINDS = ['run', 'gate', 'terminalPost', 'tieIn', 'crossing'] as const
export type ElementKind = (typeof ELEMENT_KINDS)[number]

/** Whose work an element is. */
export const WORKS = ['new', 'altered', 'existing', 'byOthers'] as const

export const GATE_FORMS = ['singleSwing', 'doubleSwing', 'slide', 'cantilever'] as const
export const POST_FORMS = ['end', 'corner', 'pull', 'gate'] as const
export const TIE_IN_TO = ['building', 'wall', 'fence'] as const
export const CROSSING_OF = ['drain', 'swale', 'curb'] as const
/** The two faces of a line, as one walks it: `outer` is the public side unless a face's settings say otherwise. */
export const FACES = ['outer', 'inner'] as const
export type Face = (typeof FACES)[number]

const length = z.number().int().safe()
const positive = length.positive().max(320_000_000_000)

export const faceSchema = z.object({
  settings: z.array(z.enum(SETTINGS)).max(SETTINGS.length),
  ground: z.object({
    finished: z.boolean(),
    surface: z.enum(['soft', 'solid']),
    /** What is still to come on unfinished ground, in the words of the desk ("mulch"). */
    coming: z.string().max(80).optional(),
    /** How thick that will lie. */
    comingThickness: positive.optional(),
  }).strict(),
}).strict()
export type FaceState = z.infer<typeof faceSchema>

export const gateSchema = z.object({
  form: z.enum(GATE_FORMS),
  /** Width of each leaf; one for single swing and slide, two for double swing. */
  leaves: z.array(positive).min(1).max(2),
  /** At which end the (first) leaf hangs, as one walks the line. */
  hinge: z.enum(['start', 'end']),
  /** To which face it opens. */
  opens: z.enum(FACES),
  /** A way out that people rely on: never locked, never taped. */
  exit: z.boolean(),
  selfClosing: z.boolean(),
  automatic: z.boolean(),
}).strict()

/** One element of a line. It belongs to the site and keeps its id over jobs; lengths as contracts.md 1. */
export const elementSchema = z.object({
  id: z.string().uuid(),
  kind: z.enum(ELEMENT_KINDS),
  /** Short name on the line: R1, G2, P3. Unique on the line. */
  tag: z.string().regex(/^[A-Z]{1,3}\d{1,3}$/),
  name: z.string().max(80).optional(),
  work: z.enum(WORKS),
  /** Along the line. Terminal posts take none of it (0). */
  length: length.nonnegative().max(320_000_000_000),
  /** Of the fabric or leaf over the ground. */
  height: positive,
  /** How much the ground rises from its start to its end; negative falls. */
  rise: length,
  /** Number of bays of a run (line posts + 1); 1 elsewhere. */
  bays: z.number().int().min(1).max(500),
  /** Mesh size: clear distance between parallel wires. */
  mesh: positive.optional(),
  topRail: z.boolean(),
  bottom: z.enum(['rail', 'tensionWire', 'none']),
  gate: gateSchema.optional(),
  post: z.enum(POST_FORMS).optional(),
  tieIn: z.enum(TIE_IN_TO).optional(),
  crossing: z.enum(CROSSING_OF).optional(),
  faces: z.object({ outer: faceSchema, inner: faceSchema }).strict(),
}).strict()
export type LineElement = z.infer<typeof elementSchema>

/** A stretch of the line between corners; elements stand in walking order. */
export const sideSchema = z.object({
  key: z.string().regex(/^[A-Z]$/),
  name: z.string().max(80),
  elements: z.array(elementSchema).min(1).max(400),
}).strict()

/** The fence of a job in walking order, one version of it. */
export const lineSchema = z.object({
  version: z.number().int().min(1),
  /** The system it was drawn in, and the job shows. */
  system: z.enum(SYSTEMS),
  sides: z.array(sideSchema).min(1).max(26),
}).strict()
export type Line = z.infer<typeof lineSchema>
export type LineSide = z.infer<typeof sideSchema>

/** All elements of a line in walking order. */
export function elementsOf(line: Line): LineElement[] {
  return line.sides.flatMap(side => side.elements)
}
