import { parse } from 'csv-parse/browser/esm/sync'
import { assembleLine, type DraftSide, type ReadLineOptions } from './assembleLine'
import type { Line } from './line'
import { CELL_WORDS, lineColumn, NO, YES, type LineColumn } from './lineColumns'
import { lineDefaults } from './lineDefaults'
import { QuickProblem, quickItems, type QuickErrorCode, type QuickItem } from './quickItems'
import { plainText, quickWordAt, type QuickMeaning } from './quickWords'
import { readQuickStatement } from './readQuickStatement'
import type { LengthUnit } from '../measure/length'

export const CSV_ERROR_CODES = ['csvBroken', 'headerMissing', 'headerTwice', 'yesNo', 'cellUnknown', 'sideUnreadable', 'sideSplit', 'tagUnreadable'] as const

/** A problem of a table: row as a spreadsheet counts it (the header is 1), the header of the column (null for the row as a whole), why, and what the sentence may name. */
export interface CsvError { row: number, column: string | null, code: QuickErrorCode | (typeof CSV_ERROR_CODES)[number], params: Record<string, string | number> }

/** What was read of a table: its header with what each column was taken for, its rows as they stand, the line if all of it was understood. */
export interface LineTable {
  columns: { header: string, column: LineColumn | null }[]
  rows: { row: number, cells: string[] }[]
  errors: CsvError[]
  line: Line | null
}

/** Places within a row are told apart by this much a column. */
const COLUMN_STEP = 1_000_000
const LONGEST_TEXT = 1_000_000

type Cell = { text: string, unit: LengthUnit | null, at: number }

/** A problem of a cell that quick typing has no code for. */
class CellProblem extends Error {
  constructor(readonly code: (typeof CSV_ERROR_CODES)[number], readonly cell: Cell) {
    super(code)
  }
}

/** Tables come with commas, semicolons or tabs between cells: the one that parts the header best. */
function delimiterOf(text: string): string {
  const head = text.split(/\r?\n/, 1)[0] ?? ''
  return [',', ';', '\t'].reduce((best, sign) => head.split(sign).length > head.split(best).length ? sign : best)
}

const word = (meaning: QuickMeaning, at: number): QuickItem => ({ is: 'word', meaning, text: '', at, length: 0 })

/** A cell in the items of quick typing; a bare number gets the unit of its column's header. */
function itemsOf({ text, unit, at }: Cell): QuickItem[] {
  const whole = unit && /^-?[\d./\s]+$/.test(text) ? `${text} ${unit}` : text
  try {
    return quickItems(whole).map(item => ({ ...item, at: item.at + at }))
  }
  catch (error) {
    if (error instanceof QuickProblem) throw new QuickProblem(error.code, error.at + at, error.length, error.params)
    throw error
  }
}

/** A cell of yes or no; undefined where it is empty. */
function yesNo(cell: Cell | undefined): boolean | undefined {
  if (!cell) return undefined
  const said = plainText(cell.text)
  if (YES.has(said)) return true
  if (NO.has(said)) return false
  throw new CellProblem('yesNo', cell)
}

/** Words of a person's own, without the brackets that keep a spreadsheet from taking them for a formula. */
function ownText({ text }: Cell): string {
  let depth = 0
  const close = [...text].findIndex(letter => (depth += letter === '(' ? 1 : letter === ')' ? -1 : 0) === 0)
  return (text.startsWith('(') && close === text.length - 1 ? text.slice(1, -1) : text).replace(/\s+/g, ' ').trim()
}

/** The words of a row as one statement. Throws {@link QuickProblem} or {@link CellProblem}. */
function statementItems(cells: Partial<Record<LineColumn, Cell>>): QuickItem[] {
  const items: QuickItem[] = []
  const clause = (...more: (QuickItem | undefined)[]) => { items.push(...more.filter(item => item !== undefined), { is: 'comma', at: 0, length: 1 }) }
  const { tag, what, length, rise, name } = cells
  if (tag) {
    if (!/^[A-Z]{1,3}\d{1,3}$/i.test(tag.text)) throw new CellProblem('tagUnreadable', tag)
    items.push({ is: 'tag', text: tag.text.toUpperCase(), at: tag.at, length: tag.text.length })
  }
  clause(...(what ? itemsOf(what) : []), ...(length ? itemsOf(length) : []))
  for (const [column, say] of [['height', 'high'], ['bays', 'bays'], ['mesh', 'mesh'], ['leaves', 'leaves']] as const) {
    const cell = cells[column]
    if (cell) clause(word({ say }, cell.at), ...itemsOf(cell).filter(item => item.is !== 'word' || item.meaning.say !== say))
  }
  if (rise) {
    const down = /^[-\u2212]/.test(rise.text)
    const said = itemsOf(down ? { ...rise, text: rise.text.slice(1) } : rise)
    clause(...(said.some(item => item.is === 'word') ? [] : [word({ say: down ? 'down' : 'up' }, rise.at)]), ...said)
  }
  const topRail = yesNo(cells.topRail)
  if (topRail !== undefined) clause(word({ say: 'topRail', has: topRail }, cells.topRail!.at))
  for (const column of ['exit', 'selfClosing', 'automatic'] as const) if (yesNo(cells[column])) clause(word({ say: column }, cells[column]!.at))
  for (const [column, says] of [['bottom', 'bottom'], ['opens', 'opens'], ['hung', 'hung'], ['work', 'work']] as const) {
    const cell = cells[column]
    if (!cell) continue
    const plain = plainText(cell.text)
    const said = CELL_WORDS[column]?.[plain] ?? plain
    const found = quickWordAt(said, 0)
    if (found?.meaning.say !== says || found.length !== said.length) throw new CellProblem('cellUnknown', cell)
    clause(word(found.meaning, cell.at))
  }
  for (const [face, ground] of [['outer', 'outerGround'], ['inner', 'innerGround']] as const) {
    const [settings, laid] = [cells[face], cells[ground]]
    // Commas and semicolons part settings in a cell as well as a plus does.
    if (settings) clause(word({ say: 'face', face }, settings.at), ...itemsOf(settings).filter(item => item.is === 'word'))
    if (laid) clause(word({ say: 'face', face }, laid.at), word({ say: 'ground' }, laid.at), ...itemsOf(laid).filter(item => item.is !== 'comma'))
  }
  if (name) {
    clause({ is: 'own', text: ownText(name), at: name.at, length: name.text.length })
  }
  return items
}

