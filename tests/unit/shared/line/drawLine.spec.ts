import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { Shape, TextShape } from '#shared/drawing/displayList'
import { drawLine } from '#shared/line/drawLine'
import { drawLineStrip } from '#shared/line/drawLineStrip'
import { drawWalk } from '#shared/line/drawWalk'
import { bayAt, bayEnd, layLine, lineLength, stationOf } from '#shared/line/layLine'
import type { Line, LineElement } from '#shared/line/line'
import { placeAlong, tapeOf } from '#shared/line/lineMark'
import { placeLabels, placeTags } from '#shared/line/placeLabels'
import { DEFICIENCY_STATES } from '#shared/round/outcome'
import { FOOT, INCH } from '#shared/measure/length'
import { gate, piece, run, schoolLine, schoolMarks } from '~~/tests/fixtures/line/schoolLine'

const one = (elements: LineElement[], system: Line['system'] = 'imperial'): Line => ({ version: 1, system, sides: [{ key: 'A', name: 'Side', elements }] })
const words = (list: readonly Shape[]) => list.filter((shape): shape is TextShape => shape.kind === 'text').map(shape => shape.text)
const of = (tag: string) => schoolLine.sides.flatMap(side => side.elements).find(element => element.tag === tag)!
const noNumberIsLost = (list: readonly Shape[]) => list.every(shape => !/NaN|Infinity|undefined/.test(JSON.stringify(shape)))
const oneOf = fc.oneof(
  fc.record({ feet: fc.integer({ min: 1, max: 1600 }), rise: fc.integer({ min: -20, max: 20 }), high: fc.integer({ min: 3, max: 12 }) }).map(({ feet, rise, high }) => run('R1', feet, rise * feet / 100, { height: high * FOOT })),
  fc.record({ feet: fc.integer({ min: 3, max: 20 }), two: fc.boolean() }).map(({ feet, two }) => gate('G1', two ? [feet, feet] : [feet])),
  fc.constantFrom('building', 'wall', 'fence').map(tieIn => piece('tieIn', 'T1', 0, { tieIn: tieIn as 'wall' })),
  fc.constantFrom('drain', 'swale', 'curb').map(crossing => piece('crossing', 'X1', 6, { crossing: crossing as 'drain' })),
  fc.constant(0).map(() => piece('terminalPost', 'P1', 0, { post: 'pull' })),
)
const someLine = fc.array(fc.array(oneOf, { minLength: 1, maxLength: 12 }), { minLength: 1, maxLength: 4 }).map((sides): Line => ({
  version: 1, system: 'imperial', sides: sides.map((elements, i) => ({ key: 'ABCD'[i]!, name: 'Side', elements })),
}))

describe('laying a line out', () => {
  it('puts each side of the school on a row of its own where the longest fits (stations added up by hand: 284, 566, 852 ft)', () => {
    expect(layLine(schoolLine, 288 * FOOT).map(row => [row.side.key, row.station / FOOT])).toEqual([['A', 0], ['B', 284], ['C', 566], ['D', 852]])
    expect(lineLength(schoolLine)).toBe(1140 * FOOT)
    expect(stationOf(schoolLine, of('R6').id)).toBe((284 + 110 + 60 + 4) * FOOT)
    expect(stationOf(schoolLine, 'nobody')).toBeUndefined()
  })

  it('keeps all of every element, in order, on rows that are not too long', () => {
    fc.assert(fc.property(someLine, fc.integer({ min: 25, max: 400 }), (line, feet) => {
      const rows = layLine(line, feet * FOOT)
      const elements = line.sides.flatMap(side => side.elements)
      const pieces = rows.flatMap(row => row.pieces)
      let at = 0
      for (const element of elements) {
        let from = 0
        do {
          const next = pieces[at++]!
          expect(next.element).toBe(element)
          expect(next.from).toBe(from)
          from = next.to
        } while (from < element.length)
      }
      expect(at).toBe(pieces.length)
      for (const row of rows) expect(row.length).toBeLessThanOrEqual(feet * FOOT)
      expect(rows.reduce((sum, row) => sum + row.length, 0)).toBe(lineLength(line))
    }))
  })

  it('breaks a run at a line post, never within a bay that fits', () => {
    const [first] = layLine(one([run('R1', 100)]), 55 * FOOT)
    expect(first!.length % (10 * FOOT)).toBe(0)
  })

  it('counts bays from 1 and gives every place of a run one of them', () => {
    const eleven = of('R6')
    expect(bayAt(eleven, 0)).toBe(1)
    expect(bayAt(eleven, eleven.length)).toBe(11)
    for (let bay = 1; bay <= 11; bay++) expect(bayAt(eleven, Math.round((bayEnd(eleven, bay - 1) + bayEnd(eleven, bay)) / 2))).toBe(bay)
  })
})

