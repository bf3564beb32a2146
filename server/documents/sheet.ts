import { deflateSync } from 'node:zlib'
import type { PDFDocument, PDFPage, PDFRef } from 'pdf-lib'
import { PDFName, PDFRawStream } from 'pdf-lib'
import type { Drawing, Role } from '../../shared/drawing/displayList'
import { fractionRuns } from '../../shared/drawing/displayList'
import { paintDrawing } from './paintDrawing'
import { colour, decimal, PAPER } from './paper'
import { Structure } from './structure'
import type { StructureType } from './structure'
import type { Face, Faces, Weight } from './typeface'
import { embedFaces, guardGlyphs } from './typeface'

/** How a text is set; sizes and leads in points. */
export interface TextStyle { size?: number, weight?: Weight, role?: Role, lead?: number }
/** A piece of a text in a weight or colour of its own. */
export interface Run { text: string, weight?: Weight, role?: Role }
export type Words = string | Run[]

interface Atom { face: Face, text: string, size: number, role: Role, rise: number, kern: number, width: number }
interface Word { atoms: Atom[], width: number, space: Atom | null, breaks: boolean }
/** A text that was laid out to a width: its lines and its height in points. */
export interface Block { lines: Word[][], size: number, lead: number, height: number, width: number }

const BODY = 9.375
/** A space at which a line may not break. */
const TIED = '\u00a0'
const UNITS = 'in|ft|mm|cm|m|lbf|N|s|of|de'

/** The pages of a document from top to bottom: lays out text, breaks pages, paints, and keeps the logical structure beside what it paints. */
export class Sheet {
  readonly structure: Structure
  y: number = PAPER.top
  private readonly pages: { page: PDFPage, ops: string[] }[] = []
  private readonly states = new Map<string, string>()
  private readonly images = new Map<PDFRef, string>()

  private constructor(readonly doc: PDFDocument, readonly faces: Faces) {
    this.structure = new Structure(doc)
    this.newPage()
  }

  static async open(doc: PDFDocument): Promise<Sheet> {
    return new Sheet(doc, await embedFaces(doc))
  }

  private get current() {
    return this.pages[this.pages.length - 1]!
  }

  get page(): PDFPage {
    return this.current.page
  }

  get pageCount(): number {
    return this.pages.length
  }

  write = (operators: string): void => {
    this.current.ops.push(operators)
  }

  newPage(): void {
    const page = this.doc.addPage([PAPER.width, PAPER.height])
    this.pages.push({ page, ops: [] })
    this.y = PAPER.top
    for (const face of Object.values(this.faces)) page.node.setFontDictionary(PDFName.of(face.key), face.font.ref)
  }

  /** Starts a new page unless this much room is left. */
  room(height: number): void {
    if (this.y + height > PAPER.bottom && this.y > PAPER.top) this.newPage()
  }

  /** Lays a text out to a width. Newlines break; a fraction stays with its whole number and a number with its unit. */
  lay(words: Words, width: number, { size = BODY, weight = 400, role = 'ink', lead = size * 1.42 }: TextStyle = {}): Block {
    const runs = typeof words === 'string' ? [{ text: words }] : words
    const all: Word[] = []
    for (const word of runs.flatMap(run => this.wordsOf(run.text, size, this.faces[run.weight ?? weight], run.role ?? role))) {
      // Runs that meet without a space are one word in two styles.
      const before = all[all.length - 1]
      if (before && before.space === null && !before.breaks) all[all.length - 1] = { ...word, atoms: [...before.atoms, ...word.atoms], width: before.width + word.width }
      else all.push(word)
    }
    const lines: Word[][] = [[]]
    let filled = 0
    for (const word of all.flatMap(word => this.split(word, width))) {
      const line = lines[lines.length - 1]!
      if (line.length > 0 && filled + word.width > width + 0.01) {
        lines.push([word])
        filled = 0
      }
      else line.push(word)
      filled += word.width + (word.space?.width ?? 0)
      if (word.breaks) {
        lines.push([])
        filled = 0
      }
    }
    return { lines, size, lead, height: lines.length * lead, width }
  }

