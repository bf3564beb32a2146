import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { DRAWINGS } from '#shared/checklist/check'
import { ROLES, type Shape } from '#shared/drawing/displayList'
import { drawLive, type LiveName, type LiveParameters } from '#shared/drawing/live/drawLive'
import { LIVE_WORDS, type LiveDrawing, type LiveLimit, type LiveWord } from '#shared/drawing/live/live'
import { textWidth } from '#shared/drawing/live/textWidth'
import { GATE_REFUSALS } from '#shared/gate/gateRefusal'
import { FOOT, INCH, SYSTEMS } from '#shared/measure/length'
import { OPENING_REFUSALS } from '#shared/opening/openingRefusal'
import english from '../../../../i18n/locales/en/walk.json'
import spanish from '../../../../i18n/locales/es/walk.json'

const catalogues = [english.walk.drawing, spanish.walk.drawing]
/** The catalogue's own words, so that their real lengths are tried. */
const sayer = ({ words }: { words: Record<string, string> }) => (word: LiveWord, params: Readonly<Record<string, string>> = {}) =>
  words[word]!.replace(/\{(\w+)\}/g, (_, key: string) => {
    if (params[key] === undefined) throw new Error(`${word} wants ${key}`)
    return params[key]
  })
const [say] = catalogues.map(sayer)
const basis = { kind: 'authority' as const, name: 'Velmor County' }
const limit = (low: number | null, high: number | null, inclusive = true): LiveLimit => ({
  limit: {
    id: 'a', measurand: 'm', datum: 'd', unit: 'length', basis, avoid: null,
    low: low === null ? null : { imperial: low, inclusive }, high: high === null ? null : { imperial: high, inclusive },
  },
})

/** Corners of all that is drawn: ends and control points of paths, and the boxes of texts. */
function outline(shape: Shape): number[][] {
  if (shape.kind === 'path') {
    const points: number[][] = []
    for (const piece of shape.d.split(/(?=[MLQCAZ])/)) {
      const numbers = piece.slice(1).trim().split(/\s+/).filter(Boolean).map(Number)
      for (let i = piece.startsWith('A') ? 5 : 0; i + 1 < numbers.length; i += 2) points.push([numbers[i]!, numbers[i + 1]!])
    }
    return points
  }
  const wide = textWidth(shape.text, shape.size, shape.weight)
  const left = shape.anchor === 'start' ? 0 : shape.anchor === 'middle' ? -wide / 2 : -wide
  const turned = (shape.rotate ?? 0) / 180 * Math.PI
  return [[left, -shape.size * 0.74], [left + wide, shape.size * 0.05]].map(([u, v]) => [shape.x + u! * Math.cos(turned) - v! * Math.sin(turned), shape.y + u! * Math.sin(turned) + v! * Math.cos(turned)])
}

/** What leaves the picture, or is no number; half a unit is the width of a hair. */
function strays({ list, width, height }: LiveDrawing): string[] {
  return list.flatMap((shape) => {
    const out = outline(shape).find(([x, y]) => !(x! >= -0.5 && x! <= width + 0.5 && y! >= -0.5 && y! <= height + 0.5))
    return [...(out ? [`${out} of ${JSON.stringify(shape).slice(0, 200)}`] : []), ...(ROLES.includes(shape.role) ? [] : [shape.role])]
  })
}

const anyLength = fc.oneof(
  fc.integer({ min: 0, max: 64 * 120 }).map(n => n * INCH / 64),
  fc.constantFrom(0, 1, INCH, 54 * INCH, 54 * INCH - INCH / 64, 54 * INCH + 1, 1000 * FOOT, 320_000_000_000),
  fc.integer({ min: 0, max: 4_000_000_000 }),
)
const limits = fc.array(fc.tuple(anyLength, anyLength, fc.constantFrom('low', 'high', 'both', 'avoid'), fc.string({ minLength: 1, maxLength: 60 }), fc.constantFrom(-INCH, 0, INCH)), { maxLength: 4 })
  .map(all => all.map(([a, b, kind, name, shift], i): LiveLimit => {
    const [low, high] = [Math.min(a, b), Math.max(a, b)]
    const bound = (value: number) => ({ imperial: value, inclusive: value % 2 === 0 })
    return {
      shift,
      limit: {
        id: `l${i}`, measurand: 'm', datum: 'd', unit: 'length', basis: { kind: 'authority', name },
        low: kind === 'low' || kind === 'both' ? bound(low) : null,
        high: kind === 'high' || kind === 'both' ? bound(high) : null,
        avoid: kind === 'avoid' ? { low: bound(low), high: bound(high) } : null,
      },
    }
  }))
