/** Why a text is not read as a length; screens word each code in their own language with the parameters beside it. */
export const LENGTH_REFUSALS = {
  noNumber: 'There is no number here: type one, for example 54 1/2 in.',
  noUnit: 'Say which unit: in, ft, mm, cm or m, for example 54 1/2 in.',
  denominator: 'A tape has halves, quarters, 8ths, 16ths, 32nds and 64ths: write the fraction in one of them.',
  improperFraction: 'After a whole number the fraction must be less than one: write 1 1/2, not 1 3/2.',
  twoFractions: 'Two fractions stand here: write one, for example 3/4.',
  decimalWithFraction: 'Write either decimals or a fraction, not both: 4.5 or 4 1/2.',
  inchesOverTwelve: 'Inches must be under 12 after feet: carry them into the feet.',
  fractionalFeet: 'Feet must be whole when inches follow: write 5\' 6" or 5 1/2 ft.',
  mixedSystems: 'Feet or inches and metric units are mixed: write the length in one of them.',
  twoUnits: 'Write one unit, or feet and then inches: 64 1/2 in or 5\' 4 1/2".',
  twoNumbers: 'Two numbers stand side by side: write one, or put the units beside them.',
  comma: 'A comma can mean two things: write a point for decimals and nothing for thousands, 1371.6 mm.',
  exponent: 'Write the number in full, without an exponent: 1000 mm.',
  word: 'This word is not a unit: use in, ft, mm, cm or m, and figures for numbers.',
  foreignDigit: 'Use the digits 0 to 9.',
  metricFraction: 'Metric lengths have no fractions: write decimals, 12.5 mm.',
  control: 'There is a hidden character in the text: delete it and type the length again.',
  tooLong: 'A length has at most 64 characters.',
  tooManyDecimals: 'Too many decimals: at most 3 for inches and feet, 4 for millimetres.',
  tooLarge: 'A length here is at most 1 km (3280 ft).',
  negative: 'A length cannot be below zero here: leave out the minus sign.',
  unknownCharacter: 'This character is not part of a length: delete it.',
  unreadable: 'This cannot be read as a length: write it like 54 1/2 in, 5\' 4 1/2" or 1372 mm.',
} as const
export type LengthRefusalCode = keyof typeof LENGTH_REFUSALS

/**
 * A text that {@link parseLength} does not read. `code` is stable, `message` says in English what to do, `parameters` are what a translated sentence
 * may name, `position` is the index (UTF-16) of the first character that is at fault, or null where the whole text is.
 */
export class LengthRefused extends Error {
  override readonly name = 'LengthRefused'
  constructor(
    readonly code: LengthRefusalCode,
    readonly parameters: Readonly<Record<string, string | number>> = {},
    readonly position: number | null = null,
  ) {
    super(LENGTH_REFUSALS[code])
  }
}
