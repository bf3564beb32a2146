import type { Limit } from './limit'
import { LimitRefused } from './limitRefused'

/** One limit, several (known by their ids), or a record (known by its keys), as a round's basis has it. */
export type LimitsGiven = Limit | readonly Limit[] | Readonly<Record<string, Limit>>

/** Limits beside the keys by which they are known. */
export interface HeldLimits { keys: readonly string[], limits: readonly Limit[] }

/**
 * The limits that hold together: of one unit and on one measurand.
 *
 * @param named - which of a record hold; all when not given
 * @throws {LimitRefused} unknownLimit, unitsDiffer, measurandsDiffer
 */
export function heldLimits(given: LimitsGiven, named?: readonly string[]): HeldLimits {
  if (isOne(given)) return { keys: [given.id], limits: [given] }
  const several = isSeveral(given)
  const keys = several ? given.map(limit => limit.id) : named ?? Object.keys(given)
  const limits = several ? given : keys.map((key) => {
    if (!Object.hasOwn(given, key)) throw new LimitRefused('unknownLimit', key)
    return given[key]!
  })
  const first = limits[0]
  for (let at = 1; at < limits.length; at++) {
    if (limits[at]!.unit !== first!.unit) throw new LimitRefused('unitsDiffer', keys[at])
    if (limits[at]!.measurand !== first!.measurand) throw new LimitRefused('measurandsDiffer', keys[at])
  }
  return { keys, limits }
}

// A record may have a key `id`, but never a text behind it.
function isOne(given: LimitsGiven): given is Limit {
  return typeof (given as Limit).id === 'string'
}
function isSeveral(given: LimitsGiven): given is readonly Limit[] {
  return Array.isArray(given)
}
