import { z } from 'zod'
import { limitSchema, UNITS } from '../limit/limit'
import { ELEMENT_KINDS, SETTINGS } from '../line/line'

/** How a check is answered at the fence. */
export const METHODS = ['look', 'measure', 'count', 'trial', 'template'] as const
export type Method = (typeof METHODS)[number]

/** What one answer stands for. `worst`: the worst place that was found on the element. */
export const ANSWERED_FOR = ['once', 'bay', 'face', 'worst'] as const

/** Whether each element is asked, or the line as a whole: then it is read once, where it is worst. */
export const ASKED = ['each', 'line'] as const

/** What becomes of a measure on elements where nobody set a limit: read once for the line, or left out until somebody sets one. */
export const UNSET = ['line', 'leave'] as const

/** What becomes of an element while a finding is open, gravest first. */
export const DEFICIENCY_CLASSES = ['outOfUse', 'correctFirst', 'ownerMayAccept'] as const
export type DeficiencyClass = (typeof DEFICIENCY_CLASSES)[number]

/** Why a check exists; law, drowning, entrapment, exit and accessibility are never below `correctFirst`. */
export const CONCERNS = ['law', 'drowning', 'entrapment', 'exit', 'accessibility', 'injury', 'workmanship'] as const

/** The big keys of a walk pass; each opens the checks that it may be a finding of. */
export const FINDING_KINDS = ['tieEnd', 'sharpEdge', 'gapBelow', 'opening', 'boltProud', 'loosePart', 'other'] as const
export type FindingKind = (typeof FINDING_KINDS)[number]

/** Drawings that know how to move with a reading; `none` with a reason in words. */
export const DRAWINGS = ['latchHeight', 'gapBelow', 'swingClearance', 'opening', 'tieEnd', 'spacing', 'height', 'closing', 'clearWidth'] as const

/** The same text in both languages; neither may be missing. */
export const bothSchema = z.object({ en: z.string().min(1).max(600), es: z.string().min(1).max(600) }).strict()
export type Both = z.infer<typeof bothSchema>

/** A limit of a built-in check, with the CEL condition under which it applies. */
export const checkLimitSchema = limitSchema.extend({ when: z.string().max(400).optional() }).strict()

/** Concerns whose checks are never below `correctFirst`, whoever writes the checklist. */
export const FLOORED_CONCERNS: readonly (typeof CONCERNS)[number][] = ['law', 'drowning', 'entrapment', 'exit', 'accessibility']

/** Concerns whose measures are taken even where nobody set a number. */
const NEVER_LEFT: readonly (typeof CONCERNS)[number][] = ['drowning', 'entrapment', 'exit']

const fields = z.object({
  /** Stable for ever; a published check keeps its id over versions. */
  id: z.string().regex(/^[a-z0-9-]{3,60}$/),
  section: z.string().regex(/^[a-z0-9-]{2,40}$/),
  title: bothSchema,
  /** What to do, as a good foreman would say it. */
  task: bothSchema,
  method: z.enum(METHODS),
  answeredFor: z.enum(ANSWERED_FOR),
  /** `each` where it is not said. */
  asked: z.enum(ASKED).optional(),
  unset: z.enum(UNSET).optional(),
  elements: z.array(z.enum(ELEMENT_KINDS)).min(1),
  /** Settings of the face that call for it; empty means every face. */
  settings: z.array(z.enum(SETTINGS)),
  /** CEL over the facts of job, element and face. */
  when: z.string().max(400).optional(),
  /** For measure and count. */
  measurand: z.string().max(80).optional(),
  datum: z.string().max(80).optional(),
  unit: z.enum(UNITS).optional(),
  /** For a trial: from where, and how often each. */
  tries: z.array(z.object({ from: z.string().max(40), label: bothSchema, times: z.number().int().min(1).max(20) }).strict()).optional(),
  /** For a template: whether it conforms when the gauge passes or when it stops. */
  conformsWhen: z.enum(['passes', 'stops']).optional(),
  /** For a template: which gauge to bring, in words. */
  gauge: bothSchema.optional(),
  /** `guarded`: judged with a guard band of the instrument's expanded uncertainty (shared/limit/judge.ts); simple acceptance where it is not said. */
  acceptance: z.literal('guarded').optional(),
  /** Which dimension may have been taken, where texts differ (side, diagonal, width). */
  dimensions: z.array(z.enum(['side', 'diagonal', 'width'])).optional(),
  limits: z.array(checkLimitSchema),
  /** Why no built-in limit stands here, where the method wants one. */
  noLimit: bothSchema.optional(),
  /** Ids of the published statements that speak of it, in templates/facts, whether or not one of them is its limit here. */
  sources: z.array(z.string().regex(/^[A-H]\d\d$/)).optional(),
  /** True where a random sample may stand for the whole (tightness, turns, spacing); never for edges, ends, protrusions or entrapment. */
  sampled: z.boolean().optional(),
  class: z.enum(DEFICIENCY_CLASSES),
  concern: z.enum(CONCERNS),
  finding: z.enum(FINDING_KINDS),
  /** May be confirmed with the others of its kind at the end of a pass (looks only). */
  group: z.boolean(),
  photo: z.enum(['none', 'wanted', 'required']),
  caution: bothSchema.optional(),
  /** Ids of checks that are read again, on the element and its neighbours, after a correction of this one. */
  disturbs: z.array(z.string()),
  /** How near two readings must stand to be of the same place, as a Length. */
  placeTolerance: z.number().int().safe().nonnegative(),
  drawing: z.union([z.enum(DRAWINGS), z.object({ none: z.string().min(3) }).strict()]),
  /** Defers to local code. */
  note: bothSchema,
}).strict()

