import type { Length, System } from './length'
import { INCH, MILLIMETRE } from './length'
import { compareLengths } from './compareLengths'

export interface LengthStyle {
  system: System
  /** `inches` (default): 54 1/2 in; `feet`: 4' 6 1/2". Metric lengths are shown in millimetres either way. */
  style?: 'inches' | 'feet'
  /** Finest fraction of an inch, a power of two to 64; 16 by default. */
  denominator?: 2 | 4 | 8 | 16 | 32 | 64
  /** Limits (or readings) that this length stands beside: it is shown finer where rounding would hide on which side of one of them it is. */
  beside?: readonly Length[]
}

/** A length as it is shown: `text` plain (ordinary spaces, U+2212 for minus), the rest for screens that set fractions. */
export interface ShownLength {
  text: string
  negative: boolean
  /** Whole feet in the feet style, else null. */
  feet: number | null
  /** Whole inches (beyond the feet, where there are any) or millimetres. */
  whole: number
  /** 0 over 1 where there is no fraction; else reduced. */
  numerator: number
  denominator: number
  /** Digits after the point, where fractions of a tape are not fine enough; else ''. */
  decimals: string
  unit: 'in' | 'mm'
  /** Whether the length is exactly what is shown. */
  exact: boolean
}

/** One way of rounding: `per` steps make one inch or millimetre. */
interface Step { per: number, decimals: number }
const decimal = (decimals: number): Step => ({ per: 10 ** decimals, decimals })
const FINER_INCH: readonly Step[] = [...[32, 64].map(per => ({ per, decimals: 0 })), ...[3, 4, 5, 6, 7].map(decimal)]
const FINER_MILLIMETRE: readonly Step[] = [1, 2, 3, 4, 5, 6].map(decimal)

/**
 * Shows a length: inches to the nearest 1/16, millimetres to 1, half away from zero and carried (11 31/32 in is 1' 0"). Showing never decides.
 *
 * @throws {RangeError} when the amount is not a whole number
 */
export function formatLength(amount: Length, { system, style = 'inches', denominator = 16, beside = [] }: LengthStyle): ShownLength {
  if (!Number.isSafeInteger(amount)) throw new RangeError('A length is a whole number of 1/320,000 mm.')
  const imperial = system === 'imperial'
  const size = BigInt(imperial ? INCH : MILLIMETRE)
  const steps = imperial
    ? [{ per: denominator, decimals: 0 }, ...FINER_INCH.filter(step => step.decimals > 0 || step.per > denominator)]
    : [{ per: 1, decimals: 0 }, ...FINER_MILLIMETRE]
  // A step fits that leaves everything beside it on its side: exactly this length too, where a figure can say it at all; the last steps are finer than the
  // unit of length itself, so one always fits the others.
  const fits = ({ per }: Step, others: readonly Length[]) => {
    const count = rounded(amount, size, per)
    return others.every(other => compareShown(count, per, other, size) === compareLengths(amount, other))
  }
  const step = steps.find(one => fits(one, beside)) ?? steps.find(one => fits(one, beside.filter(other => other !== amount)))!
  const count = rounded(amount, size, step.per)
  return { ...shown(count, step, imperial, imperial && style === 'feet'), exact: compareShown(count, step.per, amount, size) === 0 }
}

/** How many steps the length comes to, half away from zero. BigInt: the products leave 2^53. */
function rounded(amount: Length, size: bigint, per: number): bigint {
  const twice = 2n * BigInt(Math.abs(amount)) * BigInt(per)
  const count = (twice + size) / (2n * size)
  return amount < 0 ? -count : count
}

function compareShown(count: bigint, per: number, other: Length, size: bigint): -1 | 0 | 1 {
  const difference = count * size - BigInt(other) * BigInt(per)
  return difference < 0n ? -1 : difference > 0n ? 1 : 0
}

function shown(count: bigint, { per, decimals }: Step, imperial: boolean, inFeet: boolean): Omit<ShownLength, 'exact'> {
  const negative = count < 0n
  const steps = negative ? -count : count
  const units = Number(steps / BigInt(per))
  const left = Number(steps % BigInt(per))
  const feet = inFeet ? Math.floor(units / 12) : null
  const whole = feet === null ? units : units % 12
  const digits = decimals > 0 ? String(left).padStart(decimals, '0') : ''
  const shared = decimals > 0 || left === 0 ? per : commonPower(left, per)
  const [numerator, denominator] = decimals > 0 || left === 0 ? [0, 1] : [left / shared, per / shared]
  const fraction = numerator > 0 ? `${numerator}/${denominator}` : ''
  const figure = digits ? `${imperial ? whole : spaced(whole)}.${digits}`
    : fraction && whole === 0 ? fraction
      : `${imperial ? whole : spaced(whole)}${fraction && ` ${fraction}`}`
  const text = feet === null ? `${figure} ${imperial ? 'in' : 'mm'}` : `${feet > 0 ? `${feet}' ` : ''}${figure}"`
  return { text: negative ? `\u2212${text}` : text, negative, feet, whole, numerator, denominator, decimals: digits, unit: imperial ? 'in' : 'mm' }
}

/** The largest power of two in both. */
function commonPower(left: number, per: number): number {
  let power = 1
  while (left % (2 * power) === 0 && per % (2 * power) === 0) power *= 2
  return power
}

/** Groups of three digits, from five digits on would be usual too; four are grouped here so that columns of millimetres line up. */
function spaced(whole: number): string {
  return String(whole).replace(/\B(?=(?:\d{3})+$)/g, ' ')
}
