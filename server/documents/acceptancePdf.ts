import { createHash } from 'node:crypto'
import { PDFDocument } from 'pdf-lib'
import type { AcceptanceDocument } from '../../shared/record/acceptance'
import { canonicalJson } from '../../shared/record/canonicalJson'
import { addArchiveParts } from './archiveParts'
import { PAPER } from './paper'
import { paintCheckSteps, paintSignature } from './recordEnd'
import { paintHeadAndFoot, shortDigest } from './recordFrame'
import { shortAddress } from './recordPdf'
import { leaveSealPlace } from './sealPlace'
import { Sheet } from './sheet'
import { Speech } from '../../shared/record/speech'
import { fill, grouped, WORDING } from '../../shared/record/wording'

/** An acceptance is meant to stay on one sheet. */
const BODY = { size: 9, lead: 12.4 }

/**
 * The PDF of what a client signed about a record: short, bound to that record by both its digests, with a place left for the installation's seal.
 * The record's own file is never written again for it. The same document gives the same bytes.
 */
export async function buildAcceptancePdf(acceptance: AcceptanceDocument): Promise<Uint8Array> {
  const text = canonicalJson(acceptance)
  const digest = createHash('sha256').update(text).digest('hex')
  const wording = WORDING[acceptance.language]
  const { acceptance: w, titles } = wording
  const say = new Speech({ wording, system: 'imperial', zones: acceptance.zones })
  const { record } = acceptance
  const title = w.title[acceptance.meaning]
  const doc = await PDFDocument.create({ updateMetadata: false })
  const sheet = await Sheet.open(doc)

  sheet.structure.within('Sect', () => {
    sheet.paragraph([{ text: `${title}. `, weight: 500 }, { text: fill(w.lead, { name: acceptance.signer.name, client: acceptance.client }) }], { type: 'H1', size: 18.75, weight: 300, lead: 23.4, after: 3 })
    sheet.paragraph(fill(w.about, { n: record.number, job: acceptance.job, site: acceptance.site, organisation: acceptance.organisation, at: say.at(record.sealedAt) }), { role: 'soft', after: 12 })
  })
  part(sheet, w.meaning, () => paintSignature(sheet, say, { ...acceptance, state: 'signed' }, false))
  if (acceptance.deviations.length > 0) {
    part(sheet, w.deviations, () => sheet.structure.within('L', () => acceptance.deviations.forEach((one) => {
      const terms = [...(one.condition ? [fill(wording.phrases.condition, { words: one.condition })] : []), ...(one.until ? [fill(wording.phrases.until, { on: say.day(one.until) })] : [])]
      sheet.structure.within('LI', () => sheet.paragraph([
        { text: `${one.accepted ? w.acceptedOne : w.declinedOne}: `, weight: 500 },
        { text: [fill(w.deviation, { tag: one.tag, element: one.element, title: one.title, words: one.words }), ...terms].join('; ') },
      ], { ...BODY, type: 'LBody', after: 4 }))
    })))
  }
  part(sheet, w.bound, () => {
    for (const [words, value] of [[w.boundText, record.document], [w.rangeText, record.range]] as const) {
      sheet.paragraph(words, BODY)
      sheet.paragraph(grouped(value), { ...BODY, weight: 500, after: 3 })
    }
    sheet.paragraph(fill(w.witness, { witness: acceptance.witness }), { ...BODY, after: 3 })
  })
  part(sheet, w.notTitle, () => sheet.paragraph(w.isNot, BODY))
  part(sheet, w.checking, () => paintCheckSteps(sheet, say, acceptance.checkAddress, digest, 'acceptance.json'))

  sheet.finish(acceptance.language, (page, of) => paintHeadAndFoot(sheet, {
    name: acceptance.client,
    head: fill(w.head, { title, code: record.code }),
    foot: fill(w.foot, { title, own: acceptance.code, at: say.at(acceptance.at) }),
    check: fill(titles.check, { address: shortAddress(acceptance.checkAddress), code: acceptance.code, digest: shortDigest(digest) }),
    page: fill(titles.page, { n: page, of }),
  }))
  const whole = fill(w.head, { title, code: record.code })
  await addArchiveParts(doc, { source: { name: 'acceptance.json', text, description: whole }, title: whole, author: acceptance.witness, language: acceptance.language, at: acceptance.at, digest })
  leaveSealPlace(doc, { at: acceptance.at, name: acceptance.witness, reason: whole })
  return doc.save({ addDefaultPage: false, updateFieldAppearances: false, objectsPerTick: Infinity })
}

function part(sheet: Sheet, title: string, inside: () => void): void {
  sheet.room(80)
  sheet.y += 7
  sheet.rule(sheet.y)
  sheet.y += 5
  sheet.structure.within('Sect', () => {
    sheet.paragraph(title, { x: PAPER.left, type: 'H2', size: 9.75, weight: 500, lead: 13, after: 2 })
    inside()
  })
}
