import { describe, expect, it } from 'vitest'
import { clopperPearson } from '#shared/sampling/clopperPearson'
import { nextRandom } from '#shared/sampling/pickRandom'
import { zeroAcceptanceSample } from '#shared/sampling/zeroAcceptanceSample'

describe('sampling against published values', () => {
  it('of 100, 5 % at 95 %: 39 (arithmetic.md 3)', () => {
    expect(zeroAcceptanceSample({ lot: 100, tolerated: 500, confidence: 9500 })).toBe(39)
  })

  it('for large lots it tends to ln(1 - confidence) / ln(1 - share): 59 for 5 % at 95 %, 299 for 1 % at 95 %', () => {
    // PUBLISHED: the sample sizes of Wilks' "rule of 59" and of 299 (Wilks, S. S., Annals of Mathematical Statistics 12 (1941), 91); a finite lot is asked for the first count ABOVE the share, here 1001 of 100,000, which 298 find: ln 0.05 / ln 0.98999 = 297.8.
    expect([zeroAcceptanceSample({ lot: 100_000, tolerated: 500, confidence: 9500 }), zeroAcceptanceSample({ lot: 100_000, tolerated: 100, confidence: 9500 })]).toEqual([59, 298])
    expect(Math.ceil(Math.log(0.05) / Math.log(0.99))).toBe(299)
  })

  it('Clopper-Pearson: 4 bad of 20 give 0.0714 to 0.4010 at 90 % (NIST/SEMATECH e-Handbook 7.2.4.2)', () => {
    const { low, high } = clopperPearson({ sample: 20, bad: 4, confidence: 9000, sides: 'both' })
    expect(low).toBeCloseTo(0.071354, 6)
    expect(high).toBeCloseTo(0.401029, 5)
  })

  it('JCGM 106:2012, 9.5.4: 0.0424 of the bearings lie above 2 um', () => {
    // The prior of the example is a gamma law of shape 4 and mean 1 um (FROM MEMORY); its tail above 2 is that of at most 3 events where 8 are expected, the limit of a binomial count.
    const { high } = clopperPearson({ sample: 100_000, bad: 3, confidence: 10_000 - 424, sides: 'upper' })
    expect(high * 100_000).toBeCloseTo(8, 2)
  })

  it('the generator is minstd_rand: its 10,000th value from 1 is 399268537 (ISO C++, [rand.predef])', () => {
    let state = 1
    for (let step = 0; step < 10_000; step++) state = nextRandom(state)
    expect(state).toBe(399_268_537)
  })
})
