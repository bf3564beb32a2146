import { diamond, DIAMONDS } from '../../shared/drawing/displayList'
import { drawLine } from '../../shared/line/drawLine'
import { diamondOf } from '../../shared/line/lineMark'
import { elementsOf } from '../../shared/line/line'
import { MEASURE, PAPER } from './paper'
import type { Frame } from './recordFrame'
import { columnHeading } from './recordFrame'
import type { Words } from './sheet'
import { askedOf, closed, heldOf, marksOf, notSeenOf, particularsOf, tagOf, walkedWords } from '../../shared/record/recordWords'
import { fill, listed, sentence } from '../../shared/record/wording'

const GAP = 24
const COLUMN = (MEASURE - GAP) / 2
const RIGHT = PAPER.left + COLUMN + GAP

/** Page 1: the outcome in one sentence, the line, who and where, what is held, not seen and asked, and what the record is not. */
export function paintFirstPage(frame: Frame): void {
  const { sheet, record, say } = frame
  const { titles } = say.w
  sheet.paragraph([{ text: `${record.sentence.lead} `, weight: 500 }, { text: record.sentence.rest }], { type: 'H1', size: 18.75, weight: 300, lead: 23.4, after: 3 })
  sheet.paragraph(walkedWords(frame), { role: 'soft', after: 8 })
  paintAmended(frame)
  const columns: [Part[], Part[]] = [
    [[titles.whoAndWhere, { pairs: particularsOf(frame), labels: 69 }]],
    [[titles.held, held(frame)], [titles.notSeen, [notSeenOf(frame).join(' ')]], [titles.asked, askedOf(frame)]],
  ]
  const body = sheet.lay(record.isNot, MEASURE, SMALL)
  paintLine(frame, columnsHeight(frame, columns) + body.height + 30)
  paintColumns(frame, columns)
  sheet.structure.within('Sect', () => {
    sheet.room(20 + body.height)
    sheet.y = columnHeading(frame, titles.isNot, PAPER.left, sheet.y, MEASURE)
    sheet.place(body, PAPER.left, sheet.y)
    sheet.y += body.height + 8
  })
  paintCautions(frame)
}

function paintAmended(frame: Frame): void {
  const { sheet, record: { amends }, say } = frame
  if (!amends) return
  const tags = listed(amends.elements.map(element => tagOf(frame, element)), say.w.and)
  sheet.paragraph(fill(say.w.phrases[amends.how], { code: amends.code, tags, why: closed(amends.why) }), { weight: 500, after: 8 })
}

/** The line, drawn smaller (never under two thirds) where what must stand on this page would not fit under it. */
function paintLine(frame: Frame, below: number): void {
  const { sheet, record, say } = frame
  const marks = marksOf(record)
  const words = elementsOf(record.line).map(element => `${element.tag} ${say.w.legend[diamondOf(marks[element.id]!)]}`)
  const legend = 36
  let [scale, drawing] = [0.75, drawLine(record.line, { variant: 'paper', width: MEASURE / 0.75, marks })]
  while (scale > 0.5 && sheet.y + drawing.height * scale + legend + below > PAPER.bottom) {
    scale -= 0.05
    drawing = drawLine(record.line, { variant: 'paper', width: MEASURE / scale, marks })
  }
  sheet.room(drawing.height * scale)
  sheet.drawing(drawing, PAPER.left, sheet.y, scale, fill(say.w.phrases.lineAlt, { elements: words.join(', ') }))
  sheet.y += drawing.height * scale + 5
  paintLegend(frame)
}

/** The diamonds that the line wears, and no others. */
function paintLegend({ sheet, record, say }: Frame): void {
  const marks = marksOf(record)
  const worn = new Set(Object.values(marks).map(diamondOf))
  let x: number = PAPER.left
  const states = DIAMONDS.filter(state => worn.has(state))
  sheet.structure.within('L', () => states.forEach((state) => {
    const block = sheet.lay(say.w.legend[state], 200, { size: 8.25, role: 'soft', lead: 11 })
    const width = 13 + widthOf(block)
    if (x + width > PAPER.right) {
      x = PAPER.left
      sheet.y += 13
    }
    const [left, top] = [x, sheet.y]
    sheet.drawing({ list: diamond(state, 0, 0, 24), width: 24, height: 24 }, left, top + 0.8, 9 / 24, null)
    sheet.structure.within('LI', () => sheet.structure.within('LBody', () => sheet.place(block, left + 13, top, null)))
    x += width + 11
  }))
  sheet.y += 22
}

function widthOf(block: { lines: { width: number, space: { width: number } | null }[][] }): number {
  return Math.max(...block.lines.map(line => line.reduce((sum, word) => sum + word.width + (word.space?.width ?? 0), 0)))
}

type Cells = [string, Words][]
/** What a column holds: pairs of a label and its words (with the width of the labels), or paragraphs. */
type ColumnBody = { pairs: Cells, labels: number, ruled?: boolean } | string[]

type Part = [title: string, body: ColumnBody]

