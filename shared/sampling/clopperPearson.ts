import { checkWhole, LARGEST_LOT } from './samplingRefused'

// Math.log and Math.exp differ between engines in the last digits (contracts.md 4): these limits are shown, never recomputed to be compared, and in no digest.

/**
 * Limits of the share of bad ones after `bad` of `sample` were bad, by Clopper and Pearson: from 0 to 1, good to about 10 digits. `both` leaves half of the remaining risk at each end; `upper` leaves all
 * of it above, and the low limit is 0. An office view, off by default, never in a PDF.
 *
 * @param tried - `confidence` in 1/10,000: 9500 is 95 %
 * @throws {SamplingRefused} sample, bad, confidence
 * Source: Clopper, C. J., and Pearson, E. S., Biometrika 26 (1934), 404 to 413.
 */
export function clopperPearson({ sample, bad, confidence, sides }: { sample: number, bad: number, confidence: number, sides: 'both' | 'upper' }): { low: number, high: number } {
  checkWhole(sample, 1, LARGEST_LOT, 'sample')
  checkWhole(bad, 0, sample, 'bad')
  checkWhole(confidence, 1, 9999, 'confidence')
  const risk = (10_000 - confidence) / (sides === 'both' ? 20_000 : 10_000)
  return {
    // At the high limit so few are just as rare as the risk; at the low one so many are, which is so few good ones.
    high: bad === sample ? 1 : shareAt(bad, sample, risk),
    low: sides === 'upper' || bad === 0 ? 0 : 1 - shareAt(sample - bad, sample, risk),
  }
}

/** The share at which at most `few` of `sample` turn up with probability `risk`: by halving, since that probability falls as the share grows. */
function shareAt(few: number, sample: number, risk: number): number {
  let [low, high] = [0, 1]
  for (let step = 0; step < 60; step++) {
    const share = (low + high) / 2
    if (atMost(few, sample, share) > risk) low = share
    else high = share
  }
  return (low + high) / 2
}

/** P(X <= few) for a binomial count, summed downward from its largest term, in logarithms so that large samples do not underflow. */
function atMost(few: number, sample: number, share: number): number {
  const odds = share / (1 - share)
  const top = Math.min(few, Math.floor((sample + 1) * share))
  const side = (from: number, to: number, ratio: (count: number) => number) => {
    let [term, sum] = [1, 0]
    for (let count = from; count !== to && term > 1e-18; count += Math.sign(to - from)) {
      term *= ratio(count)
      sum += term
    }
    return sum
  }
  const below = side(top, 0, count => count / (sample - count + 1) / odds)
  const above = side(top, few, count => (sample - count) / (count + 1) * odds)
  return Math.exp(logBinomial(sample, top) + top * Math.log(share) + (sample - top) * Math.log1p(-share)) * (1 + below + above)
}

function logBinomial(n: number, k: number): number {
  let sum = 0
  for (let step = 1; step <= Math.min(k, n - k); step++) sum += Math.log((n - step + 1) / step)
  return sum
}
