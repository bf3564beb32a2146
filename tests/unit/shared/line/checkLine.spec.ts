import { describe, expect, it } from 'vitest'
import { checkLine, GREATEST_POST_SPACING } from '#shared/line/checkLine'
import type { Line, LineElement } from '#shared/line/line'
import { FOOT, INCH, MILLIMETRE } from '#shared/measure/length'
import { gate, piece, run, schoolLine } from '~~/tests/fixtures/line/schoolLine'

const line = (elements: LineElement[], more: Partial<Line> = {}): Line => ({ version: 1, system: 'imperial', sides: [{ key: 'A', name: '', elements }], ...more })
const codes = (elements: LineElement[], more?: Partial<Line>) => checkLine(line(elements, more)).map(remark => remark.code)

describe('what is told about a line', () => {
  it('says nothing of the line of the studies', () => expect(checkLine(schoolLine)).toEqual([]))

  it('wants tags, ids and sides once', () => {
    expect(codes([run('R1', 10), run('R1', 10)])).toEqual(['tagTaken'])
    const same = run('R1', 10)
    expect(codes([same, { ...same, tag: 'R2' }])).toEqual(['idTaken'])
    expect(checkLine({ ...schoolLine, sides: [schoolLine.sides[0]!, { ...schoolLine.sides[1]!, key: 'A' }] }).map(remark => remark.code)).toEqual(['sideTaken'])
  })

  it('wants what a kind is made of, and nothing of another', () => {
    expect(codes([run('R1', 0)])).toContain('lengthMissing')
    expect(codes([piece('gate', 'G1', 4)])).toEqual(['gateMissing'])
    expect(codes([{ ...run('R1', 10), gate: gate('G1', [4]).gate! }])).toEqual(['gateStray'])
    expect(codes([{ ...gate('G1', [4]), bays: 2 }])).toEqual(['baysStray'])
    expect(codes([gate('G1', [4, 4], {}, { form: 'slide' })])).toEqual(['leavesCount'])
    expect(codes([piece('tieIn', 'T1', 0), piece('terminalPost', 'P1', 0)])).toEqual([])
  })

  // PUBLISHED: ASTM F567-07 4.1, line posts no more than 10 ft (3050 mm) apart; templates and facts carry it as F01.
  it('hints at posts more than 10 ft (3050 mm) apart, not at 10 ft', () => {
    expect(GREATEST_POST_SPACING).toEqual({ imperial: 120 * INCH, metric: 3050 * MILLIMETRE })
    expect(codes([run('R1', 80, 0, { bays: 8 })])).toEqual([])
    expect(checkLine(line([run('R1', 84, 0, { bays: 8 })]))).toEqual([expect.objectContaining({ level: 'hint', code: 'baysWide', params: { spacing: 10.5 * FOOT, most: 10 * FOOT, bays: 9 } })])
    expect(codes([run('R1', 1, 0, { length: 3050 * MILLIMETRE, bays: 1 })], { system: 'metric' })).toEqual([])
    expect(codes([run('R1', 1, 0, { length: 3051 * MILLIMETRE, bays: 1 })], { system: 'metric' })).toEqual(['baysWide'])
  })

  it('hints at leaves that do not make the opening, steep ground, odd heights and faces without a setting', () => {
    const wide = gate('G1', [4, 4])
    expect(codes([{ ...wide, length: 8 * FOOT + 6 * INCH }])).toEqual([])
    expect(codes([{ ...wide, length: 8 * FOOT + 7 * INCH }])).toEqual(['leavesSum'])
    expect(codes([run('R1', 10, 5)])).toEqual([])
    expect(codes([run('R1', 10, -6)])).toEqual(['steep'])
    expect(codes([run('R1', 10, 0, { height: 6 * INCH })])).toEqual(['heightOdd'])
    const bare = { settings: [], ground: { finished: true, surface: 'soft' as const } }
    expect(codes([run('R1', 10, 0, { faces: { outer: bare, inner: bare } })])).toEqual(['settingMissing'])
  })

  it('tells more than 400 elements', () => {
    expect(codes(Array.from({ length: 401 }, (_, i) => run(`R${i + 1}`, 10)))).toEqual(['tooMany'])
  })
})