/** Two columns of parts, each column for itself: what is held, not seen and asked stands beside who and where. */
function paintColumns(frame: Frame, columns: [Part[], Part[]]): void {
  const { sheet } = frame
  const whole = columnsHeight(frame, columns)
  if (whole > PAPER.bottom - PAPER.top) return paintOneByOne(frame, columns.flat())
  sheet.room(whole)
  const top = sheet.y
  columns.forEach((parts, at) => {
    const x = at === 0 ? PAPER.left : RIGHT
    let y = top
    for (const [title, body] of parts) {
      const from = y
      sheet.structure.within('Sect', () => paintColumn(frame, columnHeading(frame, title, x, from, COLUMN), x, body))
      y += heightOf(frame, body) + PART
    }
  })
  sheet.y = top + whole
}

/** Where somebody wrote more than a page holds beside: one part under another, over pages. */
function paintOneByOne(frame: Frame, parts: Part[]): void {
  const { sheet } = frame
  for (const [title, body] of parts) {
    sheet.room(60)
    sheet.structure.within('Sect', () => {
      sheet.y = columnHeading(frame, title, PAPER.left, sheet.y, MEASURE)
      if (Array.isArray(body)) body.forEach(words => sheet.paragraph(words, { ...SMALL, after: 3 }))
      else body.pairs.forEach(([label, words]) => sheet.paragraph([{ text: `${label}: `, role: 'soft' }, ...(typeof words === 'string' ? [{ text: words }] : words)], { ...SMALL, after: 2 }))
    })
    sheet.y += 8
  }
}

/** Heading and the room after a part. */
const PART = 20 + 8
function columnsHeight(frame: Frame, columns: [Part[], Part[]]): number {
  return Math.max(...columns.map(parts => parts.reduce((sum, [, body]) => sum + heightOf(frame, body) + PART, 0)))
}

const SMALL = { size: 9.2, lead: 12.8 }
const PAIR = SMALL
function layPairs({ sheet }: Frame, body: Exclude<ColumnBody, string[]>) {
  return body.pairs.map(([label, words]) => {
    const [a, b] = [sheet.lay(label, body.labels - 6, { ...PAIR, role: body.ruled ? 'ink' : 'soft' }), sheet.lay(words, COLUMN - body.labels, PAIR)]
    return { a, b, height: Math.max(a.height, b.height) + (body.ruled ? 6 : 1.5) }
  })
}

function heightOf(frame: Frame, body: ColumnBody): number {
  return Array.isArray(body)
    ? body.reduce((sum, words) => sum + frame.sheet.lay(words, COLUMN, PAIR).height + 3, 0)
    : layPairs(frame, body).reduce((sum, row) => sum + row.height, 0)
}

function paintColumn(frame: Frame, top: number, x: number, body: ColumnBody): void {
  const { sheet } = frame
  let y = top
  if (Array.isArray(body)) {
    for (const words of body) {
      const block = sheet.lay(words, COLUMN, PAIR)
      sheet.place(block, x, y)
      y += block.height + 3
    }
    return
  }
  sheet.structure.within('Table', () => layPairs(frame, body).forEach(({ a, b, height }, at) => {
    if (body.ruled && at > 0) sheet.rule(y, { x1: x, x2: x + COLUMN, width: 0.75, role: 'line' })
    const inset = body.ruled ? 3 : 0
    sheet.structure.within('TR', () => {
      sheet.structure.within('TH', () => sheet.place(a, x, y + inset, null), { scope: 'Row' })
      sheet.structure.within('TD', () => sheet.place(b, x + body.labels, y + inset, null))
    })
    y += height
  }))
}

function held(frame: Frame): ColumnBody {
  const all = heldOf(frame)
  return all.length === 0 ? [frame.say.w.phrases.nothingHeld] : { pairs: all.map(({ tag, words }) => [tag, words]), labels: 38, ruled: true }
}

function paintCautions(frame: Frame): void {
  const { sheet, record, say } = frame
  const blocks = record.cautions.map(({ text }) => sheet.lay(sentence(text), COLUMN, { size: 8.25, lead: 11.2 }))
  // Two columns of about the same height, filled downwards.
  const total = blocks.reduce((sum, block) => sum + block.height + 3.5, 0)
  let left = 0
  let cut = blocks.findIndex((block) => {
    left += block.height + 3.5
    return left >= total / 2
  }) + 1
  if (cut === 0) cut = blocks.length
  const height = (some: typeof blocks) => some.reduce((sum, block) => sum + block.height + 3.5, 0)
  sheet.room(20 + Math.max(height(blocks.slice(0, cut)), height(blocks.slice(cut))))
  sheet.structure.within('Sect', () => {
    const top = columnHeading(frame, say.w.titles.cautions, PAPER.left, sheet.y, MEASURE)
    sheet.structure.within('L', () => [[blocks.slice(0, cut), PAPER.left], [blocks.slice(cut), RIGHT]].forEach(([some, x]) => {
      let y = top
      for (const block of some as typeof blocks) {
        sheet.structure.within('LI', () => sheet.structure.within('LBody', () => sheet.place(block, x as number, y, null)))
        y += block.height + 3.5
      }
      sheet.y = Math.max(sheet.y, y)
    }))
  })
}
