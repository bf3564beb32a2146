import { z } from 'zod'

/** As what a list is taken out: RFC 4180 text, or a workbook (ISO/IEC 29500). */
export const TABLE_FILES = ['csv', 'xlsx'] as const
export type TableFile = (typeof TABLE_FILES)[number]
export const tableParamsSchema = z.object({ as: z.enum(TABLE_FILES) }).strict()
