import { readFileSync } from 'node:fs'
import { createRequire } from 'node:module'
import { join } from 'node:path'
import fontkit from '@pdf-lib/fontkit'
import type { PDFDocument, PDFFont } from 'pdf-lib'

/** The weights of Lexend that the records are set in. */
export const WEIGHTS = [300, 400, 500, 600] as const
export type Weight = (typeof WEIGHTS)[number]
const FILES: Record<Weight, string> = { 300: '300Light/Lexend_300Light.ttf', 400: '400Regular/Lexend_400Regular.ttf', 500: '500Medium/Lexend_500Medium.ttf', 600: '600SemiBold/Lexend_600SemiBold.ttf' }

/** The fonts are data beside the packages, not code: found from the folder that the program runs in, so that a bundle finds them too. */
const packages = createRequire(join(process.cwd(), 'package.json'))
const fontBytes = new Map<Weight, Uint8Array>()
function bytesOf(weight: Weight): Uint8Array {
  const known = fontBytes.get(weight) ?? readFileSync(packages.resolve(`@expo-google-fonts/lexend/${FILES[weight]}`))
  fontBytes.set(weight, known)
  return known
}

interface Glyph { hex: string, width: number }

/** One weight in one document. Laid out letter by letter, with every font feature off: a record has no ligatures, and its widths stay the same for ever. */
export class Face {
  private readonly glyphs = new Map<string, Glyph>()
  constructor(readonly key: string, readonly font: PDFFont) {}

  glyph(letter: string): Glyph {
    const known = this.glyphs.get(letter)
    if (known) return known
    const glyph = { hex: this.font.encodeText(letter).asString(), width: this.font.widthOfTextAtSize(letter, 1) }
    this.glyphs.set(letter, glyph)
    return glyph
  }

  /** Width of a text at 1 pt. */
  widthOf(text: string): number {
    let width = 0
    for (const letter of text) width += this.glyph(letter).width
    return width
  }

  hexOf(text: string): string {
    let hex = ''
    for (const letter of text) hex += this.glyph(letter).hex
    return hex
  }
}

export type Faces = Record<Weight, Face>

const NO_FEATURES = { kern: false, liga: false, clig: false, calt: false, rlig: false, ccmp: false, locl: false, mark: false, mkmk: false }

/** Embeds the subsets of Lexend in a document, one font key a weight for all its pages. */
export async function embedFaces(doc: PDFDocument): Promise<Faces> {
  doc.registerFontkit(fontkit)
  const faces = await Promise.all(WEIGHTS.map(async (weight, at) => {
    // A subset has a tag of six letters before its name (ISO 32000-2, 9.9.2); a fixed one keeps the bytes the same.
    const font = await doc.embedFont(bytesOf(weight), { subset: true, features: NO_FEATURES, customName: `SMTHS${'ABCD'[at]}+Lexend-${weight}` })
    return [weight, new Face(`L${weight}`, font)] as const
  }))
  return Object.fromEntries(faces) as Faces
}

let letters: Set<number> | undefined
/** The letters that Lexend has, read once from the regular weight (all weights share them: a test compares). */
function hasLetter(code: number): boolean {
  letters ??= new Set(fontkit.create(bytesOf(400)).characterSet)
  return letters.has(code)
}

/** Other spellings of marks that Lexend lacks but has a plain form of. */
const PLAIN: Record<string, string> = { '\u2032': '\'', '\u2033': '"', '\u2010': '-', '\u2011': '-', '\u2012': '\u2013', '\u2015': '\u2014', '\u202f': '\u00a0', '\u2009': ' ', '\u2007': ' ', '\u2264': '<=', '\u2265': '>=' }

/**
 * A text with every letter that the typeface can draw; one that it cannot is replaced by its number in brackets ("[U+4E2D]"), visibly, since a missing
 * glyph would print as nothing and break archive formats. record.json keeps the text as it was.
 */
export function guardGlyphs(text: string): string {
  let safe = ''
  for (const letter of text.normalize('NFC')) {
    const code = letter.codePointAt(0)!
    if (code === 10) safe += '\n'
    else if (code === 0xA0) safe += letter
    else if (code < 32 || (code >= 0x7F && code < 0xA0)) safe += ' '
    else if (PLAIN[letter] !== undefined) safe += PLAIN[letter]
    // Joiners, direction marks and variation selectors draw nothing by themselves.
    else if (/\p{Cf}|\p{Variation_Selector}/u.test(letter)) continue
    else safe += hasLetter(code) ? letter : `[U+${code.toString(16).toUpperCase().padStart(4, '0')}]`
  }
  return safe
}
