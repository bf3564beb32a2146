import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { elementsOf, lineSchema, type Line, type LineElement } from '#shared/line/line'
import { QUICK_ERROR_CODES } from '#shared/line/quickItems'
import { QUICK_WORDS, plainText, quickWordAt } from '#shared/line/quickWords'
import { readQuickLine } from '#shared/line/readQuickLine'
import { writeQuickLine, writtenLength } from '#shared/line/writeQuickLine'
import { FOOT, INCH, MILLIMETRE } from '#shared/measure/length'
import { parseLength } from '#shared/measure/parseLength'
import { anyLine } from '~~/tests/fixtures/line/anyLine'
import { schoolLine } from '~~/tests/fixtures/line/schoolLine'

let made = 0
const newId = () => `0193b000-0000-7000-8000-${String(++made).padStart(12, '0')}`
const read = (text: string, system: Line['system'] = 'imperial') => readQuickLine(text, { system, newId })
function lineOf(text: string, system?: Line['system']): Line {
  const result = read(text, system)
  if ('errors' in result) throw new Error(JSON.stringify(result.errors))
  return result.line
}
const elements = (text: string, system?: Line['system']): LineElement[] => lineOf(`all ${system === 'metric' ? '1.8 m' : '6 ft'} high\n${text}`, system).sides.flatMap(side => side.elements)
const element = (text: string, system?: Line['system']) => elements(text, system)[0]!
/** First error as line:column+length code. */
const error = (text: string) => {
  const result = read(text)
  if (!('errors' in result)) return 'read'
  const first = result.errors[0]!
  return `${first.line}:${first.column}+${first.length} ${first.code}`
}

describe('a line jotted down', () => {
  it('reads sides, elements and what stands for all', () => {
    const line = lineOf('all 6 ft high, mesh 2 in, outer walkway, inner school\nA Mill Road: 84 ft run, rises 11 in, 9 bays; 4 ft gate G1 opens in\nrun 96\nB Pool yard\ndouble gate 8 ft, exit')
    expect(lineSchema.parse(line)).toEqual(line)
    expect(line.sides.map(side => [side.key, side.name, side.elements.length])).toEqual([['A', 'Mill Road', 3], ['B', 'Pool yard', 1]])
    const [run, gate] = line.sides[0]!.elements
    expect(run).toMatchObject({ kind: 'run', tag: 'R1', length: 84 * FOOT, height: 6 * FOOT, rise: 11 * INCH, bays: 9, mesh: 2 * INCH, topRail: true, bottom: 'tensionWire', work: 'new' })
    expect(run!.faces.outer.settings).toEqual(['walkway'])
    expect(run!.faces.inner).toEqual({ settings: ['school'], ground: { finished: true, surface: 'soft' } })
    expect(gate!.gate).toEqual({ form: 'singleSwing', leaves: [4 * FOOT], hinge: 'start', opens: 'inner', exit: false, selfClosing: false, automatic: false })
    expect(line.sides[1]!.elements[0]!.gate).toMatchObject({ form: 'doubleSwing', leaves: [4 * FOOT, 4 * FOOT], exit: true })
  })

  it('takes the words in any order, with or without commas', () => {
    const said = ['run 84 ft, 5 ft high, up 11 in, 9 bays', '5 ft high, run 84 ft, up 11 in, 9 bays', '84 ft run 5 ft high rises 11 in 9 bays', '9 bays, height 5 ft, a run of 84 ft, up 11"', 'R1 84 ft, 5 ft high, 9 bays, up 11 inches']
    for (const text of said) expect(element(text), text).toMatchObject({ kind: 'run', length: 84 * FOOT, height: 5 * FOOT, rise: 11 * INCH, bays: 9 })
    // a number after feet is no inches without a mark or a unit
    expect(element('run 84 ft 9 bays')).toMatchObject({ length: 84 * FOOT, bays: 9 })
    expect(element('run 84\' 9-1/2, 2 bays')).toMatchObject({ length: 84 * FOOT + 19 * INCH / 2, bays: 2 })
  })

  it('counts bays of at most 10 ft where nobody did (84 ft: 9), of 3 m in metric, or as the posts stand', () => {
    expect(element('run 84').bays).toBe(9)
    expect(element('run 80').bays).toBe(8)
    expect(element('run 25 m', 'metric').bays).toBe(9)
    expect(elements('run 84').length).toBe(1)
    expect(lineOf('all 6 ft high, posts 8 ft apart\nrun 84').sides[0]!.elements[0]!.bays).toBe(11)
  })

  it('reads leaves, posts, tie-ins and crossings', () => {
    expect(element('gate 4 ft + 3 ft 6 in')).toMatchObject({ length: 7.5 * FOOT, gate: { form: 'doubleSwing', leaves: [4 * FOOT, 3.5 * FOOT] } })
    expect(element('slide gate 16 ft, motor')).toMatchObject({ gate: { form: 'slide', leaves: [16 * FOOT], automatic: true } })
    expect(element('corner post')).toMatchObject({ kind: 'terminalPost', post: 'corner', length: 0, tag: 'P1' })
    expect(element('tie-in to fence')).toMatchObject({ kind: 'tieIn', tieIn: 'fence', length: 0 })
    expect(element('swale 8 ft')).toMatchObject({ kind: 'crossing', crossing: 'swale', length: 8 * FOOT, tag: 'X1' })
    expect(element('existing fence 40 ft')).toMatchObject({ kind: 'run', work: 'existing', length: 40 * FOOT })
  })

  it('keeps faces apart: settings replace those for all, ground says what is to come', () => {
    const line = lineOf('all 6 ft high, both school, ground solid\nrun 20, inner pool + playground, outer ground soft to come 4 in (mulch)\nrun 20, outer none')
    const [first, second] = line.sides[0]!.elements
    expect(first!.faces).toEqual({ outer: { settings: ['school'], ground: { finished: false, surface: 'soft', coming: 'mulch', comingThickness: 4 * INCH } }, inner: { settings: ['playground', 'pool'], ground: { finished: true, surface: 'solid' } } })
    expect(second!.faces.outer.settings).toEqual([])
    expect(second!.faces.inner.settings).toEqual(['school'])
  })

  it('reads the same in Spanish', () => {
    const spanish = lineOf('todo 1.8 m de alto, malla 50 mm, exterior acera, interior escuela\nA Calle del Molino: tramo de 25.6 m, sube 280 mm, 9 vanos\nportón de 1.2 m, abre hacia adentro, se cierra sola', 'metric')
    const english = lineOf('all 1.8 m high, mesh 50 mm, outer walkway, inner school\nA Calle del Molino: run 25.6 m, up 280 mm, 9 bays\ngate 1.2 m, opens in, self-closing', 'metric')
    const bare = (line: Line) => line.sides.map(side => ({ ...side, elements: side.elements.map(({ id, ...rest }) => rest) }))
    expect(bare(spanish)).toEqual(bare(english))
    expect(spanish.sides[0]!.elements[0]!.length).toBe(25_600 * MILLIMETRE)
  })

  it('keeps the id of an element whose tag and kind come again', () => {
    const [first] = elements('R1 run 84; G1 gate 4')
    const line = lineOf('all 6 ft high\nR1 run 84; G1 gate 4')
    const again = readQuickLine('all 6 ft high\nA\nR1 run 90; R2 run 5; G1 post', { system: 'imperial', newId, keep: elementsOf(line) })
    expect(first!.tag).toBe('R1')
    if ('errors' in again) throw new Error('not read')
    const [r1, r2, g1] = again.line.sides[0]!.elements
    expect(r1!.id).toBe(line.sides[0]!.elements[0]!.id)
    expect(line.sides[0]!.elements.map(of => of.id)).not.toContain(r2!.id)
    expect(g1!.id).not.toBe(line.sides[0]!.elements[1]!.id)
  })
})

