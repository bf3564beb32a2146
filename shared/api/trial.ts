import { z } from 'zod'
import { trialSchema, type Trial } from '../trial/trial'

/** Body of PUT /api/jobs/:jobId/trials: a trial calculation kept with an element of the job. The id is made by the caller, so that a repeat is the same trial. */
export const trialInputSchema = z.object({ id: z.string().uuid(), element: z.string().uuid(), trial: trialSchema }).strict()
export type TrialInput = z.infer<typeof trialInputSchema>

/** Row of GET /api/jobs/:jobId/trials, newest first. */
export interface KeptTrial { id: string, element: string, trial: Trial, by: string, at: string }
