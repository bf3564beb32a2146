import { z } from 'zod'
import { MEANINGS } from '../entry/entry'
import type { Line } from '../line/line'
import { elementsOf } from '../line/line'
import type { RoundOutcome } from '../round/outcome'
import { isEnded } from '../round/outcome'
import { CAUTIONS } from './record'

const text = z.string().min(1)
const oneAndMany = z.object({ one: text, many: text }).strict()

/** The texts that go into a record, in one language (templates/record): `{n}`, `{m}` and `{tags}` are filled in. */
export const recordTextsSchema = z.object({
  isNot: text,
  meanings: z.object(Object.fromEntries(MEANINGS.map(meaning => [meaning, text])) as Record<(typeof MEANINGS)[number], typeof text>).strict(),
  cautions: z.object(Object.fromEntries(CAUTIONS.map(caution => [caution, text])) as Record<(typeof CAUTIONS)[number], typeof text>).strict(),
  sentence: z.object({
    all: oneAndMany, some: oneAndMany, none: oneAndMany,
    attended: oneAndMany, outOfUse: oneAndMany, open: oneAndMany, notInspected: oneAndMany, notInspectedInFull: oneAndMany,
    nothingOpen: text, and: text,
  }).strict(),
}).strict()
export type RecordTexts = z.infer<typeof recordTextsSchema>

/**
 * The outcome in one sentence, in two parts: what is released, and what is not. Says nothing that the fold did not decide.
 * A way out is told apart from what is held out of use, since it is attended and never locked.
 */
export function recordSentence(line: Line, outcome: Pick<RoundOutcome, 'elements' | 'deficiencies' | 'checks'>, texts: RecordTexts['sentence']): { lead: string, rest: string } {
  const elements = elementsOf(line)
  const tagsWhere = (wanted: (element: RoundOutcome['elements'][number], exit: boolean) => boolean) => elements
    .filter((element) => {
      const found = outcome.elements.find(one => one.element === element.id)
      return found !== undefined && wanted(found, element.gate?.exit === true)
    })
    .map(element => element.tag)
  const released = outcome.elements.filter(element => element.released).length
  const total = outcome.elements.length
  const form = released === total ? texts.all : released === 0 ? texts.none : texts.some
  // Of "some" the count of those released decides the verb, of "all" and "none" the count of all.
  const lead = fill((form === texts.some ? released : total) === 1 ? form.one : form.many, { n: String(released), m: String(total) })

  const open = outcome.deficiencies.filter(deficiency => !isEnded(deficiency)).length
  const clause = (form: { one: string, many: string }, tags: string[]) => tags.length === 0 ? [] : [fill(tags.length === 1 ? form.one : form.many, { tags: joined(tags, texts.and), n: String(tags.length) })]
  const seen = elementsSeen(outcome.checks)
  const unread = (element: RoundOutcome['elements'][number]) => element.verdict === 'notInspected' || element.verdict === 'notRead'
  const clauses = [
    ...clause(texts.attended, tagsWhere((element, exit) => element.outOfUse && exit)),
    ...clause(texts.outOfUse, tagsWhere((element, exit) => element.outOfUse && !exit)),
    ...(open === 0 ? [] : [fill(open === 1 ? texts.open.one : texts.open.many, { n: String(open) })]),
    ...clause(texts.notInspected, tagsWhere(element => unread(element) && !seen.has(element.element))),
    ...clause(texts.notInspectedInFull, tagsWhere(element => unread(element) && seen.has(element.element))),
  ]
  const rest = clauses.length === 0 ? texts.nothingOpen : `${joined(clauses, texts.and)}.`
  return { lead, rest: rest.charAt(0).toUpperCase() + rest.slice(1) }
}

/** Ids of the elements at which at least one check was answered by looking, measuring or trying. */
export function elementsSeen(checks: readonly Pick<RoundOutcome['checks'][number], 'element' | 'verdict'>[]): Set<string> {
  return new Set(checks.filter(({ verdict }) => verdict !== 'notInspected' && verdict !== 'notRead' && verdict !== 'notApplicable').map(check => check.element))
}

function fill(template: string, values: Record<string, string>): string {
  return template.replace(/\{(\w+)\}/g, (_, key: string) => values[key] ?? '')
}

/** "A", "A and B", "A, B and C": the same in English and Spanish but for the word between the last two. */
function joined(parts: string[], and: string): string {
  return parts.length < 2 ? parts.join('') : `${parts.slice(0, -1).join(', ')} ${and} ${parts[parts.length - 1]}`
}
