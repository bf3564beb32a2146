import { z } from 'zod'
import { UNITS, type Unit } from '../limit/limit'

/** What a tape, level, watch or gauge can read, and how wrong it may be. Never edited: it ends, and another one takes its place. */
export const instrumentInputSchema = z.object({
  id: z.string().uuid(),
  /** As people call it: `25 ft tape, no. 3`. It stands in each reading that was taken with it. */
  name: z.string().trim().min(1).max(80),
  unit: z.enum(UNITS),
  /** Expanded uncertainty (k = 2) in the integer unit of what it reads (shared/limit/limit.ts). */
  uncertainty: z.number().int().safe().positive(),
  /** The uncertainty as it was written, with its unit: `1/16 in`. */
  text: z.string().trim().min(1).max(64),
  /** Where that figure is from: a certificate and its number, the maker's sheet, the class on the tape. */
  source: z.string().trim().min(1).max(300),
  checkedOn: z.string().regex(/^\d{4}-\d\d-\d\d$/).nullable(),
}).strict()
export type InstrumentInput = z.infer<typeof instrumentInputSchema>
export const instrumentEndSchema = z.object({ id: z.string().uuid() }).strict()

/** An instrument as a device takes it along. */
export interface Instrument { id: string, name: string, unit: Unit, uncertainty: number, text: string }
/** Row of GET /api/instruments, by name. */
export interface InstrumentRow extends Instrument { source: string, checkedOn: string | null, by: string }
