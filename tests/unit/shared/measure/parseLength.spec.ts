import { describe, expect, it } from 'vitest'
import fc from 'fast-check'
import fixture from '../../../fixtures/contracts/length.json'
import type { LengthRefusalCode } from '#shared/measure/lengthRefused'
import { LENGTH_REFUSALS, LengthRefused } from '#shared/measure/lengthRefused'
import type { LengthUnit } from '#shared/measure/length'
import { LONGEST } from '#shared/measure/length'
import { parseLength } from '#shared/measure/parseLength'

// OWN: hand-worked in 64ths of an inch; one inch is 25.4 mm exactly (NIST SP 811, B.6), so a 64th is 127,000 units.
const SIXTY_FOURTH = 127_000

function refusal(text: string, unit?: LengthUnit): { code: LengthRefusalCode, position: number | null } | null {
  try {
    parseLength(text, { unit })
    return null
  }
  catch (refused) {
    if (!(refused instanceof LengthRefused)) throw refused
    expect(refused.message).toBe(LENGTH_REFUSALS[refused.code])
    return { code: refused.code, position: refused.position }
  }
}

describe('parseLength reads', () => {
  it.each([
    ['5\' 4-1/2"', 64.5], ['64 1/2 in', 64.5], ['64-1/2"', 64.5], ['5\'-4 1/2"', 64.5], ['5ft4.5in', 64.5], ['5 ft. 4 1/2 in.', 64.5],
    ['5\u2019 4\u00BD\u201D', 64.5], ['5\u2032 4 1/2\u2033', 64.5], ['5\' 4 1/2\'\'', 64.5], ['5\u2032 4 1/2\u2032\u2032', 64.5], ['5 FT 4 1/2 IN', 64.5], ['5\' 4 1\u20442"', 64.5],
    ['5\'\u00A04\u202F1/2"', 64.5], ['5\' 4 1/2', 64.5], ['5\'4', 64], ['5 ft 4', 64], ['5\u20324\u2212' + '1/2"', 64.5],
    ['5 1/2 ft', 66], ['5.5 ft', 66], ['4½ in', 4.5], ['4 ½ in', 4.5], ['½"', 0.5], ['3/4 in', 0.75], ['9/8 in', 1.125], ['5\' 0"', 60], ['0 in', 0],
    ['.5 in', 0.5], ['5\' 11 63/64"', 71.984375], ['2.125 in', 2.125], ['1 / 2 in', 0.5], ['007 in', 7],
  ])('%s', (text, inches) => {
    expect(parseLength(text)).toMatchObject({ amount: inches * 64 * SIXTY_FOURTH, system: 'imperial', text })
  })

  it.each([['1372 mm', 1372], ['1 384 mm', 1384], ['1\u202F384.5 mm', 1384.5], ['137.2 cm', 1372], ['1.372 m', 1372], ['12 345 mm', 12345], ['2mm', 2], ['2 MM', 2]])('%s', (text, millimetres) => {
    expect(parseLength(text)).toMatchObject({ amount: millimetres * 320_000, system: 'metric', text })
  })

  it('a bare number in the unit of the field', () => {
    expect(parseLength('54 1/2', { unit: 'in' })).toEqual({ amount: 442_976_000, text: '54 1/2', unit: 'in', system: 'imperial' })
    expect(parseLength('5 1/2', { unit: 'ft' }).amount).toBe(66 * 8_128_000)
    expect(parseLength('1 384', { unit: 'mm' }).amount).toBe(1384 * 320_000)
    expect(parseLength('5\' 4', { unit: 'mm' }).amount).toBe(64 * 8_128_000)
  })

  it('the unit that is written, whatever the field has', () => {
    expect(parseLength('54 in', { unit: 'mm' })).toMatchObject({ unit: 'in', system: 'imperial' })
    expect(parseLength('5\' 4"', { unit: 'cm' }).unit).toBe('ft')
  })

  it('a minus sign only where a length may be below zero', () => {
    expect(parseLength('\u22123 1/2 in', { signed: true }).amount).toBe(-3.5 * 8_128_000)
    expect(Object.is(parseLength('-0 in', { signed: true }).amount, 0)).toBe(true)
    expect(refusal('-3 in')).toEqual({ code: 'negative', position: 0 })
  })

  it('the amounts that are fixed for ever', () => {
    for (const { text, amount } of fixture.lengths) expect(parseLength(text).amount, text).toBe(amount)
  })
})

