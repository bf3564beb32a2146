import { checkWhole, LARGEST_LOT } from './samplingRefused'

/** A lot (say all ties of a run), and what is asked of it; shares in parts of 10,000. */
export interface ZeroAcceptance {
  lot: number
  /** Share of bad ones that may remain undiscovered, in 1/10,000: 500 is 5 %. */
  tolerated: number
  /** How sure one wants to be that it is not exceeded when none of the sample is bad, in 1/10,000: 9500 is 95 %. */
  confidence: number
}

/**
 * How many picked at random must be tried, and none of them be bad: the smallest n with C(N - D, n) / C(N, n) <= 1 - confidence, D the first count above the tolerated share. Exact
 * integers. Only random picks carry the confidence ({@link pickRandom}). For tightness, turns and spacing; edges, ends, protrusions and entrapment are never sampled.
 *
 * @throws {SamplingRefused} lot, tolerated, confidence
 * Source: arithmetic.md 3.
 */
export function zeroAcceptanceSample({ lot, tolerated, confidence }: ZeroAcceptance): number {
  checkWhole(lot, 1, LARGEST_LOT, 'lot')
  checkWhole(tolerated, 0, 9999, 'tolerated')
  checkWhole(confidence, 1, 9999, 'confidence')
  const bad = Math.floor(lot * tolerated / 10_000) + 1
  let [low, high] = [1, lot - bad + 1] // with all the good ones and one more in the sample, a bad one is in it
  while (low < high) {
    const sample = Math.floor((low + high) / 2)
    if (goesUnseen(lot, bad, sample, 10_000 - confidence)) high = sample
    else low = sample + 1
  }
  return low
}

/** Whether C(lot - bad, sample) / C(lot, sample), the chance to see none, is at most `share` / 10,000. The shorter of two equal products: C(N-D, n)/C(N, n) = C(N-n, D)/C(N, D). */
function goesUnseen(lot: number, bad: number, sample: number, share: number): boolean {
  const [picks, left] = sample < bad ? [sample, bad] : [bad, sample]
  let [over, under] = [1n, 1n]
  for (let pick = 0; pick < picks; pick++) {
    over *= BigInt(Math.max(0, lot - left - pick))
    under *= BigInt(lot - pick)
  }
  return over * 10_000n <= under * BigInt(share)
}
