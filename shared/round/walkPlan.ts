import type { Check, FindingKind } from '../checklist/check'
import type { Place } from '../entry/entry'
import type { Face, Line, LineElement } from '../line/line'
import { elementsOf } from '../line/line'
import type { RoundBasis } from './basis'
import { tasksFor } from './makeBasis'
import type { CheckOutcome, DeficiencyOutcome, RoundOutcome } from './outcome'
import { isEnded } from './outcome'

/** A check on an element (and face) as somebody stands before it: what it asks, what was said of it, which limits hold, what is open. */
export interface WalkCheck {
  check: Check
  outcome: CheckOutcome
  /** Keys into the basis' limits. */
  limits: readonly string[]
  /** Deficiencies of this check here that have not ended. */
  open: readonly DeficiencyOutcome[]
  /** One answer stands for the line; it may be read on this element. */
  line: boolean
}

/** A check of which nothing was said on an element (and face). */
export function unread(element: string, check: string, face: Face | null): CheckOutcome {
  return { element, check, face, verdict: 'notRead', settled: false, readAgain: false, heads: [], governs: null, earlier: [], setAside: null, disturbedBy: [], baysMissing: 0 }
}

/** All checks of an element in the order of the walk list; then those that are answered once for the line and were read elsewhere, or nowhere yet; last those beside the list. */
export function walkChecks(basis: RoundBasis, outcome: RoundOutcome, element: LineElement): WalkCheck[] {
  const checks = new Map(basis.checks.map(check => [check.id, check]))
  const own = basis.tasks.filter(task => task.element === element.id)
  // An element that was added in the field is not in the pinned list: the conditions of the checklist decide.
  const tasks = own.length > 0 ? own : tasksFor(basis, element).tasks
  const here = outcome.checks.filter(one => one.element === element.id)
  const elsewhere = tasks.filter(task => task.line && here.every(one => one.check !== task.check)).map(task => unread(element.id, task.check, task.face))
  return [...here, ...elsewhere].flatMap((one) => {
    const check = checks.get(one.check)
    if (!check) return []
    const task = tasks.find(task => task.check === one.check && task.face === one.face) ?? tasks.find(task => task.check === one.check)
    return [{ check, outcome: one, limits: task?.limits ?? [], line: task?.line ?? false, open: outcome.deficiencies.filter(each => each.element === element.id && each.check === check.id && faceOf(each.place, one.face) && !isEnded(each)) }]
  })
}

const faceOf = (place: Place | null, face: Face | null) => face === null || !place?.face || place.face === face

/** Repeats of a reading within measuring error: three are read, all are kept, the worst counts (arithmetic.md 2). */
export const REPEATS = 3

/** Whether there is something to do here: not read, not yet inspected, disturbed or corrected and to be read again, or within measuring error and to be settled. */
export function isLeft({ outcome, open }: WalkCheck): boolean {
  const { verdict, readAgain, setAside } = outcome
  return verdict === 'notRead' || readAgain || (verdict === 'notInspected' && setAside?.why === 'notYet')
    || verdict === 'withinError' || open.some(one => one.state === 'corrected')
}

/**
 * What is answered once for the line, in the order of the checks: each where it was read or is to be read, as {@link walkChecks} gives it there. A check that was
 * read at several places stands once for each.
 */
export function lineChecks(basis: RoundBasis, outcome: RoundOutcome): WalkCheck[] {
  const order = new Map(basis.checks.map((check, at) => [check.id, at]))
  const said = new Set(outcome.checks.map(one => `${one.element} ${one.check}`))
  return elementsOf(outcome.line).flatMap(element => walkChecks(basis, outcome, element).filter(one => one.line && said.has(`${element.id} ${one.check.id}`)))
    .sort((a, b) => order.get(a.check.id)! - order.get(b.check.id)!)
}

/** Whether a look may be confirmed with the others at the end of a pass along this face. */
function isCovered({ check, outcome }: WalkCheck, face: Face): boolean {
  return check.group && (outcome.face === null || outcome.face === face)
}

/**
 * The looks that a pass along a face covered on an element, to be confirmed as a group. A check with an open finding is offered as well, since all but that
 * place may be in order; one that was corrected is not, because each correction is looked at by itself.
 */
export function passCovers(checks: readonly WalkCheck[], face: Face): WalkCheck[] {
  return checks.filter((one) => {
    if (!isCovered(one, face) || one.open.some(each => each.state === 'corrected')) return false
    const wholeSeen = one.outcome.heads.some(head => head.verdict === 'conforms' && (head.place?.bay ?? null) === null)
    return isLeft(one) || (one.open.length > 0 && !wholeSeen)
  })
}

/** What is in the hand while a check is answered, in the order in which one takes it up: with eyes and hands first, then the tape, what else there is in the bag last. */
export const TOOLS = ['look', 'hand', 'tape', 'gauge', 'instrument', 'count'] as const
export type Tool = (typeof TOOLS)[number]
const TOOL_OF: Record<Check['method'], Tool> = { look: 'look', trial: 'hand', measure: 'tape', template: 'gauge', count: 'count' }

