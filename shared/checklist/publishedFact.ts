import { z } from 'zod'
import type { Bound, Limit, Unit } from '../limit/limit'
import type { Length } from '../measure/length'

const figure = z.union([z.number(), z.array(z.number()).length(2)]).nullable()

/** One statement of templates/facts/published-limits.json: what a document says, in our own words, and how well that is based. */
export const publishedFactSchema = z.object({
  id: z.string().regex(/^[A-H]\d\d$/),
  topic: z.string(),
  statement: z.string(),
  inches: figure,
  millimetres: figure,
  /** How well the millimetres are based, where that differs from the rest. */
  millimetres_basis: z.string().optional(),
  tolerance_in: z.number().optional(),
  /** For what is no length, with its `unit`. */
  value: z.union([z.number(), z.string(), z.array(z.union([z.number(), z.string()]))]).optional(),
  unit: z.string().optional(),
  comparator: z.enum(['>=', '<=', '>', '<', '==', 'boolean', 'between_inclusive', 'between_exclusive', 'fail_between_exclusive', 'within_tolerance']),
  datum: z.string(),
  source: z.string(),
  edition: z.string(),
  section: z.string(),
  kind: z.string(),
  basis: z.enum(['read at the issuer', 'read in a copy', 'read in a summary', 'from memory']),
  url: z.string().optional(),
}).strict()
export type PublishedFact = z.infer<typeof publishedFactSchema>
export const publishedFactsSchema = z.array(publishedFactSchema)

/** A decimal of at most `places` places as a whole number of its last place; throws RangeError on finer ones, which a source never prints. */
function scaled(value: number, places: number): number {
  const whole = Math.round(value * 10 ** places)
  if (Math.abs(value * 10 ** places - whole) > 1e-6) throw new RangeError(`${value} has more than ${places} decimals.`)
  return whole
}

/** Inches as a source prints them, at most four decimals that are exact in 1/320,000 mm (0.0625), as a {@link Length}. */
export const lengthOfInches = (inches: number): Length => {
  const length = scaled(inches, 4) * 8128 / 10
  if (!Number.isSafeInteger(length)) throw new RangeError(`${inches} in is no whole number of 1/320,000 mm.`)
  return length
}

/** Millimetres as a source prints them, at most four decimals, as a {@link Length}. */
export const lengthOfMillimetres = (millimetres: number): Length => scaled(millimetres, 4) * 32

/** Units of the statements that are no lengths: ours, and how many of ours one of theirs is. */
const PLAIN_UNITS: Record<string, { unit: Unit, places: number }> = {
  s: { unit: 'time', places: 3 },
  degrees: { unit: 'angle', places: 3 },
  lbf: { unit: 'force', places: 3 },
  threads: { unit: 'count', places: 0 },
  signs: { unit: 'count', places: 0 },
  turn: { unit: 'count', places: 0 },
  turns: { unit: 'count', places: 0 },
}

/**
 * The bounds that a published statement sets, exactly as printed: a figure that the source does not print, or that stands there from memory, is left out.
 * Null when it sets no bound that a reading can be held against (a yes or no, a count by formula, a statement from memory).
 */
export function boundsOf(fact: PublishedFact): (Pick<Limit, 'low' | 'high' | 'avoid'> & { unit: Unit }) | null {
  if (fact.basis === 'from memory') return null
  const isLength = fact.inches !== null || fact.millimetres !== null
  const plain = isLength ? null : PLAIN_UNITS[fact.unit ?? '']
  if (!isLength && (!plain || typeof fact.value !== 'number')) return null
  const millimetres = fact.millimetres_basis === 'from memory' ? null : fact.millimetres
  const pick = (value: number | number[] | null, end: 0 | 1) => Array.isArray(value) ? value[end]! : value
  const bound = (end: 0 | 1, inclusive: boolean): Bound => {
    if (plain) {
      const amount = scaled(fact.value as number, plain.places)
      return plain.unit === 'force' ? { imperial: amount, inclusive } : { plain: amount, inclusive }
    }
    const [inch, mm] = [pick(fact.inches, end), pick(millimetres, end)]
    return { ...(inch === null ? {} : { imperial: lengthOfInches(inch) }), ...(mm === null ? {} : { metric: lengthOfMillimetres(mm) }), inclusive }
  }
  const unit = plain?.unit ?? 'length'
  switch (fact.comparator) {
    case '>=': return { unit, low: bound(0, true), high: null, avoid: null }
    case '>': return { unit, low: bound(0, false), high: null, avoid: null }
    case '<=': return { unit, low: null, high: bound(0, true), avoid: null }
    case '<': return { unit, low: null, high: bound(0, false), avoid: null }
    case 'between_inclusive': return { unit, low: bound(0, true), high: bound(1, true), avoid: null }
    case 'between_exclusive': return { unit, low: bound(0, false), high: bound(1, false), avoid: null }
    case 'fail_between_exclusive': return { unit, low: null, high: null, avoid: { low: bound(0, false), high: bound(1, false) } }
    default: return null
  }
}