/**
 * Reads a line from a table (CSV with commas, semicolons or tabs; English or Spanish headers in any order; at most 400 elements). Cells are in the words of
 * quick typing; a bare number takes the unit that its header names, else feet or metres for lengths. Rows stand in walking order; an empty side cell goes on with the
 * side above. Columns that a line has no use for are left alone. Every problem is told with its row and column.
 */
export function readLineCsv(text: string, options: ReadLineOptions): LineTable {
  const table: LineTable = { columns: [], rows: [], errors: [], line: null }
  const fail = (row: number, column: string | null, code: CsvError['code'], params: CsvError['params'] = {}) => table.errors.push({ row, column, code, params })
  if (text.length > LONGEST_TEXT) {
    fail(1, null, 'tooLong', { most: LONGEST_TEXT })
    return table
  }
  let records: string[][]
  try {
    // An inch mark in the middle of a cell is no quote.
    records = parse(text, { bom: true, delimiter: delimiterOf(text), relax_column_count: true, relax_quotes: true, trim: true })
  }
  catch (error) {
    // csv-parse names the line where its quotes went wrong.
    fail(Number((error as { lines?: unknown }).lines) || 1, null, 'csvBroken')
    return table
  }
  const [head, ...rows] = records
  const meant = (head ?? []).map(lineColumn)
  table.columns = (head ?? []).map((header, i) => ({ header, column: meant[i]?.column ?? null }))
  table.rows = rows.map((cells, i) => ({ row: i + 2, cells })).filter(({ cells }) => cells.some(cell => cell !== ''))
  for (const [i, column] of meant.entries()) {
    if (column && meant.findIndex(other => other?.column === column.column) < i) fail(1, head![i]!, 'headerTwice', { header: head![i]! })
  }
  for (const needed of ['what', 'height'] as const) if (!meant.some(column => column?.column === needed)) fail(1, null, 'headerMissing', { column: needed })
  if (table.rows.length === 0) fail(1, null, 'nothing')
  if (table.errors.length > 0) return table

  const headerAt = (at: number) => head![Math.floor(at / COLUMN_STEP)] ?? null
  const sides: DraftSide[] = []
  for (const { row, cells } of table.rows) {
    const of: Partial<Record<LineColumn, Cell>> = {}
    meant.forEach((column, i) => {
      const said = cells[i]
      if (column && said) of[column.column] = { text: said, unit: column.unit, at: i * COLUMN_STEP }
    })
    try {
      const side = sideOf(of, sides, row)
      const statement = readQuickStatement(statementItems(of), lineDefaults(options.system), options.system)
      side.elements.push({ statement, line: row, at: of.what?.at ?? 0, length: 1 })
    }
    catch (error) {
      if (error instanceof QuickProblem) fail(row, headerAt(error.at), error.code, error.params)
      else if (error instanceof CellProblem) fail(row, headerAt(error.cell.at), error.code, { cell: error.cell.text })
      else throw error
    }
  }
  const line = assembleLine(sides, options, (row, problem) => fail(row, problem.code === 'tooMany' ? null : headerAt(problem.at), problem.code, problem.params))
  table.errors.sort((a, b) => a.row - b.row)
  if (table.errors.length === 0) table.line = line
  return table
}

/** The side that a row belongs to, begun where its letter comes first. */
function sideOf(of: Partial<Record<LineColumn, Cell>>, sides: DraftSide[], row: number): DraftSide {
  const last = sides.at(-1)
  const key = of.side?.text.toUpperCase() ?? last?.key ?? 'A'
  if (!/^[A-Z]$/.test(key)) throw new CellProblem('sideUnreadable', of.side!)
  const name = of.sideName ? ownText(of.sideName) : ''
  if (name.length > 80) throw new QuickProblem('tooLong', of.sideName!.at, 1, { most: 80 })
  if (last?.key === key) {
    last.name ||= name
    return last
  }
  if (sides.some(side => side.key === key)) throw new CellProblem('sideSplit', of.side!)
  const side = { key, name, line: row, elements: [] }
  sides.push(side)
  return side
}
