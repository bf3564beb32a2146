import type { Length, LengthUnit, System } from './length'
import type { LengthToken } from './lengthTokens'
import { LENGTH_UNIT, LONGEST } from './length'
import { LengthRefused } from './lengthRefused'
import { lengthTokens } from './lengthTokens'

/** A length as it was typed. `unit` is the one it was typed in (`ft` for feet and inches), `text` exactly what was typed. */
export interface ParsedLength {
  amount: Length
  text: string
  unit: LengthUnit
  system: System
}

/** One number with its fraction, before its unit is known. */
interface Quantity {
  whole: string | null
  decimals: string
  over: number
  under: number
  at: number
}
interface Part { quantity: Quantity, unit: LengthUnit | null }

/**
 * Reads a length as people write it: `5' 4-1/2"`, `64 1/2 in`, `5ft4.5in`, `4½ in`, `1 384 mm`, `1.372 m`.
 *
 * @param text - what was typed, at most 64 characters
 * @param options - `unit`: what a bare number means in this field (without it a bare number is refused); `signed`: whether a minus sign may stand
 *   in front (a rise of the ground); elsewhere a length below zero is a slip
 * @throws {LengthRefused} with a code for each reason in arithmetic.md 1; never a guess
 *
 * Grouping by spaces in metric lengths is read because they are shown so. Source: arithmetic.md 1; 1 in = 25.4 mm exactly (NIST SP 811, B.6).
 */
export function parseLength(text: string, options: { unit?: LengthUnit, signed?: boolean } = {}): ParsedLength {
  if (text.length > 64) throw new LengthRefused('tooLong', { most: 64, length: text.length }, 64)
  const tokens = lengthTokens(text)
  const minus = tokens[0]?.kind === 'dash' ? tokens.shift()! : null
  const parts = partsOf(tokens, options.unit)
  if (parts.length === 0) throw new LengthRefused('noNumber')
  if (minus && !options.signed) throw new LengthRefused('negative', {}, minus.at)
  const { amount, unit } = sum(parts, options.unit)
  return { amount: minus && amount !== 0 ? -amount : amount, text, unit, system: LENGTH_UNIT[unit].system }
}

function partsOf(tokens: LengthToken[], implied: LengthUnit | undefined): Part[] {
  const parts: Part[] = []
  let before: LengthToken[] = []
  for (const token of tokens) {
    if (token.kind !== 'unit') before.push(token)
    else {
      parts.push({ quantity: quantityOf(before, parts.length > 0, token.unit, token.at), unit: token.unit })
      before = []
    }
  }
  if (before.length > 0) parts.push({ quantity: quantityOf(before, parts.length > 0, implied ?? null, before[0]!.at), unit: null })
  return parts
}

/** Reads the numbers in front of one unit. A dash may part feet from inches and a whole number from its fraction, nothing else. */
function quantityOf(tokens: LengthToken[], follows: boolean, unit: LengthUnit | null, end: number): Quantity {
  const rest = follows && tokens[0]?.kind === 'dash' ? tokens.slice(1) : tokens
  if (rest.length === 0) throw new LengthRefused('noNumber', {}, end)
  const numbers: (LengthToken & { kind: 'number' })[] = []
  const fractions: { over: number, under: number, at: number }[] = []
  let at = 0
  let dashed = false
  while (at < rest.length) {
    const [token, next, last] = [rest[at]!, rest[at + 1], rest[at + 2]]
    if (token.kind === 'number' && next?.kind === 'slash' && last?.kind === 'number') {
      if (token.decimals || last.decimals) throw new LengthRefused('decimalWithFraction', {}, token.at)
      fractions.push({ over: Number(token.whole), under: Number(last.whole), at: token.at })
      at += 3
    }
    else if (token.kind === 'vulgar') {
      fractions.push(token)
      at += 1
    }
    else if (token.kind === 'number' && fractions.length === 0 && !dashed) {
      numbers.push(token)
      at += 1
    }
    else if (token.kind === 'dash' && !dashed && numbers.length > 0 && fractions.length === 0 && at + 1 < rest.length) {
      dashed = true
      at += 1
    }
    else throw new LengthRefused(token.kind === 'number' ? 'twoNumbers' : 'unreadable', {}, token.at)
  }
  const [fraction, second] = fractions
  if (second) throw new LengthRefused('twoFractions', {}, second.at)
  const number = grouped(numbers, unit)
  if (fraction && number?.decimals) throw new LengthRefused('decimalWithFraction', {}, number.at)
  if (fraction && !(fraction.under >= 2 && fraction.under <= 64 && (fraction.under & (fraction.under - 1)) === 0)) {
    throw new LengthRefused('denominator', { denominator: fraction.under }, fraction.at)
  }
  if (fraction && number && fraction.over >= fraction.under) throw new LengthRefused('improperFraction', { over: fraction.over, under: fraction.under }, fraction.at)
  return { whole: number?.whole ?? null, decimals: number?.decimals ?? '', over: fraction?.over ?? 0, under: fraction?.under ?? 1, at: (number ?? fraction)!.at }
}