describe('a place that is not understood', () => {
  it.each([
    ['', '1:1+1 nothing'],
    ['run 84', '1:1+3 heightMissing'],
    ['all 6 ft high\nrun', '2:1+3 measureMissing'],
    ['all 6 ft high\nrun 84, up', '2:9+2 measureMissing'],
    ['all 6 ft high\nA North\nrnu 84 ft', '3:1+3 unknownWord'],
    ['all 6 ft high\nrun 1,140 ft', '2:6+1 commaInNumber'],
    ['all 6 ft high\nrun 5\' 13"', '2:5+6 measureRefused'],
    ['all 6 ft high\nrun 84 ft, up 11', '2:15+2 measureRefused'],
    ['all 6 ft high\nrun 84 ft, 0 ft high', '2:12+4 measureRefused'],
    ['all 6 ft high\nrun 84 ft, 900 bays', '2:12+3 countRefused'],
    ['all 6 ft high\nrun 84 ft, 3 ft', '2:12+4 measureUnasked'],
    ['all 6 ft high\n84 ft', '2:1+5 noKind'],
    ['all 6 ft high\nrun 84 ft gate', '2:11+4 saidTwice'],
    ['all 6 ft high\nrun 84 ft, slide', '2:12+5 twoKinds'],
    ['all 6 ft high\nrun 84 ft, opens in', '2:12+8 notForThis'],
    ['all 6 ft high\ngate 4 ft, 3 bays', '2:14+4 notForThis'],
    ['all 6 ft high, exit\nrun 5', '1:16+4 notForThis'],
    ['all 6 ft high\nrun 84 ft, 5 ft high, 4 ft high', '2:28+4 saidTwice'],
    ['all 6 ft high\ngate 4 ft (pool', '2:11+5 bracketOpen'],
    ['all 6 ft high\nrun 84 ft @ 3', '2:11+1 unknownSign'],
    ['all 6 ft high\nR1 84 ft; R1 20 ft', '2:11+2 tagTaken'],
    ['all 6 ft high\nA\nrun 5\nA\nrun 6', '4:1+1 sideTaken'],
    ['all 6 ft high\nA\nB\nrun 8', '2:1+1 sideEmpty'],
    ['all 6 ft high\nrun 8\nall 5 ft high', '3:1+3 allLate'],
    ['all 6 ft high\ndouble gate 8 ft, leaves 4 ft', '2:1+11 leavesCount'],
    [`all 6 ft high\n${'post\n'.repeat(401)}`, '402:1+4 tooMany'],
    [`all 6 ft high\nrun 5 (${'x'.repeat(81)})`, '2:7+83 tooLong'],
  ].map(([text, expected]) => [expected!, text!] as const))('%s', (expected, text) => expect(error(text)).toBe(expected))

  it('has met every code above', () => {
    const met = new Set(['nothing', 'heightMissing', 'measureMissing', 'unknownWord', 'commaInNumber', 'measureRefused', 'countRefused', 'measureUnasked', 'noKind', 'saidTwice', 'twoKinds', 'notForThis', 'bracketOpen', 'unknownSign', 'tagTaken', 'sideTaken', 'sideEmpty', 'allLate', 'leavesCount', 'tooMany', 'tooLong'])
    expect(new Set(QUICK_ERROR_CODES)).toEqual(met)
  })

  it('offers the word that was likely meant, and tells all errors at once', () => {
    const result = read('all 6 ft high\nrnu 84 ft\ngate 4 ft, opnes in\nrun 20')
    expect('errors' in result && result.errors.map(found => [found.line, found.params.word, found.params.nearest])).toEqual([[2, 'rnu', 'run'], [3, 'opnes', undefined]])
    expect(read('all 6 ft hihg\nrun 3')).toEqual({ errors: [{ line: 1, column: 10, length: 4, code: 'unknownWord', params: { word: 'hihg', nearest: 'high' } }] })
    expect(read('run 3\nrun 4')).toMatchObject({ errors: [{ line: 1, code: 'heightMissing' }] })
  })

  it('never throws, and points into the text, whatever is typed', () => {
    const words = QUICK_WORDS.flatMap(([, en, es]) => [...en, ...es])
    const some = fc.array(fc.oneof(fc.constantFrom(...words), fc.constantFrom('84 ft', '6', '11 in', ',', ';', '+', '(', ')', 'R1', 'A', '\n', '1/2', ':', '½', '\u0000', '-', '𝟛')), { maxLength: 25 })
    fc.assert(fc.property(fc.oneof(some.map(parts => parts.join(' ')), fc.string({ maxLength: 60, unit: 'grapheme' })), (text) => {
      const result = read(text)
      if ('line' in result) expect(lineSchema.safeParse(result.line).success).toBe(true)
      else {
        const rows = text.split(/\r\n|\r|\n/)
        expect(result.errors.length).toBeGreaterThan(0)
        for (const found of result.errors) {
          expect(found.line).toBeLessThanOrEqual(rows.length)
          expect(found.column - 1 + found.length).toBeLessThanOrEqual(Math.max(1, rows[found.line - 1]!.length))
        }
      }
    }), { numRuns: 200 })
  })
})

