import { z } from 'zod'
import { limitSchema } from '../limit/limit'
import { PROVISION_EFFECTS, type Provision } from '../provision/provision'
import { questionAboutSchema, questionAnswerSchema, questionWordsSchema, type Question } from '../question/question'
import type { DeliveryEvent } from './record'

const id = z.string().uuid()
export const questionIdSchema = z.object({ questionId: id }).strict()

/** Body of POST /api/jobs/:jobId/questions. The id is made by the caller, so that a repeat is the same question. */
export const questionInputSchema = z.object({ id, about: questionAboutSchema, words: questionWordsSchema }).strict()
export type QuestionInput = z.infer<typeof questionInputSchema>

/** Body of POST /api/jobs/:jobId/question-sheets: puts questions to somebody, by mail where there is an address, else on paper. */
export const questionSheetInputSchema = z.object({
  id,
  questions: z.array(id).min(1).max(60),
  name: z.string().trim().min(1).max(200),
  email: z.string().trim().toLowerCase().email().max(200).nullable(),
  message: z.string().trim().max(2000),
  language: z.enum(['en', 'es']),
}).strict()
export type QuestionSheetInput = z.infer<typeof questionSheetInputSchema>

/** Body of POST /api/questions/:questionId/answer. `number`: a limit that the answer sets for all sites of the authority, in the setting of the question. */
export const questionAnswerInputSchema = z.object({
  answer: questionAnswerSchema,
  number: z.object({ id, effect: z.enum(PROVISION_EFFECTS), limit: limitSchema.pick({ datum: true, unit: true, low: true, high: true, avoid: true }).strict() }).strict().nullable(),
}).strict()
export type QuestionAnswerInput = z.infer<typeof questionAnswerInputSchema>

/** Body of POST /api/jobs/:jobId/basis: brings the walk list up to the numbers in force. */
export const basisRenewSchema = z.object({ why: z.string().trim().min(1).max(2000) }).strict()

export interface QuestionSheetRow { id: string, name: string, email: string | null, sentBy: string, at: string, questions: number, events: { kind: DeliveryEvent, detail: string, at: string }[] }

/** Answer of GET /api/jobs/:jobId/limits: what the desk knows of a job's limits beside its walk list. */
export interface JobLimitsOf {
  questions: Question[]
  sheets: QuestionSheetRow[]
  /** True when numbers were set or ended since the walk list was pinned, and the round is still open. */
  numbersChanged: boolean
  /** Local numbers that hold here and that somebody should ask after again, within 60 days or already. */
  reviews: Provision[]
}