/** One number, or the groups of three digits of a metric one ("1 384 mm", as the SI Brochure 5.4.4 writes it). */
function grouped(numbers: (LengthToken & { kind: 'number' })[], unit: LengthUnit | null): (LengthToken & { kind: 'number' }) | undefined {
  const [first, second] = numbers
  if (!first || !second) return first
  const isGrouped = unit !== null && LENGTH_UNIT[unit].system === 'metric' && /^\d{1,3}$/.test(first.whole)
    && numbers.slice(1).every(number => /^\d{3}$/.test(number.whole)) && numbers.slice(0, -1).every(number => number.decimals === '')
  if (!isGrouped) throw new LengthRefused('twoNumbers', {}, second.at)
  return { ...first, whole: numbers.map(number => number.whole).join(''), decimals: numbers.at(-1)!.decimals }
}

function sum(parts: Part[], implied: LengthUnit | undefined): { amount: Length, unit: LengthUnit } {
  const [first, second, third] = parts as [Part, Part?, Part?]
  const systems = new Set(parts.flatMap(part => part.unit ? [LENGTH_UNIT[part.unit].system] : []))
  if (systems.size > 1) throw new LengthRefused('mixedSystems', {}, second!.quantity.at)
  if (!second) {
    const unit = first.unit ?? implied
    if (!unit) throw new LengthRefused('noUnit', {}, first.quantity.at)
    return { amount: amountOf(first.quantity, unit), unit }
  }
  if (third || first.unit !== 'ft' || (second.unit ?? 'in') !== 'in') throw new LengthRefused(second.unit ? 'twoUnits' : 'twoNumbers', {}, second.quantity.at)
  if (first.quantity.decimals || first.quantity.under > 1) throw new LengthRefused('fractionalFeet', {}, first.quantity.at)
  const inches = amountOf(second.quantity, 'in')
  if (inches >= LENGTH_UNIT.ft.size) throw new LengthRefused('inchesOverTwelve', { feet: first.quantity.whole ?? '0' }, second.quantity.at)
  return { amount: withinLongest(amountOf(first.quantity, 'ft') + inches, first.quantity.at), unit: 'ft' }
}

function amountOf(quantity: Quantity, unit: LengthUnit): Length {
  const { size, system, decimals } = LENGTH_UNIT[unit]
  if (quantity.under > 1 && system === 'metric') throw new LengthRefused('metricFraction', { unit }, quantity.at)
  if (quantity.decimals.length > decimals) throw new LengthRefused('tooManyDecimals', { unit, most: decimals }, quantity.at)
  // Every division here is exact by the choice of the unit, and every product that is not is far beyond the longest length.
  const whole = withinLongest(Number(quantity.whole ?? '0') * size, quantity.at)
  const decimal = Number(quantity.decimals || '0') * (size / 10 ** quantity.decimals.length)
  return withinLongest(whole + decimal + quantity.over * (size / quantity.under), quantity.at)
}

function withinLongest(amount: Length, at: number): Length {
  if (!(amount <= LONGEST)) throw new LengthRefused('tooLarge', {}, at)
  return amount
}
