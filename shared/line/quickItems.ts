import { nearestQuickWord, plainText, quickWordAt, type QuickMeaning } from './quickWords'

/** Why a typed line is not understood; screens word each code with `params`. */
export const QUICK_ERROR_CODES = [
  'unknownWord', 'unknownSign', 'commaInNumber', 'bracketOpen', 'noKind', 'twoKinds', 'measureMissing', 'measureUnasked', 'measureRefused', 'countRefused',
  'saidTwice', 'notForThis', 'heightMissing', 'tagTaken', 'sideTaken', 'sideEmpty', 'allLate', 'tooMany', 'tooLong', 'nothing', 'leavesCount',
] as const
export type QuickErrorCode = (typeof QUICK_ERROR_CODES)[number]

/** Something that is not understood: which line and column it starts at (from 1), how long it is, why, and what the sentence may name. */
export interface QuickError { line: number, column: number, length: number, code: QuickErrorCode, params: Record<string, string | number> }

/** One thing that stands on a typed line. `at` and `length` are its place there; a measure keeps the text that it was typed as. */
export type QuickItem =
  | { is: 'word', meaning: QuickMeaning, text: string, at: number, length: number }
  | { is: 'tag', text: string, at: number, length: number }
  | { is: 'measure', text: string, at: number, length: number }
  | { is: 'own', text: string, at: number, length: number }
  | { is: 'comma' | 'end' | 'plus', at: number, length: number }

/** A problem on the line in hand; the reader adds which line it is. */
export class QuickProblem extends Error {
  constructor(readonly code: QuickErrorCode, readonly at: number, readonly length: number, readonly params: Record<string, string | number> = {}) {
    super(code)
  }
}

const VULGAR = '[\\u00BC-\\u00BE\\u2150-\\u215E]'
const FRACTION = `(?:\\d+\\s*[/\\u2044]\\s*\\d+|${VULGAR})`
const NUMBER = `(?:${FRACTION}|(?:\\d+(?:\\.\\d+)?|\\.\\d+)(?:\\s*-?\\s*${FRACTION})?)`
const FEET = '(?:feet|foot|ft|pies|pie)(?!\\p{L})\\.?'
const FOOT_MARK = '[\'\\u2018\\u2019\\u2032](?![\'\\u2018\\u2019\\u2032])'
const INCHES = '(?:(?:inches|inch|in|pulgadas?|pulg)(?!\\p{L})\\.?|["\\u201C\\u201D\\u2033]|[\'\\u2018\\u2019\\u2032]{2})'
const METRIC = '(?:millimet(?:er|re)s?|milimetros?|mm|centimet(?:er|re)s?|centimetros?|cm|met(?:er|re)s?|metros?|m)(?!\\p{L})\\.?'
/**
 * As much as can belong to one measure. A number after feet is inches only with its unit or after the foot mark: "84 ft 9 bays" is no 84 ft 9 in.
 * What is wrong with a measure is told by parseLength; here it is only cut out.
 */
const MEASURE = new RegExp([
  `${NUMBER}\\s*(?:${FEET}|${FOOT_MARK})\\s*-?\\s*${NUMBER}\\s*${INCHES}`,
  `${NUMBER}\\s*${FOOT_MARK}\\s*-?\\s*${NUMBER}`,
  `\\d{1,3}(?:\\s\\d{3})+(?:\\.\\d+)?\\s*${METRIC}`,
  `${NUMBER}\\s*(?:${FEET}|${FOOT_MARK}|${INCHES}|${METRIC})?`,
].join('|'), 'uy')
const TAG = /[a-z]{1,3}\d{1,3}(?![\p{L}\p{N}])/uy
const WORD = /[\p{L}\p{N}'-]+/uy
/** Units as people call them, in the letters that a length is read in. */
const UNITS: readonly (readonly [RegExp, string])[] = [
  [/(?:millimet(?:er|re)s?|milimetros?)/gi, 'mm'], [/(?:centimet(?:er|re)s?|centimetros?)/gi, 'cm'], [/(?:met(?:er|re)s?|metros?)/gi, 'm'],
  [/(?:feet|foot|pies|pie)/gi, 'ft'], [/(?:inches|inch|pulgadas?|pulg)/gi, 'in'],
]

/**
 * Cuts a typed line into items; words that mean nothing (a, of, the) are left out, and words in brackets are kept as they are.
 * Throws {@link QuickProblem} for what it does not know.
 */
export function quickItems(text: string, from = 0): QuickItem[] {
  const plain = plainText(text)
  const items: QuickItem[] = []
  const match = (pattern: RegExp, at: number) => {
    pattern.lastIndex = at
    return pattern.exec(plain)?.[0]
  }
  let at = from
  while (at < text.length) {
    const sign = text.charAt(at)
    if (/\s/.test(sign)) {
      at++
      continue
    }
    if (sign === '(') {
      const own = ownWords(text, at)
      items.push(own)
      at += own.length
      continue
    }
    if (sign === ',' && /\d/.test(text.charAt(at - 1)) && /\d/.test(text.charAt(at + 1))) throw new QuickProblem('commaInNumber', at, 1)
    if (sign === ',' || sign === ':' || sign === ';' || sign === '+' || sign === '&') {
      items.push({ is: sign === ';' ? 'end' : sign === '+' || sign === '&' ? 'plus' : 'comma', at, length: 1 })
      at++
      continue
    }
    const tag = match(TAG, at)
    if (tag) {
      items.push({ is: 'tag', text: tag.toUpperCase(), at, length: tag.length })
      at += tag.length
      continue
    }
    const word = quickWordAt(plain, at)
    if (word) {
      if (word.meaning.say !== 'filler') items.push({ is: 'word', meaning: word.meaning, text: text.slice(at, at + word.length), at, length: word.length })
      at += word.length
      continue
    }
    const measure = match(MEASURE, at)
    if (measure) {
      const typed = text.slice(at, at + measure.trimEnd().length)
      items.push({ is: 'measure', text: UNITS.reduce((said, [name, unit]) => plainText(said).replace(name, unit), typed), at, length: typed.length })
      at += typed.length
      continue
    }
    if (sign === '.') {
      items.push({ is: 'comma', at, length: 1 })
      at++
      continue
    }
    const unknown = match(WORD, at)
    if (!unknown) throw new QuickProblem('unknownSign', at, 1, { sign })
    const said = text.slice(at, at + unknown.length)
    const nearest = nearestQuickWord(said)
    throw new QuickProblem('unknownWord', at, unknown.length, { word: said, ...(nearest && { nearest }) })
  }
  return items
}

/** Words of a person's own: from the bracket that opens at `at` to the one that closes it; brackets may stand in brackets. */
export function ownWords(text: string, at: number): QuickItem & { is: 'own' } {
  let depth = 0
  for (let i = at; i < text.length; i++) {
    if (text[i] === '(') depth++
    else if (text[i] === ')' && --depth === 0) return { is: 'own', text: text.slice(at + 1, i).replace(/\s+/g, ' ').trim(), at, length: i + 1 - at }
  }
  throw new QuickProblem('bracketOpen', at, text.length - at)
}