describe('writing a line down again', () => {
  it('says what most share once', () => {
    expect(writeQuickLine(schoolLine).split('\n').slice(0, 4)).toEqual(['all 6 ft high, mesh 2 in, outer walkway, inner school', '', 'A Mill Road side', 'R1 run 84 ft, up 10.8 in'])
  })

  it('reads back to the same line, in both languages', () => {
    fc.assert(fc.property(anyLine, fc.constantFrom('en' as const, 'es' as const), (line, language) => {
      const text = writeQuickLine(line, language)
      expect(readQuickLine(text, { system: line.system, newId, keep: elementsOf(line) }), text).toEqual({ line })
    }), { numRuns: 60 })
  })

  it('writes every length that a person or a code can write so that it is read back exactly', () => {
    fc.assert(fc.property(fc.integer({ min: 0, max: 9_000_000_000 }), fc.constantFrom(INCH / 64, INCH / 1000, FOOT / 1000, MILLIMETRE / 10_000), fc.constantFrom('imperial' as const, 'metric' as const), (count, step, system) => {
      const amount = (count % Math.floor(1_000_000 * MILLIMETRE / step)) * step
      expect(parseLength(writtenLength(amount, system)).amount).toBe(amount)
    }))
    // by hand: 64 1/2 in = 5 ft 4 1/2 in; 25.6 m; 50 mm
    expect([writtenLength(129 * INCH / 2, 'imperial'), writtenLength(25_600 * MILLIMETRE, 'metric'), writtenLength(50 * MILLIMETRE, 'metric'), writtenLength(0, 'imperial')]).toEqual(['5 ft 4 1/2 in', '25.6 m', '50 mm', '0 in'])
  })
})

describe('the words', () => {
  it('no word of either language means two things', () => {
    const all = QUICK_WORDS.flatMap(([, en, es]) => [...new Set([...en, ...es].map(plainText))])
    expect(all.filter((word, i) => all.indexOf(word) !== i)).toEqual([])
  })
  it('finds every word whole, the longest first', () => {
    for (const [meaning, en, es] of QUICK_WORDS) {
      for (const word of [...en, ...es]) expect(quickWordAt(plainText(word), 0), word).toEqual({ meaning, length: word.length })
    }
    expect(quickWordAt('runs', 0)).toBeUndefined()
  })
})
