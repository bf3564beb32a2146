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
