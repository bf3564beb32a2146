import { DEFICIENCY_CLASSES } from '../checklist/check'
import type { Check } from '../checklist/check'
import { combineLimits } from '../limit/combineLimits'
import type { CombinedLimits } from '../limit/combineLimits'
import { BASIS_KINDS } from '../limit/limit'
import type { Limit, Unit } from '../limit/limit'
import { elementsOf } from '../line/line'
import type { Face } from '../line/line'
import type { Length } from '../measure/length'
import type { RoundBasis, WalkTask } from '../round/basis'
import { datumOverDatum } from './datumOverDatum'
import type { DatumOverDatum } from './datumOverDatum'
import { leafOverGround } from './leafOverGround'
import type { LeafOverGround } from './leafOverGround'

/** Where a measurand is held against the same limits: the elements in walking order. */
export interface TogetherPlace { element: string, face: Face | null }

/** All limits in force on one measurand at places that are alike, brought together. */
export interface Together {
  measurand: string
  unit: Unit
  places: TogetherPlace[]
  /** Ids of the checks that take it there, in the order of the checklists. */
  checks: string[]
  /** The gravest class among them: how much hangs on it. */
  class: Check['class']
  /** `unset`: no limit at all. `hangs`: some value meets all limits only for some of the gaps that may lie between two datums. */
  state: 'clash' | 'hangs' | 'window' | 'unset'
  /** Keys of the limits in force. */
  limits: string[]
  /** What the limits of each datum leave, and who binds each end. */
  byDatum: CombinedLimits[]
  /** Limits from two datums together; null where there is one, or nothing says how they lie to each other. */
  joined: (DatumOverDatum & { /** Keys of the limits that say how far the datums lie apart. */ gapBy: string[] }) | null
  /** Datums that stay apart, since nothing says how they lie to each other: each window holds on its own. */
  apart: string[]
  /** Limits that bind no end here: another asks more, by its key. */
  weaker: string[]
  /** Limits that would have held here, and why another stands in their place. */
  setAside: NonNullable<RoundBasis['setAside']>
  /** Local numbers that wanted to take the place of a limit which only an authority may loosen. */
  notLoosened: { provision: string, limit: string }[]
}

/** A gate whose closed gap and swing cannot both be met, or which leave only a part of what the gap alone would. */
export interface LeafTogether extends LeafOverGround {
  element: string
  /** Keys: what limits the closed gap, and what is asked through the swing (none: it must swing free). */
  closedBy: string[]
  swingBy: string[]
  margin: Length
}

/** Everything that holds together on a walk list, worst first: clashes, then what hangs on a gap, then windows, then what nobody has set. */
export interface LimitsTogether {
  measurands: Together[]
  leaves: LeafTogether[]
}

type Held = Pick<RoundBasis, 'line' | 'checks' | 'limits' | 'tasks'> & Partial<Pick<RoundBasis, 'setAside' | 'provisions'>>

/** Datums of one measurand whose distance another measurand is: the bottom of the leaf lies over the ground by the gap under it, which is no less than the swing asks for. */
const STACKED = { upper: 'bottom-of-leaf', lower: 'ground', gap: 'gap-below', atLeast: 'swing-clearance' } as const
const STATES = ['clash', 'hangs', 'window', 'unset'] as const

/**
 * Local numbers of a weaker kind that wanted to replace a limit which only an authority may loosen, among limits that hold together: both stand
 * (limitsInForce.ts tells it while it works; a pinned basis and a record no longer carry it, so it is told from what stands: where it could loosen, the other is gone).
 */
export function notLoosenedAmong(limits: readonly Limit[], provisions: NonNullable<RoundBasis['provisions']>): { provision: string, limit: string }[] {
  const rank = ({ basis }: Limit) => BASIS_KINDS.indexOf(basis.kind)
  const wanting = limits.filter(limit => limit.basis.kind !== 'authority' && provisions.some(one => one.id === limit.id && one.effect === 'replace'))
  return wanting.flatMap(by => limits.filter(limit => rank(limit) < rank(by)).map(limit => ({ provision: by.id, limit: limit.id })))
}

/**
 * The window that meets all limits in force, for each measurand and place of a walk list, and who sets each end; or the clash (arithmetic.md 8). Places with the same limits are told once.
 * Pure and exact; nothing is picked silently: what does not bind, was set aside or could not be brought together is told.
 *
 * @throws {LimitRefused} as {@link combineLimits}; GateRefusal for a gate that cannot be
 */