describe('the line drawing', () => {
  it('names every element, side, tag and the stations of the study', () => {
    const shown = words(drawLine(schoolLine, { variant: 'desk', width: 1264, marks: schoolMarks }).list)
    for (const word of [...schoolLine.sides.flatMap(side => side.elements).map(element => element.tag), 'A', 'D', 'B09', 'B07', 'B12', 'B10', 'B14', '0 ft', '50', '1,100']) expect(shown).toContain(word)
  })

  it('is true to one scale both ways (feet by hand: 84 ft of R1 to 12 ft of G4, 10 ft of R8 over 6 ft)', () => {
    const { areas } = drawLine(schoolLine, { variant: 'desk', width: 1264 })
    const wide = (tag: string) => areas.find(area => area.element === of(tag).id)!.width
    expect(wide('R1') / wide('G4')).toBeCloseTo(84 / 12, 6)
    const tall = (tag: string) => {
      const area = areas.find(found => found.element === of(tag).id)!
      return area.y
    }
    // R8 is 4 ft higher than R7 and its ground lies 0.3 ft higher; areas begin 6 over the fabric.
    expect((tall('R7') - tall('R8')) / (wide('R1') / 84)).toBeCloseTo(4, 1)
  })

  it('tears the fabric at the place of an open finding and tapes what is out of use, exits never', () => {
    const rust = (tag: string, marks = schoolMarks) => drawLine(one([of(tag)]), { variant: 'paper', width: 600, marks }).list.filter(shape => shape.kind === 'path' && shape.layer === 'tag' && shape.fill === 'rust' && shape.width === 0)
    expect(rust('G4')).toHaveLength(1)
    expect(of('G2').gate!.exit && schoolMarks[of('G2').id]!.outOfUse).toBe(true)
    expect(rust('G2')).toHaveLength(0)
    const tears = (tag: string) => drawLine(one([of(tag)]), { variant: 'paper', width: 600, marks: schoolMarks }).list.filter(shape => shape.layer === 'fit')
    expect(tears('R6')).toHaveLength(1)
    expect(tears('R3')).toHaveLength(0)
  })

  it('weaves only what was read', () => {
    const mesh = (tag: string) => drawLine(one([of(tag)]), { variant: 'desk', width: 600, marks: schoolMarks }).list.filter(shape => shape.layer === 'mesh').map(shape => shape.role)
    expect(mesh('R1')).toEqual(['pine'])
    expect(mesh('R6')).toEqual(['soft'])
    expect(mesh('R8')).toEqual(['brass'])
    expect(mesh('R12')).toEqual([])
    expect(mesh('G5')).toEqual([])
  })

  it('draws anything between 240 and 1600 wide without losing a number or leaving the page', () => {
    fc.assert(fc.property(someLine, fc.integer({ min: 240, max: 1600 }), fc.constantFrom('desk' as const, 'paper' as const), (line, width, variant) => {
      const drawing = drawLine(line, { variant, width })
      expect(noNumberIsLost(drawing.list)).toBe(true)
      for (const area of drawing.areas) {
        expect(area.x).toBeGreaterThanOrEqual(0)
        expect(area.x + area.width).toBeLessThanOrEqual(width)
        expect(area.y).toBeGreaterThanOrEqual(-1)
        expect(area.y + area.height).toBeLessThanOrEqual(drawing.height + 1)
      }
      expect(new Set(drawing.areas.map(area => area.element)).size).toBe(line.sides.flatMap(side => side.elements).map(element => element.id).filter((id, i, all) => all.indexOf(id) === i).length)
    }), { numRuns: 60 })
  })

  it('writes stations in metres every 25 m on a metric line', () => {
    expect(words(drawLine(one([run('R1', 300)], 'metric'), { variant: 'desk', width: 1000 }).list)).toEqual(expect.arrayContaining(['0 m', '25', '50', '75']))
  })

  it('gives 200 elements a name each', () => {
    const many = one(Array.from({ length: 200 }, (_, i) => i % 5 === 2 ? gate(`G${i + 1}`, [4]) : run(`R${i + 1}`, 6 + (i * 7) % 13)))
    const shown = words(drawLine(many, { variant: 'desk', width: 1264 }).list)
    for (const element of many.sides[0]!.elements) expect(shown).toContain(element.tag)
  })
})

