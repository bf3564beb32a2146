import type { RecordSignature } from '../../shared/record/record'
import { PAPER } from './paper'
import type { Frame } from './recordFrame'
import { heading, tableRow } from './recordFrame'
import type { Block, Sheet, Words } from './sheet'
import type { Speech } from '../../shared/record/speech'
import { squareCode } from './squareCode'
import { signatureDrawing } from '../../shared/record/signatureDrawing'
import { tagOf } from '../../shared/record/recordWords'
import { fill, grouped, listed, sentence } from '../../shared/record/wording'

export function paintNotes(frame: Frame): void {
  const { sheet, record, say, photoNumbers } = frame
  if (record.notes.length === 0) return
  const { phrases, labels, titles } = say.w
  const columns = [{ x: PAPER.left, width: 46 }, { x: PAPER.left + 50, width: 272 }, { x: PAPER.left + 334, width: 170 }]
  sheet.structure.within('Sect', () => {
    heading(frame, titles.notes, 90)
    sheet.structure.within('Table', () => {
      tableRow(frame, columns, [labels.element, labels.note, labels.who], { head: true, before: 0 })
      for (const note of record.notes) {
        const photos = note.photos.flatMap(digest => photoNumbers.get(digest) ?? [])
        const words = photos.length === 0 ? note.words : `${note.words} (${fill(photos.length === 1 ? phrases.photo : phrases.photos, { n: listed(photos.map(String), say.w.and) })})`
        tableRow(frame, columns, [tagOf(frame, note.element), words, fill(phrases.writtenBy, { by: note.by, at: say.at(note.at) })])
      }
    })
  })
}

/** What a block of a signature shows; the record's and an acceptance's are painted alike. */
export type ShownSignature = Pick<RecordSignature, 'state' | 'meaningText' | 'signer' | 'role' | 'known' | 'presence' | 'at' | 'sheetDigest' | 'strokes' | 'typed' | 'words'>

export function paintSignatures(frame: Frame): void {
  const { sheet, record, say } = frame
  sheet.structure.within('Sect', () => {
    heading(frame, say.w.titles.signatures, 220)
    if (record.signatures.length === 0) sheet.paragraph(say.w.phrases.noSignatures)
    record.signatures.forEach(signature => paintSignature(sheet, say, signature))
  })
}

export function paintSignature(sheet: Sheet, say: Speech, one: ShownSignature, ruled = true): void {
  const { phrases, known, knownAlone } = say.w
  const [x, width] = [PAPER.left + 216, PAPER.right - PAPER.left - 216]
  const name = [one.signer.name, one.signer.title].filter(part => part).join(', ')
  const how = one.known === 'onDevice' && one.presence === null ? knownAlone : fill(known[one.known], { presence: one.presence ?? '' })
  const small = { size: 8.6, lead: 12 }
  const blocks = [
    sheet.lay(one.meaningText, width, { size: 10.2, weight: 500, lead: 14 }),
    sheet.lay(fill(phrases.signedBy, { name, role: one.role }), width, small),
    sheet.lay(one.state === 'signed' ? fill(phrases.signedAt, { at: say.at(one.at), known: how }) : fill(phrases.writtenBy, { by: sentence(phrases[one.state]), at: say.at(one.at) }), width, { ...small, role: 'soft' }),
    ...(one.words ? [sheet.lay(fill(phrases.ownWords, { words: one.words }), width, small)] : []),
    ...(one.sheetDigest ? [sheet.lay(fill(phrases.sheetDigest, { digest: grouped(one.sheetDigest) }), width, { size: 8.25, lead: 11, role: 'soft' })] : []),
  ]
  const hand = handBlock(sheet, say, one)
  const line = Math.max(58, (hand?.height ?? 0) + 4)
  const height = Math.max(line + 14, blocks.reduce((sum, block) => sum + block.height, 0) + 4)
  sheet.room(height + 18)
  if (ruled) sheet.rule(sheet.y, { width: 0.75, role: 'line' })
  const top = sheet.y + (ruled ? 9 : 2)
  sheet.structure.within('Sect', () => {
    paintHand(sheet, say, one, hand, name, top + line)
    let y = top - 2
    for (const block of blocks) {
      sheet.place(block, x, y)
      y += block.height
    }
  })
  sheet.y = top + height + 9
}

/** A typed name, or the plain word that there is no signature; null where strokes were drawn. */
function handBlock(sheet: Sheet, say: Speech, one: ShownSignature): Block | null {
  const drawn = one.state === 'signed' && one.strokes && one.strokes.length > 0
  const words = one.state === 'signed' ? one.typed ?? one.signer.name : say.w.phrases[one.state]
  return drawn ? null : sheet.lay(words, 195, { size: 15, weight: 300, lead: 19, role: one.state === 'signed' ? 'ink' : 'soft' })
}