  private wordsOf(text: string, size: number, face: Face, role: Role): Word[] {
    const tied = guardGlyphs(text)
      .replace(/(\d) (?=\d{1,3}\/\d)/g, `$1${TIED}`)
      .replace(new RegExp(`(\\d) (?=(${UNITS})(?![\\p{L}]))`, 'gu'), `$1${TIED}`)
    const pieces = tied.split(/( |\n)/)
    const words: Word[] = []
    for (let at = 0; at < pieces.length; at += 2) {
      const atoms = fractionRuns(pieces[at]!.replaceAll(TIED, ' ')).map(run => ({
        face, role, text: run.text, size: size * run.scale, rise: run.rise * size, kern: run.kern * size,
        width: face.widthOf(run.text) * size * run.scale + run.kern * size,
      }))
      const space = pieces[at + 1] === undefined ? null : { face, role, text: ' ', size, rise: 0, kern: 0, width: face.widthOf(' ') * size }
      const width = atoms.reduce((sum, atom) => sum + atom.width, 0)
      words.push({ atoms, width, space, breaks: pieces[at + 1] === '\n' })
    }
    return words
  }

  /** Breaks a word that is wider than its column between letters; addresses and digests are such words. */
  private split(word: Word, width: number): Word[] {
    if (word.width <= width) return [word]
    const parts: Word[] = []
    let part: Word = { atoms: [], width: 0, space: null, breaks: false }
    for (const atom of word.atoms) {
      for (const letter of atom.text) {
        const wide = atom.face.widthOf(letter) * atom.size
        if (part.width + wide > width && part.atoms.length > 0) {
          parts.push(part)
          part = { atoms: [], width: 0, space: null, breaks: false }
        }
        const last = part.atoms[part.atoms.length - 1]
        if (last && last.rise === atom.rise && last.size === atom.size) {
          last.text += letter
          last.width += wide
        }
        else part.atoms.push({ ...atom, text: letter, width: wide })
        part.width += wide
      }
    }
    return [...parts, { ...part, space: word.space, breaks: word.breaks }]
  }

  /** Paints lines of a block with the top of the first at `top`; the caller has opened the element or artifact. */
  private paintLines(block: Block, from: number, to: number, x: number, top: number, align: 'left' | 'right'): void {
    for (let at = from; at < to; at++) {
      const line = block.lines[at]!
      const atoms = line.flatMap((word, place) => place < line.length - 1 || at < block.lines.length - 1 ? [...word.atoms, ...(word.space ? [word.space] : [])] : word.atoms)
      if (atoms.length === 0) continue
      const wide = line.reduce((sum, word, place) => sum + word.width + (place < line.length - 1 ? word.space?.width ?? 0 : 0), 0)
      const baseline = top + (at - from) * block.lead + (block.lead - 1.25 * block.size) / 2 + block.size
      this.write(`BT 1 0 0 1 ${decimal(align === 'left' ? x : x + block.width - wide)} ${decimal(PAPER.height - baseline)} Tm`)
      this.write(`${textOperators(atoms)} ET`)
    }
  }

  /** A block as an element of its own at a fixed place; does not move on. */
  place(block: Block, x: number, top: number, type: StructureType | null = 'P', align: 'left' | 'right' = 'left'): void {
    const paint = () => this.structure.content(this.page, this.write, () => this.paintLines(block, 0, block.lines.length, x, top, align))
    if (type === null) paint()
    else this.structure.within(type, paint)
  }

  /** A text that repeats on every page. */
  placeArtifact(block: Block, x: number, top: number, align: 'left' | 'right' = 'left'): void {
    this.structure.artifact(this.write, () => this.paintLines(block, 0, block.lines.length, x, top, align), 'Pagination')
  }

  /** A text where the sheet stands; goes on over pages; leaves the sheet below it. */
  paragraph(words: Words, { x = PAPER.left, width = PAPER.right - x, type = 'P' as StructureType, after = 0, ...style }: TextStyle & { x?: number, width?: number, type?: StructureType, after?: number } = {}): void {
    const block = this.lay(words, width, style)
    this.structure.within(type, () => {
      for (let from = 0; from < block.lines.length;) {
        // A line alone at the foot of a page reads badly: two at least, unless there is only one.
        this.room(Math.min(2, block.lines.length - from) * block.lead)
        const fits = Math.max(1, Math.min(block.lines.length - from, Math.floor((PAPER.bottom - this.y) / block.lead + 0.001)))
        const [first, last, top] = [from, from + fits, this.y]
        this.structure.content(this.page, this.write, () => this.paintLines(block, first, last, x, top, 'left'))
        this.y += fits * block.lead
        from += fits
      }
    })
    this.y += after
  }

