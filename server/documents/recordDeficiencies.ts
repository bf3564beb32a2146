import type { PDFRef } from 'pdf-lib'
import { tapeTag, tapeTagWidth } from '../../shared/drawing/displayList'
import { tapeOf } from '../../shared/line/lineMark'
import type { RecordDeficiency, RecordPhoto } from '../../shared/record/record'
import { PAPER } from './paper'
import type { Frame } from './recordFrame'
import { heading } from './recordFrame'
import { captionOf, photosOfDeficiency, stepWords, tagOf } from '../../shared/record/recordWords'
import { fill, sentence } from '../../shared/record/wording'

/** The image of each photo, by digest; none for one that was erased. */
export type Images = Map<string, PDFRef>
const GAP = 16
/** Histories hang beside their tags; photos stand under them in the same column. */
const HANG = 60
const WHO = 172
const PHOTO = { height: 116 }

/** Each deficiency from its finding to where it stands, what is open first, with its photos in the order of its history. */
export function paintDeficiencies(frame: Frame, images: Images): void {
  const { sheet, record, say } = frame
  sheet.newPage()
  sheet.structure.within('Sect', () => {
    heading(frame, say.w.titles.deficiencies)
    if (record.deficiencies.length === 0) sheet.paragraph(say.w.phrases.noDeficiency)
    const open = (one: RecordDeficiency) => one.state.startsWith('ended') ? 1 : 0
    for (const one of [...record.deficiencies].sort((a, b) => open(a) - open(b))) paintDeficiency(frame, one, images)
  })
}

function paintDeficiency(frame: Frame, one: RecordDeficiency, images: Images): void {
  const { sheet, record, say } = frame
  const { states, classes } = say.w
  const check = record.checks.find(each => each.element === one.element && each.check === one.check)
  const place = say.place(one.place)
  const photos = photosOfDeficiency(frame, one)
  const x = PAPER.left + HANG
  const title = sheet.lay([{ text: `${tagOf(frame, one.element)}: ${check?.title ?? one.check}`, weight: 500 }], PAPER.right - x, { size: 10.5, lead: 14 })
  const state = fill(states[one.state], { who: one.assignedTo ?? '', for: one.waitsFor ?? '' })
  const stands = sheet.lay([{ text: sentence(state), weight: 500 }, { text: ` \u00b7 ${classes[one.class]}${place ? ` \u00b7 ${place}` : ''}`, role: 'soft' }], PAPER.right - x, { size: 8.8, lead: 12.4 })
  const steps = one.steps.map((step, at) => ({ words: sheet.lay(stepWords(frame, step, at, check?.unit ?? null), PAPER.right - x - WHO - 10, { size: 8.8, lead: 12.2 }), who: sheet.lay(fill(say.w.phrases.writtenBy, { by: step.by, at: say.at(step.at) }), WHO, { size: 8.25, lead: 12.2, role: 'soft' }) }))
  const first = steps[0]!
  sheet.room(22 + title.height + stands.height + Math.max(first.words.height, first.who.height) + (photos.length > 0 && steps.length < 4 ? PHOTO.height + 40 : 0))
  sheet.rule(sheet.y, { width: 0.75, role: 'line' })
  const top = sheet.y + 9
  sheet.structure.within('Sect', () => {
    const tape = tapeOf(one.state) ?? 'settled'
    const size = 15
    const list = tapeTag(5, 1, one.tag, { state: tape, height: 20, size })
    const width = tapeTagWidth(one.tag, size) + 7
    const scale = Math.min(0.75, 52 / width)
    sheet.structure.within('H2', () => {
      sheet.drawing({ list, width, height: 22 }, PAPER.left, top - 1, scale, fill(say.w.phrases.tag, { tag: one.tag }))
      sheet.place(title, x, top - 1, null)
    })
    sheet.place(stands, x, top - 1 + title.height)
    sheet.y = top + title.height + stands.height + 3
    sheet.structure.within('L', () => {
      for (const { words, who } of steps) {
        sheet.room(Math.max(words.height, who.height) + 2)
        const y = sheet.y
        sheet.structure.within('LI', () => sheet.structure.within('LBody', () => {
          sheet.place(words, x, y, 'P')
          sheet.place(who, PAPER.right - WHO, y, 'P', 'right')
        }))
        sheet.y = y + Math.max(words.height, who.height) + 2
      }
    })
    paintPhotos(frame, photos, images, x)
  })
  sheet.y += 8
}

/** Photos that no deficiency shows. */
export function paintOtherPhotos(frame: Frame, images: Images): void {
  const { sheet, record, say } = frame
  const shown = new Set(record.deficiencies.flatMap(one => one.steps.flatMap(step => step.photos)))
  const others = record.photos.filter(photo => !shown.has(photo.digest))
  if (others.length === 0) return
  sheet.structure.within('Sect', () => {
    heading(frame, say.w.titles.photos, PHOTO.height + 90)
    paintPhotos(frame, others.map(photo => ({ photo, what: [tagOf(frame, photo.element), say.w.entryKinds[photo.of]].filter(part => part).join(', ') })), images)
  })
}

/** Where a photo stood that was erased: its place stays, between two lines. */
function paintGap({ sheet, say }: Frame, x: number, top: number, width: number, height: number): void {
  for (const y of [top, top + height]) sheet.rule(y, { x1: x, x2: x + width, width: 0.75, role: 'soft' })
  sheet.place(sheet.lay(say.w.phrases.photoErased, width, { size: 8.25, lead: 11, role: 'soft' }), x, top + 6)
}

/** Photos in rows of three, each with its number and who took it when. */
function paintPhotos(frame: Frame, shown: { photo: RecordPhoto, what: string }[], images: Images, left: number = PAPER.left): void {
  const { sheet, say, photoNumbers } = frame
  const { phrases } = say.w
  const wide = (PAPER.right - left - 2 * GAP) / 3
  for (let from = 0; from < shown.length; from += 3) {
    const row = shown.slice(from, from + 3).map(({ photo, what }) => {
      const caption = captionOf({ photo, what }, frame)
      const scale = Math.min(wide / photo.width, PHOTO.height / photo.height)
      return { photo, what, caption: sheet.lay(caption, wide, { size: 8.25, lead: 11, role: 'soft' }), width: photo.width * scale, height: photo.height * scale }
    })
    const tallest = Math.max(...row.map(one => one.height))
    sheet.room(tallest + 10 + Math.max(...row.map(one => one.caption.height)))
    const top = sheet.y + 5
    row.forEach(({ photo, what, caption, width, height }, at) => {
      const x = left + at * (wide + GAP)
      const image = images.get(photo.digest)
      if (image) sheet.photo(image, x, top, width, height, fill(phrases.photoAlt, { n: photoNumbers.get(photo.digest)!, what }))
      else paintGap(frame, x, top, width, height)
      sheet.place(caption, x, top + tallest + 3, 'Caption')
    })
    sheet.y = top + tallest + 5 + Math.max(...row.map(one => one.caption.height))
  }
}
