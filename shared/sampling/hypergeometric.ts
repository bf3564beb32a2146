/**
 * C(n, k), exact. 0 where k is out of range.
 */
export function binomial(n: number, k: number): bigint {
  if (k < 0 || k > n) return 0n
  let result = 1n
  for (let step = 1; step <= Math.min(k, n - k); step++) result = result * BigInt(n - step + 1) / BigInt(step)
  return result
}

/**
 * Whether at most `found` bad ones turn up in a random sample with a probability of at most `share` parts in 10,000, given `bad` in the lot. Exact: sums of C(bad, k) C(lot - bad, sample - k)
 * against C(lot, sample).
 */
export function isRarer(found: number, { lot, bad, sample }: { lot: number, bad: number, sample: number }, share: number): boolean {
  let ways = 0n
  const least = Math.max(0, sample - (lot - bad))
  if (found < least) return true
  let term = binomial(bad, least) * binomial(lot - bad, sample - least)
  for (let count = least; count <= Math.min(found, bad, sample); count++) {
    ways += term
    // C(b, k+1) C(g, s-k-1) from C(b, k) C(g, s-k); exact, since the result is a whole number.
    term = term * BigInt(bad - count) * BigInt(sample - count) / (BigInt(count + 1) * BigInt(lot - bad - sample + count + 1))
  }
  return ways * 10_000n <= binomial(lot, sample) * BigInt(share)
}