const input = fc.record({
  reading: fc.option(fc.oneof(anyLength, fc.integer({ min: -64 * 20, max: 0 }).map(n => n * INCH / 64))),
  limits,
  system: fc.constantFrom(...SYSTEMS),
  say: fc.constantFrom(...catalogues.map(sayer)),
  size: fc.constantFrom('field' as const, 'paper' as const),
})
const slope = fc.integer({ min: -48, max: 48 }).map(rise => ({ rise, over: 48 }))
const positive = anyLength.map(each => Math.max(1, each))

/** Random parameters of each drawing, extreme ones among them. */
const parameters: { [Name in LiveName]: fc.Arbitrary<LiveParameters[Name]> } = {
  latchHeight: fc.tuple(input, fc.constantFrom('ground' as const, 'leaf' as const, 'top' as const), anyLength, anyLength).map(([base, from, leafHeight, gapBelow]) => ({ ...base, from, leafHeight, gapBelow })),
  gapBelow: fc.tuple(input, fc.constantFrom('rail' as const, 'wire' as const, 'leaf' as const, 'none' as const), slope, fc.option(fc.record({ words: fc.string({ maxLength: 80 }), thickness: fc.option(positive) })))
    .map(([base, edge, ground, coming]) => ({ ...base, edge, slope: ground, ...(coming && { coming }) })),
  height: fc.tuple(input, fc.constantFrom('fence' as const, 'barbedWire' as const)).map(([base, of]) => ({ ...base, of })),
  spacing: fc.tuple(input, fc.constantFrom('tiesOnRail' as const, 'tiesOnPost' as const, 'tiesOnWire' as const, 'bands' as const, 'bandEnd' as const, 'horizontals' as const, 'object' as const)).map(([base, between]) => ({ ...base, between })),
  clearWidth: input,
  opening: fc.tuple(input, fc.oneof(
    fc.record({ shape: fc.constant('mesh' as const), dimension: fc.constantFrom('side' as const, 'diagonal' as const, 'width' as const) }),
    fc.record({ shape: fc.constant('bars' as const), gauge: fc.constantFrom('passed' as const, 'stopped' as const) }),
    fc.tuple(positive, positive).map(([base, height]) => ({ shape: 'rightTriangle' as const, measures: { kind: 'rightTriangle' as const, base, height } })),
    fc.tuple(positive, positive).map(([width, height]) => ({ shape: 'diamond' as const, measures: { kind: 'rhombus' as const, width, height } })),
    fc.tuple(positive, fc.integer({ min: 1, max: 99 })).map(([side, share]) => ({ shape: 'diamond' as const, measures: { kind: 'pulledSquare' as const, side: side + 1, width: Math.max(1, Math.floor(side * share / 50)) } })),
    fc.tuple(positive, positive, fc.integer({ min: 1, max: 99 })).map(([a, b, share]) => ({ shape: 'triangle' as const, measures: { kind: 'triangle' as const, sides: [a + 2, b + 2, Math.abs(a - b) + 1 + Math.floor(2 * Math.min(a, b) * share / 100)] as [number, number, number] } })),
    fc.tuple(positive, anyLength, positive).map(([between, first, second]) => ({ shape: 'underRail' as const, measures: { kind: 'underRail' as const, between, first, second } })),
  )).map(([base, more]) => ({ ...base, ...more })),
  closing: fc.record({
    say: fc.constantFrom(...catalogues.map(sayer)), size: fc.constantFrom('field' as const, 'paper' as const),
    trials: fc.array(fc.record({ label: fc.string({ maxLength: 80 }), angle: fc.integer({ min: 0, max: 180_000 }), good: fc.option(fc.integer({ min: 0, max: 20 })), of: fc.integer({ min: 1, max: 20 }) }), { maxLength: 6 }),
  }),
  tieEnd: fc.record({ say: fc.constantFrom(...catalogues.map(sayer)), size: fc.constantFrom('field' as const, 'paper' as const), ends: fc.constantFrom('in' as const, 'out' as const, null) }),
  swingClearance: fc.tuple(input, positive, anyLength, slope, slope, slope, fc.integer({ min: 1, max: 180 }), fc.option(fc.integer({ min: 0, max: 180_000 })), fc.option(anyLength), fc.boolean())
    .map(([base, width, clearance, rake, along, across, to, angle, closedAtMost, measured]) => ({
      ...base, leaf: { width, clearance, rake }, to: to * 1000, angle, closedAtMost,
      ground: measured ? { arc: [0, 45, 90, 180].map((degree, i) => ({ angle: degree * 1000, height: Math.round([0, along.rise, across.rise, rake.rise][i]! / 48 * width) })) } : { plane: { along, across } },
    })),
}

