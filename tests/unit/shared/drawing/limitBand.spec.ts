import { describe, expect, it } from 'vitest'
import type { PathShape } from '#shared/drawing/displayList'
import { limitBand } from '#shared/drawing/limitBand'
import { placeLimits } from '#shared/drawing/live/placedLimit'
import { combineLimits } from '#shared/limit/combineLimits'
import type { Bound, Limit } from '#shared/limit/limit'
import { INCH } from '#shared/measure/length'

const end = (inches: number): Bound => ({ imperial: inches * INCH, inclusive: true })
const limit = (id: string, low: number | null, high: number | null): Limit => ({ id, measurand: 'm', datum: 'ground', unit: 'length', low: low === null ? null : end(low), high: high === null ? null : end(high), avoid: null, basis: { kind: 'builtIn', name: 'made up for this test' } })
const drawn = (...limits: Limit[]) => limitBand({
  placed: placeLimits({ limits: limits.map(one => ({ limit: one })), reading: null, system: 'imperial', say: () => '' }),
  windows: combineLimits(limits, { datum: 'ground', system: 'imperial' }).windows, tape: 'imperial', figure: amount => `${amount / INCH} in`,
})
const xs = ({ d }: PathShape) => [...d.matchAll(/[ML](-?[\d.]+) /g)].map(found => Number(found[1]))
const paths = (list: ReturnType<typeof drawn>['list'], role: string, layer: string) => list.filter((shape): shape is PathShape => shape.kind === 'path' && (shape.role === role || shape.fill === role) && shape.layer === layer)
const inside = (drawing: ReturnType<typeof drawn>) => drawing.list.flatMap(shape => shape.kind === 'path' ? xs(shape) : [shape.x]).every(x => x >= -4 && x <= drawing.width + 4)

describe('the band of limits', () => {
  it('washes just what meets all limits, to scale', () => {
    const drawing = drawn(limit('a', 34, null), limit('b', null, 48))
    const [wash] = paths(drawing.list, 'pine-wash', 'band')
    const edges = [...new Set(xs(wash!))].sort((one, other) => one - other)
    // By hand: 14 in between the ends, 0.45 of it beside each, so 26.6 in lie on 300.
    expect(edges[0]).toBeCloseTo(300 * 6.3 / 26.6, 1)
    expect(edges[1]).toBeCloseTo(300 * 20.3 / 26.6, 1)
    expect(drawing.list.flatMap(shape => shape.kind === 'text' ? [shape.text] : [])).toEqual(['34 in', '48 in'])
    expect(inside(drawing)).toBe(true)
  })
  it('draws the empty window as a gap between two broken edges, and no wash', () => {
    const drawing = drawn(limit('pool', 54, null), limit('reach', 34, 48))
    expect(paths(drawing.list, 'pine-wash', 'band')).toEqual([])
    const broken = drawing.list.filter((shape): shape is PathShape => shape.kind === 'path' && shape.dash !== undefined)
    expect(broken.map(shape => new Set(xs(shape)).size)).toEqual([1, 1])
    expect(inside(drawing)).toBe(true)
  })
  it('shows a single value that is left, and figures that would run into each other one under the other', () => {
    const drawing = drawn(limit('pool', 54, null), limit('reach', null, 54))
    expect(Math.max(...xs(paths(drawing.list, 'pine-wash', 'band')[0]!)) - Math.min(...xs(paths(drawing.list, 'pine-wash', 'band')[0]!))).toBeGreaterThanOrEqual(3)
    const close = drawn(limit('a', 54, null), limit('b', null, 54.25), limit('c', 20, null)).list.flatMap(shape => shape.kind === 'text' ? [shape] : [])
    expect(close.map(shape => shape.text)).toEqual(['20 in', '54 in', '54.25 in'])
    expect(new Set(close.map(shape => shape.y)).size).toBe(2)
  })
})
