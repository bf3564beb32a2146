import type { FigureKey } from './boundDistance'
import type { JudgedReading } from './judge'
import type { Bound, Limit } from './limit'
import { boundDistance, figureKey } from './boundDistance'
import { judge } from './judge'
import { LimitRefused } from './limitRefused'

// Math.exp differs between engines in the last digits (contracts.md 4): this probability is shown, never recomputed to be compared, and in no digest.

/**
 * How probable it is that the value itself meets one limit, given a normal distribution round the reading with u = U/2: Phi((H - y)/u) - Phi((L - y)/u), less what lies in a
 * band to stay out of. From 0 to 1, good to about 14 digits. An office view, off by default, never in a PDF: it knows the error of the tape, not the uneven ground.
 *
 * @throws {LimitRefused} uncertainty when the reading has none; as {@link judge} otherwise
 * Source: JCGM 106:2012, 7.2 and 7.4.
 */
export function conformanceProbability(reading: JudgedReading & { uncertainty: number }, limit: Limit): number {
  if (!(reading.uncertainty >= 0)) throw new LimitRefused('uncertainty')
  const simple = judge(reading, limit)
  if (reading.uncertainty === 0) return simple.verdict === 'doesNotConform' ? 0 : 1
  const above = (bound: Bound | undefined | null, otherwise: number) => bound ? -distance(reading, limit, bound) / (reading.uncertainty / 2) : otherwise
  const low = above(limit.low, -Infinity)
  const high = above(limit.high, Infinity)
  const within = normalMass(low, high)
  if (!limit.avoid) return within
  return within - normalMass(Math.max(low, above(limit.avoid.low, 0)), Math.min(high, above(limit.avoid.high, 0)))
}

/** How far the reading lies above a bound. */
function distance({ amount, system }: JudgedReading, { unit, id }: Limit, bound: Bound): number {
  const key: FigureKey = figureKey(bound, unit, system, id)
  return boundDistance(amount, bound, key, 'above', unit, system, true)
}

/** The share of a standard normal distribution between two values; 0 when they cross. */
export function normalMass(from: number, to: number): number {
  if (!(from < to)) return 0
  // From the nearer tail, so that a small share does not drown in 1 - 1.
  return from > 0 ? normalTail(from) - normalTail(to) : to < 0 ? normalTail(-to) - normalTail(-from) : 1 - normalTail(to) - normalTail(-from)
}

/** The share of a standard normal distribution above `z` >= 0. Series and continued fraction as Abramowitz and Stegun 26.2.11 and 26.2.14. */
function normalTail(z: number): number {
  if (z > 39) return 0
  const density = Math.exp(-z * z / 2) / Math.sqrt(2 * Math.PI)
  if (z < 3) {
    let term = z
    let sum = z
    for (let odd = 3; term > 1e-17; odd += 2) {
      term *= z * z / odd
      sum += term
    }
    return 0.5 - density * sum
  }
  let fraction = z
  for (let step = 200; step > 0; step--) fraction = z + step / fraction
  return density / fraction
}
