import type { System } from '../measure/length'
import type { FigureKey } from './boundDistance'
import type { HeldLimits, LimitsGiven } from './heldLimits'
import type { Bound } from './limit'
import { boundDistance, figureKey } from './boundDistance'
import { commonFigures } from './commonFigures'
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
  for (const [at, limit] of held.limits.entries()) {
    if (limit.datum !== held.limits[0]!.datum) throw new LimitRefused('datumsDiffer', held.keys[at])
  }
  const acceptance = uncertainty > 0 ? 'guarded' : 'simple'
  const read: Read = { held, system, uncertainty, common: boundsOfCommonFigures(held, system) }
  const worst = appraise(read, amount, false)
  if (worst === null) return { verdict: 'noLimit', margin: null, limit: null, end: null, decidedBy: null, otherSystemDiffers: false, acceptance, neverConforms: false }
  return {
    verdict: VERDICTS[worst.rank],
    margin: worst.margin,
    limit: worst.limit,
    end: worst.end,
    decidedBy: worst.by,
    otherSystemDiffers: worst.dual && appraise(read, amount, true)!.rank !== worst.rank,
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
interface Appraisal { rank: Rank, margin: number, limit: string, end: 'low' | 'high' | 'avoid', by: FigureKey, dual: boolean }

/** What a reading is held against; `common`: ends that are decided by the other system's figure, since several sources print that one alike. */
interface Read { held: HeldLimits, system: System | undefined, uncertainty: number, common: ReadonlySet<Bound> | null }

function boundsOfCommonFigures({ keys, limits }: HeldLimits, system: System | undefined): ReadonlySet<Bound> | null {
  if (limits.length < 2 || limits[0]!.unit !== 'length' || system === undefined) return null
  const ends = limits.flatMap(({ low, high, avoid }, at) => [low, high, avoid?.low, avoid?.high].flatMap(bound => bound ? [{ limit: keys[at]!, bound, datum: '' }] : []))
  const groups = commonFigures(ends, system)
  return groups.length > 0 ? new Set(groups.flatMap(group => group.ends.map(end => end.bound))) : null
}

/** The part of the limits that governs; null when there is none. */
function appraise({ held, system, uncertainty, common }: Read, amount: number, prefersOther: boolean): Appraisal | null {
  let worst: Appraisal | null = null
  const isCommon = (bound: Bound) => common !== null && common.has(bound)
  let dual = false
  const offer = (rank: Rank, margin: number, limit: string, end: Appraisal['end'], by: FigureKey) => {
    if (worst === null) worst = { rank, margin, limit, end, by, dual }
    else if (rank > worst.rank || (rank === worst.rank && (margin < worst.margin || (margin === worst.margin && limit < worst.limit)))) {
      worst.rank = rank
      worst.margin = margin
      worst.limit = limit
      worst.end = end
      worst.by = by
    }
  }
  for (let at = 0; at < held.keys.length; at++) {
    const key = held.keys[at]!
    const { unit, low, high, avoid } = held.limits[at]!
    if (low) {
      dual ||= low.imperial !== undefined && low.metric !== undefined
      const by = figureKey(low, unit, system, key, prefersOther !== isCommon(low))
      const inside = boundDistance(amount, low, by, 'above', unit, system, low.inclusive)
      offer(rankOf(inside, uncertainty, low.inclusive), inside, key, 'low', by)
    }
    if (high) {
      dual ||= high.imperial !== undefined && high.metric !== undefined
      const by = figureKey(high, unit, system, key, prefersOther !== isCommon(high))
      const inside = boundDistance(amount, high, by, 'below', unit, system, high.inclusive)
      offer(rankOf(inside, uncertainty, high.inclusive), inside, key, 'high', by)
    }
    if (avoid) {
      dual ||= (avoid.low.imperial !== undefined && avoid.low.metric !== undefined) || (avoid.high.imperial !== undefined && avoid.high.metric !== undefined)
      const byLow = figureKey(avoid.low, unit, system, key, prefersOther !== isCommon(avoid.low))
      const byHigh = figureKey(avoid.high, unit, system, key, prefersOther !== isCommon(avoid.high))
      // An end that is inside the band does not conform; beside the band it is enough to be clear of one end.
      const below = boundDistance(amount, avoid.low, byLow, 'below', unit, system, !avoid.low.inclusive)
      const above = boundDistance(amount, avoid.high, byHigh, 'above', unit, system, !avoid.high.inclusive)
      const rank = Math.min(rankOf(below, uncertainty, !avoid.low.inclusive), rankOf(above, uncertainty, !avoid.high.inclusive)) as Rank
      offer(rank, Math.max(below, above), key, 'avoid', below >= above ? byLow : byHigh)
    }
  }
  if (worst !== null) (worst as Appraisal).dual = dual
  return worst
}

function rankOf(inside: number, uncertainty: number, endConforms: boolean): Rank {
  if (endConforms) return inside >= uncertainty ? 0 : inside < -uncertainty ? 2 : 1
  return inside > uncertainty ? 0 : inside <= -uncertainty ? 2 : 1
}

/** Whether any amount conforms: if one does, then one that is only just far enough above a low end or a band does. */
function canConform(read: Read, amount: number): boolean {
  const { held, system, uncertainty, common } = read
  let bounded = false
  for (const [at, { unit, low, avoid }] of held.limits.entries()) {
    bounded ||= low !== null
    for (const [bound, endConforms] of [[low, low?.inclusive], [avoid?.high, avoid && !avoid.high.inclusive]] as const) {
      if (!bound) continue
      const inside = boundDistance(amount, bound, figureKey(bound, unit, system, held.keys[at]!, common?.has(bound)), 'above', unit, system, endConforms!)
      const nearest = amount - inside + uncertainty + (endConforms ? 0 : 1)
      if (appraise(read, nearest, false)!.rank === 0) return true
    }
  }
  return !bounded
}
