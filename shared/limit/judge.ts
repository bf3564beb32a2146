import type { System } from '../measure/length'
import type { FigureKey } from './boundDistance'
import type { PrintedEnd } from './commonFigures'
import type { HeldLimits, LimitsGiven } from './heldLimits'
import type { Bound, Limit } from './limit'
import { boundDistance, figureKey } from './boundDistance'
import { boundsOf, commonFigures } from './commonFigures'
import { heldLimits } from './heldLimits'
import { LimitRefused } from './limitRefused'

/** A reading as the rules see it; a reading's value of method `measure` fits as it is. */
export interface JudgedReading {
  /** In the integer unit of the limits (shared/limit/limit.ts), at most 2^52 either way. */
  amount: number
  /** In which system it was read; needed for lengths and forces. */
  system?: System
  /** Expanded uncertainty of the instrument (k = 2) in the same unit; used by guarded acceptance alone. */
  uncertainty?: number
}

export interface JudgeOptions {
  /** `simple` (default): the limit as it stands; `guarded`: a guard band of the instrument's expanded uncertainty on both sides of it. */
  acceptance?: 'simple' | 'guarded'
  /** Which of the limits hold here, where they are given as a record. */
  keys?: readonly string[]
}

export interface Judgement {
  verdict: 'conforms' | 'doesNotConform' | 'withinError' | 'noLimit'
  /** Signed distance to the nearest limit in the unit of the reading, inside positive; 0 with `doesNotConform` is exactly on an end that does not conform. */
  margin: number | null
  /** Key of the limit that decided (its id, where limits are not given as a record). */
  limit: string | null
  /** Which part of it: its low end, its high end, or the band to stay out of. */
  end: 'low' | 'high' | 'avoid' | null
  /** Whose figure decided. */
  decidedBy: FigureKey | null
  /** True when the figures of the other system would come to another verdict (54 in is under 1372 mm). */
  otherSystemDiffers: boolean
  /** How it was judged: guarded acceptance without an uncertainty is simple acceptance. */
  acceptance: 'simple' | 'guarded'
  /** Under guarded acceptance: the limits leave a band narrower than twice the uncertainty, so that no reading with this instrument can conform. */
  neverConforms: boolean
}

const VERDICTS = ['conforms', 'withinError', 'doesNotConform'] as const

/**
 * What a reading comes to against all limits that hold for it: the worst governs, then the nearest, then the first key.
 *
 * Simple and guarded acceptance as in ILAC G8:09/2019 with guard band w = U: conforms within [L + U, H - U], does not conform outside [L - U, H + U], else within
 * measuring error. An end that itself conforms belongs to the accepting side in both; an end that does not ("over", "under") to the other.
 *
 * The figure of the reading's system decides; where several limits print one figure in the other system and differ only by its rounding in this one, that common figure does.
 *
 * @param limits - one limit, several, or a record of which `options.keys` hold (all when not given); of one unit, measurand and datum
 * @throws {LimitRefused} notWhole, tooLarge, uncertainty, noSystem, noFigure, unknownLimit, unitsDiffer, measurandsDiffer, datumsDiffer
 */
export function judge(reading: JudgedReading, limits: LimitsGiven, options: JudgeOptions = {}): Judgement {
  const { amount, system } = reading
  const uncertainty = options.acceptance === 'guarded' ? reading.uncertainty ?? 0 : 0
  checkAmount(amount)
  checkAmount(uncertainty)
  if (uncertainty < 0) throw new LimitRefused('uncertainty')
  const held = heldLimits(limits, options.keys)
  for (let at = 1; at < held.limits.length; at++) {
    if (held.limits[at]!.datum !== held.limits[0]!.datum) throw new LimitRefused('datumsDiffer', held.keys[at])
  }
  const acceptance = uncertainty > 0 ? 'guarded' : 'simple'
  const read: Read = { held, system, uncertainty, common: boundsOfCommonFigures(held, system) }
  const worst = appraise(read, amount)
  if (worst === null) return { verdict: 'noLimit', margin: null, limit: null, end: null, decidedBy: null, otherSystemDiffers: false, acceptance, neverConforms: false }
  return {
    verdict: VERDICTS[worst.rank],
    margin: worst.margin,
    limit: worst.limit,
    end: worst.end,
    decidedBy: worst.by,
    otherSystemDiffers: worst.otherRank !== worst.rank,
    acceptance,
    neverConforms: uncertainty > 0 && worst.rank > 0 && !canConform(read, amount),
  }
}

function checkAmount(amount: number): void {
  if (!Number.isSafeInteger(amount)) throw new LimitRefused('notWhole')
  // Beyond 2^52 a difference of two amounts need not be exact.
  if (Math.abs(amount) > 2 ** 52) throw new LimitRefused('tooLarge')
}

/** Index into {@link VERDICTS}. */
type Rank = 0 | 1 | 2
interface Appraisal { rank: Rank, margin: number, limit: string, end: 'low' | 'high' | 'avoid', by: FigureKey, otherRank: Rank }

/** What a reading is held against; `common`: ends that are decided by the other system's figure, since several sources print that one alike. */
interface Read { held: HeldLimits, system: System | undefined, uncertainty: number, common: ReadonlySet<Bound> | null }

