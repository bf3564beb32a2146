import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { parse } from 'csv-parse/sync'
import { lineColumn, LINE_COLUMNS, LINE_HEADERS } from '#shared/line/lineColumns'
import { CSV_ERROR_CODES, readLineCsv } from '#shared/line/readLineCsv'
import { writeLineCsv } from '#shared/line/writeLineCsv'
import { elementsOf, type Line } from '#shared/line/line'
import { FOOT, INCH, MILLIMETRE } from '#shared/measure/length'
import { anyLine } from '~~/tests/fixtures/line/anyLine'
import { schoolLine } from '~~/tests/fixtures/line/schoolLine'

let made = 0
const newId = () => `0193c000-0000-7000-8000-${String(++made).padStart(12, '0')}`
const read = (text: string, system: Line['system'] = 'imperial') => readLineCsv(text, { system, newId })
const errors = (text: string) => read(text).errors.map(error => `${error.row} ${error.column} ${error.code}`)

describe('a line from a table', () => {
  it('reads commas, semicolons and tabs, English and Spanish headers, and units from the header', () => {
    const english = read('Side,Side name,What,Length (ft),Height,Rise (in),Bays,Outer face,Exit,Remarks\nA,Mill Road,run,84,6 ft,11,9,"walkway, school",,x\n,,gate,4,6 ft,-2,,,yes,\n')
    expect(english.errors).toEqual([])
    expect(english.columns.at(-1)).toEqual({ header: 'Remarks', column: null })
    const [run, gate] = english.line!.sides[0]!.elements
    expect(english.line!.sides[0]!.name).toBe('Mill Road')
    expect(run).toMatchObject({ kind: 'run', tag: 'R1', length: 84 * FOOT, height: 6 * FOOT, rise: 11 * INCH, bays: 9, faces: { outer: { settings: ['school', 'walkway'] } } })
    expect(gate).toMatchObject({ kind: 'gate', rise: -2 * INCH, gate: { exit: true, leaves: [4 * FOOT] } })
    const spanish = read('lado;qué;largo (m);alto;cara interior;abre;se cierra sola\nA;tramo;25.6;1.8 m;escuela;;\nA;puerta;1.2;1.8 m;escuela + alberca;adentro;sí', 'metric')
    expect(spanish.errors).toEqual([])
    expect(spanish.line!.sides[0]!.elements[1]).toMatchObject({ length: 1200 * MILLIMETRE, gate: { opens: 'inner', selfClosing: true }, faces: { inner: { settings: ['school', 'pool'] } } })
    expect(read('what\tlength\theight\nrun\t84 ft\t6 ft').line!.sides[0]!.elements).toHaveLength(1)
  })

  it('tells every problem with its row and its column', () => {
    expect(errors('')).toEqual(['1 null headerMissing', '1 null headerMissing', '1 null nothing'])
    expect(errors('what,height\n')).toEqual(['1 null nothing'])
    expect(errors('what,length,height,what\nrun,5,6,x')).toEqual(['1 what headerTwice'])
    expect(errors('what,length,height\nrun,84,6 ft\nrnu,84,6 ft\n\nrun,"1,140",6 ft\nrun,5\' 13",6 ft\nrun,84,\nrun,,6 ft')).toEqual(['3 what unknownWord', '5 length commaInNumber', '6 length measureRefused', '7 what heightMissing', '8 what measureMissing'])
    expect(errors('side,what,length,height,exit,bottom,tag\nA,gate,4,6 ft,perhaps,,\nB,gate,4,6 ft,,string,\nA,run,4,6 ft,,,\n1,run,4,6 ft,,,\nB,run,4,6 ft,,,fence one\nB,run,4,6 ft,,,R1\nB,run,4,6 ft,,,r1'))
      .toEqual(['2 exit yesNo', '3 bottom cellUnknown', '4 side sideSplit', '5 side sideUnreadable', '6 tag tagUnreadable', '8 what tagTaken'])
    expect(errors('what,height\nrun,"6 ft\ngate,5 ft')).toEqual([expect.stringMatching(/^\d null csvBroken$/)])
    expect(errors(`what,height\n${'post,6 ft\n'.repeat(401)}`)).toEqual(['402 null tooMany'])
    expect(CSV_ERROR_CODES).toHaveLength(8)
  })

  it('keeps the rows as they stand for the preview', () => {
    expect(read('what,length,height\nrun,84,6 ft\n\nrnu,1,2').rows).toEqual([{ row: 2, cells: ['run', '84', '6 ft'] }, { row: 4, cells: ['rnu', '1', '2'] }])
  })

  it('reads what it wrote, in both languages', () => {
    fc.assert(fc.property(anyLine, fc.constantFrom('en' as const, 'es' as const), (line, language) => {
      const text = writeLineCsv(line, language)
      const table = readLineCsv(text, { system: line.system, newId, keep: elementsOf(line) })
      expect(table.errors, text).toEqual([])
      expect(table.line).toEqual(line)
    }), { numRuns: 60 })
  })

  it('is read by a plain CSV reader, one cell a column, quotes and all (RFC 4180)', () => {
    const line: Line = { ...schoolLine, sides: [{ ...schoolLine.sides[0]!, name: 'Mill Road, "lower"', elements: [schoolLine.sides[0]!.elements[0]!] }] }
    const [head, row] = parse(writeLineCsv(line)) as string[][]
    expect(head).toHaveLength(LINE_COLUMNS.length)
    expect(row!.slice(0, 7)).toEqual(['A', 'Mill Road, "lower"', 'R1', 'run', '84 ft', '6 ft', 'up 10.8 in'])
  })

  it('writes no cell that a spreadsheet takes for a formula', () => {
    const line: Line = { ...schoolLine, sides: [{ ...schoolLine.sides[0]!, name: '=1+1', elements: [{ ...schoolLine.sides[0]!.elements[0]!, name: '@sum', rise: -INCH }] }] }
    const text = writeLineCsv(line)
    expect(text).not.toMatch(/(?:^|,|")[=+\-@]/m)
    expect(readLineCsv(text, { system: 'imperial', newId, keep: elementsOf(line) }).line).toEqual(line)
  })

  it('finds every header that it knows, and a unit beside it', () => {
    for (const column of LINE_COLUMNS) for (const header of [...LINE_HEADERS[column].en, ...LINE_HEADERS[column].es]) expect(lineColumn(header.toUpperCase()), header).toEqual({ column, unit: null })
    expect(lineColumn('rise_in')).toEqual({ column: 'rise', unit: 'in' })
    expect(lineColumn('Largo [mm]')).toEqual({ column: 'length', unit: 'mm' })
    expect(lineColumn('colour')).toBeNull()
  })
})
