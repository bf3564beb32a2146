import { fractionRuns, text, type Shape, type TextStyle } from '../displayList'

// Advance widths of Lexend Regular (SIL OFL 1.1) in 1/1000 em, code points 32 to 126, read from the font file itself.
const ADVANCES = [
  280, 236, 412, 678, 624, 839, 739, 205, 366, 366, 387, 591, 267, 394, 228, 557, 607, 500, 548, 529, 620, 568, 557, 542, 579, 551, 228, 262, 524, 566, 524, 511,
  965, 700, 681, 679, 748, 614, 602, 766, 761, 478, 642, 732, 599, 864, 793, 782, 634, 782, 695, 624, 576, 740, 715, 996, 685, 660, 659, 403, 557, 403, 579, 690,
  500, 633, 630, 535, 634, 586, 393, 649, 595, 278, 265, 568, 251, 921, 595, 615, 631, 630, 403, 479, 384, 605, 573, 800, 562, 581, 484, 411, 231, 411, 510,
]
const OTHERS: Readonly<Record<string, number>> = { '°': 532, '×': 484, '·': 228, '\u2044': 606, '\u2212': 580, '…': 605 }
/** Heavier weights are wider by up to this much (digits and letters of weight 600). */
const WEIGHT_FACTOR: Readonly<Record<number, number>> = { 300: 1, 400: 1, 500: 1.03, 600: 1.08 }

/** Accented letters are as wide as bare ones; a letter that the table does not know is taken as wide. */
const advance = (letter: string) => ADVANCES[letter.charCodeAt(0) - 32] ?? OTHERS[letter] ?? ADVANCES[letter.normalize('NFD').charCodeAt(0) - 32] ?? 900

/** How wide a text is set, fractions and all, in the units of its size. */
export function textWidth(words: string, size: number, weight: number = 400): number {
  let em = 0
  for (const run of fractionRuns(words)) {
    em += run.kern
    for (const letter of run.text) em += advance(letter) / 1000 * run.scale
  }
  return em * size * (WEIGHT_FACTOR[weight] ?? 1)
}

/** A text cut with an ellipsis so that it is no wider than `width`; '' where not even that fits. */
export function cutText(words: string, size: number, width: number, weight = 400): string {
  if (textWidth(words, size, weight) <= width) return words
  const letters = [...words]
  while (letters.length > 0 && textWidth(`${letters.join('').trimEnd()}…`, size, weight) > width) letters.pop()
  return letters.length > 0 ? `${letters.join('').trimEnd()}…` : ''
}

/** A figure at the largest of these sizes that is no wider than `width`. None fits: nothing, for a figure that is cut is another figure. */
export function figureThatFits(x: number, y: number, words: string, sizes: readonly number[], width: number, style: TextStyle = {}): Shape[] {
  const size = sizes.find(each => textWidth(words, each, style.weight) <= width)
  return size === undefined || !words ? [] : [text(x, y, words, { ...style, size })]
}

/** A text in up to `lines` lines no wider than `width`, broken at spaces; the last is cut where the rest does not fit. */
export function wrapText(words: string, size: number, width: number, lines: number, weight = 400): string[] {
  const found: string[] = []
  let left = words
  while (left && found.length < lines - 1 && textWidth(left, size, weight) > width) {
    // A figure keeps its fraction and its unit: only other spaces break.
    const breaks = [...left.matchAll(/ (?!\d+\/|in\b|mm\b)/g)].map(({ index }) => index)
    const at = breaks.filter(index => textWidth(left.slice(0, index), size, weight) <= width).at(-1)
    if (at === undefined) break
    found.push(left.slice(0, at))
    left = left.slice(at + 1)
  }
  return left ? [...found, cutText(left, size, width, weight)] : found
}

/** Where a text stands that wants its middle at `x` but must stay inside [left, right]. */
export function middleWithin(words: string, size: number, x: number, left: number, right: number, weight = 400): number {
  const half = textWidth(words, size, weight) / 2
  return Math.max(left + half, Math.min(right - half, x))
}
