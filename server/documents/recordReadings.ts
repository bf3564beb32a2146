import type { RecordCheck } from '../../shared/record/record'
import { liveDrawing } from '../../shared/record/liveDrawing'
import { PAPER } from './paper'
import type { Frame } from './recordFrame'
import { heading, placeDiamond, tableRow } from './recordFrame'
import type { Block, Words } from './sheet'
import { asideRows, circumstancesOf, clearRows, conditionsOf, diamondStateOf, earlierWords, isPlainLook, READING_ORDER, tagOf } from '../../shared/record/recordWords'
import { fill, listed } from '../../shared/record/wording'

const PICTURE = { x: PAPER.left + 37.5, width: 112.5 }
const TEXT = { x: PICTURE.x + PICTURE.width + 12, width: 231 }
const FIGURE = { x: PAPER.right - 111, width: 111 }

export function paintReadings(frame: Frame): void {
  const { sheet, record, say } = frame
  const shown = record.checks.filter(check => !isPlainLook(check) && (check.readings.length > 0 || check.verdict === 'notRead'))
  // Sorting is stable: within one verdict the rows keep the order of the walk.
  shown.sort((a, b) => READING_ORDER.indexOf(a.verdict) - READING_ORDER.indexOf(b.verdict))
  if (shown.length > 0) {
    sheet.structure.within('Sect', () => {
      heading(frame, say.w.titles.readings, 300)
      shown.forEach((check, at) => paintReading(frame, check, at === 0))
    })
  }
  paintClear(frame)
  paintSetAside(frame)
}

function paintReading(frame: Frame, check: RecordCheck, first: boolean): void {
  const { sheet, record, say } = frame
  const { phrases, verdicts } = say.w
  const [governing, ...others] = check.readings
  const limits = check.limits.flatMap(key => record.limits[key] ? [record.limits[key]] : [])
  const element = frame.elements.get(check.element)
  const drawing = governing && element ? liveDrawing(check, governing, limits, element, say) : null

  const wide = drawing ? TEXT : { x: PICTURE.x, width: TEXT.x + TEXT.width - PICTURE.x }
  const small = { size: 8.6, lead: 12 }
  const said: Block[] = [
    sheet.lay(check.title, wide.width, { size: 10.5, weight: 500, lead: 14 }),
    ...limits.map(limit => sheet.lay([{ text: say.limit(limit) }, { text: `\n${say.basis(limit.basis)}`, role: 'soft' }], wide.width, small)),
    ...conditionsOf(check, frame).map(words => sheet.lay(words, wide.width, small)),
    ...(governing ? [sheet.lay(circumstancesOf(governing, check, frame), wide.width, { ...small, role: 'soft' })] : []),
    ...(check.readAgain ? [sheet.lay(phrases.readAgain, wide.width, { ...small, weight: 500 })] : []),
  ]
  // There may be one for each of five hundred bays: these go on over pages, the rest of the row stands together.
  const more: Words[] = [
    ...others.map((reading): Words => [{ text: fill(phrases.moreReadings, { list: say.reading(reading.value, check, limits) }) }, { text: ` (${circumstancesOf(reading, check, frame)})`, role: 'soft' }]),
    ...check.earlier.map((reading): Words => [{ text: earlierWords(reading, check, frame), role: 'soft' }]),
  ]
  const figure = governing ? sheet.lay(say.reading(governing.value, check, limits), FIGURE.width, { size: governing.value.method === 'template' ? 10.5 : 15, weight: 300, lead: governing.value.method === 'template' ? 14 : 18 }) : null
  const margin = governing ? say.margin(governing, check, record.limits) : null
  const state = diamondStateOf(check)
  const verdict = sheet.lay([...(margin ? [{ text: `${margin}\n`, weight: 600 as const }] : []), { text: state === 'settled' ? say.w.settledVerdict : verdicts[check.verdict] }], FIGURE.width - 23, { size: 9, lead: 11.8 })

  const scale = drawing ? Math.min(0.75, PICTURE.width / drawing.width) : 0
  const heightText = said.reduce((sum, block) => sum + block.height, 0) - 2
  const height = Math.max(heightText, (figure?.height ?? 0) + 5 + verdict.height, drawing ? drawing.height * scale : 0)
  sheet.room(height + 15)
  if (!first) sheet.rule(sheet.y, { width: 0.75, role: 'line' })
  const top = sheet.y + 8
  sheet.structure.within('Sect', () => {
    const tag = sheet.lay(tagOf(frame, check.element), PICTURE.x - PAPER.left - 2, { size: 15, weight: 300, lead: 17 })
    sheet.structure.within('H2', () => {
      sheet.place(tag, PAPER.left, top - 2, null)
      sheet.place(said[0]!, wide.x, top - 2, null)
    })
    if (drawing && governing) sheet.drawing(drawing, PICTURE.x, top, scale, `${tagOf(frame, check.element)}, ${check.title}: ${drawing.summary}`)
    let y = top - 2 + said[0]!.height
    for (const block of said.slice(1)) {
      sheet.place(block, wide.x, y)
      y += block.height
    }
    if (figure) sheet.place(figure, FIGURE.x, top - 2)
    const under = top + (figure ? figure.height + 3 : 0)
    placeDiamond(sheet, state, FIGURE.x, under + Math.max(0, (verdict.height - 16) / 2), 16)
    sheet.place(verdict, FIGURE.x + 23, under)
    const { page } = sheet
    sheet.y = top + heightText
    for (const words of more) sheet.paragraph(words, { x: wide.x, width: wide.width, ...small })
    if (sheet.page === page) sheet.y = Math.max(sheet.y, top + height)
  })
  sheet.y += 7
}

/** Looks that were clear, in few words: elements on which the same was looked at by the same people on the same days share a row. */
function paintClear(frame: Frame): void {
  const rows = clearRows(frame)
  if (rows.length === 0) return
  const { sheet, say } = frame
  const columns = [{ x: PAPER.left, width: 62 }, { x: PAPER.left + 74, width: 312 }, { x: PAPER.left + 398, width: 106 }]
  sheet.structure.within('Sect', () => {
    heading(frame, say.w.titles.clear)
    sheet.structure.within('Table', () => {
      tableRow(frame, columns, [say.w.labels.element, say.w.labels.checks, say.w.labels.who], { head: true, before: 0 })
      for (const { tags, titles, who } of rows) tableRow(frame, columns, [listed(tags, say.w.and), titles, who], { marks: [{ column: 1, state: 'conforms' }] })
    })
  })
}

/** What was set aside, with its reason and who set it aside. */
function paintSetAside(frame: Frame): void {
  const rows = asideRows(frame)
  if (rows.length === 0) return
  const { sheet, say } = frame
  const columns = [{ x: PAPER.left, width: 62 }, { x: PAPER.left + 74, width: 250 }, { x: PAPER.left + 336, width: 168 }]
  sheet.structure.within('Sect', () => {
    heading(frame, say.w.titles.setAside, 90)
    sheet.structure.within('Table', () => {
      tableRow(frame, columns, [say.w.labels.element, say.w.labels.checks, say.w.labels.state], { head: true, before: 0 })
      for (const { tags, titles, words, verdict } of rows) tableRow(frame, columns, [listed(tags, say.w.and), titles, words], { marks: [{ column: 2, state: verdict }] })
    })
  })
}
