import { z } from 'zod'
import type { ElementKind, Line } from '../line/line'
import { lineSchema } from '../line/line'
import type { LineMarks } from '../line/lineMark'
import type { Length } from '../measure/length'
import { SYSTEMS } from '../measure/length'
import type { Role } from '../permission/permission'
import type { RoundBasis } from '../round/basis'
import type { RoundOutcome } from '../round/outcome'
import type { RecordRow } from './record'

/** Where a job stands, in the order in which it goes. */
export const JOB_STATES = ['drawing', 'walking', 'correcting', 'signing', 'sealing', 'sealed', 'closed'] as const
export type JobState = (typeof JOB_STATES)[number]

/** Whose move it is next. */
export const MOVERS = ['crew', 'inspector', 'manager', 'client', 'authority'] as const
export type Mover = (typeof MOVERS)[number]

/** Which move that is; screens word it with `count`. */
export const JOB_MOVES = ['drawLine', 'setNumbers', 'walk', 'correct', 'orderPart', 'walkAgain', 'sign', 'seal', 'mendSealing', 'send', 'readRecord', 'acceptDeviation', 'answerQuestion', 'none'] as const
export type JobMove = (typeof JOB_MOVES)[number]

const line = (max: number) => z.string().trim().max(max)
/** A day of the calendar in this century, as 2026-12-24; 2026-02-30 is none. */
const day = z.string().regex(/^20\d\d-\d\d-\d\d$/).refine(text => new Date(`${text}T00:00:00Z`).toJSON()?.startsWith(text), 'This day is not in the calendar.')

/** Body of POST and PATCH of a job. The id is made by the caller, so that a repeat is the same job. */
export const jobInputSchema = z.object({
  id: z.string().uuid(),
  siteId: z.string().uuid(),
  title: line(120).min(1),
  neededBy: day.nullable(),
  onsiteName: line(120), onsitePhone: line(40),
  emergencyName: line(120), emergencyPhone: line(40),
  contract: line(80), permit: line(80), buildingCode: line(120), gateTag: line(80),
  system: z.enum(SYSTEMS),
  language: z.enum(['en', 'es']),
  checklists: z.array(z.string().max(60)).min(1).max(10),
  /** Accounts it is given to. */
  given: z.array(z.object({ accountId: z.string().uuid(), as: z.enum(['inspector', 'crew']) }).strict()).max(40),
}).strict()
export type JobInput = z.infer<typeof jobInputSchema>

/** What people call a job: the organisation's code and the job's number, as in TG-0417. A record's code adds its own number. */
export const jobCode = (organisationCode: string, jobNumber: number) => `${organisationCode}-${String(jobNumber).padStart(4, '0')}`

/** What a list draws of a line: enough for one row, no more. */
export interface LineStripOf {
  elements: { id: string, kind: ElementKind, length: Length }[]
  marks: LineMarks
}

export const JOB_FILTERS = ['all', 'yours', 'thisWeek', 'heldOut', 'unopened', 'closed'] as const
/** Query of GET /api/jobs. `after` is the `next` of the page before. */
export const jobListSchema = z.object({
  find: line(100).default(''),
  filter: z.enum(JOB_FILTERS).default('all'),
  sort: z.enum(['neededBy', 'number', 'since']).default('neededBy'),
  siteId: z.string().uuid().optional(),
  after: z.string().max(200).optional(),
  most: z.coerce.number().int().min(1).max(200).default(50),
}).strict()
export type JobListQuery = z.infer<typeof jobListSchema>

export interface JobRow {
  id: string, number: number, code: string, title: string, siteId: string, siteName: string, clientName: string, neededBy: string | null
  system: 'imperial' | 'metric', state: JobState, moveBy: Mover, move: JobMove, moveCount: number, moveSince: string
  strip: LineStripOf | null, openTags: number, heldOut: number, length: Length
}
export interface JobPage { rows: JobRow[], next: string | null, counts: Record<(typeof JOB_FILTERS)[number], number> }

export const jobIdSchema = z.object({ jobId: z.string().uuid() }).strict()
export const jobChangeSchema = jobInputSchema.omit({ id: true, siteId: true })
/** Body of PUT /api/jobs/:jobId/line. `from` is the version that it was drawn over, 0 for the first. */
export const lineInputSchema = z.object({ from: z.number().int().min(0), line: lineSchema, why: line(2000).min(1) }).strict()

/** Answer of GET /api/jobs/:jobId: everything that the job's page shows. */
export interface JobPageOf {
  job: JobInput & { number: number, code: string, clientId: string, clientName: string, siteName: string, siteAddress: string, timeZone: string, authorityId: string | null, authorityName: string | null, state: JobState, moveBy: Mover, move: JobMove, moveCount: number, moveSince: string }
  /** As built where a round has begun, else as drawn; null before the first. */
  line: Line | null
  lineVersion: number
  round: { id: string, number: number, state: 'open' | 'frozen' | 'sealed', accepted: number, basis: string } | null
  basis: RoundBasis | null
  outcome: RoundOutcome | null
  people: { accountId: string, name: string, role: Role }[]
  devices: { device: string, name: string, accountId: string, letter: string, takenAt: string, emptyAt: string | null }[]
  records: RecordRow[]
}
