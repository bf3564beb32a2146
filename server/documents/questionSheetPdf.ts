import { createHash } from 'node:crypto'
import { PDFDocument } from 'pdf-lib'
import { bandOfLimits } from '../../shared/drawing/limitBand'
import type { QuestionSheet } from '../../shared/question/question'
import { canonicalJson } from '../../shared/record/canonicalJson'
import { Speech } from '../../shared/record/speech'
import { fill, WORDING } from '../../shared/record/wording'
import { addArchiveParts } from './archiveParts'
import { PAPER } from './paper'
import { paintHeadAndFoot, shortDigest } from './recordFrame'
import { Sheet } from './sheet'

const BODY = { size: 9.375, lead: 13 }
const SMALL = { size: 8.6, lead: 12 }
const PICTURE = 200
const LINE = 22

/** A sheet of questions on paper, in the hand of the record: each with its drawing and sources, and room to write the answer. Same sheet, same bytes; it is not sealed. */
export async function buildQuestionSheetPdf(asked: QuestionSheet): Promise<Uint8Array> {
  const text = canonicalJson(asked)
  const digest = createHash('sha256').update(text).digest('hex')
  const wording = WORDING[asked.language]
  const w = wording.questionSheet
  const say = new Speech({ wording, system: asked.system, zones: asked.zones })
  const doc = await PDFDocument.create({ updateMetadata: false })
  const sheet = await Sheet.open(doc)
  const { job, site, from } = asked

  sheet.structure.within('Sect', () => {
    sheet.paragraph([{ text: w.title[0]!, weight: 300 }, { text: w.title[1]!, weight: 500 }], { type: 'H1', size: 20.25, lead: 25, after: 6 })
    sheet.paragraph(fill(w.to, { to: asked.to }), { ...BODY, weight: 500 })
    sheet.paragraph([fill(w.about, { job: job.code, title: job.title ? `, ${job.title}` : '', site: [site.name, site.address].filter(Boolean).join(', '), client: asked.client }), ...(job.permit ? [fill(w.permit, { permit: job.permit })] : []), fill(w.asked, { at: say.at(asked.at) })].join(' · '), { ...BODY, role: 'soft' })
    sheet.paragraph(from.email ? fill(w.from, { name: from.name, organisation: asked.organisation, email: from.email }) : fill(w.fromNoMail, { name: from.name, organisation: asked.organisation }), { ...BODY, role: 'soft' })
    if (asked.message) sheet.paragraph(asked.message, { ...BODY, after: 2 })
    sheet.y += 8
  })
  asked.questions.forEach((one, at) => sheet.structure.within('Sect', () => paintQuestion(sheet, say, one, at + 1)))
  sheet.room(40)
  sheet.y += 8
  sheet.paragraph(w.defer, { ...SMALL, role: 'soft' })

  const title = fill(w.head, { site: site.name })
  sheet.finish(asked.language, (page, of) => paintHeadAndFoot(sheet, {
    name: asked.organisation, head: title, foot: fill(w.foot, { code: job.code, at: say.at(asked.at) }), check: `questions.json ${shortDigest(digest)}`, page: fill(wording.titles.page, { n: page, of }),
  }))
  await addArchiveParts(doc, { source: { name: 'questions.json', text, description: title }, title, author: asked.organisation, language: asked.language, at: asked.at, digest })
  return doc.save({ addDefaultPage: false, updateFieldAppearances: false, objectsPerTick: Infinity })
}

function paintQuestion(sheet: Sheet, say: Speech, { about, words }: QuestionSheet['questions'][number], number: number): void {
  const w = say.w.questionSheet
  const language = say.w === WORDING.es ? 'es' : 'en'
  const drawing = bandOfLimits(about.limits, { gap: about.gap, system: say.voice.system, figure: amount => say.amount(amount, about.unit, { beside: [amount] }), width: 260 })
  const limits = about.limits.map(limit => [{ text: `${say.limit(limit)} `, weight: 500 as const }, { text: [say.basis(limit.basis), limit.basis.read && ((w.reads as Record<string, string>)[limit.basis.read] ?? limit.basis.read)].filter(Boolean).join('; '), role: 'soft' as const }])
  const left = PAPER.left + (drawing ? PICTURE + 18 : 0)
  const blocks = limits.map(limit => sheet.lay(limit, PAPER.right - left, SMALL))
  const scale = drawing ? PICTURE / drawing.width : 0
  const height = Math.max(blocks.reduce((sum, block) => sum + block.height + 3, 0), drawing ? drawing.height * scale : 0)

  // Heading, words and what belongs to them stand together as far as a page holds them.
  sheet.room(Math.min(height, 300) + 190)
  sheet.rule(sheet.y)
  sheet.y += 6
  sheet.paragraph([{ text: `${number}  `, weight: 300 }, { text: about.title[language], weight: 500 }, ...(about.tags.length > 0 ? [{ text: ` · ${fill(w.at, { tags: about.tags.join(', ') })}`, role: 'soft' as const }] : [])], { type: 'H2', size: 11.5, lead: 16, after: 2 })
  sheet.paragraph(words, { ...BODY, after: 6 })
  if (about.limits.length === 0) sheet.paragraph(w.noLimits, { ...SMALL, role: 'soft', after: 4 })
  else {
    sheet.room(height)
    if (drawing) sheet.drawing(drawing, PAPER.left, sheet.y + 2, scale, fill(w.bandAlt, { limits: about.limits.map(limit => say.limit(limit)).join('; ') }))
    let top = sheet.y
    sheet.structure.within('L', () => blocks.forEach((block) => {
      sheet.structure.within('LI', () => sheet.place(block, left, top, 'LBody'))
      top += block.height + 3
    }))
    sheet.y += height + 4
    if (about.gap) sheet.paragraph(fill(w.gap, { x: say.length(about.gap.at) }), { ...SMALL, role: 'soft', after: 4 })
  }
  writingLines(sheet, [[w.answer], [], [w.signed, w.day], [w.document]])
}

/** Ruled lines to write on, each with what belongs on it below; two share one where there are two. */
function writingLines(sheet: Sheet, lines: string[][]): void {
  sheet.room(lines.length * (LINE + 11))
  for (const labels of lines) {
    sheet.y += LINE
    const edges = labels.length === 2 ? [PAPER.left, PAPER.left + 340] : [PAPER.left]
    edges.forEach((x, at) => {
      sheet.rule(sheet.y, { x1: x, x2: at + 1 < edges.length ? edges[at + 1]! - 14 : PAPER.right, width: 0.75, role: 'mark' })
      if (labels[at]) sheet.place(sheet.lay(labels[at], 320, { size: 8.25, role: 'soft', lead: 11 }), x, sheet.y + 1)
    })
    if (labels.length > 0) sheet.y += 11
  }
  sheet.y += 12
}
