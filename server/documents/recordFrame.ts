import type { Drawing, DiamondState } from '../../shared/drawing/displayList'
import { diamond, path } from '../../shared/drawing/displayList'
import type { RecordDocument } from '../../shared/record/record'
import { PAPER } from './paper'
import type { Sheet, TextStyle, Words } from './sheet'
import { tellingOf, type Telling } from '../../shared/record/recordWords'
import { fill, grouped } from '../../shared/record/wording'

/** What the parts of a record share while it is built. */
export interface Frame extends Telling {
  sheet: Sheet
  digest: string
}

export function frameOf(sheet: Sheet, record: RecordDocument, digest: string): Frame {
  return { ...tellingOf(record), sheet, digest }
}

/** A verdict diamond beside its word, painted as an artifact: the word says it. */
export function placeDiamond(sheet: Sheet, state: DiamondState, x: number, top: number, size: number): void {
  sheet.drawing({ list: diamond(state, 0, 0, 24), width: 24, height: 24 }, x, top, size / 24, null)
}

/** The heading of a part: light, then in medium weight what it is about; on a new page unless there is room for it and what follows. */
export function heading({ sheet }: Frame, [light, strong]: string[], room = 150): void {
  sheet.room(room)
  if (sheet.y > PAPER.top) sheet.y += 22
  const block = sheet.lay([{ text: light!, weight: 300 }, { text: strong!, weight: 500 }], PAPER.right - PAPER.left, { size: 20.25, lead: 25 })
  sheet.place(block, PAPER.left, sheet.y, 'H1')
  sheet.y += block.height + 8
}

/** A smaller heading under a rule, for a column. */
export function columnHeading({ sheet }: Frame, words: string, x: number, top: number, width: number): number {
  sheet.rule(top, { x1: x, x2: x + width })
  const block = sheet.lay(words, width, { size: 9.75, weight: 500, lead: 13 })
  sheet.place(block, x, top + 4.5, 'H2')
  return top + 4.5 + block.height + 2.5
}

export interface Column { x: number, width: number, head?: string }

/**
 * A row of a table whose cells are texts; the first is the row's head where `head` says so. Stands on one page; what is taller than a page goes on
 * in rows of the same head.
 */
export function tableRow({ sheet }: Frame, columns: Column[], cells: (Words | null)[], { head = false, size = 8.6, before = 5, after = 5, rule = true, marks = [] as { column: number, state: DiamondState }[] } = {}): void {
  const inset = (at: number) => marks.some(mark => mark.column === at) ? 15 : 0
  const lead = size * 1.38
  const blocks = columns.map((column, at) => sheet.lay(cells[at] ?? '', column.width - inset(at), { size, lead, ...(head && { weight: 500, role: 'soft' as const }) }))
  const lines = Math.max(...blocks.map(block => block.lines.length))
  const linesFrom = (y: number) => Math.floor((PAPER.bottom - y - before - after) / lead + 0.001)
  sheet.room(before + Math.min(lines, linesFrom(PAPER.top)) * lead + after)
  for (let from = 0; from < lines;) {
    if (from > 0) sheet.newPage()
    const [fits, top] = [Math.min(lines - from, linesFrom(sheet.y)), sheet.y + before]
    sheet.structure.within('TR', () => blocks.forEach((whole, at) => {
      const column = columns[at]!
      const first = at === 0 && whole.lines.length <= from ? 0 : from
      const mark = from === 0 && marks.find(one => one.column === at)
      if (mark) placeDiamond(sheet, mark.state, column.x, top + size * 0.1, size * 1.2)
      const block = { ...whole, lines: whole.lines.slice(first, first + fits) }
      sheet.structure.within(head || at === 0 ? 'TH' : 'TD', () => sheet.place(block, column.x + inset(at), top, null), head ? { scope: 'Column' } : at === 0 ? { scope: 'Row' } : {})
    }))
    sheet.y = top + fits * lead + after
    from += fits
  }
  if (rule) sheet.rule(sheet.y, head ? {} : { width: 0.75, role: 'line' })
}

const LOGO: Drawing = {
  width: 32, height: 32,
  list: [path('text', 'M18.8 5.2L29.6 16L16 29.6L2.4 16L14.2 4.2Q16.4 2 18.6 4.2Q21 6.8 18.4 9.6L12.6 15.4', { role: 'pine', width: 3.2 })],
}

/** Running head and foot of one page. */
export function paintHeadAndFoot(sheet: Sheet, { name, head, foot, check, page }: { name: string, head: string, foot: string, check: string, page: string }): void {
  sheet.drawing(LOGO, PAPER.left, 38.5, 0.4, null)
  sheet.placeArtifact(oneLine(sheet, name, 205, { size: 9, weight: 500, role: 'ink' }), PAPER.left + 18.75, 38)
  sheet.placeArtifact(oneLine(sheet, head, 270, { size: 9 }), PAPER.right - 270, 38, 'right')
  sheet.rule(56.5)
  sheet.rule(733, { width: 0.75 })
  sheet.placeArtifact(oneLine(sheet, foot, 425), PAPER.left, 737.5)
  sheet.placeArtifact(oneLine(sheet, check, 500), PAPER.left, 749.5)
  sheet.placeArtifact(sheet.lay(page, 84, { size: 8.25, role: 'soft', lead: 12 }), PAPER.right - 84, 737.5, 'right')
}

/** A head or foot that is too long loses its end, visibly: it only repeats what page 1 says in full. */
function oneLine(sheet: Sheet, text: string, width: number, { size = 8.25, weight = 400, role = 'soft' }: TextStyle = {}) {
  const style = { size, weight, role, lead: size + 3.75 }
  let short = text
  while (short.length > 8 && sheet.lay(short, width, style).lines.length > 1) short = `${short.slice(0, -2).trimEnd()}\u2026`
  return sheet.lay(short, width, style)
}

export function scopeTitle({ record, say }: Pick<Frame, 'record' | 'say'>): string {
  return fill(say.w.titles.scope[record.scope], { n: record.number })
}

/** A digest short enough for a foot, still telling: its first and last figures. */
export function shortDigest(digest: string): string {
  return `${grouped(digest.slice(0, 16))} \u2026 ${digest.slice(-4)}`
}
