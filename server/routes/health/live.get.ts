import { defineEventHandler } from 'h3'

/** The process answers. */
export default defineEventHandler(() => ({ live: true }))
