import type { LineElement } from '#shared/line/line'

/**
 * A run made two at a distance from its start, in whole units: lengths and rises add up to what they were, bays are shared out by length, each part
 * has one at least. Both parts still carry the run's own id and tag: the caller gives the second its own. Throws RangeError unless 0 < at < length.
 */
export function splitRun(run: LineElement, at: number): [LineElement, LineElement] {
  if (!(at > 0 && at < run.length)) throw new RangeError('a run is split between its ends')
  const rise = Math.round(run.rise * (at / run.length))
  const bays = Math.min(Math.max(1, Math.round(run.bays * (at / run.length))), Math.max(1, run.bays - 1))
  return [{ ...run, length: at, rise, bays }, { ...run, length: run.length - at, rise: run.rise - rise, bays: Math.max(1, run.bays - bays) }]
}
