import type { System } from '../measure/length'
import { elementsOf, type Line, type LineElement, type LineSide } from './line'
import { freeTag, lineDefaults, MOST_ELEMENTS, usualBays, usualLeaves, type LineDefaults } from './lineDefaults'
import { ownWords, QuickProblem, quickItems, type QuickError, type QuickItem } from './quickItems'
import { readQuickStatement, type QuickStatement } from './readQuickStatement'

export interface ReadLineOptions {
  /** What the line is drawn in; a bare measure means feet or metres. */
  system: System
  newId: () => string
  /** The line as it stood: an element whose tag and kind come again keeps its id, since elements outlive a typing. */
  keep?: Line
}

/** A side begins with a capital letter that stands alone. */
const SIDE = /^\s*([A-Z])(?=[\s:.(]|$)/
const LONGEST_TEXT = 100_000

interface Placed { statement: QuickStatement, line: number, at: number, length: number }
interface DraftSide { key: string, name: string, line: number, elements: Placed[] }

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

function elementOf({ statement, ...place }: Placed, tag: string, id: string): LineElement {
  const { shared, kind, head } = statement
  const problem = (code: 'noKind' | 'measureMissing' | 'heightMissing' | 'leavesCount', params = {}) => new QuickProblem(code, head?.at ?? place.at, head?.length ?? place.length, params)
  if (!kind) throw problem('noKind')
  const length = statement.length ?? statement.leaves?.reduce((sum, leaf) => sum + leaf, 0) ?? 0
  if (length === 0 && kind !== 'terminalPost' && kind !== 'tieIn') throw problem('measureMissing', { word: head && 'text' in head ? head.text : tag })
  if (shared.height === null) throw problem('heightMissing')
  const form = statement.form ?? (statement.leaves?.length === 2 ? 'doubleSwing' : 'singleSwing')
  const leaves = statement.leaves ?? usualLeaves(length, form)
  if (kind === 'gate' && (leaves.length > 2 || (form === 'doubleSwing' && leaves.length !== 2))) throw problem('leavesCount')
  return {
    id, kind, tag,
    ...(statement.name && { name: statement.name }),
    work: shared.work, length, height: shared.height, rise: statement.rise,
    bays: kind === 'run' ? statement.bays ?? usualBays(length, shared.spacing) : 1,
    ...(shared.mesh && { mesh: shared.mesh }),
    topRail: shared.topRail, bottom: shared.bottom,
    ...(kind === 'gate' && { gate: { form, leaves, ...statement.gate } }),
    ...(statement.post && { post: statement.post }),
    ...(statement.tieIn && { tieIn: statement.tieIn }),
    ...(statement.crossing && { crossing: statement.crossing }),
    faces: shared.faces,
  }
}

/**
 * Reads a line as somebody jots it down, in English or Spanish: what stands for all, a capital letter for each side, one element a line or
 * parted by semicolons, in any order of words ("84 ft run 6 ft high, up 11 in, 9 bays"). A text that is not understood gives every error with
 * its place and a code; nothing is guessed. Ids come from `newId` or from the line that is kept.
 */
export function readQuickLine(text: string, { system, newId, keep }: ReadLineOptions): { line: Line } | { errors: QuickError[] } {
  const errors: QuickError[] = []
  const fail = (line: number, at: number, length: number, code: QuickError['code'], params: QuickError['params'] = {}) => errors.push({ line, column: at + 1, length: Math.max(1, length), code, params })
  /** Runs a step; a problem becomes an error of that line and the reading goes on. */
  const trying = <T>(line: number, step: () => T): T | undefined => {
    try {
      return step()
    }
    catch (error) {
      if (!(error instanceof QuickProblem)) throw error
      fail(line, error.at, error.length, error.code, error.params)
      return undefined
    }
  }
  if (text.length > LONGEST_TEXT) {
    fail(1, 0, 1, 'tooLong', { most: LONGEST_TEXT })
    return { errors }
  }

  let defaults: LineDefaults = lineDefaults(system)
  const sides: DraftSide[] = []
  text.split(/\r\n|\r|\n/).forEach((row, index) => trying(index + 1, () => {
    const line = index + 1
    if (/^\s*(#|$)/.test(row)) return
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
  }))

  const placed = sides.flatMap(side => side.elements)
  if (placed.length > MOST_ELEMENTS) fail(placed[MOST_ELEMENTS]!.line, placed[MOST_ELEMENTS]!.at, placed[MOST_ELEMENTS]!.length, 'tooMany', { most: MOST_ELEMENTS })
  const known = new Map(keep ? elementsOf(keep).map(element => [element.tag, element]) : [])
  const taken = new Set(placed.flatMap(({ statement }) => statement.tag ?? []))
  const seen = new Set<string>()
  const drawn = sides.map((side): LineSide => ({
    key: side.key, name: side.name, elements: side.elements.flatMap(place => trying(place.line, () => {
      const { statement } = place
      if (statement.tag && seen.has(statement.tag)) throw new QuickProblem('tagTaken', place.at, statement.tag.length, { tag: statement.tag })
      const tag = statement.tag ?? (statement.kind && freeTag(statement.kind, taken)) ?? ''
      seen.add(tag)
      taken.add(tag)
      const before = known.get(tag)
      return elementOf(place, tag, before && before.kind === statement.kind ? before.id : newId())
    }) ?? []),
  }))
  for (const side of sides) if (side.elements.length === 0 && errors.every(error => error.line < side.line)) fail(side.line, 0, 1, 'sideEmpty', { side: side.key })
  if (sides.length === 0 && errors.length === 0) fail(1, 0, 1, 'nothing')
  if (errors.length > 0) {
    errors.sort((a, b) => a.line - b.line || a.column - b.column)
    // A height that was missed (or misspelt) at the top is missed by every element: once is enough, and after another error not at all.
    return { errors: errors.filter((error, i) => error.code !== 'heightMissing' || i === 0) }
  }
  return { line: { version: keep?.version ?? 1, system, sides: drawn } }
}
