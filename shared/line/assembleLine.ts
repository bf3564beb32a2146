import type { Line, LineElement, LineSide } from './line'
import { freeTag, MOST_ELEMENTS, usualBays, usualLeaves } from './lineDefaults'
import { QuickProblem } from './quickItems'
import type { QuickStatement } from './readQuickStatement'
import type { System } from '../measure/length'

export interface ReadLineOptions {
  /** What the line is drawn in; a bare measure means feet or metres. */
  system: System
  newId: () => string
  /** Elements as they stood: one whose tag and kind come again keeps its id, since elements outlive a typing. The first of a tag counts. */
  keep?: readonly Pick<LineElement, 'id' | 'tag' | 'kind'>[]
  /** Version that the line is given; 1 where absent. */
  version?: number
}

/** A statement with its place in the text: which line or row, and where there. */
export interface PlacedStatement { statement: QuickStatement, line: number, at: number, length: number }
export interface DraftSide { key: string, name: string, line: number, elements: PlacedStatement[] }

function elementOf({ statement, ...place }: PlacedStatement, tag: string, id: string): LineElement {
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
 * Makes the line of statements: tags for those without one, ids, bays, leaves. Every problem is told through `fail` with the line that it is on;
 * the line is to be used only if none was.
 */
export function assembleLine(sides: readonly DraftSide[], { system, newId, keep = [], version = 1 }: ReadLineOptions, fail: (line: number, problem: QuickProblem) => void): Line {
  const placed = sides.flatMap(side => side.elements)
  const beyond = placed[MOST_ELEMENTS]
  if (beyond) fail(beyond.line, new QuickProblem('tooMany', beyond.at, beyond.length, { most: MOST_ELEMENTS }))
  const known = new Map([...keep].reverse().map(element => [`${element.kind} ${element.tag}`, element.id]))
  const taken = new Set(placed.flatMap(({ statement }) => statement.tag ?? []))
  const seen = new Set<string>()
  const elementAt = (place: PlacedStatement): LineElement | [] => {
    const { statement } = place
    const tag = statement.tag ?? (statement.kind && freeTag(statement.kind, taken)) ?? ''
    try {
      if (seen.has(tag)) throw new QuickProblem('tagTaken', place.at, tag.length, { tag })
      return elementOf(place, tag, known.get(`${statement.kind} ${tag}`) ?? newId())
    }
    catch (error) {
      if (!(error instanceof QuickProblem)) throw error
      fail(place.line, error)
      return []
    }
    finally {
      seen.add(tag)
      taken.add(tag)
    }
  }
  return { version, system, sides: sides.map((side): LineSide => ({ key: side.key, name: side.name, elements: side.elements.flatMap(elementAt) })) }
}
