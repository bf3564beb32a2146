import { diamond, DIAMONDS } from '../../shared/drawing/displayList'
import { drawLine } from '../../shared/line/drawLine'
import type { LineMarks } from '../../shared/line/lineMark'
import { diamondOf, placeAlong, tapeOf } from '../../shared/line/lineMark'
import { elementsOf } from '../../shared/line/line'
import type { RecordDocument } from '../../shared/record/record'
import { MEASURE, PAPER } from './paper'
import type { Frame } from './recordFrame'
import { columnHeading, tagOf } from './recordFrame'
import type { Words } from './sheet'
import { fill, listed, sentence } from '../../shared/record/wording'

const GAP = 24
const COLUMN = (MEASURE - GAP) / 2
const RIGHT = PAPER.left + COLUMN + GAP

/** Page 1: the outcome in one sentence, the line, who and where, what is held, not seen and asked, and what the record is not. */
export function paintFirstPage(frame: Frame): void {
  const { sheet, record, say } = frame
  const { titles, phrases } = say.w
  sheet.paragraph([{ text: `${record.sentence.lead} `, weight: 500 }, { text: record.sentence.rest }], { type: 'H1', size: 18.75, weight: 300, lead: 23.4, after: 3 })
  const read = [...record.walks.map(({ at, by }) => ({ at, by })), ...record.checks.flatMap(check => check.readings.map(({ madeAt, by }) => ({ at: madeAt, by })))]
  const walked = read.length === 0 ? phrases.notWalked : fill(phrases.walked, { days: say.days(read.map(one => one.at)), names: listed([...new Set(read.map(one => one.by))], say.w.and) })
  sheet.paragraph(walked, { role: 'soft', after: 8 })
  paintAmended(frame)
  const columns: [Part[], Part[]] = [
    [[titles.whoAndWhere, definitions(frame)]],
    [[titles.held, held(frame)], [titles.notSeen, [notSeen(frame)]], [titles.asked, asked(frame)]],
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

function paintAmended({ sheet, record, say, ...rest }: Frame): void {
  const { amends } = record
  if (!amends) return
  const tags = listed(amends.elements.map(element => tagOf({ sheet, record, say, ...rest }, element)), say.w.and)
  sheet.paragraph(fill(say.w.phrases[amends.how], { code: amends.code, tags, why: closed(amends.why) }), { weight: 500, after: 8 })
}

/** What the record says of the line, as marks for its drawing. */
export function marksOf(record: RecordDocument): LineMarks {
  return Object.fromEntries(elementsOf(record.line).map((element) => {
    const of = record.elements.find(one => one.element === element.id)
    const tags = record.deficiencies.flatMap((deficiency) => {
      const state = deficiency.element === element.id ? tapeOf(deficiency.state) : null
      return state ? [{ words: deficiency.tag, state, along: placeAlong(element, deficiency.place) }] : []
    })
    return [element.id, { verdict: of?.verdict ?? 'notRead' as const, settled: of?.settled ?? false, outOfUse: of?.outOfUse ?? false, tags }]
  }))
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

function definitions({ record, say }: Frame): ColumnBody {
  const { labels, phrases } = say.w
  const { job, site, client, organisation, inspectors } = record
  const named = (person: { name: string, title?: string, phone?: string }) => [person.name, person.title, person.phone?.replace(/ /g, '\u00a0')].filter(part => part).join(', ')
  const pairs: Cells = [
    [labels.site, [site.name, site.address].filter(part => part).join(', ')],
    [labels.client, [client.name, ...(client.contact ? [named(client.contact)] : [])].join(', ')],
    [labels.job, [job.number, job.title].filter(part => part).join(', ')],
    ...(['contract', 'permit', 'buildingCode', 'gateTag'] as const).flatMap((key): Cells => job.keys[key] ? [[labels[key], job.keys[key]]] : []),
    [labels.contractor, [organisation.name, ...organisation.address].join(', ')],
    ...inspectors.map(({ employer, builtTheFence, ...person }): [string, Words] => [labels.inspector, fill(builtTheFence ? phrases.employedBuilt : phrases.employed, { name: named(person), employer })]),
    ...(site.onSite ? [[labels.onSite, named(site.onSite)] as [string, Words]] : []),
    ...(site.emergency ? [[labels.emergency, named(site.emergency)] as [string, Words]] : []),
  ]
  return { pairs, labels: 69 }
}

function held(frame: Frame): ColumnBody {
  const { record, say } = frame
  const { phrases, helds } = say.w
  const out = record.elements.filter(element => element.outOfUse)
  if (out.length === 0) return [phrases.nothingHeld]
  const pairs = out.map(({ element }): [string, Words] => {
    const open = record.deficiencies.filter(one => one.element === element && one.class === 'outOfUse' && !one.state.startsWith('ended'))
    const words = open.map((one) => {
      const step = [...one.steps].reverse().find(each => each.kind === 'dangerNow')
      const how = one.held ? helds[one.held] : phrases.heldUnknown
      const since = step ? fill(phrases.heldSince, { how, at: `${say.time(step.at)}, ${say.day(step.at.slice(0, 10))}` }) : how
      const reading = record.checks.find(check => check.element === element && check.check === one.check)
      const margin = reading?.readings[0] ? say.margin(reading.readings[0], reading, record.limits) : null
      return `${since}; ${[reading?.title.toLowerCase() ?? '', margin].filter(part => part).join(', ')} (${one.tag})`
    }).join('\n')
    return [tagOf(frame, element), frame.elements.get(element)?.gate?.exit ? fill(phrases.heldWayOut, { how: words }) : words]
  })
  return { pairs, labels: 38, ruled: true }
}

function asked({ record, say }: Frame): string[] {
  const { phrases } = say.w
  if (record.questions.length === 0) return [phrases.nothingAsked]
  return record.questions.map(({ words, askedOf, on }) => fill(phrases.putTo, { words: closed(words), to: askedOf, on: say.day(on) }))
}

/** What nobody saw: set aside with a reason, not read in full, ground that is still to come, and what no walk ever sees. */
function notSeen(frame: Frame): string {
  const { record, say, elements } = frame
  const { phrases, whys } = say.w
  const groups = new Map<string, { tags: Set<string>, checks: number }>()
  for (const check of record.checks) {
    if (check.verdict !== 'notInspected') continue
    const whole = record.elements.find(one => one.element === check.element)?.verdict === 'notInspected'
    const aside = check.setAside
    const why = aside ? aside.words ?? whys[aside.why as keyof typeof whys] ?? aside.why : ''
    const key = `${whole ? 'whole' : check.element}\u0000${why}`
    const group = groups.get(key) ?? { tags: new Set<string>(), checks: 0 }
    group.tags.add(tagOf(frame, check.element))
    groups.set(key, { tags: group.tags, checks: group.checks + 1 })
  }
  const lines = [...groups].map(([key, { tags, checks }]) => {
    const [scope, why] = key.split('\u0000')
    return fill(scope === 'whole' ? phrases.setAsideWhole : phrases.setAside, { tags: listed([...tags], say.w.and), checks: checks === 1 ? phrases.checksOne : fill(phrases.checksMany, { n: checks }), why: why || say.w.verdicts.notInspected })
  })
  const unread = record.elements.filter(one => one.verdict === 'notRead' || record.checks.some(check => check.element === one.element && check.verdict === 'notRead')).map(one => tagOf(frame, one.element))
  if (unread.length > 0) lines.push(fill(phrases.unread, { tags: listed(unread, say.w.and) }))
  const ground = new Map<string, string[]>()
  for (const { element, verdict } of record.elements) {
    const faces = elements.get(element)?.faces
    if (!faces || verdict === 'notInspected' || (faces.outer.ground.finished && faces.inner.ground.finished)) continue
    const open = faces.outer.ground.finished ? faces.inner.ground : faces.outer.ground
    const what = open.coming && open.comingThickness ? fill(phrases.thickOf, { x: say.length(open.comingThickness), what: open.coming }) : open.coming ?? ''
    ground.set(what, [...ground.get(what) ?? [], tagOf(frame, element)])
  }
  for (const [what, tags] of ground) lines.push(fill(what ? phrases.groundComing : phrases.groundOpen, { tags: listed(tags, say.w.and), what }))
  return [...(lines.length === 0 ? [phrases.nothingUnseen] : lines.map(closed)), phrases.nothingBelow].join(' ')
}

function closed(words: string): string {
  return /[.!?]$/.test(words) ? words : `${words}.`
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