export function limitsTogether({ line, checks, limits, tasks, setAside = [], provisions = [] }: Held): LimitsTogether {
  const { system } = line
  const checkById = new Map(checks.map(check => [check.id, check]))
  const order = new Map(checks.map((check, at) => [check.id, at]))
  const measured = tasks.filter((task) => {
    const check = checkById.get(task.check)
    // A gauge that stands for no figure leaves nothing to set.
    return check?.measurand !== undefined && check.unit !== undefined && !(check.method === 'template' && task.limits.length === 0)
  })
  const byElement = new Map<string, Map<string, WalkTask[]>>()
  for (const task of measured) {
    const onElement = byElement.get(task.element) ?? new Map<string, WalkTask[]>()
    byElement.set(task.element, onElement)
    const { measurand } = checkById.get(task.check)!
    onElement.set(measurand!, [...onElement.get(measurand!) ?? [], task])
  }

  const keysOf = (list: readonly WalkTask[] = []) => [...new Set(list.flatMap(task => task.limits))].sort()
  const groups = new Map<string, { places: TogetherPlace[], checks: Set<string>, keys: string[], gapKeys: string[], swingKeys: string[] }>()
  for (const [element, onElement] of byElement) {
    for (const [measurand, on] of onElement) {
      const faces = [...new Set(on.flatMap(task => task.face ?? []))]
      for (const face of faces.length > 0 ? faces : [null]) {
        const here = on.filter(task => task.face === null || task.face === face)
        const keys = keysOf(here)
        const stacked = [STACKED.upper, STACKED.lower].every(datum => keys.some(key => limits[key]!.datum === datum))
        const [gapKeys, swingKeys] = stacked ? [keysOf(onElement.get(STACKED.gap)), keysOf(onElement.get(STACKED.atLeast))] : [[], []]
        const id = JSON.stringify([measurand, keys, gapKeys, swingKeys])
        const group = groups.get(id) ?? { places: [], checks: new Set(), keys, gapKeys, swingKeys }
        group.places.push({ element, face })
        for (const task of here) group.checks.add(task.check)
        groups.set(id, group)
      }
    }
  }

  const pick = (keys: readonly string[]) => keys.map(key => limits[key]!)
  const measurands = [...groups.values()].map(({ places, checks: ids, keys, gapKeys, swingKeys }): Together => {
    const taking = [...ids].sort((one, other) => order.get(one)! - order.get(other)!).map(id => checkById.get(id)!)
    const { measurand, unit } = taking[0]!
    const datums = [...new Set(pick(keys).map(limit => limit.datum))]
    const byDatum = datums.map(datum => combineLimits(pick(keys).filter(limit => limit.datum === datum), { datum, system }))
    const stacked = unit === 'length' && datums.includes(STACKED.upper) && datums.includes(STACKED.lower)
    const joined = stacked && byDatum.every(one => one.clashes.length === 0)
      ? { ...datumOverDatum(pick(keys).filter(limit => limit.datum === STACKED.upper || limit.datum === STACKED.lower), STACKED.upper, STACKED.lower, gapOf(pick(gapKeys), pick(swingKeys), system), system), gapBy: [...gapKeys, ...swingKeys] }
      : null
    const binding = new Set(byDatum.flatMap(one => [...one.windows.flatMap(window => [...window.low?.limits ?? [], ...window.high?.limits ?? []]), ...clashing(one.clashes)]))
    return {
      measurand: measurand!, unit: unit!, places, checks: taking.map(check => check.id),
      class: DEFICIENCY_CLASSES.find(weight => taking.some(check => check.class === weight))!,
      state: keys.length === 0 ? 'unset' : byDatum.some(one => one.clashes.length > 0) || joined?.works === null ? 'clash' : joined && !joined.always ? 'hangs' : 'window',
      limits: keys, byDatum, joined,
      apart: datums.length > 1 && !stacked ? datums : datums.length > 2 ? datums.filter(datum => datum !== STACKED.upper && datum !== STACKED.lower) : [],
      weaker: keys.filter(key => !binding.has(key)),
      setAside: setAside.filter(one => one.limit.measurand === measurand && keys.includes(one.by)),
      notLoosened: notLoosenedAmong(pick(keys), provisions),
    }
  })
  measurands.sort((one, other) => STATES.indexOf(one.state) - STATES.indexOf(other.state)
    || DEFICIENCY_CLASSES.indexOf(one.class) - DEFICIENCY_CLASSES.indexOf(other.class) || order.get(one.checks[0]!)! - order.get(other.checks[0]!)!)

  const leaves = elementsOf(line).filter(element => element.gate).flatMap((element): LeafTogether[] => {
    const onElement = byElement.get(element.id)
    const [closedBy, swingBy] = [keysOf(onElement?.get(STACKED.gap)), keysOf(onElement?.get(STACKED.atLeast))]
    const { from: margin } = gapOf([], pick(swingBy), system)
    const { to } = gapOf(pick(closedBy), [], system)
    return to === null ? [] : leafOverGround(element, margin, to).filter(leaf => leaf.range.window === null || leaf.range.low > 0 || leaf.range.high < to)
      .map(leaf => ({ ...leaf, element: element.id, closedBy, swingBy, margin }))
  })
  return { measurands, leaves }
}

/** How far the leaf may hang over the ground: no less than is asked through the swing, no more than the closed gap may be. Limits that clash among themselves say nothing. */
function gapOf(closed: readonly Limit[], swing: readonly Limit[], system: RoundBasis['line']['system']): { from: Length, to: Length | null } {
  const windows = (held: readonly Limit[]) => held.length === 0 ? [] : combineLimits(held, { datum: held[0]!.datum, system }).windows
  const [gaps, asked] = [windows(closed), windows(swing)]
  const from = Math.max(0, gaps[0]?.low?.amount ?? 0, asked[0]?.low?.amount ?? 0)
  const to = gaps.at(-1)?.high?.amount ?? null
  // Where the swing asks for more than the closed gap allows there is no such leaf; that is told of the leaf, and here the closed gap is let go.
  return to !== null && to < from ? { from, to: null } : { from, to }
}

const clashing = (clashes: CombinedLimits['clashes']) => clashes.flatMap(clash => clash.kind === 'apart' ? [clash.low, clash.high] : [...clash.limits, ...clash.bands])
