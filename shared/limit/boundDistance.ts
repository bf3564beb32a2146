import type { System } from '../measure/length'
import type { Bound, Unit } from './limit'
import { LimitRefused } from './limitRefused'

/** Which figure of a bound is meant: that of a system for lengths and forces, the plain one for the rest. */
export type FigureKey = System | 'plain'

/**
 * Which figure of a bound a reading in `system` is held against: its own system's, else the only one there is. `prefersOther` asks for
 * the other system's instead, where several sources print that one alike.
 *
 * @throws {LimitRefused} noFigure, noSystem
 */
export function figureKey(bound: Bound, unit: Unit, system: System | undefined, limit: string, prefersOther = false): FigureKey {
  if (unit !== 'length' && unit !== 'force') {
    if (bound.plain === undefined) throw new LimitRefused('noFigure', limit)
    return 'plain'
  }
  if (system === undefined) throw new LimitRefused('noSystem', limit)
  const other = system === 'imperial' ? 'metric' : 'imperial'
  const first = prefersOther ? other : system
  if (bound[first] !== undefined) return first
  const second = prefersOther ? system : other
  if (bound[second] !== undefined) return second
  throw new LimitRefused('noFigure', limit)
}

/**
 * How far an amount lies inside one bound, in the unit (and for forces the system) of the amount; `from` is the side of the bound that is looked to.
 * Lengths of both systems count in one unit; a force is converted exactly (1 lbf = 4.4482216152605 N, NIST SP 811, B.8). Where that leaves a fraction the result is rounded
 * so that it is at least (above, for ends that do not conform) a whole number exactly when the true distance is: verdicts stay exact.
 */
export function boundDistance(amount: number, bound: Bound, key: FigureKey, from: 'above' | 'below', unit: Unit, system: System | undefined, endConforms: boolean): number {
  const figure = bound[key]!
  if (unit !== 'force' || key === system) return from === 'above' ? amount - figure : figure - amount
  const [own, theirs] = system === 'imperial' ? [NEWTONS, POUND_FORCE] : [POUND_FORCE, NEWTONS]
  const difference = BigInt(amount) * own - BigInt(figure) * theirs
  const inside = from === 'above' ? difference : -difference
  const down = inside / own - (inside % own < 0n ? 1n : 0n)
  return Number(endConforms || inside % own === 0n ? down : down + 1n)
}

// 1 lbf : 1 N as whole numbers.
const NEWTONS = 44_482_216_152_605n
const POUND_FORCE = 10_000_000_000_000n
