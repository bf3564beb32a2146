import { checkWhole, LARGEST_LOT } from './samplingRefused'

const MODULUS = 2_147_483_647
const MULTIPLIER = 48_271

/**
 * The stated generator: x <- 48271 x mod (2^31 - 1), the minimal standard of Park and Miller with the multiplier of their 1993 revision (`minstd_rand` of ISO C++). Products stay below 2^47, so it is the
 * same everywhere. Good for drawing lots, not for secrets.
 */
export function nextRandom(state: number): number {
  return state * MULTIPLIER % MODULUS
}

/**
 * Which of `of` numbered things to try: `count` different numbers from 1, in ascending order, each choice equally likely. The same seed gives the same picks, so the record can say how they were
 * drawn. The caller takes the seed from a real source of chance, once, and keeps it.
 *
 * @throws {SamplingRefused} lot, sample, seed
 */
export function pickRandom({ of, count, seed }: { of: number, count: number, seed: number }): number[] {
  checkWhole(of, 1, LARGEST_LOT, 'lot')
  checkWhole(count, 0, of, 'sample')
  checkWhole(seed, 1, MODULUS - 1, 'seed')
  let state = seed
  // Small seeds start with small numbers; a few steps mix them.
  for (let step = 0; step < 16; step++) state = nextRandom(state)
  const below = (bound: number): number => {
    const fair = MODULUS - 1 - (MODULUS - 1) % bound
    do state = nextRandom(state)
    while (state > fair) // the rest would favour the first numbers
    return (state - 1) % bound
  }
  const numbers = Array.from({ length: of }, (_, index) => index + 1)
  for (let at = 0; at < count; at++) {
    const other = at + below(of - at)
    ;[numbers[at], numbers[other]] = [numbers[other]!, numbers[at]!]
  }
  return numbers.slice(0, count).sort((first, second) => first - second)
}
