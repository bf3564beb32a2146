import type { LengthUnit } from './length'
import { LengthRefused } from './lengthRefused'

/** What a typed length is made of; `at` is the index of its first character in the text. */
export type LengthToken =
  | { kind: 'number', whole: string, decimals: string, at: number }
  | { kind: 'vulgar', over: number, under: number, at: number }
  | { kind: 'unit', unit: LengthUnit, at: number }
  | { kind: 'slash' | 'dash', at: number }

const UNIT_WORDS: Readonly<Record<string, LengthUnit>> = { in: 'in', ft: 'ft', mm: 'mm', cm: 'cm', m: 'm' }
// Typewriter, curly, prime and modifier marks, as keyboards and documents have them.
const FOOT_MARKS = '\'\u2018\u2019\u201B\u2032\u02B9\u02BC'
const INCH_MARKS = '"\u201C\u201D\u201F\u2033\u02BA'
const DASHES = '-\u2010\u2011\u2012\u2013\u2212'
const SLASHES = '/\u2044\u2215'
const SPACES = ' \u00A0\u2007\u2009\u202F'
// Never through NFKC: that turns 4½ into 41⁄2, ten times too much.
const VULGAR: Readonly<Record<string, readonly [number, number]>> = {
  '½': [1, 2], '¼': [1, 4], '¾': [3, 4], '⅛': [1, 8], '⅜': [3, 8], '⅝': [5, 8], '⅞': [7, 8],
  '⅓': [1, 3], '⅔': [2, 3], '⅕': [1, 5], '⅖': [2, 5], '⅗': [3, 5], '⅘': [4, 5], '⅙': [1, 6], '⅚': [5, 6], '⅐': [1, 7], '⅑': [1, 9], '⅒': [1, 10], '↉': [0, 3],
}
// eslint-disable-next-line no-control-regex -- finding them is the point
const HIDDEN = /[\u0000-\u001F\u007F-\u009F\p{Cf}\p{Zl}\p{Zp}\p{Cs}\p{Co}\p{Cn}]/u

/**
 * Cuts a typed length into tokens.
 * @throws {LengthRefused} for characters that no length has: comma, exponent, word, foreignDigit, control, unknownCharacter
 */
export function lengthTokens(text: string): LengthToken[] {
  const hidden = HIDDEN.exec(text)
  if (hidden) throw new LengthRefused('control', {}, hidden.index)
  const tokens: LengthToken[] = []
  let at = 0
  while (at < text.length) {
    const rest = text.slice(at)
    const character = String.fromCodePoint(text.codePointAt(at)!)
    const number = /^(?:(\d+)(?:\.(\d+))?|\.(\d+))/.exec(rest)
    const word = /^\p{L}+/u.exec(rest)?.[0]
    const vulgar = VULGAR[character]
    let taken = character.length
    if (SPACES.includes(character)) { /* parts tokens and means nothing else */ }
    else if (number) {
      tokens.push({ kind: 'number', whole: number[1] ?? '', decimals: number[2] ?? number[3] ?? '', at })
      taken = number[0].length
    }
    else if (vulgar) tokens.push({ kind: 'vulgar', over: vulgar[0], under: vulgar[1], at })
    else if (word) {
      const unit = Object.hasOwn(UNIT_WORDS, asciiLower(word)) ? UNIT_WORDS[asciiLower(word)] : undefined
      if (!unit) throw refusedWord(word, text, at)
      tokens.push({ kind: 'unit', unit, at })
      const dotted = rest[word.length] === '.' // "ft.", "in."
      // "5ft.5in" is 5 ft 5 in to one reader and 5 ft 1/2 in to another.
      if (dotted && /\d/.test(rest[word.length + 1] ?? '')) throw new LengthRefused('unreadable', {}, at + word.length)
      taken = word.length + (dotted ? 1 : 0)
    }
    else if (INCH_MARKS.includes(character)) tokens.push({ kind: 'unit', unit: 'in', at })
    else if (FOOT_MARKS.includes(character)) {
      const doubled = rest.length > 1 && FOOT_MARKS.includes(rest[1]!) // '' stands for the inch mark
      tokens.push({ kind: 'unit', unit: doubled ? 'in' : 'ft', at })
      taken = doubled ? 2 : 1
    }
    else if (DASHES.includes(character)) tokens.push({ kind: 'dash', at })
    else if (SLASHES.includes(character)) tokens.push({ kind: 'slash', at })
    else if (character === ',' || character === '\u066B' || character === '\u066C') throw new LengthRefused('comma', {}, at)
    else if (/\p{N}/u.test(character)) throw new LengthRefused('foreignDigit', { character }, at)
    else throw new LengthRefused('unknownCharacter', { character }, at)
    at += taken
  }
  return tokens
}

/** Lower case of ASCII alone: the full mapping would turn other letters (the Kelvin sign, a dotted I) into unit letters. */
function asciiLower(word: string): string {
  return word.replace(/[A-Z]/g, letter => letter.toLowerCase())
}

function refusedWord(word: string, text: string, at: number): LengthRefused {
  const exponent = asciiLower(word) === 'e' && /[\d.]\s*$/.test(text.slice(0, at)) && /^\s*[-+\u2212]?\s*\d/.test(text.slice(at + 1))
  return exponent ? new LengthRefused('exponent', {}, at) : new LengthRefused('word', { word }, at)
}
