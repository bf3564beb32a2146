import type { TableFile } from '../../../shared/api/table'

/** A list as it is taken out: a name for the file, and rows of which the first is the head. Days and instants are texts as ISO 8601 has them. */
export interface ListTable { name: string, rows: (string | number | null | undefined)[][] }

// A cell that begins like a formula is kept from being one in a table program.
const plain = (value: ListTable['rows'][number][number]) => typeof value === 'string' && /^[=+\-@\t\r]/.test(value) ? `'${value}` : value ?? ''
const csvCell = (value: string | number) => /[",\n\r]/.test(String(value)) ? `"${String(value).replace(/"/g, '""')}"` : String(value)

/** Writes a table as CSV (UTF-8, RFC 4180) or as a workbook of one sheet with a head that stays. */
export async function writeTable({ name, rows }: ListTable, as: TableFile): Promise<Buffer> {
  const cells = rows.map(row => row.map(plain))
  if (as === 'csv') return Buffer.from(cells.map(row => row.map(csvCell).join(',')).join('\r\n'), 'utf8')
  // A megabyte of library: loaded by whoever asks for a workbook.
  const { default: excel } = await import('exceljs')
  const book = new excel.Workbook()
  const sheet = book.addWorksheet(name, { views: [{ state: 'frozen', ySplit: 1 }] })
  sheet.addRows(cells)
  sheet.getRow(1).font = { bold: true }
  sheet.columns.forEach((column, at) => { column.width = Math.min(60, 2 + cells.reduce((most, row) => Math.max(most, String(row[at] ?? '').length), 6)) })
  return Buffer.from(await book.xlsx.writeBuffer())
}
