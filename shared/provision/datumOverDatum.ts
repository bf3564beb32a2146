import type { Clash } from '../limit/combineLimits'
import type { Limit } from '../limit/limit'
import type { Length, System } from '../measure/length'
import { figureKey } from '../limit/boundDistance'
import { combineLimits } from '../limit/combineLimits'

/** How far an upper datum may lie over a lower one; `to` null is open. */
export interface Stretch { from: Length, to: Length | null }

/** What limits from two datums leave together, whatever lies between the datums. */
export interface DatumOverDatum {
  upper: string
  lower: string
  /** How far the upper one may lie over the lower. */
  gap: Stretch
  /** From the least to the greatest gap of that stretch at which some value meets all limits (bands may take out some between); null when none does. */
  works: Stretch | null
  /** True when every gap of the stretch works. */
  always: boolean
  /** What clashes: at the gap that clashes least when none works, else at the greatest of the stretch (just past what works, where it is open). Empty when all work. */
  clashes: Clash[]
  /** The gap at which those clash by so much; null where the stretch is open, since they are apart by ever more. */
  at: Length | null
}

/**
 * Limits on one measurand from an upper and a lower datum (latch release over the bottom of the leaf, and over the ground), where the upper lies over the
 * lower by a gap that is not known before somebody reads it, but is within `gap`. Exact: emptiness can only change where an end of one side meets an end of
 * the other, so those gaps and their neighbours are tried (arithmetic.md 8; checked against trying every gap).
 *
 * @throws {LimitRefused} as {@link combineLimits}
 */
export function datumOverDatum(limits: readonly Limit[], upper: string, lower: string, gap: Stretch, system: System): DatumOverDatum {
  const at = (shift: Length) => combineLimits(limits, { datum: lower, offsets: { [upper]: shift }, system })
  const figures = (datum: string) => limits.filter(limit => limit.datum === datum).flatMap(({ id, unit, low, high, avoid }) =>
    [low, high, avoid?.low, avoid?.high].flatMap(bound => bound ? [bound[figureKey(bound, unit, system, id)]!] : []))
  const meetings = figures(upper).flatMap(up => figures(lower).flatMap(down => [down - up - 1, down - up, down - up + 1]))
  // Past the last meeting nothing changes any more.
  const last = gap.to ?? Math.max(gap.from, ...meetings) + 1
  const tried = [...new Set([gap.from, ...meetings.filter(one => one > gap.from && one < last), last])].sort((one, other) => one - other)
  const working = tried.filter(shift => at(shift).windows.length > 0)
  const [first, most] = [working[0], working.at(-1)]
  const works = first === undefined || most === undefined ? null : { from: first, to: gap.to === null && most === last ? null : most }
  const always = working.length === tried.length
  if (always) return { upper, lower, gap, works, always, clashes: [], at: null }
  if (!works) {
    const least = tried.map(shift => ({ shift, clashes: at(shift).clashes })).reduce((best, next) => farthest(next.clashes) < farthest(best.clashes) ? next : best)
    return { upper, lower, gap, works, always, clashes: least.clashes, at: least.shift }
  }
  const beyond = tried.findLast(shift => !working.includes(shift))!
  return { upper, lower, gap, works, always, clashes: at(beyond).clashes, at: gap.to === null ? null : beyond }
}

/** By how much clashing limits lie apart at the most; a band that leaves nothing counts as more than any distance. */
const farthest = (clashes: readonly Clash[]) => Math.max(0, ...clashes.map(clash => clash.kind === 'apart' ? clash.by : Infinity))
