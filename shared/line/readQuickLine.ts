import { assembleLine, type DraftSide, type ReadLineOptions } from './assembleLine'
import type { Line } from './line'
import { lineDefaults, type LineDefaults } from './lineDefaults'
import { ownWords, QuickProblem, quickItems, type QuickError, type QuickItem } from './quickItems'
import { readQuickStatement } from './readQuickStatement'

/** A side begins with a capital letter that stands alone. */
const SIDE = /^\s*([A-Z])(?=[\s:.(]|$)/
const LONGEST_TEXT = 100_000

/** The name after a side's letter: words in brackets, or all up to a colon. */
function sideHead(text: string): { key: string, name: string, rest: number } | null {
  const key = SIDE.exec(text)
  if (!key) return null
  const after = key[0].length
  const space = /^[\s.]*/.exec(text.slice(after))![0].length
  if (text[after + space] === '(') {
    const own = ownWords(text, after + space)
    return { key: key[1]!, name: own.text, rest: own.at + own.length }
  }
  const colon = text.indexOf(':', after)
  const end = colon < 0 ? text.length : colon
  return { key: key[1]!, name: text.slice(after, end).replace(/^[\s.]+/, '').replace(/\s+/g, ' ').trim(), rest: end }
}

/** Cuts items at semicolons. */
function statementsOf(items: readonly QuickItem[]): QuickItem[][] {
  const all: QuickItem[][] = [[]]
  for (const item of items) {
    if (item.is === 'end') all.push([])
    else all.at(-1)!.push(item)
  }
  return all.filter(statement => statement.some(item => item.is !== 'comma' && item.is !== 'plus'))
}

/**
 * Reads a line as somebody jots it down, in English or Spanish: what stands for all, a capital letter for each side, one element a line or
 * parted by semicolons, in any order of words ("84 ft run 6 ft high, up 11 in, 9 bays"). A text that is not understood gives every error with
 * its place and a code; nothing is guessed. Ids come from `newId` or from the line that is kept.
 */
export function readQuickLine(text: string, options: ReadLineOptions): { line: Line } | { errors: QuickError[] } {
  const { system } = options
  const errors: QuickError[] = []
  const fail = (line: number, { at, length, code, params }: QuickProblem) => errors.push({ line, column: at + 1, length: Math.max(1, length), code, params })
  if (text.length > LONGEST_TEXT) {
    fail(1, new QuickProblem('tooLong', 0, 1, { most: LONGEST_TEXT }))
    return { errors }
  }

  let defaults: LineDefaults = lineDefaults(system)
  const sides: DraftSide[] = []
  const readRow = (row: string, line: number) => {
    const head = sideHead(row)
    if (head) {
      if (head.name.length > 80) throw new QuickProblem('tooLong', 0, row.length, { most: 80 })
      if (sides.some(side => side.key === head.key)) throw new QuickProblem('sideTaken', row.indexOf(head.key), 1, { side: head.key })
      sides.push({ key: head.key, name: head.name, line, elements: [] })
    }
    for (const items of statementsOf(quickItems(row, head?.rest ?? 0))) {
      const [first, last] = [items[0]!, items.at(-1)!]
      const statement = readQuickStatement(items, defaults, system)
      const all = items.find(item => item.is === 'word' && item.meaning.say === 'all')
      if (all) {
        if (sides.length > 0) throw new QuickProblem('allLate', all.at, all.length)
        defaults = statement.shared
        continue
      }
      if (sides.length === 0) sides.push({ key: 'A', name: '', line, elements: [] })
      sides.at(-1)!.elements.push({ statement, line, at: first.at, length: last.at + last.length - first.at })
    }
  }
  text.split(/\r\n|\r|\n/).forEach((row, index) => {
    if (/^\s*(#|$)/.test(row)) return
    try {
      readRow(row, index + 1)
    }
    catch (error) {
      // One problem a row; the reading goes on with the next.
      if (!(error instanceof QuickProblem)) throw error
      fail(index + 1, error)
    }
  })
  const line = assembleLine(sides, options, fail)
  for (const side of sides) if (side.elements.length === 0 && errors.every(error => error.line < side.line)) fail(side.line, new QuickProblem('sideEmpty', 0, 1, { side: side.key }))
  if (sides.length === 0 && errors.length === 0) fail(1, new QuickProblem('nothing', 0, 1))
  if (errors.length > 0) {
    errors.sort((a, b) => a.line - b.line || a.column - b.column)
    // A height that was missed (or misspelt) at the top is missed by every element: once is enough, and after another error not at all.
    return { errors: errors.filter((error, i) => error.code !== 'heightMissing' || i === 0) }
  }
  return { line }
}
