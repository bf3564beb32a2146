import type { Check } from '../checklist/check'
import { compileCondition, factsNamed } from '../checklist/condition'
import { factsOf } from '../checklist/facts'
import type { Facts } from '../checklist/facts'
import type { Limit } from '../limit/limit'
import { ELEMENT_KINDS, FACES } from '../line/line'
import type { Face, LineElement } from '../line/line'
import type { System } from '../measure/length'
import { facesAsking, limitsAt } from '../provision/limitsInForce'
import type { SetAside } from '../provision/limitsInForce'
import type { Provision } from '../provision/provision'
import type { WalkTask } from './basis'

/** What is to be answered on given elements, with the limits that its keys point to. */
export interface WalkList {
  tasks: WalkTask[]
  limits: Record<string, Limit>
  setAside: SetAside[]
}

/** A limit id that stands for two different limits: the checklists or local numbers cannot be used together. */
export class LimitsDiffer extends Error {
  readonly code = 'limits-differ'
  constructor(readonly limit: string) {
    super(`Two different limits are both named "${limit}": give one of them another id.`)
    this.name = 'LimitsDiffer'
  }
}

/** Limits by id, each once: `keep` answers the id, and throws {@link LimitsDiffer} where another limit has it already. */
export function limitBasket(): { limits: Record<string, Limit>, keep: (limit: Limit) => string } {
  const limits: Record<string, Limit> = {}
  const kept = new Set<Limit>()
  return {
    limits,
    keep(limit) {
      if (kept.has(limit)) return limit.id
      const earlier = limits[limit.id]
      // Two checks may hold the same limit, each its own copy; the first stands for both.
      if (earlier !== undefined && JSON.stringify(earlier) !== JSON.stringify(limit)) throw new LimitsDiffer(limit.id)
      limits[limit.id] ??= limit
      kept.add(limit)
      return limit.id
    },
  }
}

type Planned = Omit<WalkTask, 'element'>

const valueAt = (facts: Facts, path: readonly string[]): unknown => path.reduce<unknown>((value, key) => (value as Record<string, unknown>)[key], facts)

/**
 * The walk list of elements in the order given; within an element in the order of the checks, outer face before inner.
 *
 * A check is asked of an element where its kind fits and at least one face has one of the settings (none named: any) and meets the condition. Answered
 * for the `face` it is one task for each such face; otherwise one task, held against the limits of all such faces together, so that the strictest governs.
 *
 * A measure on which nobody set a limit is left out, or asked of the line as a whole, where its check says so. What is asked of the line as a whole is a task
 * of each element that calls for it, marked `line`: the fold makes one answer of them (elementOutcomes.ts).
 *
 * Elements that no condition can tell apart are worked out once. Throws {@link LimitsDiffer}; a condition that cannot be compiled throws ConditionError.
 */
export function walkList(elements: readonly LineElement[], checks: readonly Check[], provisions: readonly Provision[], system: System): WalkList {
  const conditions = [...checks.flatMap(check => [check.when, ...check.limits.map(limit => limit.when)]), ...provisions.map(provision => provision.when)]
  const paths = [...new Set(['element.kind', 'face.settings', ...conditions.flatMap(text => text === undefined ? [] : factsNamed(compileCondition(text).tree))])].map(path => path.split('.'))
  const { limits, keep } = limitBasket()
  const setAside = new Map<string, SetAside>()
  const provisionsOn = new Map<string, Provision[]>()
  for (const provision of provisions) provisionsOn.set(provision.measurand, [...provisionsOn.get(provision.measurand) ?? [], provision])

  const checksOf = new Map(ELEMENT_KINDS.map(kind => [kind, checks.filter(check => check.elements.includes(kind))]))
  const plan = (both: Facts[], kind: LineElement['kind']): Planned[] => checksOf.get(kind)!.flatMap((check) => {
    const asking = facesAsking(check, both)
    if (asking.length === 0) return []
    const places: { face: Face | null, of: Facts[] }[] = check.answeredFor === 'face'
      ? asking.map(facts => ({ face: facts.face.name as Face, of: [facts] }))
      : [{ face: null, of: asking }]
    return places.flatMap(({ face, of }) => {
      const force = limitsAt(check, of, provisionsOn.get(check.measurand ?? '') ?? [])
      for (const one of force.setAside) setAside.set(`${one.limit.id} ${one.by}`, one)
      const unset = force.limits.length === 0 ? check.unset : undefined
      if (unset === 'leave') return []
      const line = check.asked === 'line' || unset === 'line'
      return { check: check.id, face, limits: force.limits.map(keep), ...(line && { line }) }
    })
  })

  const planned = new Map<string, Planned[]>()
  const tasks: WalkTask[] = []
  for (const element of elements) {
    const faces = factsOf(element, system)
    const key = FACES.map(face => paths.map(path => String(valueAt(faces[face], path))).join('|')).join('/')
    const plans = planned.get(key) ?? plan(FACES.map(face => faces[face]), element.kind)
    planned.set(key, plans)
    for (const one of plans) tasks.push({ element: element.id, ...one })
  }
  return { tasks, limits, setAside: [...setAside.entries()].sort(([one], [other]) => one < other ? -1 : 1).map(([, value]) => value) }
}
