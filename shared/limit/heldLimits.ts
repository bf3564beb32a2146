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
  const limits: Limit[] = []
  for (let at = 0; at < keys.length; at++) {
    const limit = several ? given[at] : given[keys[at]!]
    // Also for keys that every object inherits: those lead to no limit.
    if (typeof limit?.id !== 'string') throw new LimitRefused('unknownLimit', keys[at])
    if (at > 0 && limit.unit !== limits[0]!.unit) throw new LimitRefused('unitsDiffer', keys[at])
    if (at > 0 && limit.measurand !== limits[0]!.measurand) throw new LimitRefused('measurandsDiffer', keys[at])
    limits.push(limit)
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
