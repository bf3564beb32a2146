import type { Length, System } from '../measure/length'
import type { Bound, Limit } from './limit'
import { INCH, MILLIMETRE } from '../measure/length'

/** An end of a limit on a length, with the key of the limit and the datum of the figure. */
export interface PrintedEnd { limit: string, bound: Bound, datum: string }

/**
 * Ends of several limits that print one common figure and differ only by its rounding in the `differing` system (54 in as 1370 and as 1372 mm): there the common figure decides
 * (arithmetic.md 1). Only what can be rounding counts as such: to 10 mm, or to half an inch; farther off, one of the figures is a slip and stands as printed.
 */
export function commonFigures<E extends PrintedEnd>(ends: readonly E[], differing: System): { common: Length, ends: E[] }[] {
  const shared: System = differing === 'imperial' ? 'metric' : 'imperial'
  const reach = differing === 'metric' ? 5 * MILLIMETRE : INCH / 4
  const groups = new Map<string, { common: Length, ends: E[] }>()
  for (const end of ends) {
    const common = end.bound[shared]
    if (common === undefined || Math.abs((end.bound[differing] ?? common) - common) > reach) continue
    const key = `${common} ${end.datum}`
    const group = groups.get(key) ?? { common, ends: [] }
    group.ends.push(end)
    groups.set(key, group)
  }
  return [...groups.values()].filter(group =>
    new Set(group.ends.map(end => end.bound[differing])).size > 1 && new Set(group.ends.map(end => end.limit)).size > 1)
}

/** Every end of a limit that has figures. */
export function boundsOf({ low, high, avoid }: Limit): Bound[] {
  return [low, high, avoid?.low, avoid?.high].filter(bound => bound !== null && bound !== undefined)
}
