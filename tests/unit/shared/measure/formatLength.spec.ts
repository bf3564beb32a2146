import { describe, expect, it } from 'vitest'
import fc from 'fast-check'
import Fraction from 'fraction.js'
import { compareLengths } from '#shared/measure/compareLengths'
import { formatLength } from '#shared/measure/formatLength'
import { INCH } from '#shared/measure/length'
import { parseLength } from '#shared/measure/parseLength'

const inch = (inches: number) => inches * 8_128_000
const imperial = { system: 'imperial' } as const
const feet = { system: 'imperial', style: 'feet' } as const
const metric = { system: 'metric' } as const

describe('formatLength', () => {
  it.each([
    [inch(54.5), imperial, '54 1/2 in'], [inch(0.5), imperial, '1/2 in'], [0, imperial, '0 in'], [inch(64.5), feet, '5\' 4 1/2"'], [inch(60), feet, '5\' 0"'],
    [inch(4.5), feet, '4 1/2"'], [inch(12.25), feet, '1\' 1/4"'], [inch(11) + 31 * 254_000, feet, '1\' 0"'], [inch(-3.5), imperial, '\u22123 1/2 in'],
    [1384 * 320_000, metric, '1 384 mm'], [999 * 320_000, metric, '999 mm'], [12_345_678 * 320_000, metric, '12 345 678 mm'], [160_000, metric, '1 mm'], [159_999, metric, '0 mm'],
    [-160_000, metric, '\u22121 mm'], [-1, imperial, '0 in'],
    [254_000, imperial, '1/16 in'], [253_999, imperial, '0 in'], [-254_000, imperial, '\u22121/16 in'],
  ] as const)('shows %d as %o: %s', (amount, style, text) => {
    expect(formatLength(amount, style).text).toBe(text)
  })

  it('gives the parts for screens that set fractions', () => {
    expect(formatLength(inch(64.5), feet)).toEqual({ text: '5\' 4 1/2"', negative: false, feet: 5, whole: 4, numerator: 1, denominator: 2, decimals: '', unit: 'in', exact: true })
    expect(formatLength(254_000, imperial)).toMatchObject({ numerator: 1, denominator: 16, exact: false })
  })

  it('shows finer where rounding would hide the side of a limit', () => {
    const limit = inch(54)
    expect(formatLength(limit + 127_000, { ...imperial, beside: [limit] }).text).toBe('54 1/32 in')
    expect(formatLength(limit - 127_000, { ...imperial, beside: [limit] }).text).toBe('53 63/64 in')
    expect(formatLength(limit - 32_000, { ...imperial, beside: [limit] }).text).toBe('53.996 in')
    expect(formatLength(limit - 1, { ...feet, beside: [limit] }).text).toBe('4\' 5.9999999"')
    expect(formatLength(1372 * 320_000 - 32, { ...metric, beside: [1372 * 320_000] }).text).toBe('1 371.9999 mm')
    // 54 in beside 1372 mm, as millimetres: 1371.6 rounds to the limit itself.
    expect(formatLength(limit, { ...metric, beside: [1372 * 320_000] }).text).toBe('1 371.6 mm')
    expect(formatLength(limit, { ...imperial, beside: [limit] }).text).toBe('54 in')
  })

  it('refuses what is not a whole number', () => {
    expect(() => formatLength(0.5, imperial)).toThrow(RangeError)
    expect(() => formatLength(Number.NaN, metric)).toThrow(RangeError)
  })

  it('round-trips every length at 1/64 in up to 40 ft, in inches and in feet', () => {
    for (let count = 0; count <= 40 * 12 * 64; count++) {
      const amount = count * 127_000
      for (const style of ['inches', 'feet'] as const) {
        const shown = formatLength(amount, { system: 'imperial', style, denominator: 64 })
        if (parseLength(shown.text).amount !== amount || !shown.exact) expect.fail(shown.text)
      }
    }
  })

  it('round-trips every whole millimetre up to 13 m', () => {
    for (let count = 0; count <= 13_000; count++) {
      if (parseLength(formatLength(count * 320_000, metric).text).amount !== count * 320_000) expect.fail(String(count))
    }
  })

  const amounts = fc.integer({ min: -320_000_000_000, max: 320_000_000_000 })
  const valueOf = (amount: number, system: 'imperial' | 'metric', beside: number[] = []) => {
    const shown = formatLength(amount, { system, beside })
    const size = shown.decimals ? new Fraction(`${shown.whole}.${shown.decimals}`) : new Fraction(shown.whole).add(new Fraction(shown.numerator, shown.denominator))
    return size.mul(system === 'imperial' ? 8_128_000 : 320_000).mul(shown.negative ? -1 : 1)
  }

  it('is never off by more than half a step (against fraction.js), and a negative length mirrors the positive', () => {
    fc.assert(fc.property(amounts, fc.constantFrom('imperial' as const, 'metric' as const), (amount, system) => {
      const error = valueOf(amount, system).sub(amount).abs()
      expect(error.compare(system === 'imperial' ? 254_000 : 160_000)).toBeLessThanOrEqual(0)
      expect(valueOf(-amount, system).add(valueOf(amount, system)).equals(0)).toBe(true)
    }))
  })

  it('is monotone', () => {
    fc.assert(fc.property(amounts, fc.integer({ min: 0, max: 1_000_000 }), (amount, more) => {
      expect(valueOf(amount, 'imperial').compare(valueOf(amount + more, 'imperial'))).toBeLessThanOrEqual(0)
    }))
  })

  it('shows the side of every limit beside it', () => {
    fc.assert(fc.property(amounts, fc.array(fc.integer({ min: -600_000, max: 600_000 }), { maxLength: 3 }), fc.constantFrom('imperial' as const, 'metric' as const), (amount, offsets, system) => {
      const limits = offsets.map(offset => amount + offset)
      const value = valueOf(amount, system, limits)
      // Exactly this length has a figure only where seven decimals of an inch, or six of a millimetre, can say it.
      const sayable = system === 'imperial' ? BigInt(amount) * 10_000_000n % BigInt(INCH) === 0n : BigInt(amount) * 1_000_000n % 320_000n === 0n
      for (const limit of limits) if (limit !== amount || sayable) expect(value.compare(limit)).toBe(compareLengths(amount, limit))
    }))
  })

  it('shows a limit of the very same length exactly where a figure can, and never gives up where none can', () => {
    expect(formatLength(INCH / 25, { system: 'imperial', beside: [INCH / 25] }).text).toBe('0.040 in')
    fc.assert(fc.property(amounts, fc.constantFrom('imperial' as const, 'metric' as const), (amount, system) => {
      const shown = formatLength(amount, { system, beside: [amount] })
      expect(shown.exact || formatLength(amount, { system }).text === shown.text).toBe(true)
    }))
  })
})