describe('drawLive', () => {
  it('draws every drawing that a check may name', () => {
    expect(Object.keys(parameters).sort()).toEqual([...DRAWINGS].sort())
  })

  it.each(DRAWINGS)('keeps all of %s inside its picture, whatever is read and whoever sets limits', (name) => {
    const drawn = (given: LiveParameters[typeof name]) => {
      expect(strays(drawLive(name, given))).toEqual([])
    }
    fc.assert(fc.property(parameters[name] as fc.Arbitrary<LiveParameters[typeof name]>, drawn), { numRuns: 120 })
  }, 30_000)

  it('has every word and every alternative text in both languages', () => {
    for (const { words, alt, refusal } of catalogues) {
      expect(Object.keys(words).sort()).toEqual([...LIVE_WORDS].sort())
      expect(Object.keys(alt).sort()).toEqual([...DRAWINGS].sort())
      expect(Object.keys(refusal).sort()).toEqual([...new Set([...GATE_REFUSALS, ...OPENING_REFUSALS, 'limit'])].sort())
    }
  })

  const latch = { reading: 53.625 * INCH, limits: [limit(54 * INCH, null)], system: 'imperial', say: say!, size: 'field', from: 'leaf', leafHeight: 70 * INCH, gapBelow: 1.5 * INCH } as const
  const textsOf = ({ list }: LiveDrawing) => list.flatMap(shape => shape.kind === 'text' ? [shape.text] : [])

  it('writes limit, whose it is, reading and margin, and says the same to who does not see', () => {
    const drawn = drawLive('latchHeight', latch)
    expect(textsOf(drawn)).toEqual(expect.arrayContaining(['54 in and up', 'Velmor County', '53 5/8', '3/8 in short']))
    expect(drawn.alt).toEqual({ code: 'latchHeight', params: { summary: '53 5/8 in; 54 in and up (Velmor County), 3/8 in short' } })
  })

  it('dimensions the gap between limits that leave nothing in common', () => {
    const reach = { ...limit(null, 54 * INCH), shift: -1.5 * INCH }
    expect(drawLive('latchHeight', { ...latch, limits: [latch.limits[0], reach] }).alt.params.summary).toContain('clash: 1 1/2 in')
  })

  it('shows a hair\'s breadth: reading and limit stand apart, the margin is exact', () => {
    const drawn = drawLive('latchHeight', { ...latch, reading: 54 * INCH - INCH / 64 })
    expect(textsOf(drawn)).toContain('1/64 in short')
    const [mark] = drawn.list.filter(shape => shape.layer === 'chalk')
    const [edge] = drawn.list.filter(shape => shape.kind === 'path' && shape.role === 'pine' && shape.width === 'heavy')
    const middle = (shape: Shape) => outline(shape).reduce((sum, [, y]) => sum + y!, 0) / outline(shape).length
    expect(middle(mark!) - middle(edge!)).toBeGreaterThan(9)
  })

  it('puts its chalk where its own tape says', () => {
    // The tape's marks are drawn from the lengths alone: the two labelled ones give scale and zero.
    fc.assert(fc.property(fc.integer({ min: 53 * 16, max: 55 * 16 }), (sixteenths) => {
      const drawn = drawLive('latchHeight', { ...latch, limits: [limit(50 * INCH, null)], reading: sixteenths * INCH / 16 })
      const marks = drawn.list.flatMap(shape => shape.kind === 'text' && shape.weight === 600 && /^\d+$/.test(shape.text) ? [{ inches: Number(shape.text), y: shape.y - 16 }] : [])
      const [one, other] = [marks[0]!, marks.at(-1)!]
      const expected = one.y + (other.y - one.y) * (sixteenths / 16 - one.inches) / (other.inches - one.inches)
      const [stroke] = drawn.list.filter(shape => shape.layer === 'chalk')
      const heights = outline(stroke!).map(([, y]) => y!)
      expect(Math.abs((Math.min(...heights) + Math.max(...heights)) / 2 - expected)).toBeLessThan(1.2)
    }))
  })

  it.each(DRAWINGS)('cuts no figure of %s short: a figure without its end is another figure', (name) => {
    fc.assert(fc.property(parameters[name] as fc.Arbitrary<LiveParameters[typeof name]>, (given) => {
      expect(textsOf(drawLive(name, given)).filter(words => /^[+\u2212-]?\d[\d\s/.]*…$/.test(words))).toEqual([])
    }), { numRuns: 120 })
  }, 30_000)

  it('is the same picture for the same parameters', () => {
    expect(drawLive('latchHeight', latch)).toEqual(drawLive('latchHeight', { ...latch }))
  })

  it('keeps figures and words readable: 14 and more on a phone, 11 on paper', () => {
    fc.assert(fc.property(parameters.spacing, (given) => {
      const least = given.size === 'paper' ? 11 : 13
      for (const shape of drawLive('spacing', given).list) if (shape.kind === 'text') expect(shape.size).toBeGreaterThanOrEqual(least)
    }), { numRuns: 50 })
  })
})