/** What a check is answered with; `instrument` reads an angle, a time or a force. */
export function toolOf({ method, unit }: Pick<Check, 'method' | 'unit'>): Tool {
  return method === 'measure' && unit !== 'length' ? 'instrument' : TOOL_OF[method]
}

/** Checks by what is in the hand; within a tool in the order given. */
export function byTool(checks: readonly WalkCheck[]): WalkCheck[] {
  return TOOLS.flatMap(tool => checks.filter(one => toolOf(one.check) === tool))
}

/** The next check that is left after one, by what is in the hand and round to the first; null when none is. */
export function nextLeft(checks: readonly WalkCheck[], after: { check: string, face: Face | null }): WalkCheck | null {
  const order = byTool(checks)
  const at = order.findIndex(one => one.check.id === after.check && one.outcome.face === after.face)
  const left = (one: WalkCheck) => isLeft(one) && one.open.every(each => each.state !== 'corrected')
  return [...order.slice(at + 1), ...order.slice(0, Math.max(at, 0))].find(left) ?? null
}

/** What is answered one by one on an element, by what is in the hand: all that is left but the looks that the end of the pass asks about, and what is answered once for the line. */
export function oneByOne(checks: readonly WalkCheck[]): WalkCheck[] {
  return byTool(checks).filter(one => isLeft(one) && !one.line && (!one.check.group || one.open.some(each => each.state === 'corrected')))
}

/**
 * The checks that a finding key may mean on an element, walking along a face. `asked`: those of its kind that are called for there; where there is none, a
 * look of that kind that the checklists know stands in (a finding counts wherever it is made). Something else may be of any check here.
 */
export function findingChecks(basis: RoundBasis, checks: readonly WalkCheck[], face: Face, kind: FindingKind): { check: Check, face: Face | null, asked: boolean }[] {
  const here = checks.filter(({ outcome }) => outcome.face === null || outcome.face === face).map(({ check, outcome }) => ({ check, face: outcome.face, asked: true }))
  const own = here.filter(({ check }) => check.finding === kind)
  if (kind === 'other') return [...own, ...here.filter(({ check }) => check.finding !== kind)]
  if (own.length > 0) return own
  return basis.checks.filter(check => check.finding === kind && check.method === 'look').map(check => ({ check, face: check.answeredFor === 'face' ? face : null, asked: false }))
}

/** What may be a danger on an element: checks whose findings put it out of use first, then all others. */
export function dangerChecks(checks: readonly WalkCheck[], face: Face): { check: Check, face: Face | null, asked: boolean }[] {
  const here = checks.filter(({ outcome }) => outcome.face === null || outcome.face === face).map(({ check, outcome }) => ({ check, face: outcome.face, asked: true }))
  return [...here.filter(({ check }) => check.class === 'outOfUse'), ...here.filter(({ check }) => check.class !== 'outOfUse')]
}

/** Where one stands on a walk: an element, and which of its bays (1 on all but a run). */
export interface WalkPosition { element: string, bay: number }

/** Elements in the order in which a pass meets them. */
export function passOrder(line: Line, backwards: boolean): LineElement[] {
  const elements = elementsOf(line)
  return backwards ? elements.reverse() : elements
}

const baysOf = (element: LineElement) => element.kind === 'run' ? element.bays : 1

/** Where a pass enters an element. */
export function entryOf(element: LineElement, backwards: boolean): WalkPosition {
  return { element: element.id, bay: backwards ? baysOf(element) : 1 }
}

/** The next place of a pass. `end` when the element is behind one: its looks are confirmed before the next element is entered. Null where the element is not on the line. */
export function stepOn(line: Line, { element: id, bay }: WalkPosition, backwards: boolean): { to: WalkPosition } | { end: true } | null {
  const element = elementsOf(line).find(one => one.id === id)
  if (!element) return null
  const next = backwards ? bay - 1 : bay + 1
  return next >= 1 && next <= baysOf(element) ? { to: { element: id, bay: next } } : { end: true }
}

/** The element after this one on a pass; null at the end of the line. */
export function nextElement(line: Line, id: string, backwards: boolean): LineElement | null {
  const order = passOrder(line, backwards)
  const at = order.findIndex(one => one.id === id)
  return at < 0 ? null : order[at + 1] ?? null
}

/** One place back, into the element before where need be; null at the start of the pass. */
export function stepBack(line: Line, { element: id, bay }: WalkPosition, backwards: boolean): WalkPosition | null {
  const order = passOrder(line, backwards)
  const at = order.findIndex(one => one.id === id)
  if (at < 0) return null
  const before = backwards ? bay + 1 : bay - 1
  if (before >= 1 && before <= baysOf(order[at]!)) return { element: id, bay: before }
  const last = order[at - 1]
  return last ? entryOf(last, !backwards) : null
}

/** Faces that the walk list asks about, outer first; both where no check is of one face. */
export function facesAsked(outcome: RoundOutcome): Face[] {
  const faces = (['outer', 'inner'] as const).filter(face => outcome.checks.some(one => one.face === face))
  return faces.length > 0 ? faces : ['outer', 'inner']
}
