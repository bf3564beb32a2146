/** One end of a window, with the keys of all limits that set it. */
export interface WindowEnd {
  amount: number
  /** Whether the value itself conforms. */
  inclusive: boolean
  limits: string[]
}

/** A stretch of values that conform; null is open. */
export interface Window { low: WindowEnd | null, high: WindowEnd | null }

/** A band to stay out of: the end of what conforms below it, and the start of what conforms above it. `whole`: only whole numbers are values (counts). */
export interface Band { limit: string, below: WindowEnd, above: WindowEnd, whole: boolean }

/** Whether no value lies in a window. */
export function isEmpty({ low, high }: Window): boolean {
  if (!low || !high) return false
  return low.amount > high.amount || (low.amount === high.amount && !(low.inclusive && high.inclusive))
}

/** The stricter of two ends on one side. */
export function stricter(first: WindowEnd | null, second: WindowEnd, side: 'low' | 'high'): WindowEnd {
  if (!first) return second
  if (first.amount !== second.amount) return (first.amount > second.amount) === (side === 'low') ? first : second
  return first.inclusive ? second : first
}

/** An end with the keys of all that would set it alone, in their own order. */
export function withBinders(end: WindowEnd | null, candidates: readonly WindowEnd[]): WindowEnd | null {
  return end && { ...end, limits: [...new Set(candidates.filter(one => one.amount === end.amount && one.inclusive === end.inclusive).flatMap(one => one.limits))] }
}

/** Whether a band takes anything out of a window. */
export function cutsInto({ below, above, whole }: Band, { low, high }: Window): boolean {
  const inside: Window = whole
    ? { low: { ...below, amount: below.amount + 1 }, high: { ...above, amount: above.amount - 1 } }
    : { low: { ...below, inclusive: !below.inclusive }, high: { ...above, inclusive: !above.inclusive } }
  return !isEmpty({ low: stricter(low, inside.low!, 'low'), high: stricter(high, inside.high!, 'high') })
}

/** What bands leave of a window, lowest first. */
export function withoutBands(window: Window, bands: readonly Band[]): Window[] {
  let left = [window].filter(one => !isEmpty(one))
  for (const band of bands) {
    left = left.flatMap(one => cutsInto(band, one)
      ? [{ low: one.low, high: stricter(one.high, band.below, 'high') }, { low: stricter(one.low, band.above, 'low'), high: one.high }].filter(piece => !isEmpty(piece))
      : [one])
  }
  return left
}
