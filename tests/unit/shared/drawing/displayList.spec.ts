import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { chalk, diamond, DIAMONDS, DIAMOND_ROLE, dimH, dimV, fractionRuns, ground, hatch, joinStrokes, meshPath, path, seg, tapeTag, text, type PathShape, type Shape } from '#shared/drawing/displayList'

const paths = (list: readonly Shape[]) => list.filter((shape): shape is PathShape => shape.kind === 'path')
/** The grammar that both painters read: absolute commands, each with its own count of numbers. */
const COMMAND = /^(?:M N N|L N N|Q N N N N|C N N N N N N|A N N 0 [01] [01] N N|Z)+$/
const plain = (d: string) => d.replace(/([MLQCAZ])/g, '|$1 ').split('|').filter(Boolean)
  .every(part => COMMAND.test(part.trim().replace(/-?\d+(?:\.\d{1,2})?/g, (n, index: number, all: string) => (all.startsWith('A') && /^[01]$/.test(n) && index > 2) ? n : 'N')))
const pointsOf = (d: string) => [...d.matchAll(/[ML](-?[\d.]+) (-?[\d.]+)/g)].map(m => [Number(m[1]), Number(m[2])] as const)

describe('the display list', () => {
  it('writes paths of absolute M, L, A, Q, C and Z alone, to 1/100', () => {
    const all = [
      ...DIAMONDS.flatMap(state => diamond(state, 10.123, 20.456, 17)), ...chalk(0, 0, 40, 3), ...ground([[0, 10], [50, 8.3333], [90, 9]]),
      ...dimV(3, 4, 50, '53 5/8 in'), ...dimH(3, 40, 5, '10 ft'), hatch(1, 2, 33, 44), ...tapeTag(5, 5, 'B12', { state: 'settled' }),
    ]
    for (const shape of paths(all)) expect(plain(shape.d), shape.d).toBe(true)
  })

  it('has a diamond for every verdict and keeps it inside its box, no two with the same outline', () => {
    const drawn = DIAMONDS.map(state => diamond(state, 0, 0, 24))
    expect(new Set(drawn.map(parts => parts.map(p => `${p.d}|${p.width}|${p.dash}`).join(';'))).size).toBe(9)
    for (const parts of drawn) {
      for (const [x, y] of parts.flatMap(p => pointsOf(p.d))) {
        expect(Math.min(x, y)).toBeGreaterThanOrEqual(0)
        expect(Math.max(x, y)).toBeLessThanOrEqual(24)
      }
    }
  })

  it('colours the diamonds as look.md says', () => {
    expect(DIAMOND_ROLE).toMatchObject({ notRead: 'mark', conforms: 'pine', doesNotConform: 'rust', withinError: 'brass', groundNotFinished: 'brass', noLimit: 'brass', notApplicable: 'slate', notInspected: 'slate', settled: 'rust' })
  })

  it('keeps every wire of a fabric inside its panel', () => {
    fc.assert(fc.property(fc.integer({ min: 1, max: 400 }), fc.integer({ min: 1, max: 200 }), fc.integer({ min: 3, max: 20 }), (w, h, mesh) => {
      for (const [x, y] of pointsOf(meshPath(w, h, mesh, mesh, (u, v) => [u, v]))) {
        expect(x).toBeGreaterThanOrEqual(-0.01)
        expect(x).toBeLessThanOrEqual(w + 0.01)
        expect(y).toBeGreaterThanOrEqual(-0.01)
        expect(y).toBeLessThanOrEqual(h + 0.01)
      }
    }))
  })

  it('weaves as many knots as a panel of whole meshes has (counted by hand: 4 by 2 meshes of 2 x 10)', () => {
    // Knots on the top rail at 0, 10, 20, 30, 40; each wire from there either way; those that start left or right of the panel enter by its sides.
    const d = meshPath(40, 20, 10, 10, (u, v) => [u, v])
    const wires = d.split('M').slice(1)
    // right-leaning: starts at u = -10, 0, 10, 20, 30 (5); left-leaning the mirror image (5)
    expect(wires).toHaveLength(10)
  })

  it('draws no fabric on a panel without width', () => {
    expect(meshPath(0, 20, 5, 5, (u, v) => [u, v])).toBe('')
  })

  it('draws the same chalk each time, its true line in the middle', () => {
    const [stroke] = chalk(10, 20, 90, 20, { thick: 6 })
    expect(chalk(10, 20, 90, 20, { thick: 6 })[0]).toEqual(stroke)
    const heights = pointsOf(stroke!.d).map(p => p[1])
    expect(Math.min(...heights)).toBeGreaterThan(20 - 6)
    expect(Math.max(...heights)).toBeLessThan(20 + 6)
    expect(Math.min(...heights)).toBeLessThan(20)
    expect(Math.max(...heights)).toBeGreaterThan(20)
    expect(chalk(5, 5, 5, 5)).toEqual([])
  })

  it('hatches inside the band only, at 45 degrees', () => {
    for (const lean of [1, -1] as const) {
      const points = pointsOf(hatch(10, 20, 30, 50, { lean }).d)
      for (let i = 0; i < points.length; i += 2) {
        const [[x1, y1], [x2, y2]] = [points[i]!, points[i + 1]!]
        expect((y2 - y1) / (x2 - x1)).toBeCloseTo(-lean, 1)
        expect(Math.min(x1, x2)).toBeGreaterThanOrEqual(10)
        expect(Math.max(x1, x2)).toBeLessThanOrEqual(40)
        expect(Math.min(y1, y2)).toBeGreaterThanOrEqual(20)
        expect(Math.max(y1, y2)).toBeLessThanOrEqual(70)
      }
    }
  })
})

