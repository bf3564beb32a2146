import type { Limit } from '../limit/limit'
import type { Check, Checklist } from './check'
import { compileCondition, ConditionError } from './condition'
import { boundsOf } from './publishedFact'
import type { PublishedFact } from './publishedFact'

/** Something that keeps a checklist from being published: where it is (JSON pointer), a stable code, and what to do. */
export interface ChecklistProblem { pointer: string, code: string, message: string }

/** A checklist that cannot be used; every problem at once, so that it is mended in one go. */
export class ChecklistError extends Error {
  readonly code = 'checklist-problems'
  constructor(readonly problems: ChecklistProblem[]) {
    super(problems.map(problem => `${problem.pointer}: ${problem.message}`).join('\n'))
    this.name = 'ChecklistError'
  }
}

const figures = (limit: Pick<Limit, 'low' | 'high' | 'avoid'>) => {
  const bound = (one: Limit['low']) => one && [one.imperial ?? null, one.metric ?? null, one.plain ?? null, one.inclusive]
  return JSON.stringify([bound(limit.low), bound(limit.high), limit.avoid && [bound(limit.avoid.low), bound(limit.avoid.high)]])
}

function limitProblems(limit: Limit, pointer: string, facts: Map<string, PublishedFact>): ChecklistProblem[] {
  const said = (code: string, message: string) => [{ pointer, code, message }]
  if (!limit.low && !limit.high && !limit.avoid) return said('empty-limit', 'Give the limit a low end, a high end or a band to stay out of, or leave it away and say why.')
  if (limit.basis.kind !== 'builtIn') return []
  const fact = facts.get(limit.basis.fact ?? '')
  if (!fact) return said('unknown-fact', `A built-in limit names a published statement; "${limit.basis.fact ?? ''}" is none.`)
  if (fact.basis === 'from memory') return said('from-memory', `${fact.id} is from memory and is never a default limit: leave it empty with the reason.`)
  const expected = boundsOf(fact)
  if (!expected) return said('no-bound', `${fact.id} sets no figure that a reading can be held against.`)
  if (expected.unit !== limit.unit || figures(expected) !== figures(limit)) return said('figure-differs', `The figures are not those of ${fact.id}: ${fact.statement}.`)
  const { name, citation, edition, read } = limit.basis
  if (name !== fact.source || citation !== fact.section || edition !== fact.edition || read !== fact.basis) return said('basis-differs', `Name ${fact.id} as its statement does: document, section, edition, how it was read.`)
  return []
}

function conditionProblems(text: string | undefined, pointer: string): ChecklistProblem[] {
  if (text === undefined) return []
  try {
    compileCondition(text)
    return []
  }
  catch (error) {
    if (error instanceof ConditionError) return [{ pointer, code: `condition-${error.code}`, message: error.message }]
    throw error
  }
}

/** What is wrong with one check that its schema cannot see; `checks` are the ids that it may name. */
function checkProblems(check: Check, pointer: string, checks: Set<string>, facts: Map<string, PublishedFact>): ChecklistProblem[] {
  const limitIds = check.limits.map(limit => limit.id)
  return [
    ...conditionProblems(check.when, `${pointer}/when`),
    ...check.limits.flatMap((limit, at) => [
      ...conditionProblems(limit.when, `${pointer}/limits/${at}/when`),
      ...limitProblems(limit, `${pointer}/limits/${at}`, facts),
      ...(limitIds.indexOf(limit.id) === at ? [] : [{ pointer: `${pointer}/limits/${at}/id`, code: 'limit-twice', message: `The limit "${limit.id}" stands twice in "${check.id}".` }]),
    ]),
    ...check.disturbs.filter(id => !checks.has(id)).map(id => ({ pointer: `${pointer}/disturbs`, code: 'unknown-check', message: `"${check.id}" disturbs "${id}", which is not in this checklist.` })),
    ...(check.sources ?? []).filter(id => !facts.has(id)).map(id => ({ pointer: `${pointer}/sources`, code: 'unknown-fact', message: `There is no published statement "${id}".` })),
  ]
}

/**
 * All that keeps a checklist from being published and that needs more than one check to see: ids, sections, what checks disturb, conditions, and
 * built-in figures against the published statements. An empty answer means that it may be published.
 */
export function checklistProblems(checklist: Checklist, facts: readonly PublishedFact[]): ChecklistProblem[] {
  const byId = new Map(facts.map(fact => [fact.id, fact]))
  const ids = checklist.checks.map(check => check.id)
  const sections = new Set(checklist.sections.map(section => section.id))
  const known = new Set(ids)
  return checklist.checks.flatMap((check, at) => {
    const pointer = `/checks/${at}`
    return [
      ...(ids.indexOf(check.id) === at ? [] : [{ pointer: `${pointer}/id`, code: 'check-twice', message: `The check "${check.id}" stands twice.` }]),
      ...(sections.has(check.section) ? [] : [{ pointer: `${pointer}/section`, code: 'unknown-section', message: `There is no section "${check.section}".` }]),
      ...checkProblems(check, pointer, known, byId),
    ]
  })
}
