import type { Length } from '../measure/length'
import { LENGTH_UNIT } from '../measure/length'

/** A size of fence pipe: the fence trade's names in inches, the nominal pipe size (NPS) of the same outside diameter, and that diameter. */
export interface PipeSize { trade: readonly string[], nps: string, outsideDiameter: Length }

const thousandths = (count: number): Length => count * (LENGTH_UNIT.in.size / 1000)

/**
 * Pipe by the fence trade's names. A name is a label: what is measured with the caliper is the outside diameter.
 * Trade names: COMMON PRACTICE, no source (NPS 3 goes by none). Diameters: ASTM A53 table (published-limits F50 to F56).
 */
export const PIPE_SIZES: readonly PipeSize[] = [
  { trade: ['1-3/8'], nps: '1', outsideDiameter: thousandths(1315) },
  { trade: ['1-5/8'], nps: '1-1/4', outsideDiameter: thousandths(1660) },
  { trade: ['1-7/8', '2'], nps: '1-1/2', outsideDiameter: thousandths(1900) },
  { trade: ['2-3/8', '2-1/2'], nps: '2', outsideDiameter: thousandths(2375) },
  { trade: ['2-7/8', '3'], nps: '2-1/2', outsideDiameter: thousandths(2875) },
  { trade: [], nps: '3', outsideDiameter: thousandths(3500) },
  { trade: ['4'], nps: '3-1/2', outsideDiameter: thousandths(4000) },
]

/** The size that goes by a trade name such as `2-3/8`, or null. */
export function pipeByTradeName(name: string): PipeSize | null {
  return PIPE_SIZES.find(size => size.trade.includes(name)) ?? null
}

/** The sizes whose outside diameter is within `tolerance` of what the caliper says, nearest first; none is picked silently. */
export function pipesByDiameter(measured: Length, tolerance: Length): PipeSize[] {
  const off = (size: PipeSize) => Math.abs(size.outsideDiameter - measured)
  return PIPE_SIZES.filter(size => off(size) <= tolerance).sort((first, second) => off(first) - off(second))
}