describe('labels and tags', () => {
  it('lets no label cover another', () => {
    fc.assert(fc.property(fc.array(fc.record({ centre: fc.integer({ min: 0, max: 600 }), width: fc.integer({ min: 10, max: 60 }) }), { maxLength: 40 }), (wanted) => {
      wanted.sort((a, b) => a.centre - b.centre)
      const placed = placeLabels(wanted, { from: 0, to: 640, lanes: 3, shift: 30 })
      placed.forEach((a, i) => placed.slice(i + 1).forEach((b, k) => {
        if (a && b && a.lane === b.lane) expect(a.left + wanted[i]!.width <= b.left || b.left + wanted[i + 1 + k]!.width <= a.left).toBe(true)
      }))
    }))
  })

  it('lets no tape cover another and, away from the right edge, no stem cross a tape', () => {
    fc.assert(fc.property(fc.array(fc.record({ stem: fc.integer({ min: 0, max: 500 }), width: fc.integer({ min: 30, max: 60 }), top: fc.integer({ min: 80, max: 140 }) }), { maxLength: 12 }), (tags) => {
      const placed = placeTags(tags, { to: 1000, lanes: 12, rise: 27, height: 18 })
      placed.forEach((a, i) => placed.forEach((b, k) => {
        if (i === k || !a || !b) return
        const apart = a.left + tags[i]!.width <= b.left || b.left + tags[k]!.width <= a.left || a.y + 18 <= b.y || b.y + 18 <= a.y
        expect(apart).toBe(true)
        const inside = tags[i]!.stem > b.left && tags[i]!.stem < b.left + tags[k]!.width
        if (inside) expect(a.y >= b.y + 18 || tags[i]!.top <= b.y).toBe(true)
      }))
    }))
  })

  it('folds what three lanes do not hold into the tag beside it', () => {
    const marks = { [of('G1').id]: { ...schoolMarks[of('G2').id]!, tags: Array.from({ length: 6 }, (_, i) => ({ words: `B${i + 1}`, state: 'open' as const, along: null })) } }
    const shown = words(drawLine(one([of('G1')]), { variant: 'desk', width: 800, marks }).list).filter(word => word.startsWith('B'))
    expect(shown).toHaveLength(3)
    // 6 tags: those that are shown and those that are counted
    expect(shown.reduce((sum, word) => sum + 1 + Number(/\+(\d+)/.exec(word)?.[1] ?? 0), 0)).toBe(6)
  })
})

describe('the strip of a list', () => {
  it('draws all lines to the scale of the longest', () => {
    const end = (line: Line) => Math.max(...drawLineStrip(line, { width: 206, longest: 1600 * FOOT }).list.filter(shape => shape.layer === 'post').map(shape => Number(/^M([\d.]+)/.exec(shape.kind === 'path' ? shape.d : '')![1])))
    expect((end(one([run('R1', 1600)])) - 2) / (end(one([run('R1', 400)])) - 2)).toBeCloseTo(4, 1)
  })
  it('shows a diamond a gate and one stroke for what was read together', () => {
    const { list } = drawLineStrip(schoolLine, { width: 206, longest: lineLength(schoolLine), marks: schoolMarks })
    expect(list.filter(shape => shape.layer === 'leaf')).toHaveLength(5)
    // read from 0 to 942 ft without a gap: G2 to G4 have findings and were read
    expect(list.filter(shape => shape.layer === 'rail' && shape.role === 'pine')).toHaveLength(1)
  })
})

describe('the head of the walk', () => {
  const walk = (tag: string, feet: number, backwards = false) => drawWalk(schoolLine, { width: 360, here: { element: of(tag).id, along: feet * FOOT }, marks: schoolMarks, backwards, words: { youAreHere: 'you are here' } })
  it('says where one stands (458 ft to R6, 65 ft along it) and shows the bays around', () => {
    const shown = words(walk('R6', 65).list)
    expect(shown).toEqual(expect.arrayContaining(['523 ft', '1,140 ft', '0 ft', 'you are here', '6', '7', '8']))
  })
  it('turns the picture round for a pass the other way', () => {
    const at = (backwards: boolean, bay: string) => walk('R6', 65, backwards).list.find((shape): shape is TextShape => shape.kind === 'text' && shape.text === bay)!.x
    expect(at(false, '6')).toBeLessThan(at(false, '8'))
    expect(at(true, '6')).toBeGreaterThan(at(true, '8'))
    expect(at(false, '7')).toBe(180)
  })
  it('stands at every place of the line without losing a number', () => {
    for (const element of schoolLine.sides.flatMap(side => side.elements)) {
      for (const part of [0, 0.5, 1]) {
        for (const backwards of [false, true]) expect(noNumberIsLost(walk(element.tag, element.length * part / FOOT, backwards).list)).toBe(true)
      }
    }
  })
  it('refuses a place on an element that is not on the line', () => {
    expect(() => drawWalk(schoolLine, { width: 360, here: { element: 'nobody', along: 0 }, words: { youAreHere: '' } })).toThrow(RangeError)
  })
})

describe('where a place stands', () => {
  it('from either end, from its bay, or nowhere', () => {
    const r6 = of('R6')
    const place = (more: object) => ({ face: null, bay: null, from: null, height: null, ...more })
    expect(placeAlong(r6, place({ from: { end: 'end', distance: 8 * FOOT } }))).toBe(100 * FOOT)
    // 11 bays of 108 ft: the middle of the first is 108/22 ft = 58 10/11 in
    expect(placeAlong(r6, place({ bay: 1 }))).toBe(Math.round(108 * 12 * INCH / 22))
    expect(placeAlong(r6, place({ bay: 12 }))).toBeNull()
    expect(placeAlong(r6, null)).toBeNull()
  })
  it('every state of a deficiency has its tape, one entered in error none', () => {
    for (const state of DEFICIENCY_STATES) expect(tapeOf(state) === null).toBe(state === 'endedInError')
  })
})
