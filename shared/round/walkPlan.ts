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
}

/** All checks of an element in the order of the walk list; those that were read beside the list come last. */
export function walkChecks(basis: RoundBasis, outcome: RoundOutcome, element: LineElement): WalkCheck[] {
  const checks = new Map(basis.checks.map(check => [check.id, check]))
  const own = basis.tasks.filter(task => task.element === element.id)
  // An element that was added in the field is not in the pinned list: the conditions of the checklist decide.
  const tasks = own.length > 0 ? own : tasksFor(basis, element).tasks
  return outcome.checks.filter(one => one.element === element.id).flatMap((one) => {
    const check = checks.get(one.check)
    if (!check) return []
    const limits = (tasks.find(task => task.check === one.check && task.face === one.face) ?? tasks.find(task => task.check === one.check))?.limits ?? []
    return [{ check, outcome: one, limits, open: outcome.deficiencies.filter(each => each.element === element.id && each.check === check.id && faceOf(each.place, one.face) && !isEnded(each)) }]
  })
}

const faceOf = (place: Place | null, face: Face | null) => face === null || !place?.face || place.face === face

/** Repeats of a reading within measuring error: three are read, all are kept, the worst counts (arithmetic.md 2). */
const REPEATS = 3

/** Whether there is something to do here: not read, not yet inspected, disturbed or corrected and to be read again, or to be repeated within measuring error. */
export function isLeft({ outcome, open }: WalkCheck): boolean {
  const { verdict, readAgain, setAside, heads } = outcome
  return verdict === 'notRead' || readAgain || (verdict === 'notInspected' && setAside?.why === 'notYet')
    || (verdict === 'withinError' && heads.length < REPEATS) || open.some(one => one.state === 'corrected')
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

/** What is answered one by one on an element: everything left but the looks that the end of the pass asks about. */
export function oneByOne(checks: readonly WalkCheck[]): WalkCheck[] {
  return checks.filter(one => isLeft(one) && (!one.check.group || one.open.some(each => each.state === 'corrected')))
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
