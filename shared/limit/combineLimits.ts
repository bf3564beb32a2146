import type { Length, System } from '../measure/length'
import type { PrintedEnd } from './commonFigures'
import type { LimitsGiven } from './heldLimits'
import type { Unit } from './limit'
import type { Band, WindowEnd, Window } from './window'
import { figureKey } from './boundDistance'
import { commonFigures } from './commonFigures'
import { heldLimits } from './heldLimits'
import { LimitRefused } from './limitRefused'
import { cutsInto, isEmpty, stricter, withBinders, withoutBands } from './window'

export interface CombineOptions {
  /** The datum that everything is brought to. */
  datum: string
  /** How far above that datum each other datum lies (the gap under the leaf, for the bottom of the leaf above the ground); negative below it. In the unit of the limits. */
  offsets?: Readonly<Record<string, number>>
  /** In which system to combine lengths and forces: the job's. */
  system?: System
  /** Which of a record of limits to combine; all when not given. */
  keys?: readonly string[]
}

/** Why no value meets all limits: two ends that lie apart (`by` how much; 0 when they touch at a value that one of them excludes), or bands that leave nothing of the window. */
export type Clash =
  | { kind: 'apart', low: string, high: string, by: number }
  | { kind: 'band', limits: string[], bands: string[] }

/** Limits whose sources print the same figure in one system and differ only by the other's rounding: the common figure decides. */
export interface SameNominal {
  common: { amount: Length, system: System }
  /** What each limit prints in the other system, or null where its source prints nothing there. */
  printed: { limit: string, figure: Length | null }[]
}

export interface CombinedLimits {
  measurand: string
  datum: string
  unit: Unit
  system: System | null
  /** What meets every limit, lowest first, each end with the keys of all limits that bind it; empty when they clash. */
  windows: Window[]
  clashes: Clash[]
  sameNominal: SameNominal[]
  /** Limits that could not be taken in; never silently: the windows hold without them only. */
  leftOut: { limit: string, why: 'datumUnknown' | 'otherSystemOnly' }[]
}

/** One end of one limit, with the figure that decides; bands have two. */
interface End extends PrintedEnd { amount: number }
interface Taken { limit: string, shift: number, low: End | null, high: End | null, avoid: { low: End, high: End } | null }

/**
 * What several limits on one measurand leave open together, who binds each end, and where they clash (arithmetic.md 8). Exact; the order in which limits are given changes nothing
 * but the order of lists.
 *
 * @throws {LimitRefused} noLimits, unitsDiffer, measurandsDiffer, unknownLimit, noSystem, noFigure, notWhole (an offset), badBand
 */
export function combineLimits(given: LimitsGiven, { datum, offsets = {}, system, keys: named }: CombineOptions): CombinedLimits {
  const { keys, limits } = heldLimits(given, named)
  const [first] = limits
  if (!first) throw new LimitRefused('noLimits')
  const { unit, measurand } = first
  const leftOut: CombinedLimits['leftOut'] = []
  const taken: Taken[] = []
  for (const [at, limit] of limits.entries()) {
    const key = keys[at]!
    const shift = limit.datum === datum ? 0 : Object.hasOwn(offsets, limit.datum) ? offsets[limit.datum] : undefined
    const ends = [limit.low, limit.high, limit.avoid?.low, limit.avoid?.high].map((bound): End | null =>
      bound ? { limit: key, bound, datum: limit.datum, amount: bound[figureKey(bound, unit, system, key)]! } : null)
    const [low, high, avoidLow, avoidHigh] = ends as [End | null, End | null, End | null, End | null]
    if (avoidLow && avoidHigh && avoidLow.amount > avoidHigh.amount) throw new LimitRefused('badBand', key)
    if (shift !== undefined && !Number.isSafeInteger(shift)) throw new LimitRefused('notWhole', key)
    if (shift === undefined) leftOut.push({ limit: key, why: 'datumUnknown' })
    // Newtons and pounds-force share no whole unit, so a force is not converted here.
    else if (unit === 'force' && ends.some(end => end && end.bound[system!] === undefined)) leftOut.push({ limit: key, why: 'otherSystemOnly' })
    else taken.push({ limit: key, shift, low, high, avoid: avoidLow && avoidHigh && { low: avoidLow, high: avoidHigh } })
  }
  const sameNominal = unit === 'length' && system ? settleCommonFigures(taken.flatMap(({ low, high, avoid }) => [low, high, avoid?.low, avoid?.high].filter(end => end != null)), system) : []

  const lows = taken.flatMap(({ low, shift }) => low ? [windowEnd(low, shift, low.bound.inclusive, unit, 1)] : [])
  const highs = taken.flatMap(({ high, shift }) => high ? [windowEnd(high, shift, high.bound.inclusive, unit, -1)] : [])
  const bands = taken.flatMap(({ limit, avoid, shift }): Band[] => avoid
    ? [{ limit, below: windowEnd(avoid.low, shift, !avoid.low.bound.inclusive, unit, -1), above: windowEnd(avoid.high, shift, !avoid.high.bound.inclusive, unit, 1), whole: unit === 'count' }]
    : []).filter(band => cutsInto(band, { low: null, high: null }))
  const window: Window = {
    low: lows.reduce<WindowEnd | null>((strictest, end) => stricter(strictest, end, 'low'), null),
    high: highs.reduce<WindowEnd | null>((strictest, end) => stricter(strictest, end, 'high'), null),
  }
  const clashes = lows.flatMap(low => highs.filter(high => isEmpty({ low, high }))
    .map((high): Clash => ({ kind: 'apart', low: low.limits[0]!, high: high.limits[0]!, by: low.amount - high.amount })))
  const bound = ({ low, high }: Window): Window => ({ low: withBinders(low, [...lows, ...bands.map(band => band.above)]), high: withBinders(high, [...highs, ...bands.map(band => band.below)]) })
  const windows = withoutBands(window, bands).map(bound)
  if (windows.length === 0 && clashes.length === 0) {
    const { low, high } = bound(window)
    clashes.push({ kind: 'band', limits: [...new Set([...low?.limits ?? [], ...high?.limits ?? []])], bands: bands.filter(band => cutsInto(band, window)).map(band => band.limit) })
  }
  return { measurand, datum, unit, system: unit === 'length' || unit === 'force' ? system ?? null : null, windows, clashes, sameNominal, leftOut }
}

function windowEnd({ limit, amount }: End, shift: number, conforms: boolean, unit: Unit, inward: 1 | -1): WindowEnd {
  // Between two whole counts there is nothing, so what a count is not allowed to reach begins one farther.
  return unit === 'count' && !conforms ? { amount: amount + shift + inward, inclusive: true, limits: [limit] } : { amount: amount + shift, inclusive: conforms, limits: [limit] }
}

/** Lets common figures decide (in place), and tells of them. */
function settleCommonFigures(ends: readonly End[], system: System): SameNominal[] {
  const other: System = system === 'imperial' ? 'metric' : 'imperial'
  const ownDiffers = commonFigures(ends, system)
  for (const group of ownDiffers) for (const end of group.ends) end.amount = group.common
  return [[ownDiffers, other, system] as const, [commonFigures(ends, other), system, other] as const].flatMap(([groups, shared, differing]) => groups.map(group =>
    ({ common: { amount: group.common, system: shared }, printed: group.ends.map(({ limit, bound }) => ({ limit, figure: bound[differing] ?? null })) })))
}
