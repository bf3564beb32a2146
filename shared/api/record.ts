import { z } from 'zod'
import type { RecordDocument } from '../record/record'

/** States of a sealing, in order (contracts.md 5). */
export const SEALING_STATES = ['frozen', 'built', 'signed', 'logged', 'sealed'] as const
export type SealingState = (typeof SEALING_STATES)[number]

/** What a sealed record is worth today. */
export const RECORD_STANDINGS = ['current', 'superseded', 'underQuestion', 'withdrawn'] as const

/** What the delivery log may say: only what is known. */
export const DELIVERY_EVENTS = ['queued', 'handed', 'deferred', 'returned', 'opened', 'downloaded'] as const
export type DeliveryEvent = (typeof DELIVERY_EVENTS)[number]

/** A record as lists show it. */
export interface RecordRow {
  id: string, code: string, number: number, scope: 'interim' | 'final', jobId: string, jobTitle: string, siteId: string, siteName: string, organisationName: string
  sealing: SealingState, trouble: string | null, standing: (typeof RECORD_STANDINGS)[number], sealedAt: string | null, pages: number | null, bytes: number | null
  documentDigest: string | null
  /** Recipients and how far each got, newest event; empty for a client. */
  recipients: { name: string, email: string, newest: DeliveryEvent | null, at: string | null }[]
  /** Elements that a later record speaks for. */
  replacedFor: { tag: string, by: string }[]
}

const uuid = z.string().uuid()
export const recordParamsSchema = z.object({ recordId: uuid }).strict()
export const recordListSchema = z.object({ find: z.string().trim().max(100).default(''), most: z.coerce.number().int().min(1).max(500).default(200) }).strict()
/** Body of POST /api/jobs/:jobId/records. The id is made by the caller, so that a second press seals nothing twice. */
export const sealInputSchema = z.object({
  id: uuid,
  scope: z.enum(['interim', 'final']),
  /** Why devices that are still out are not waited for; printed. */
  overDevices: z.string().trim().min(1).max(500).nullable(),
}).strict()
/** Body of POST /api/records/:recordId/transmittals. */
export const sendInputSchema = z.object({ id: uuid, contacts: z.array(uuid).min(1).max(60), message: z.string().trim().max(2000) }).strict()
/** Body of PATCH /api/records/:recordId: what it is worth from now on, and why; a leaf of the log. */
export const standingInputSchema = z.object({ standing: z.enum(['current', 'underQuestion', 'withdrawn']), reason: z.string().trim().min(1).max(500) }).strict()

/** A step of the delivery log. */
export interface DeliveryRow { name: string, email: string, kind: DeliveryEvent, at: string, detail: string }
/** Answer of GET /api/records/:recordId. */
export interface RecordPageOf {
  record: RecordRow & { standingReason: string | null, rangeDigest: string | null, fileDigest: string | null, leaf: number | null, border: number }
  /** The canonical document, once it is built. */
  document: RecordDocument | null
  /** The delivery log, newest first; empty for a client. */
  deliveries: DeliveryRow[]
  acceptances: { id: string, contactName: string, meaning: string, deficiencyId: string | null, at: string }[]
  /** Who it can be sent to; empty for a client. */
  contacts: { id: string, name: string, title: string, email: string, mailbox: boolean, accepts: boolean }[]
}
