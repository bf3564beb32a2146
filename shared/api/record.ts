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
