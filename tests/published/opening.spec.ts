import { describe, expect, it } from 'vitest'
import { largestSphere } from '#shared/opening/largestSphere'
import { INCH } from '#shared/measure/length'

const inches = (n: number) => Math.round(n * INCH)

describe('openings as documents state them', () => {
  it('passes a 2 in sphere through 2 in mesh: mesh size is the clear distance between parallel wires (CLFMI PM 2445)', () => {
    expect(largestSphere({ kind: 'mesh', dimension: 'side', measured: inches(2) }).diameter).toBe(inches(2))
  })

  it('finds the 1-1/4 in square (CPSC Pub. 362, older text) within what another CPSC sheet allows corner to corner, 1-3/4 in, only by the rounding of that sheet', () => {
    // A 1-1/4 in square is 1.77 in from corner to corner, so a diamond of 1-3/4 in has a mesh size a little under 1-1/4 in.
    const bySheet = largestSphere({ kind: 'mesh', dimension: 'diagonal', measured: inches(1.75) }).diameter
    expect(bySheet).toBeLessThan(inches(1.25))
    expect(bySheet).toBeGreaterThan(inches(1.23))
  })

  it('gives the tallest diamond of TxDOT Item 550 (7 meshes in 23 in of height) a sphere that 2-1/4 in mesh passes too', () => {
    // 23 / 7 = 3.286 in from knuckle to knuckle, wire included (0.148 in, 9 gauge): as a square that is 3.286 / sqrt 2 - 0.148 = 2.18 in between wires.
    const pitch = largestSphere({ kind: 'mesh', dimension: 'diagonal', measured: inches(23 / 7) }).diameter
    expect((pitch - inches(0.148)) / INCH).toBeCloseTo(2.175, 2)
  })

  it('does not let a 4 in sphere (CPSC Pub. 362) under a rail that stands 4 in over level ground and no more', () => {
    expect(largestSphere({ kind: 'underRail', between: inches(96), first: inches(4), second: inches(4) }).diameter).toBe(inches(4))
    expect(largestSphere({ kind: 'underRail', between: inches(96), first: inches(4), second: inches(3) }).diameter).toBeLessThan(inches(4))
  })
})