describe('joinStrokes', () => {
  it('makes one path of the marks of a tape, and of nothing else', () => {
    const marks = [0, 1, 2, 3].map(i => seg('dim', 0, i, 5, i, { width: i % 2 ? 'line' : 'hair' }))
    const joined = joinStrokes([...marks, path('dim', 'M0 0L1 1Z', { fill: 'paper' }), seg('dim', 9, 9, 8, 8, { width: 'hair' })])
    expect(joined.map(shape => shape.kind === 'path' && shape.d)).toEqual(['M0 0L5 0M0 2L5 2', 'M0 1L5 1M0 3L5 3', 'M0 0L1 1Z', 'M9 9L8 8'])
  })

  it('loses no stroke, and moves none over one of another colour', () => {
    const style = fc.record({ role: fc.constantFrom('ink' as const, 'paper' as const), width: fc.constantFrom('hair' as const, 'heavy' as const), fill: fc.option(fc.constant('chalk' as const), { nil: undefined }) })
    fc.assert(fc.property(fc.array(style, { maxLength: 20 }), (styles) => {
      const list: Shape[] = styles.map(({ fill, ...bare }, i) => seg('dim', i, 0, i, 1, { ...bare, ...(fill && { fill }) }))
      // Painted one after another: the order of the colours must come out the same, each with the same strokes.
      const painted = (shapes: readonly Shape[]) => shapes.flatMap(shape => shape.kind === 'path' ? shape.d.split(/(?=M)/).map(d => ({ d, role: shape.role, fill: shape.fill, width: shape.width })) : [])
      const runs = (shapes: readonly Shape[]) => painted(shapes).reduce<{ key: string, strokes: string[] }[]>((found, { d, role, fill, width }) => {
        const key = `${role} ${fill ?? ''}`
        if (found.at(-1)?.key !== key) found.push({ key, strokes: [] })
        found.at(-1)!.strokes.push(`${d} ${width}`)
        return found
      }, []).map(({ key, strokes }) => ({ key, strokes: strokes.sort() }))
      expect(runs(joinStrokes(list))).toEqual(runs(list))
    }))
  })

  it('leaves words where they are', () => {
    expect(joinStrokes([seg('text', 0, 0, 1, 1), text(0, 0, 'a'), seg('text', 2, 2, 3, 3)])).toHaveLength(3)
  })
})

describe('fractions in a text', () => {
  const shown = (words: string) => fractionRuns(words).map(run => [run.text, run.scale, run.rise])
  it('sets both figures small, the upper one raised, with a narrow space before', () => {
    expect(shown('53 5/8 in')).toEqual([['53', 1, 0], [' ', 0.7, 0], ['5', 0.66, 0.24], ['\u2044', 1, 0], ['8', 0.66, 0], [' in', 1, 0]])
  })
  it('finds every fraction of a sentence', () => {
    expect(shown('3/8 in short of 54 1/16').map(run => run[0])).toEqual(['3', '\u2044', '8', ' in short of 54', ' ', '1', '\u2044', '16'])
  })
  it('leaves dates and plain words alone', () => {
    expect(shown('3/4/2027, G3')).toEqual([['3/4/2027, G3', 1, 0]])
    expect(shown('')).toEqual([])
  })
  it('loses and adds nothing but the sign of the fraction', () => {
    fc.assert(fc.property(fc.stringMatching(/^[0-9a-z /,.-]{0,30}$/), (words) => {
      expect(fractionRuns(words).map(run => run.text).join('').replace(/\u2044/g, '/')).toBe(words)
    }))
  })
})
