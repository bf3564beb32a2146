import type { EntryKind } from '../entry/entry'
import { ENTRY_RULES } from '../entry/entryRules'
import type { DeficiencyOutcome } from './outcome'

/** Words that stay on the table until a later one names them. */
const TO_ANSWER: readonly EntryKind[] = ['assignment', 'cannot', 'disputed', 'deviationOffered']

/**
 * What the next word of a kind on a deficiency names in `answers`: the readings that stand, corrections that nobody has looked at, and words that wait for one.
 * Kinds that name one reading need an entry for each: several lists come back. `kindOf` tells the kind of an entry of its history, undefined where it is not at hand.
 */
export function wordAnswers(kind: EntryKind, deficiency: Pick<DeficiencyOutcome, 'standing' | 'history'>, kindOf: (id: string) => string | undefined): string[][] {
  const { answers, readings } = ENTRY_RULES[kind]
  const standing = deficiency.standing.filter(one => answers.includes(one.kind))
  const waiting = deficiency.history.filter((id) => {
    const word = TO_ANSWER.find(one => one === kindOf(id))
    return word !== undefined && answers.includes(word)
  })
  const others = [...standing.filter(one => one.kind !== 'reading').map(one => one.entry), ...waiting]
  const read = standing.filter(one => one.kind === 'reading').map(one => one.entry)
  return readings === 'one' ? read.map(reading => [reading, ...others]) : [[...read, ...others]]
}
