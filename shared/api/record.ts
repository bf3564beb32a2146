/** States of a sealing, in order (contracts.md 5). */
export const SEALING_STATES = ['frozen', 'built', 'signed', 'logged', 'sealed'] as const
export type SealingState = (typeof SEALING_STATES)[number]

/** What a sealed record is worth today. */
export const RECORD_STANDINGS = ['current', 'superseded', 'underQuestion', 'withdrawn'] as const

/** What the delivery log may say: only what is known. */
export const DELIVERY_EVENTS = ['queued', 'handed', 'deferred', 'returned', 'opened', 'downloaded'] as const
export type DeliveryEvent = (typeof DELIVERY_EVENTS)[number]