function boundsOfCommonFigures({ keys, limits }: HeldLimits, system: System | undefined): ReadonlySet<Bound> | null {
  if (limits.length < 2 || limits[0]!.unit !== 'length' || system === undefined) return null
  // Two limits at least must print a figure of the other system; most rounds are in the system that all limits print.
  let printed = 0
  for (let at = 0; at < limits.length; at++) if (printsIn(limits[at]!, system === 'imperial' ? 'metric' : 'imperial')) printed++
  if (printed < 2) return null
  const ends: PrintedEnd[] = []
  for (let at = 0; at < limits.length; at++) {
    for (const bound of boundsOf(limits[at]!)) ends.push({ limit: keys[at]!, bound, datum: '' })
  }
  const groups = commonFigures(ends, system)
  return groups.length > 0 ? new Set(groups.flatMap(group => group.ends.map(end => end.bound))) : null
}

/** The part of the limits that governs; null when there is none. Plain loops and no closures: a round is judged again at every reading. */
function appraise(read: Read, amount: number): Appraisal | null {
  const { keys, limits } = read.held
  let worst: Appraisal | null = null
  let otherRank: Rank = 0
  for (let at = 0; at < keys.length; at++) {
    const key = keys[at]!
    const limit = limits[at]!
    const { low, high, avoid } = limit
    if (low) {
      const by = keyOf(read, low, limit, key)
      const inside = boundDistance(amount, low, by, 'above', limit.unit, read.system, low.inclusive)
      const rank = rankOf(inside, read.uncertainty, low.inclusive)
      worst = worse(worst, rank, inside, key, 'low', by)
      otherRank = Math.max(otherRank, isDual(low) ? rankByOther(read, amount, low, by, 'above', limit, low.inclusive) : rank) as Rank
    }
    if (high) {
      const by = keyOf(read, high, limit, key)
      const inside = boundDistance(amount, high, by, 'below', limit.unit, read.system, high.inclusive)
      const rank = rankOf(inside, read.uncertainty, high.inclusive)
      worst = worse(worst, rank, inside, key, 'high', by)
      otherRank = Math.max(otherRank, isDual(high) ? rankByOther(read, amount, high, by, 'below', limit, high.inclusive) : rank) as Rank
    }
    if (avoid) {
      // An end that is inside the band does not conform; beside the band it is enough to be clear of one end.
      const [byLow, byHigh] = [keyOf(read, avoid.low, limit, key), keyOf(read, avoid.high, limit, key)]
      const below = boundDistance(amount, avoid.low, byLow, 'below', limit.unit, read.system, !avoid.low.inclusive)
      const above = boundDistance(amount, avoid.high, byHigh, 'above', limit.unit, read.system, !avoid.high.inclusive)
      const [rankBelow, rankAbove] = [rankOf(below, read.uncertainty, !avoid.low.inclusive), rankOf(above, read.uncertainty, !avoid.high.inclusive)]
      worst = worse(worst, Math.min(rankBelow, rankAbove) as Rank, Math.max(below, above), key, 'avoid', below >= above ? byLow : byHigh)
      otherRank = Math.max(otherRank, Math.min(
        isDual(avoid.low) ? rankByOther(read, amount, avoid.low, byLow, 'below', limit, !avoid.low.inclusive) : rankBelow,
        isDual(avoid.high) ? rankByOther(read, amount, avoid.high, byHigh, 'above', limit, !avoid.high.inclusive) : rankAbove,
      )) as Rank
    }
  }
  if (worst) worst.otherRank = otherRank
  return worst
}

function keyOf({ system, common }: Read, bound: Bound, { unit }: Limit, key: string): FigureKey {
  return figureKey(bound, unit, system, key, common !== null && common.has(bound))
}

/** What the figure that did not decide would make of it. */
function rankByOther({ system, uncertainty }: Read, amount: number, bound: Bound, by: FigureKey, from: 'above' | 'below', { unit }: Limit, endConforms: boolean): Rank {
  const other = by === 'plain' ? by : by === 'imperial' ? 'metric' : 'imperial'
  return rankOf(boundDistance(amount, bound, other, from, unit, system, endConforms), uncertainty, endConforms)
}

function printsIn({ low, high, avoid }: Limit, system: System): boolean {
  return low?.[system] !== undefined || high?.[system] !== undefined || avoid?.low[system] !== undefined || avoid?.high[system] !== undefined
}

function isDual(bound: Bound): boolean {
  return bound.imperial !== undefined && bound.metric !== undefined
}

function worse(worst: Appraisal | null, rank: Rank, margin: number, limit: string, end: Appraisal['end'], by: FigureKey): Appraisal {
  const stands = worst !== null && (rank < worst.rank || (rank === worst.rank && (margin > worst.margin || (margin === worst.margin && limit >= worst.limit))))
  return stands ? worst : { rank, margin, limit, end, by, otherRank: rank }
}

function rankOf(inside: number, uncertainty: number, endConforms: boolean): Rank {
  if (endConforms) return inside >= uncertainty ? 0 : inside < -uncertainty ? 2 : 1
  return inside > uncertainty ? 0 : inside <= -uncertainty ? 2 : 1
}

/** Whether any amount conforms: if one does, then one that is only just far enough above a low end or a band does. */
function canConform(read: Read, amount: number): boolean {
  const { keys, limits } = read.held
  let bounded = false
  for (let at = 0; at < limits.length; at++) {
    const { unit, low, avoid } = limits[at]!
    bounded ||= low !== null
    for (const [bound, endConforms] of [[low, low?.inclusive], [avoid?.high, avoid && !avoid.high.inclusive]] as const) {
      if (!bound) continue
      const inside = boundDistance(amount, bound, keyOf(read, bound, limits[at]!, keys[at]!), 'above', unit, read.system, endConforms!)
      const nearest = amount - inside + read.uncertainty + (endConforms ? 0 : 1)
      if (appraise(read, nearest)!.rank === 0) return true
    }
  }
  return !bounded
}