/** What the signer's hand left, over a line. */
function paintHand(sheet: Sheet, say: Speech, one: ShownSignature, hand: Block | null, name: string, line: number): void {
  const { phrases } = say.w
  if (hand) {
    sheet.place(hand, PAPER.left, line - 4 - hand.height)
    if (one.state === 'signed') sheet.place(sheet.lay(phrases.typedName, 195, { size: 8.25, lead: 11, role: 'soft' }), PAPER.left, line + 3)
  }
  else {
    const drawing = signatureDrawing(one.strokes!)
    const scale = Math.min(190 / drawing.width, 54 / drawing.height, 0.9)
    sheet.drawing(drawing, PAPER.left + 6, line - 2 - drawing.height * scale, scale, fill(phrases.signatureAlt, { name, n: one.strokes!.length }))
  }
  sheet.rule(line, { x1: PAPER.left, x2: PAPER.left + 198, width: 0.75 })
}

/** The sealed set, what came too late for it, and devices that were not waited for. */
export function paintSet(frame: Frame): void {
  const { sheet, record, say } = frame
  const { phrases, titles, entryKinds } = say.w
  const [first, last] = [record.entries[0], record.entries[record.entries.length - 1]]
  sheet.structure.within('Sect', () => {
    heading(frame, titles.set, 140)
    if (first && last) sheet.paragraph(fill(phrases.sealedSet, { n: record.entries.length, from: first.number, to: last.number }), { after: 5 })
    sheet.paragraph(fill(phrases.basisOf, {
      rules: record.rules, basis: grouped(record.basis.slice(0, 16)), line: record.line.version, renderer: record.renderer,
      checklists: listed(record.checklists.map(({ id, version }) => fill(phrases.checklistVersion, { id, version })), say.w.and),
    }), { role: 'soft', after: 8 })
    if (record.conflicts.length > 0) sheet.paragraph(fill(phrases.conflicts, { n: record.conflicts.length }), { weight: 500, after: 5 })
    if (record.erased.length > 0) sheet.paragraph(fill(phrases.erasedSome, { n: record.erased.length }), { after: 5 })
    const list = (none: string, some: string, lines: string[]) => {
      sheet.paragraph(lines.length === 0 ? none : some, { after: 3, weight: lines.length === 0 ? 400 : 500 })
      if (lines.length > 0) sheet.structure.within('L', () => lines.forEach(line => sheet.structure.within('LI', () => sheet.paragraph(line, { x: PAPER.left + 12, type: 'LBody', after: 2, size: 8.8 }))))
      sheet.y += 5
    }
    list(phrases.lateNone, phrases.lateSome, record.late.map(entry => fill(phrases.lateLine, { kind: [tagOf(frame, entry.element), entryKinds[entry.kind as keyof typeof entryKinds] ?? entry.kind].filter(part => part).join(' '), by: entry.by, at: say.at(entry.madeAt), digest: grouped(entry.digest.slice(0, 16)) })))
    list(phrases.devicesNone, phrases.devicesSome, record.devicesOut.map(({ device, holder, takenAt, reason }) => fill(phrases.deviceLine, { device, holder, at: say.at(takenAt), reason })))
  })
}

/** How anybody checks the paper, with the square code beside it. */
export function paintChecking(frame: Frame): void {
  const { sheet, say } = frame
  sheet.structure.within('Sect', () => {
    heading(frame, say.w.titles.checking, 200)
    paintCheckSteps(sheet, say, frame.record.checkAddress, frame.digest)
  })
}

export function paintCheckSteps(sheet: Sheet, say: Speech, address: string, digest: string, source = 'record.json'): void {
  const { phrases } = say.w
  const side = 96
  const x = PAPER.left + side + 22
  sheet.room(150)
  const code = squareCode(address)
  const top = sheet.y
  // The quiet zone stands outside the margin, so that the modules line up with the text.
  const scale = side / (code.width - 8)
  sheet.drawing(code, PAPER.left - 4 * scale, top + 3 - 4 * scale, scale, fill(phrases.qrAlt, { address }))
  const steps: Words[] = [fill(phrases.checkStep1, { address }), phrases.checkStep2, [{ text: `${fill(phrases.checkStep3, { source })}\n` }, { text: grouped(digest), weight: 500 }], phrases.checkStep4, fill(phrases.checkStep5, { source })]
  sheet.structure.within('L', () => steps.forEach(step => sheet.structure.within('LI', () => sheet.paragraph(step, { x, type: 'LBody', size: 8.8, lead: 12.4, after: 3 }))))
  sheet.y = Math.max(sheet.y, top + side + 8)
}
