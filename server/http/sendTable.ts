import type { H3Event } from 'h3'
import { setResponseHeaders } from 'h3'
import type { TableFile } from '../../shared/api/table'
import { writeTable, type ListTable } from '../services/table/writeTable'

const TYPES: Record<TableFile, string> = { csv: 'text/csv; charset=utf-8', xlsx: 'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet' }

/** Answers with a list as a file to save. */
export async function sendTable(event: H3Event, table: ListTable, as: TableFile): Promise<Buffer> {
  const bytes = await writeTable(table, as)
  setResponseHeaders(event, { 'content-type': TYPES[as], 'content-disposition': `attachment; filename="${table.name}.${as}"` })
  return bytes
}