/** One check, whole. What one check alone can get wrong is refused here; what needs the others or the sources is in {@link checklistProblems}. */
export const checkSchema = fields.superRefine((check, context) => {
  const refuse = (path: string, message: string) => context.addIssue({ code: 'custom', path: [path], message })
  const numeric = check.method === 'measure' || check.method === 'count'
  if (check.class === 'ownerMayAccept' && FLOORED_CONCERNS.includes(check.concern)) refuse('class', `A check for ${check.concern} is at least correctFirst.`)
  if (check.group && check.method !== 'look') refuse('group', 'Only looks may be confirmed as a group.')
  if (check.sampled && (check.concern === 'entrapment' || ['tieEnd', 'sharpEdge', 'boltProud', 'opening', 'gapBelow'].includes(check.finding)))
    refuse('sampled', 'Edges, ends, protrusions and entrapment are done in full, never sampled.')
  if ((check.asked === 'line' || check.unset === 'line') && (check.answeredFor === 'bay' || check.answeredFor === 'face'))
    refuse('asked', 'What is answered once for the line is answered once, or where it is worst, not by bay or face.')
  if (check.asked === 'line' && check.group) refuse('asked', 'Looks of a group are confirmed at the end of each element, not once for the line.')
  if (check.acceptance !== undefined && check.method !== 'measure') refuse('acceptance', 'Only a measure has an instrument with an uncertainty.')
  if (check.unset !== undefined && !numeric) refuse('unset', 'Only a measure or a count waits for a number.')
  if (check.unset === 'leave' && NEVER_LEFT.includes(check.concern)) refuse('unset', `A check for ${check.concern} is asked whether or not a number is set.`)
  if (numeric && !(check.measurand && check.datum && check.unit)) refuse('measurand', 'A measure or count names its measurand, datum and unit.')
  if (check.method === 'count' && check.unit !== 'count') refuse('unit', 'A count is in ones.')
  // A limit that hangs on a condition leaves places without one: there the reason must be readable.
  if (numeric && !check.noLimit && check.limits.every(limit => limit.when !== undefined)) refuse('noLimit', 'Say why no built-in limit stands where none applies.')
  if (check.method === 'trial' && !check.tries?.length) refuse('tries', 'A trial says from where and how often.')
  if (check.method === 'template' && !(check.conformsWhen && check.gauge && check.measurand && check.datum && check.unit))
    refuse('conformsWhen', 'A template names its gauge, what the gauge stands for, and whether it conforms when the gauge passes or stops.')
  if (check.method === 'look' && check.limits.length > 0) refuse('limits', 'A look has no limit; make it a measure.')
  check.limits.forEach((limit, at) => {
    if (limit.measurand !== check.measurand || limit.datum !== check.datum || limit.unit !== check.unit)
      context.addIssue({ code: 'custom', path: ['limits', at], message: 'A limit is on the measurand, datum and unit of its check.' })
  })
})
export type Check = z.infer<typeof checkSchema>

/** One published version of a checklist: sections in order, checks in walking sense. */
export const checklistSchema = z.object({
  id: z.string().regex(/^[a-z0-9-]{3,60}$/),
  version: z.number().int().min(1),
  title: bothSchema,
  sections: z.array(z.object({ id: z.string(), title: bothSchema }).strict()).min(1),
  checks: z.array(checkSchema).min(1).max(400),
}).strict()
export type Checklist = z.infer<typeof checklistSchema>
