import { parse, YAMLParseError } from 'yaml'
import { z } from 'zod'
import type { Bound, Unit } from '../limit/limit'
import { bothSchema, checklistSchema } from './check'
import type { Checklist } from './check'
import { ChecklistError, checklistProblems } from './checklistProblems'
import type { ChecklistProblem } from './checklistProblems'
import { lengthOfInches, lengthOfMillimetres } from './publishedFact'
import type { PublishedFact } from './publishedFact'

/** Figures of one end of a limit as a person writes them in YAML, in the units of the source. */
const figuresSchema = z.object({
  inches: z.number().optional(),
  millimetres: z.number().optional(),
  seconds: z.number().optional(),
  degrees: z.number().optional(),
  count: z.number().int().optional(),
  poundsForce: z.number().optional(),
  /** False for "over" and "under". */
  inclusive: z.boolean().optional(),
}).strict()

const limitTextSchema = z.object({
  fact: z.string(),
  low: figuresSchema.optional(),
  high: figuresSchema.optional(),
  avoid: z.object({ low: figuresSchema, high: figuresSchema }).strict().optional(),
  when: z.string().optional(),
}).strict()

const checkTextSchema = z.object({
  limits: z.array(limitTextSchema).default([]),
  placeTolerance: z.object({ inches: z.number().optional(), millimetres: z.number().optional() }).strict(),
  measurand: z.string().optional(),
  datum: z.string().optional(),
  unit: z.string().optional(),
}).passthrough()

/** A section: a title, what its checks share, and the checks. */
const sectionTextSchema = z.object({
  id: z.string().regex(/^[a-z0-9-]{2,40}$/),
  title: bothSchema,
  defaults: z.record(z.unknown()).default({}),
  checks: z.array(z.record(z.unknown())).min(1),
}).strict()

const listTextSchema = z.object({ id: z.string(), version: z.number(), title: bothSchema, sections: z.array(z.string()).min(1) }).strict()

/** YAML texts: one for each checklist, and all sections that they may be composed of. */
export interface ChecklistTexts { checklists: readonly string[], sections: readonly string[] }

type Section = z.output<typeof sectionTextSchema>

const refuse = (pointer: string, code: string, message: string): never => {
  throw new ChecklistError([{ pointer, code, message }])
}

function read<T extends z.ZodTypeAny>(schema: T, value: unknown, where: string): z.output<T> {
  const result = schema.safeParse(value)
  if (result.success) return result.data as z.output<T>
  throw new ChecklistError(result.error.issues.map((issue): ChecklistProblem => ({ pointer: `${where}/${issue.path.join('/')}`, code: 'schema', message: issue.message })))
}

function yamlOf(text: string, where: string): unknown {
  try {
    return parse(text, { uniqueKeys: true, maxAliasCount: 0 })
  }
  catch (error) {
    return refuse(where, 'yaml', `The YAML cannot be read: ${error instanceof YAMLParseError ? error.message : String(error)}`)
  }
}

function boundFrom(figures: z.infer<typeof figuresSchema>, inclusive: boolean): Bound {
  const { inches, millimetres, seconds, degrees, count, poundsForce } = figures
  const imperial = inches !== undefined ? lengthOfInches(inches) : poundsForce !== undefined ? Math.round(poundsForce * 1000) : undefined
  const plain = seconds !== undefined ? Math.round(seconds * 1000) : degrees !== undefined ? Math.round(degrees * 1000) : count
  return {
    ...(imperial === undefined ? {} : { imperial }),
    ...(millimetres === undefined ? {} : { metric: lengthOfMillimetres(millimetres) }),
    ...(plain === undefined ? {} : { plain }),
    inclusive: figures.inclusive ?? inclusive,
  }
}

function checkFrom(raw: Record<string, unknown>, section: string, where: string, facts: Map<string, PublishedFact>): Record<string, unknown> {
  const text = read(checkTextSchema, raw, where)
  const limits = text.limits.map((limit) => {
    const fact = facts.get(limit.fact) ?? refuse(`${where}/limits`, 'unknown-fact', `There is no published statement "${limit.fact}".`)
    return {
      // The same statement on the same measurand and datum is one limit, wherever it is named: a round's basis holds it once, under this id.
      id: `${limit.fact}.${text.measurand ?? ''}.${text.datum ?? ''}`,
      measurand: text.measurand,
      datum: text.datum,
      unit: text.unit as Unit,
      low: limit.low ? boundFrom(limit.low, true) : null,
      high: limit.high ? boundFrom(limit.high, true) : null,
      avoid: limit.avoid ? { low: boundFrom(limit.avoid.low, false), high: boundFrom(limit.avoid.high, false) } : null,
      basis: { kind: 'builtIn', name: fact.source, citation: fact.section, edition: fact.edition, read: fact.basis, fact: fact.id },
      ...(limit.when === undefined ? {} : { when: limit.when }),
    }
  })
  const { inches = 0, millimetres } = text.placeTolerance
  return { settings: [], disturbs: [], ...text, section, limits, placeTolerance: millimetres === undefined ? lengthOfInches(inches) : lengthOfMillimetres(millimetres) }
}

function compose(text: string, sections: ReadonlyMap<string, Section>, factsById: Map<string, PublishedFact>): Checklist {
  const list = read(listTextSchema, yamlOf(text, '/checklist'), '/checklist')
  const chosen = list.sections.map(id => sections.get(id) ?? refuse('/checklist/sections', 'unknown-section', `There is no section "${id}".`))
  const everyId = new Set([...sections.values()].flatMap(section => section.checks.map(check => String(check.id))))
  const here = new Set(chosen.flatMap(section => section.checks.map(check => String(check.id))))
  const checks = chosen.flatMap(section => section.checks.map((check) => {
    const whole = checkFrom({ ...section.defaults, ...check }, section.id, `/sections/${section.id}/${String(check.id)}`, factsById)
    const disturbs = whole.disturbs as string[]
    return { ...whole, disturbs: disturbs.filter(id => here.has(id) || !everyId.has(id)) }
  }))
  return read(checklistSchema, { id: list.id, version: list.version, title: list.title, sections: chosen.map(({ id, title }) => ({ id, title })), checks }, '')
}

/**
 * Reads checklists from YAML: composes their sections, fills in what a section's checks share, turns figures into integers and names each limit's source
 * from the published statements; then checks everything that {@link checklistProblems} knows.
 *
 * A check may disturb one of a section that its checklist leaves out; that reference is dropped. One that no section knows is refused.
 *
 * @throws {ChecklistError} with every problem of the first stage that found any
 */
export function parseChecklists(texts: ChecklistTexts, facts: readonly PublishedFact[]): Checklist[] {
  const factsById = new Map(facts.map(fact => [fact.id, fact]))
  const sections = new Map(texts.sections.map((text) => {
    const section = read(sectionTextSchema, yamlOf(text, '/sections'), '/sections')
    return [section.id, section] as const
  }))
  return texts.checklists.map((text) => {
    const checklist = compose(text, sections, factsById)
    const problems = checklistProblems(checklist, facts)
    if (problems.length > 0) throw new ChecklistError(problems)
    return checklist
  })
}
