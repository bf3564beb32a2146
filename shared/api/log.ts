import { z } from 'zod'

/** Answer of GET /api/log: how the installation's log stands. `behind` is the last head said outside of a database that has fallen behind it. */
export interface LogStanding { size: number, epoch: number, behind: { size: number, at: string } | null }
/** Body of POST /api/log/epochs: why the log goes on from here. */
export const epochInputSchema = z.object({ reason: z.string().trim().min(1).max(500) }).strict()
