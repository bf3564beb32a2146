import { pino } from 'pino'

/** Ids only: no names, addresses, tokens or texts ever go here (a test greps the log of the whole browser test). */
export const logger = pino({ level: process.env.LOG_LEVEL ?? 'info', base: { role: process.env.SMOOTHSIDE_ROLE ?? 'both' } })