const REFUSED: [string, LengthRefusalCode, number | null][] = [
  ['', 'noNumber', null], ['   ', 'noNumber', null], ['in', 'noNumber', 0], ['5\' "', 'noNumber', 3],
  ['54', 'noUnit', 0], ['54 1/2', 'noUnit', 0],
  ['1/3 in', 'denominator', 0], ['4 1/10 in', 'denominator', 2], ['1/128 in', 'denominator', 0], ['1/1 in', 'denominator', 0], ['1/0 in', 'denominator', 0], ['⅓ in', 'denominator', 0],
  ['4 3/2 in', 'improperFraction', 2], ['4 2/2 in', 'improperFraction', 2],
  ['1/2 1/4 in', 'twoFractions', 4], ['4½ 1/4 in', 'twoFractions', 3],
  ['4.5 1/2 in', 'decimalWithFraction', 0], ['1.5/2 in', 'decimalWithFraction', 0],
  ['5\' 12"', 'inchesOverTwelve', 3], ['5\' 13 1/2', 'inchesOverTwelve', 3],
  ['5.5\' 4"', 'fractionalFeet', 0], ['5 1/2\' 4"', 'fractionalFeet', 0],
  ['5\' 30 mm', 'mixedSystems', 3], ['2 in 5 mm', 'mixedSystems', 5],
  ['1 m 37 cm', 'twoUnits', 4], ['4" 5\'', 'twoUnits', 3], ['5\' 4\'', 'twoUnits', 3],
  ['5 4 in', 'twoNumbers', 2], ['1 384 in', 'twoNumbers', 2], ['1 38 mm', 'twoNumbers', 2], ['4-3 in', 'twoNumbers', 2], ['5 mm 4', 'twoNumbers', 5],
  ['1,37 m', 'comma', 1], ['1,371.6 mm', 'comma', 1],
  ['1e3 mm', 'exponent', 1], ['1E-3 in', 'exponent', 1],
  ['five ft', 'word', 0], ['5 feet', 'word', 2], ['NaN', 'word', 0], ['5 \u212A', 'word', 2], ['5 constructor', 'word', 2],
  ['٥ in', 'foreignDigit', 0], ['５ in', 'foreignDigit', 0], ['5² in', 'foreignDigit', 1],
  ['1/2 mm', 'metricFraction', 0], ['12½ cm', 'metricFraction', 0],
  ['5\u0000 in', 'control', 1], ['5\tin', 'control', 1], ['5\u200B in', 'control', 1], ['5\u202E in', 'control', 1], ['5\uD800 in', 'control', 1],
  [`${'0'.repeat(62)} in`, 'tooLong', 64],
  ['0.0001 in', 'tooManyDecimals', 0], ['0.00001 mm', 'tooManyDecimals', 0], ['0.0001 ft', 'tooManyDecimals', 0],
  ['1001 m', 'tooLarge', 0], ['99999999999999999999999 in', 'tooLarge', 0],
  ['+5 in', 'unknownCharacter', 0], ['(5) in', 'unknownCharacter', 0],
  ['5ft.5in', 'unreadable', 3], ['/2 in', 'unreadable', 0], ['5\' 4- in', 'unreadable', 4], ['1/2/4 in', 'unreadable', 3],
  ['-3 in', 'negative', 0], ['\u22123 in', 'negative', 0],
]

describe('parseLength refuses', () => {
  it.each(REFUSED)('%j as %s', (text, code, position) => {
    expect(refusal(text)).toEqual({ code, position })
  })

  it('for no reason that is not tried above', () => {
    expect([...new Set(REFUSED.map(([, code]) => code))].sort()).toEqual(Object.keys(LENGTH_REFUSALS).sort())
  })

  it('any other text by a typed error, or gives a whole number within bounds, never NaN', () => {
    const piece = fc.constantFrom('5', '4', '1/2', '½', '.5', '\'', '"', ' ', '-', 'ft', 'in', 'mm', 'm', '/', ',', 'e', '9999', '\u2032', '٥')
    fc.assert(fc.property(fc.oneof(fc.string(), fc.string({ unit: 'binary' }), fc.array(piece, { maxLength: 9 }).map(pieces => pieces.join(''))), fc.constantFrom(undefined, 'in' as const, 'mm' as const), (text, unit) => {
      try {
        const { amount } = parseLength(text, { unit })
        expect(Number.isSafeInteger(amount) && amount >= 0 && amount <= LONGEST).toBe(true)
      }
      catch (refused) { expect(refused).toBeInstanceOf(LengthRefused) }
    }), { numRuns: 3000 })
  })
})
