import type { System } from '../measure/length'
import type { FigureKey } from './boundDistance'
import type { Bound, Limit, Unit } from './limit'
import { figureKey } from './boundDistance'

/** A figure as its source prints it: in the asked system where there is one, with the other's beside it. */
export interface DescribedFigure {
  amount: number
  in: FigureKey
  other: { amount: number, in: System } | null
}

/** One statement of a limit, for screens and the PDF to word: "at least 54 in", "under 4 in", "over 3 1/2 and under 9 in is to stay out of". */
export type DescribedPart =
  | { kind: 'atLeast' | 'over' | 'atMost' | 'under' | 'exactly', figure: DescribedFigure }
  /** `lowIncluded`, `highIncluded`: whether the end itself conforms. */
  | { kind: 'between', low: DescribedFigure, high: DescribedFigure, lowIncluded: boolean, highIncluded: boolean }
  /** `lowIncluded`, `highIncluded`: whether the end itself is to stay out of, too. */
  | { kind: 'stayOut', low: DescribedFigure, high: DescribedFigure, lowIncluded: boolean, highIncluded: boolean }

/**
 * What a limit says, in no language. No part means that no figure is set. Amounts are in the unit of the limit.
 *
 * @param system - which system's figures to put first, for lengths and forces
 * @throws {LimitRefused} noSystem, noFigure
 */
export function describeLimit(limit: Limit, system?: System): { unit: Unit, parts: DescribedPart[] } {
  const { id, unit, low, high, avoid } = limit
  const figure = (bound: Bound): DescribedFigure => {
    const key = figureKey(bound, unit, system, id)
    const other = key === 'plain' ? null : key === 'imperial' ? 'metric' : 'imperial'
    return { amount: bound[key]!, in: key, other: other && bound[other] !== undefined ? { amount: bound[other], in: other } : null }
  }
  const parts: DescribedPart[] = []
  if (low && high) {
    const [first, last] = [figure(low), figure(high)]
    const exactly = first.amount === last.amount && first.in === last.in && low.inclusive && high.inclusive
    parts.push(exactly ? { kind: 'exactly', figure: first } : { kind: 'between', low: first, high: last, lowIncluded: low.inclusive, highIncluded: high.inclusive })
  }
  else if (low) parts.push({ kind: low.inclusive ? 'atLeast' : 'over', figure: figure(low) })
  else if (high) parts.push({ kind: high.inclusive ? 'atMost' : 'under', figure: figure(high) })
  if (avoid) parts.push({ kind: 'stayOut', low: figure(avoid.low), high: figure(avoid.high), lowIncluded: avoid.low.inclusive, highIncluded: avoid.high.inclusive })
  return { unit, parts }
}
