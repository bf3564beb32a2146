import { isRarer } from './hypergeometric'
import { checkWhole, LARGEST_LOT } from './samplingRefused'

/**
 * After `bad` of a random `sample` were bad: the most bad ones that the whole lot may hold at this confidence (an exact upper limit, hypergeometric), those in the sample included.
 * One bad tie within a child's reach means all the same: try every one.
 *
 * @param tried - `confidence` in 1/10,000: 9500 is 95 %
 * @throws {SamplingRefused} lot, sample, bad, confidence
 */
export function largestBadCount({ lot, sample, bad, confidence }: { lot: number, sample: number, bad: number, confidence: number }): number {
  checkWhole(lot, 1, LARGEST_LOT, 'lot')
  checkWhole(sample, 0, lot, 'sample')
  checkWhole(bad, 0, sample, 'bad')
  checkWhole(confidence, 1, 9999, 'confidence')
  // The more are bad, the rarer it is to find so few: search the last count that is not yet too rare.
  let [low, high] = [bad, lot - sample + bad]
  while (low < high) {
    const count = Math.ceil((low + high) / 2)
    if (isRarer(bad, { lot, bad: count, sample }, 10_000 - confidence)) high = count - 1
    else low = count
  }
  return low
}
