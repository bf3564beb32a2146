import type { Check, DeficiencyClass } from '../checklist/check'
import { DEFICIENCY_CLASSES, FLOORED_CONCERNS } from '../checklist/check'
import type { PayloadOf } from '../entry/entry'
import { judge } from '../limit/judge'
import type { Limit } from '../limit/limit'
import { LimitRefused } from '../limit/limitRefused'
import type { Verdict } from './outcome'

/** What one reading comes to by itself; margin and limit as in {@link Head}. */
export interface ReadingJudgement {
  verdict: Verdict
  margin: number | null
  limit: string | null
  otherSystemDiffers: boolean
}

const plain = (verdict: Verdict): ReadingJudgement => Object.freeze({ verdict, margin: null, limit: null, otherSystemDiffers: false })
const CONFORMS = plain('conforms')
const DOES_NOT = plain('doesNotConform')
const NO_LIMIT = plain('noLimit')
/** A trial with fewer tries than it asks for has not been made yet. */
const NOT_READ = plain('notRead')
/** A limit that cannot be compared with this reading at all (no figure, another unit): measure again in the way that it asks for. */
const CANNOT_TELL = plain('withinError')

/**
 * What a reading comes to under the check and the limits that hold there. A measure with an uncertainty is judged with a guard band, as the checklist asked
 * for it. On ground that is not finished a measure is shown as read and comes to no verdict. Never throws.
 */
export function judgeReading(payload: Pick<PayloadOf<'reading'>, 'value' | 'groundUnfinished'>, check: Check, keys: readonly string[], limits: Readonly<Record<string, Limit>>): ReadingJudgement {
  const { value } = payload
  switch (value.method) {
    case 'look': return value.found === 'clear' ? CONFORMS : DOES_NOT
    case 'template':
      if (payload.groundUnfinished) return plain('groundNotFinished')
      return check.conformsWhen === undefined ? NO_LIMIT : (check.conformsWhen === 'passes') === (value.went === 'passed') ? CONFORMS : DOES_NOT
    case 'trial': {
      if (value.tries.some(one => one.good < one.of)) return DOES_NOT
      const made = (from: string) => value.tries.reduce((sum, one) => one.from === from ? sum + one.of : sum, 0)
      return (check.tries ?? []).every(one => made(one.from) >= one.times) ? CONFORMS : NOT_READ
    }
    default: {
      if (keys.length === 0) return NO_LIMIT
      const judged = judgeAmount(value, keys, limits)
      return payload.groundUnfinished ? { ...judged, verdict: 'groundNotFinished' } : judged
    }
  }
}

function judgeAmount(value: { amount: number, system?: 'imperial' | 'metric', uncertainty?: number }, keys: readonly string[], limits: Readonly<Record<string, Limit>>): ReadingJudgement {
  try {
    return judge(value, limits, { keys, acceptance: value.uncertainty === undefined ? 'simple' : 'guarded' })
  }
  catch (error) {
    if (error instanceof LimitRefused) return CANNOT_TELL
    throw error
  }
}

/** The graver of two classes. */
export function graver(a: DeficiencyClass, b: DeficiencyClass): DeficiencyClass {
  return DEFICIENCY_CLASSES.indexOf(a) <= DEFICIENCY_CLASSES.indexOf(b) ? a : b
}

/** The class of a finding: the check's, or a graver one that the inspector gave; never below `correctFirst` where law, drowning, entrapment, exit or accessibility is at stake. */
export function findingClass(check: Pick<Check, 'class' | 'concern'>, given: DeficiencyClass | undefined): DeficiencyClass {
  const own = given === undefined ? check.class : graver(check.class, given)
  return (FLOORED_CONCERNS as readonly string[]).includes(check.concern) ? graver(own, 'correctFirst') : own
}