  rule(y: number, { x1 = PAPER.left, x2 = PAPER.right, width = 1.125, role = 'ink' as Role }: { x1?: number, x2?: number, width?: number, role?: Role } = {}): void {
    this.structure.artifact(this.write, () => this.write(`${colour(role)} RG ${decimal(width)} w 0 J [] 0 d ${decimal(x1)} ${decimal(PAPER.height - y)} m ${decimal(x2)} ${decimal(PAPER.height - y)} l S`))
  }

  private get ground() {
    return { write: this.write, faces: this.faces, opacity: this.opacity }
  }

  /** A display list as a figure (or, without words, as an artifact beside a text that says the same). */
  drawing(drawing: Drawing, x: number, top: number, scale: number, alt: string | null): void {
    const paint = () => paintDrawing(this.ground, drawing, x, PAPER.height - top, scale)
    if (alt === null) this.structure.artifact(this.write, paint)
    else this.structure.figure(this.page, this.write, guardGlyphs(alt), [x, PAPER.height - top - drawing.height * scale, x + drawing.width * scale, PAPER.height - top], paint)
  }

  /** A photo as a figure, filling the box given. */
  photo(image: PDFRef, x: number, top: number, width: number, height: number, alt: string): void {
    const key = this.images.get(image) ?? `P${this.images.size + 1}`
    this.images.set(image, key)
    this.page.node.setXObject(PDFName.of(key), image)
    const bottom = PAPER.height - top - height
    this.structure.figure(this.page, this.write, guardGlyphs(alt), [x, bottom, x + width, bottom + height], () =>
      this.write(`q ${decimal(width)} 0 0 ${decimal(height)} ${decimal(x)} ${decimal(bottom)} cm /${key} Do Q`))
  }

  private opacity = (stroke: number, fill: number): string => {
    const name = `G${Math.round(stroke * 100)}-${Math.round(fill * 100)}`
    if (!this.states.has(name)) this.states.set(name, name)
    this.page.node.setExtGState(PDFName.of(name), this.doc.context.obj({ Type: 'ExtGState', CA: stroke, ca: fill }))
    return name
  }

  /** Goes over all pages for what repeats on them, then writes their streams and the structure. `each` paints with the sheet set to that page. */
  finish(language: string, each: (page: number, of: number) => void): void {
    const of = this.pages.length
    const all = [...this.pages]
    all.forEach((one, at) => {
      // The page to be painted on is the last one of the list.
      this.pages.push(one)
      each(at + 1, of)
      this.pages.pop()
    })
    for (const { page, ops } of all) {
      const content = deflateSync(Buffer.from(ops.join('\n'), 'latin1'))
      const { context } = this.doc
      page.node.set(PDFName.of('Contents'), context.register(PDFRawStream.of(context.obj({ Filter: 'FlateDecode', Length: content.length }), content)))
    }
    this.structure.finish(language)
  }
}

function textOperators(atoms: Atom[]): string {
  const out: string[] = []
  let [key, size, role, rise] = ['', 0, '', 0]
  let hex = ''
  const flush = () => {
    if (hex) out.push(`<${hex}> Tj`)
    hex = ''
  }
  for (const atom of atoms) {
    if (atom.face.key !== key || atom.size !== size || atom.role !== role || atom.rise !== rise || atom.kern !== 0) {
      flush()
      if (atom.face.key !== key || atom.size !== size) out.push(`/${atom.face.key} ${decimal(atom.size)} Tf`)
      if (atom.role !== role) out.push(`${colour(atom.role)} rg`)
      if (atom.rise !== rise) out.push(`${decimal(atom.rise)} Ts`)
      if (atom.kern !== 0) out.push(`[${decimal(-atom.kern / atom.size * 1000)}] TJ`)
      ;[key, size, role, rise] = [atom.face.key, atom.size, atom.role, atom.rise]
    }
    hex += atom.face.hexOf(atom.text)
  }
  flush()
  if (rise !== 0) out.push('0 Ts')
  return out.join(' ')
}
