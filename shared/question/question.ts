import { z } from 'zod'
import { limitSchema, UNITS } from '../limit/limit'
import { SETTINGS } from '../line/line'

/** `open`: written down; `asked`: put to somebody on a sheet; `answered`: settled, with name, date and document; `withdrawn`: not asked any more. */
export const QUESTION_STATES = ['open', 'asked', 'answered', 'withdrawn'] as const
export type QuestionState = (typeof QUESTION_STATES)[number]

const both = z.object({ en: z.string().min(1).max(200), es: z.string().min(1).max(200) }).strict()
export const questionWordsSchema = z.string().trim().min(1).max(2000)

/** What a question is about, in no language: enough to draw its limits and to print whose they are, on any day. */
export const questionAboutSchema = z.object({
  title: both,
  /** Elements by their short names, in walking order. */
  tags: z.array(z.string().regex(/^[A-Z]{1,3}\d{1,3}$/)).max(400),
  measurand: z.string().min(1).max(80),
  unit: z.enum(UNITS),
  /** From where a number would be taken that the answer sets. */
  datum: z.string().min(1).max(80),
  /** The setting that such a number would hold for. */
  setting: z.enum(SETTINGS),
  limits: z.array(limitSchema).max(20),
  /** How far one datum lies over another where the limits meet, when they come from two; see shared/provision/datumOverDatum. */
  gap: z.object({ upper: z.string().max(80), lower: z.string().max(80), at: z.number().int().safe() }).strict().nullable(),
}).strict()
export type QuestionAbout = z.infer<typeof questionAboutSchema>

/** The datums that a number which answers it may be taken from: that of the check, then those of its limits on the same thing. */
export const datumsOf = ({ datum, measurand, limits }: QuestionAbout): string[] => [...new Set([datum, ...limits.filter(limit => limit.measurand === measurand).map(limit => limit.datum)])]

const short = (max: number) => z.string().trim().min(1).max(max)
/** What settles a question: who said it, when, and where it stands. */
export const questionAnswerSchema = z.object({
  name: short(120),
  role: short(120),
  /** Day of the answer, as 2027-03-03. */
  on: z.string().regex(/^20\d\d-\d\d-\d\d$/),
  /** Letter, permit, section: where it can be read again. */
  document: short(200),
  words: questionWordsSchema,
}).strict()
export type QuestionAnswer = z.infer<typeof questionAnswerSchema>

/** A question as it stands. */
export interface Question {
  id: string
  about: QuestionAbout
  words: string
  state: QuestionState
  askedOf: string | null
  /** Instant. */
  askedAt: string | null
  sheetId: string | null
  answer: QuestionAnswer | null
}

/** questions.json, version 1: a sheet of questions as it was put to somebody. Never edited; a change is a version 2 beside it. */
export const questionSheetSchema = z.object({
  format: z.literal('smoothside-questions'),
  version: z.literal(1),
  id: z.string().uuid(),
  language: z.enum(['en', 'es']),
  system: z.enum(['imperial', 'metric']),
  at: z.string().datetime({ offset: true }),
  zones: z.record(z.string(), z.string().min(1).max(8)),
  organisation: short(200),
  /** Who asks, and where an answer reaches them. */
  from: z.object({ name: short(120), email: z.string().max(200) }).strict(),
  to: short(200),
  job: z.object({ code: short(40), title: z.string().max(200), permit: z.string().max(80) }).strict(),
  site: z.object({ name: short(200), address: z.string().max(300) }).strict(),
  client: short(200),
  message: z.string().max(2000),
  questions: z.array(z.object({ id: z.string().uuid(), about: questionAboutSchema, words: questionWordsSchema }).strict()).min(1).max(60),
}).strict()
export type QuestionSheet = z.infer<typeof questionSheetSchema>
