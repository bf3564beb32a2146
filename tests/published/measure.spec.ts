import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { compareWithDual } from '#shared/measure/compareLengths'
import { formatLength } from '#shared/measure/formatLength'
import { parseLength } from '#shared/measure/parseLength'

const length = (text: string) => parseLength(text).amount
interface Statement { id: string, inches: number | number[] | null, millimetres: number | number[] | null }
const statements: Statement[] = JSON.parse(readFileSync(new URL('../../templates/facts/published-limits.json', import.meta.url), 'utf8'))

describe('lengths against published definitions', () => {
  it('the international inch and foot are exact (NIST SP 811, B.6: 1 in = 25.4 mm, 1 ft = 0.3048 m)', () => {
    expect(length('1 in')).toBe(length('25.4 mm'))
    expect(length('1 ft')).toBe(length('0.3048 m'))
    expect(length('1/64 in')).toBe(length('0.0001 mm') / 32 * 127_000)
  })

  it('reads every length of the published limits, and shows it in its own system as it was printed', () => {
    let read = 0
    for (const { id, inches, millimetres } of statements) {
      for (const figure of [inches ?? []].flat()) {
        // C09 and E16 are printed as fractions (1/16, 5/16 in); as decimals they would be over three, and refused.
        const text = Number.isInteger(figure * 1000) ? `${figure} in` : `${figure * 16}/16 in`
        const shown = formatLength(length(text), { system: 'imperial', denominator: 64, beside: [length(text)] })
        expect(Math.abs(shown.whole + shown.numerator / shown.denominator + Number(`0.${shown.decimals || 0}`) - figure), id).toBeLessThan(1e-9)
        read++
      }
      for (const figure of [millimetres ?? []].flat()) {
        expect(length(`${figure} mm`), id).toBe(Math.round(figure * 10_000) * 32)
        read++
      }
    }
    expect(read).toBeGreaterThan(200)
  })

  it('a source\'s two figures are seldom the same length: the reading\'s own decides', () => {
    // Model pool codes print 54 in as 1372 mm, and 2 in as 51 mm (published-limits.json A22, A31).
    expect(compareWithDual({ amount: length('54 in'), system: 'imperial' }, { imperial: length('54 in'), metric: length('1372 mm') })).toEqual({ order: 0, decidedBy: 'imperial', otherOrder: -1 })
    expect(compareWithDual({ amount: length('51 mm'), system: 'metric' }, { imperial: length('2 in'), metric: length('51 mm') })).toEqual({ order: 0, decidedBy: 'metric', otherOrder: 1 })
  })
})
