import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { INCH } from '#shared/measure/length'
import type { TrialOf } from '#shared/trial/trial'
import { trialSchema } from '#shared/trial/trial'
import { anglesTo, gapsAt, trySwing } from '#shared/trial/trySwing'

const limit = (id: string, low: number | null, high: number | null): TrialOf<'swing'>['margin'] => ({
  id, measurand: 'gap', datum: 'ground', unit: 'length', avoid: null, basis: null,
  low: low === null ? null : { imperial: low, inclusive: true }, high: high === null ? null : { imperial: high, inclusive: true },
})
const trial = (more: Partial<TrialOf<'swing'>> = {}): TrialOf<'swing'> => ({
  kind: 'swing', version: 1, system: 'imperial', leaf: { width: 46 * INCH, clearance: 1.875 * INCH, rake: { rise: 0, over: 46 * INCH } }, pair: false, hinge: 'start',
  ground: { by: 'slope', along: { rise: 0.75 * INCH, over: 46 * INCH }, across: { rise: 1.5 * INCH, over: 46 * INCH } }, to: 90_000,
  margin: limit('margin', 0.5 * INCH, null), closed: limit('closed', null, 4 * INCH), ...more,
})

describe('a swing that is tried out', () => {
  it('is kept and read again as it was', () => {
    expect(trialSchema.parse(JSON.parse(JSON.stringify(trial())))).toEqual(trial())
    expect(trialSchema.safeParse({ ...trial(), to: 200_000 }).success).toBe(false)
  })

  it('meets the ground from the hinge that it hangs on', () => {
    // OWN: each latch end is walked over the plane of the site, degree by degree, from its own hinge: x along the opening from its start, y to the side it opens to.
    const slope = fc.integer({ min: -460, max: 460 }).map(n => ({ rise: n * INCH / 100, over: 46 * INCH }))
    fc.assert(fc.property(slope, slope, fc.integer({ min: 1, max: 180 }), (along, across, degrees) => {
      const [first, second] = trySwing(trial({ pair: true, ground: { by: 'slope', along, across }, to: degrees * 1000 }))
      const walked = (start: boolean) => Math.min(1.875, ...Array.from({ length: degrees + 1 }, (_, degree) => {
        const [x, y] = [46 * Math.cos(degree / 180 * Math.PI) * (start ? 1 : -1), 46 * Math.sin(degree / 180 * Math.PI)]
        return 1.875 - (along.rise / along.over * x + across.rise / across.over * y)
      }))
      expect(first!.hinge + second!.hinge).toBe('startend')
      // Between two whole degrees a latch end of 46 in strays by under 0.01 in on slopes up to 1 in 10.
      expect(Math.abs(first!.swing.least.gap / INCH - walked(true))).toBeLessThan(0.01)
      expect(Math.abs(second!.swing.least.gap / INCH - walked(false))).toBeLessThan(0.01)
    }))
  })

  it('answers range, contact and ways out by hand', () => {
    // By hand: the steepest rise over the leaf is hypot(0.75, 1.5) = 1.677 in, so that 0.5 + 1.677 = 2.177 in is the least; closed, the gap is largest at the hinge: 4 in.
    const [one] = trySwing(trial())
    expect(one!.range!.window!.low / INCH).toBeCloseTo(2.177, 3)
    expect(one!.range!.window!.high / INCH).toBe(4)
    expect(one!.swing.contact).toBeNull()
    expect(one!.closed.largest).toEqual({ gap: 1.875 * INCH, distance: 0 })
    const [none] = trySwing(trial({ closed: limit('closed', null, 2 * INCH) }))
    expect(none!.range!.window).toBeNull()
    expect(none!.range!.shortBy / INCH).toBeCloseTo(0.177, 3)
    expect(none!.range!.waysOut.map(way => way.code)).toContain('openOtherSide')
  })

  it('takes heights for the one leaf that they were measured from', () => {
    const arc = [0, 30, 60, 90].map((degree, i) => ({ angle: degree * 1000, height: [0, 0.25, 1.5, 0.75][i]! * INCH }))
    const tried = trySwing(trial({ pair: true, hinge: 'end', ground: { by: 'heights', arc } }))
    expect(tried.map(({ hinge }) => hinge)).toEqual(['end'])
    expect(tried[0]!.swing.least).toEqual({ gap: 0.375 * INCH, angle: 60_000, at: 'latch' })
    expect(gapsAt(tried[0]!, [0, 30_000, 60_000]).map(({ gap }) => gap / INCH)).toEqual([1.875, 1.625, 0.375])
  })

  it('looks every 15 degrees, and at the end', () => {
    expect(anglesTo(90_000)).toEqual([0, 15, 30, 45, 60, 75, 90].map(degree => degree * 1000))
    expect(anglesTo(100_000).at(-1)).toBe(100_000)
  })
})
