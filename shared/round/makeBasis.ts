import type { Check, Checklist } from '../checklist/check'
import { elementsOf } from '../line/line'
import type { Line, LineElement } from '../line/line'
import { possibleLimits } from '../provision/limitsInForce'
import type { Provision } from '../provision/provision'
import { RULES_VERSION } from './basis'
import type { RoundBasis } from './basis'
import { limitBasket, walkList } from './walkList'
import type { WalkList } from './walkList'

/** Checklists that cannot be walked together, because they hold one check in two wordings. */
export class ChecklistsDiffer extends Error {
  readonly code = 'checklists-differ'
  constructor(readonly check: string, readonly checklists: [string, string]) {
    super(`The check "${check}" is worded differently in "${checklists[0]}" and "${checklists[1]}": publish both from the same sections, or choose one of them.`)
    this.name = 'ChecklistsDiffer'
  }
}

/** Whether two JSON values are alike, whatever the order of their keys: a checklist that was stored comes back in another order. */
function alike(one: unknown, other: unknown, except?: string): boolean {
  if (one === other) return true
  if (typeof one !== 'object' || typeof other !== 'object' || one === null || other === null || Array.isArray(one) !== Array.isArray(other)) return false
  const keys = Object.keys(one)
  return keys.length === Object.keys(other).length
    && keys.every(key => key === except || (Object.hasOwn(other, key) && alike((one as Record<string, unknown>)[key], (other as Record<string, unknown>)[key])))
}

function checksOf(checklists: readonly Checklist[]): Check[] {
  const kept = new Map<string, { check: Check, from: string }>()
  for (const { id: from, checks } of checklists) {
    for (const check of checks) {
      const earlier = kept.get(check.id)
      if (!earlier) kept.set(check.id, { check, from })
      // Sections are shared: alike but for what they disturb, since a checklist names only its own checks there.
      else if (!alike(check, earlier.check, 'disturbs')) throw new ChecklistsDiffer(check.id, [earlier.from, from])
      else if (check.disturbs.some(id => !earlier.check.disturbs.includes(id))) earlier.check = { ...earlier.check, disturbs: [...new Set([...earlier.check.disturbs, ...check.disturbs])] }
    }
  }
  return [...kept.values()].map(({ check }) => check)
}

/**
 * What a walk along this line is held against: every check of the checklists (also those that no element calls for yet, so that one added in the
 * field finds its own), the tasks in walking order, and each limit of those checks and of the local numbers once. Same input, same basis, byte for byte.
 *
 * @throws {ChecklistsDiffer} when two checklists word one check differently
 * @throws {LimitsDiffer} when two limits share an id
 */
export function makeBasis(line: Line, checklists: readonly Checklist[], provisions: readonly Provision[]): RoundBasis {
  const checks = checksOf(checklists)
  // Through JSON once: rows bring members that are there and undefined, which have no canonical form.
  const pinned = (JSON.parse(JSON.stringify(provisions)) as Provision[]).sort((one, other) => one.id < other.id ? -1 : one.id > other.id ? 1 : 0)
  const { limits, keep } = limitBasket()
  // Also those that no element calls for yet: the fold of an element added in the field finds its keys here.
  possibleLimits(checks, pinned).forEach(keep)
  const { tasks, setAside } = walkList(elementsOf(line), checks, pinned, line.system)
  return {
    rules: RULES_VERSION,
    line,
    checklists: checklists.map(({ id, version }) => ({ id, version })),
    checks,
    limits,
    tasks,
    provisions: pinned,
    setAside,
  }
}

/** The walk list of one element under a basis that is already pinned, for an element that was added, split or measured again in the field. */
export function tasksFor(basis: RoundBasis, element: LineElement): WalkList {
  return walkList([element], basis.checks, basis.provisions ?? [], basis.line.system)
}
