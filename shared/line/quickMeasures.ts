import { QuickProblem, type QuickItem } from './quickItems'
import type { QuickMeaning } from './quickWords'

/** One measure, or several joined by a plus ("4 ft + 4 ft"). */
export interface QuickMeasure { parts: { text: string, at: number, length: number }[], at: number, length: number }
type Word = Extract<QuickItem, { is: 'word' | 'tag' }>

/** Words that a measure may stand beside; true for those that are nothing without one. */
const TAKES: Partial<Record<QuickMeaning['say'], boolean>> = { kind: false, form: false, tieIn: false, high: true, up: true, down: true, mesh: true, bays: true, spacing: true, leaves: true, unfinished: false }

/** How much a word wants a measure: what is nothing without one first, then the kind, then the rest. */
function wish(item: Word): number {
  if (item.is === 'tag') return 3
  if (TAKES[item.meaning.say]) return 4
  return item.meaning.say === 'kind' && item.meaning.kind !== 'terminalPost' && item.meaning.kind !== 'tieIn' ? 3 : 2
}

/** Bays are counted, all else is measured; a count would not be read as a length, nor the other way round. */
function suits(measure: QuickMeasure, word: Word): boolean {
  const isBays = word.is === 'word' && word.meaning.say === 'bays'
  return !isBays || measure.parts.every(part => /^\d+$/.test(part.text))
}

/** Gives each measure of a clause to the word before or after it, in the way that serves most. Clauses are short, so every way is tried. */
function give(row: readonly (Word | QuickMeasure)[]): Map<QuickMeasure, Word> {
  let best = { score: -1, pairs: new Map<QuickMeasure, Word>() }
  const solve = (at: number, pairs: ReadonlyMap<QuickMeasure, Word>, score: number) => {
    if (score > best.score) best = { score, pairs: new Map(pairs) }
    if (at >= row.length) return
    const entry = row[at]!
    if ('parts' in entry) {
      for (const beside of [row[at - 1], row[at + 1]]) {
        if (beside && !('parts' in beside) && suits(entry, beside) && ![...pairs.values()].includes(beside)) solve(at + 1, new Map(pairs).set(entry, beside), score + wish(beside))
      }
    }
    solve(at + 1, pairs, score)
  }
  solve(0, new Map(), 0)
  return best.pairs
}

/**
 * Which measure belongs to which word of a statement; `kindAt` is the tag that stands for its kind ("R1 84 ft"), where it does.
 * Throws {@link QuickProblem} for a measure that belongs to no word and for a word that lacks its measure.
 */
export function quickMeasures(items: readonly QuickItem[], kindAt: QuickItem | undefined): Map<QuickItem, QuickMeasure> {
  const rows: (Word | QuickMeasure)[][] = [[]]
  let joined = false
  for (const item of items) {
    const row = rows.at(-1)!
    const last = row.at(-1)
    if (item.is === 'comma') rows.push([])
    else if (item === kindAt && item.is === 'tag') row.push(item)
    else if (item.is === 'word' && item.meaning.say in TAKES) row.push(item)
    else if (item.is === 'measure') {
      const part = { text: item.text, at: item.at, length: item.length }
      if (joined && last && 'parts' in last) {
        last.parts.push(part)
        last.length = item.at + item.length - last.at
      }
      else row.push({ parts: [part], at: item.at, length: item.length })
    }
    joined = item.is === 'plus'
  }
  const given = new Map<QuickItem, QuickMeasure>()
  for (const row of rows) {
    // A clause of a dozen measures is no jotting; trying every way would take long.
    const measures = row.filter(entry => 'parts' in entry)
    const pairs = measures.length > 10 ? new Map<QuickMeasure, Word>() : give(row)
    for (const measure of measures) {
      const word = pairs.get(measure)
      if (!word) throw new QuickProblem('measureUnasked', measure.at, measure.length, { measure: measure.parts.map(part => part.text).join(' + ') })
      given.set(word, measure)
    }
  }
  for (const item of items) {
    if (item.is === 'word' && TAKES[item.meaning.say] && !given.has(item)) throw new QuickProblem('measureMissing', item.at, item.length, { word: item.text })
  }
  return given
}
