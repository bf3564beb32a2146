import { z } from 'zod'
import { SYSTEMS } from '../measure/length'

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

/** Body of POST and PATCH of a job. The id is made by the caller, so that a repeat is the same job. */
export const jobInputSchema = z.object({
  id: z.string().uuid(),
  siteId: z.string().uuid(),
  title: line(120).min(1),
  neededBy: z.string().regex(/^\d{4}-\d\d-\d\d$/).nullable(),
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
