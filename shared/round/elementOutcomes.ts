import { worse } from './checkOutcomes'
import type { CheckOutcome, DeficiencyOutcome, ElementOutcome, Verdict } from './outcome'
import { isEnded } from './outcome'
import type { Slot, WalkSlots } from './walkSlots'

/**
 * The outcome of each element in walking order, and the checks that are shown: what was found on a struck element or beside the list is shown for as long as it
 * is open, and on a standing element for good. The first `planned` checks are those that were asked for.
 *
 * @param once - where only some elements are folded: what all of them came to
 */
export function elementOutcomes(slots: WalkSlots, outcomes: readonly CheckOutcome[], deficiencies: readonly DeficiencyOutcome[], once: OnceForTheLine = onceForTheLine(slots, outcomes)): { elements: ElementOutcome[], checks: CheckOutcome[], planned: number, once: OnceForTheLine } {
  const openOf = new Map<string, DeficiencyOutcome[]>()
  for (const one of deficiencies) if (!isEnded(one)) openOf.set(one.element, [...openOf.get(one.element) ?? [], one])

  const walking = new Map(slots.elements.map((element, at) => [element.id, at]))
  const planned: CheckOutcome[] = []
  const beside: CheckOutcome[] = []
  for (const [at, slot] of slots.all.entries()) {
    const outcome = outcomes[at]!
    if (slot.line && !once.shown.has(slotName(slot))) continue
    if (slot.planned) planned.push(outcome)
    else if (walking.has(slot.element) || openOf.get(slot.element)?.some(one => one.check === slot.check.id)) beside.push(outcome)
  }
  sortBeside(beside, walking)
  const checks = [...planned, ...beside]

  const checksOf = new Map<string, CheckOutcome[]>()
  for (const check of checks) {
    const list = checksOf.get(check.element)
    if (list) list.push(check)
    else checksOf.set(check.element, [check])
  }
  const struck = [...checksOf.keys()].filter(id => !walking.has(id)).sort()
  return { checks, once, planned: planned.length, elements: [...walking.keys(), ...struck].map(id => elementOutcome(id, checksOf.get(id) ?? [], openOf.get(id) ?? [], slots.unplanned.has(id), once.holds.has(id))) }
}

/** Sorts checks that nobody asked for; `walking`: the turn of each element of the line. */
export function sortBeside(checks: CheckOutcome[], walking: ReadonlyMap<string, number>): void {
  const turn = (element: string) => walking.get(element) ?? Infinity
  checks.sort((a, b) => order(turn(a.element), turn(b.element)) || order(a.element, b.element) || order(a.check, b.check) || order(a.face ?? '', b.face ?? ''))
}

/** Checks that are answered once for the line, their slots that are shown, and elements that are held since one has no answer yet. */
export interface OnceForTheLine { checks: ReadonlySet<string>, shown: ReadonlySet<string>, holds: ReadonlySet<string> }

const slotName = ({ element, check, face }: Slot) => `${element} ${check.id} ${face}`

/**
 * What is answered once for the line is shown where somebody spoke of it (also in the round before), else on the first element that calls for it (the first that was not set aside
 * whole). While it has no answer, it holds every element that calls for it.
 */
function onceForTheLine(slots: WalkSlots, outcomes: readonly CheckOutcome[]): OnceForTheLine {
  const byCheck = new Map<string, { slot: Slot, outcome: CheckOutcome }[]>()
  for (const [at, slot] of slots.all.entries()) {
    if (!slot.line) continue
    const asked = byCheck.get(slot.check.id)
    if (asked) asked.push({ slot, outcome: outcomes[at]! })
    else byCheck.set(slot.check.id, [{ slot, outcome: outcomes[at]! }])
  }
  const shown = new Set<string>()
  const holds = new Set<string>()
  for (const asked of byCheck.values()) {
    const spoken = asked.filter(({ slot, outcome }) => slot.spoken || (outcome.setAside !== null && slot.asides.length === 0) || outcome.heads.length > 0 || outcome.earlier.length > 0 || outcome.readAgain || outcome.settled || outcome.verdict === 'doesNotConform')
    const standing = spoken.length > 0 ? spoken : [asked.find(({ outcome }) => outcome.setAside === null) ?? asked[0]!]
    for (const { slot } of standing) shown.add(slotName(slot))
    if (!standing.every(({ outcome }) => isAnswered(outcome))) for (const { slot } of asked) holds.add(slot.element)
  }
  return { checks: new Set(byCheck.keys()), shown, holds }
}

function elementOutcome(element: string, checks: readonly CheckOutcome[], open: readonly DeficiencyOutcome[], unplanned: boolean, held: boolean): ElementOutcome {
  const outOfUse = open.some(one => one.class === 'outOfUse')
  const looked = checks.length === 0 || checks.some(check => check.verdict !== 'notInspected' || check.setAside?.why === 'outOfScope')
  return {
    element,
    verdict: elementVerdict(checks, unplanned),
    settled: open.length === 0 && checks.some(check => check.settled),
    released: !unplanned && !held && looked && open.every(one => one.class === 'ownerMayAccept') && checks.every(isAnswered),
    outOfUse,
    tasks: checks.length,
    answered: checks.filter(check => check.verdict !== 'notRead' && !check.readAgain).length,
  }
}

/**
 * The worst of its checks. What is recorded with no limit set speaks neither for nor against an element that has anything else to say:
 * a number that nobody enforces would otherwise hide that all which is enforced conforms.
 */
function elementVerdict(checks: readonly CheckOutcome[], unplanned: boolean): Verdict {
  const judged = checks.filter(check => check.verdict !== 'noLimit').reduce<Verdict>((sum, check) => worse(sum, check.verdict), unplanned ? 'notRead' : 'notApplicable')
  return judged === 'notApplicable' && checks.some(check => check.verdict === 'noLimit') ? 'noLimit' : judged
}

/** Read, or set aside for a reason that is not merely "not yet"; nothing to be measured or looked at again. */
function isAnswered(check: CheckOutcome): boolean {
  return !check.readAgain && check.verdict !== 'notRead' && check.verdict !== 'withinError' && check.verdict !== 'groundNotFinished'
    && !(check.verdict === 'notInspected' && check.setAside?.why === 'notYet')
}

function order<T extends string | number>(a: T, b: T): number {
  return a < b ? -1 : a > b ? 1 : 0
}
