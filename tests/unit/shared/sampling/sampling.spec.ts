import { describe, expect, it } from 'vitest'
import fc from 'fast-check'
import jstat from 'jstat'
import { clopperPearson } from '#shared/sampling/clopperPearson'
import { binomial } from '#shared/sampling/hypergeometric'
import { largestBadCount } from '#shared/sampling/largestBadCount'
import { pickRandom } from '#shared/sampling/pickRandom'
import { zeroAcceptanceSample } from '#shared/sampling/zeroAcceptanceSample'

/** OWN, brute force: of all samples of a small lot (as bit masks, the first `bad` things being bad), how many hold at most `found` bad ones, and how many there are. */
function samplesWith(lot: number, bad: number, sample: number, found: number): { few: number, all: number } {
  const bits = (mask: number) => [...mask.toString(2)].filter(bit => bit === '1').length
  let [few, all] = [0, 0]
  for (let mask = 0; mask < 2 ** lot; mask++) {
    if (bits(mask) !== sample) continue
    all++
    if (bits(mask & (2 ** bad - 1)) <= found) few++
  }
  return { few, all }
}
const share = fc.integer({ min: 1, max: 9999 })

describe('zeroAcceptanceSample', () => {
  it('is the smallest that leaves too little chance to see none, counted out over all samples', () => {
    fc.assert(fc.property(fc.integer({ min: 1, max: 9 }), fc.integer({ min: 0, max: 9999 }), share, (lot, tolerated, confidence) => {
      // The first count above the tolerated share.
      let bad = 0
      while (bad * 10_000 <= tolerated * lot) bad++
      let sample = 1
      for (;; sample++) {
        const { few, all } = samplesWith(lot, bad, sample, 0)
        if (few * 10_000 <= all * (10_000 - confidence)) break
      }
      expect(zeroAcceptanceSample({ lot, tolerated, confidence })).toBe(sample)
    }), { numRuns: 150 })
  })

  it('agrees with exact binomials on larger lots', () => {
    fc.assert(fc.property(fc.integer({ min: 10, max: 3000 }), fc.integer({ min: 0, max: 2000 }), fc.integer({ min: 5000, max: 9999 }), (lot, tolerated, confidence) => {
      const sample = zeroAcceptanceSample({ lot, tolerated, confidence })
      const bad = Math.floor(lot * tolerated / 10_000) + 1
      const enough = (n: number) => binomial(lot - bad, n) * 10_000n <= binomial(lot, n) * BigInt(10_000 - confidence)
      expect([enough(sample), sample > 1 && enough(sample - 1)]).toEqual([true, false])
    }), { numRuns: 60 })
  })

  it('never falls when more confidence is asked, or less is tolerated', () => {
    fc.assert(fc.property(fc.integer({ min: 1, max: 500 }), fc.integer({ min: 0, max: 9000 }), fc.integer({ min: 1, max: 9000 }), fc.nat(900), (lot, tolerated, confidence, more) => {
      const sample = zeroAcceptanceSample({ lot, tolerated, confidence })
      expect(zeroAcceptanceSample({ lot, tolerated, confidence: confidence + more })).toBeGreaterThanOrEqual(sample)
      expect(zeroAcceptanceSample({ lot, tolerated: tolerated + more, confidence })).toBeLessThanOrEqual(sample)
    }))
  })
})

describe('largestBadCount', () => {
  it('is the most that do not make so few in the sample too rare, counted out over all samples', () => {
    fc.assert(fc.property(fc.integer({ min: 1, max: 9 }), fc.nat(9), fc.nat(9), share, (lot, samples, found, confidence) => {
      const sample = Math.min(samples, lot)
      const bad = Math.min(found, sample)
      let most = bad
      for (let count = bad; count <= lot - sample + bad; count++) {
        const { few, all } = samplesWith(lot, count, sample, bad)
        if (few * 10_000 > all * (10_000 - confidence)) most = count
      }
      expect(largestBadCount({ lot, sample, bad, confidence })).toBe(most)
    }), { numRuns: 150 })
  })

  it('agrees with another library on larger lots', () => {
    for (const [lot, sample, bad] of [[200, 50, 0], [200, 50, 3], [1000, 80, 1], [1000, 300, 12]] as const) {
      const most = largestBadCount({ lot, sample, bad, confidence: 9500 })
      expect(jstat.hypgeom.cdf(bad, lot, most, sample)).toBeGreaterThan(0.05)
      expect(jstat.hypgeom.cdf(bad, lot, most + 1, sample)).toBeLessThanOrEqual(0.05)
    }
  })

  it('is the other side of zero acceptance: with that sample and none bad, no more than is tolerated', () => {
    fc.assert(fc.property(fc.integer({ min: 1, max: 400 }), fc.integer({ min: 0, max: 5000 }), fc.integer({ min: 5000, max: 9999 }), (lot, tolerated, confidence) => {
      const sample = zeroAcceptanceSample({ lot, tolerated, confidence })
      expect(largestBadCount({ lot, sample, bad: 0, confidence }) * 10_000).toBeLessThanOrEqual(lot * tolerated)
    }))
  })

  it('is what was found when everything was tried', () => {
    expect(largestBadCount({ lot: 40, sample: 40, bad: 3, confidence: 9500 })).toBe(3)
    expect(largestBadCount({ lot: 40, sample: 0, bad: 0, confidence: 9500 })).toBe(40)
  })
})

