/**
 * A length: a whole number of 1/320,000 mm, a safe integer (contracts.md 1). Never a fraction, never a float.
 * 1 in = 25.4 mm exactly = 8,128,000.
 */
export type Length = number

/** One millimetre as a {@link Length}. */
export const MILLIMETRE: Length = 320_000
/** One inch as a {@link Length}; exact, since an inch is 25.4 mm by definition. */
export const INCH: Length = 8_128_000
/** One foot as a {@link Length}. */
export const FOOT: Length = 12 * INCH

/** The two systems that a tape is marked in. */
export const SYSTEMS = ['imperial', 'metric'] as const
export type System = (typeof SYSTEMS)[number]

/** The units in which a length is typed. */
export const LENGTH_UNITS = ['in', 'ft', 'mm', 'cm', 'm'] as const
export type LengthUnit = (typeof LENGTH_UNITS)[number]

/** Each unit of {@link LENGTH_UNITS} as a {@link Length}, its system, and how many decimals of it a length holds exactly. */
export const LENGTH_UNIT: Readonly<Record<LengthUnit, { size: Length, system: System, decimals: number }>> = {
  in: { size: INCH, system: 'imperial', decimals: 3 },
  ft: { size: FOOT, system: 'imperial', decimals: 3 },
  mm: { size: MILLIMETRE, system: 'metric', decimals: 4 },
  cm: { size: 10 * MILLIMETRE, system: 'metric', decimals: 5 },
  m: { size: 1000 * MILLIMETRE, system: 'metric', decimals: 7 },
}

/** The longest length that is read or stored: 1 km, as the line's schema has it. */
export const LONGEST: Length = 1_000_000 * MILLIMETRE
