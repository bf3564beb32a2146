import { z } from 'zod'
import { digestSchema, type EntryKind } from '../entry/entry'

const uuid = z.string().uuid()
const reason = z.string().trim().min(1).max(500)

/** Body of POST /api/jobs/:jobId/erasures: one picture, or what one entry says. */
export const askErasureSchema = z.object({ id: uuid, entryId: uuid.nullable(), photo: digestSchema.nullable(), reason }).strict()
  .refine(input => (input.entryId === null) !== (input.photo === null), { path: ['photo'], message: 'Name a picture or an entry, one of the two.' })
export type AskErasure = z.infer<typeof askErasureSchema>
export const erasureParamsSchema = z.object({ erasureId: uuid }).strict()
/** Body of PUT /api/jobs/:jobId/hold: why nothing of the job may be erased, or null to lift the hold. */
export const holdInputSchema = z.object({ reason: reason.nullable() }).strict()

/** What was asked to be erased, and what became of it; who erased it is null until then. */
export interface ErasureRow { id: string, entryId: string | null, photo: string | null, reason: string, askedBy: { accountId: string, name: string }, askedAt: string, doneBy: string | null, doneAt: string | null }
/** An entry that names somebody or says something in words. */
export interface ErasableEntry { id: string, kind: EntryKind, by: string, at: string, element: string, names: string[], words: string | null, erased: boolean }
export interface ErasablePicture { digest: string, kind: EntryKind, by: string, at: string, element: string, erased: boolean }
/** Answer of GET /api/jobs/:jobId/erasures. */
export interface ErasablePage {
  job: { id: string, code: string, siteName: string }
  hold: { reason: string, by: string, at: string } | null
  pictures: ErasablePicture[]
  entries: ErasableEntry[]
  /** Newest first; what was taken back is not among them. */
  asked: ErasureRow[]
  /** Codes of sealed records that show a picture, by its digest. */
  shownIn: Record<string, string[]>
}