describe('clopperPearson', () => {
  it('agrees with the beta quantiles of another library', () => {
    fc.assert(fc.property(fc.integer({ min: 1, max: 400 }), fc.nat(400), fc.integer({ min: 5000, max: 9990 }), (sample, found, confidence) => {
      const bad = Math.min(found, sample)
      const risk = 1 - confidence / 10_000
      const both = clopperPearson({ sample, bad, confidence, sides: 'both' })
      expect(both.low).toBeCloseTo(bad === 0 ? 0 : jstat.beta.inv(risk / 2, bad, sample - bad + 1), 6)
      expect(both.high).toBeCloseTo(bad === sample ? 1 : jstat.beta.inv(1 - risk / 2, bad + 1, sample - bad), 6)
      expect(clopperPearson({ sample, bad, confidence, sides: 'upper' }).high).toBeCloseTo(bad === sample ? 1 : jstat.beta.inv(1 - risk, bad + 1, sample - bad), 6)
    }), { numRuns: 200 })
  })

  it('has closed forms at the ends, up to the largest lot', () => {
    for (const sample of [1, 10, 59, 100_000]) {
      expect(clopperPearson({ sample, bad: 0, confidence: 9500, sides: 'upper' })).toEqual({ low: 0, high: expect.closeTo(1 - 0.05 ** (1 / sample), 10) })
      expect(clopperPearson({ sample, bad: sample, confidence: 9500, sides: 'both' })).toEqual({ low: expect.closeTo(0.025 ** (1 / sample), 10), high: 1 })
    }
  })

  it('is symmetric in good and bad', () => {
    fc.assert(fc.property(fc.integer({ min: 1, max: 300 }), fc.nat(300), share, (sample, found, confidence) => {
      const bad = Math.min(found, sample)
      const [there, back] = [clopperPearson({ sample, bad, confidence, sides: 'both' }), clopperPearson({ sample, bad: sample - bad, confidence, sides: 'both' })]
      expect(there.low).toBeCloseTo(1 - back.high, 12)
      expect(there.high).toBeCloseTo(1 - back.low, 12)
    }))
  })
})

describe('pickRandom', () => {
  it('picks different numbers of the lot, in order, and the same for the same seed', () => {
    fc.assert(fc.property(fc.integer({ min: 1, max: 300 }), fc.nat(300), fc.integer({ min: 1, max: 2_147_483_646 }), (of, wanted, seed) => {
      const count = Math.min(wanted, of)
      const picks = pickRandom({ of, count, seed })
      expect(picks).toEqual([...new Set(picks)].sort((first, second) => first - second))
      expect(picks).toHaveLength(count)
      expect(picks.every(pick => Number.isInteger(pick) && pick >= 1 && pick <= of)).toBe(true)
      expect(pickRandom({ of, count, seed })).toEqual(picks)
    }))
  })

  it('takes each choice of two in five equally often, over small seeds and over large ones', () => {
    for (const first of [1, 2_000_000_000]) {
      const counts = new Map<string, number>()
      for (let seed = first; seed < first + 20_000; seed++) {
        const picks = pickRandom({ of: 5, count: 2, seed }).join()
        counts.set(picks, (counts.get(picks) ?? 0) + 1)
      }
      // Chi-square with 9 degrees of freedom: 27.88 is exceeded once in a thousand (NIST/SEMATECH e-Handbook 1.3.6.7.4). The seeds are fixed, so this is no lottery.
      const off = [...counts.values()].reduce((sum, count) => sum + (count - 2000) ** 2 / 2000, 0)
      expect(counts.size).toBe(10)
      expect(off).toBeLessThan(27.88)
    }
  })
})

describe('sampling refuses', () => {
  it.each([
    ['lot', () => zeroAcceptanceSample({ lot: 0, tolerated: 500, confidence: 9500 })], ['lot', () => pickRandom({ of: 100_001, count: 1, seed: 1 })],
    ['tolerated', () => zeroAcceptanceSample({ lot: 10, tolerated: 10_000, confidence: 9500 })], ['tolerated', () => zeroAcceptanceSample({ lot: 10, tolerated: 0.5, confidence: 9500 })],
    ['confidence', () => zeroAcceptanceSample({ lot: 10, tolerated: 500, confidence: 10_000 })], ['confidence', () => clopperPearson({ sample: 1, bad: 0, confidence: 0, sides: 'both' })],
    ['sample', () => largestBadCount({ lot: 10, sample: 11, bad: 0, confidence: 9500 })], ['sample', () => pickRandom({ of: 3, count: 4, seed: 1 })], ['sample', () => clopperPearson({ sample: 0, bad: 0, confidence: 9500, sides: 'both' })],
    ['bad', () => largestBadCount({ lot: 10, sample: 5, bad: 6, confidence: 9500 })], ['bad', () => clopperPearson({ sample: 5, bad: -1, confidence: 9500, sides: 'both' })],
    ['seed', () => pickRandom({ of: 3, count: 1, seed: 0 })], ['seed', () => pickRandom({ of: 3, count: 1, seed: 2_147_483_647 })], ['seed', () => pickRandom({ of: 3, count: 1, seed: Number.NaN })],
  ])('with the code %s', (code, act) => {
    expect(act).toThrowError(expect.objectContaining({ name: 'SamplingRefused', code }))
  })
})
