import { describe, expect, it } from 'vitest'
import { jobSummary } from '#server/services/job/jobSummary'
import type { DeficiencyState, RoundOutcome, Verdict } from '#shared/round/outcome'
import { schoolLine } from '../../fixtures/line/schoolLine'

const line = typeof schoolLine === 'function' ? (schoolLine as unknown as () => RoundOutcome['line'])() : schoolLine as unknown as RoundOutcome['line']
const element = line.sides[0]!.elements[0]!.id

/** An outcome of one element with these verdicts and deficiencies; the rest empty. */
function outcomeOf(verdicts: Verdict[], states: DeficiencyState[] = [], readAgain = false): RoundOutcome {
  return {
    rules: 1, basis: 'b', waiting: [], unknown: [], ignored: [], refusedLinks: [], erased: [], conflicts: [], line,
    tally: {} as RoundOutcome['tally'],
    elements: [{ element, verdict: verdicts[0] ?? 'notRead', settled: false, released: false, outOfUse: states.some(state => !state.startsWith('ended')), tasks: verdicts.length, answered: 0 }],
    checks: verdicts.map((verdict, at) => ({ element, check: `check-${at}`, face: null, verdict, settled: false, readAgain, heads: [], governs: null, earlier: [], setAside: null, disturbedBy: [], baysMissing: 0 })),
    deficiencies: states.map((state, at) => ({ id: `${at}`, tag: `A${at + 1}`, element, check: 'check-0', place: null, class: 'outOfUse', state, history: [], standing: [], assignedTo: null, due: null, waitsFor: null, until: null, held: null })),
  }
}
const move = (...of: Parameters<typeof outcomeOf>) => {
  const { moveBy, move: what, moveCount } = jobSummary(line, outcomeOf(...of), 0)
  return [moveBy, what, moveCount]
}

describe('whose move a job is', () => {
  it('is the inspector\'s while nothing, or not everything, is read', () => {
    expect(move(['notRead', 'notRead'])).toEqual(['inspector', 'walk', 0])
    expect(move(['conforms', 'notRead'])).toEqual(['inspector', 'walk', 1])
  })
  it('is the crew\'s while tags can be corrected', () => {
    expect(move(['doesNotConform', 'conforms'], ['open', 'assigned', 'cannot'])).toEqual(['crew', 'correct', 2])
  })
  it('is the inspector\'s once all that could be corrected is', () => {
    expect(move(['doesNotConform'], ['corrected'])).toEqual(['inspector', 'walkAgain', 1])
    expect(move(['conforms'], [], true)).toEqual(['inspector', 'walk', 1])
  })
  it('is the client\'s while a deviation is offered, and the manager\'s while a part is waited for', () => {
    expect(move(['doesNotConform'], ['offered'])).toEqual(['client', 'acceptDeviation', 1])
    expect(move(['doesNotConform'], ['cannot'])).toEqual(['manager', 'orderPart', 1])
  })
  it('goes to the signature when nothing is open, and to the seal once somebody signed', () => {
    expect(move(['conforms'], ['endedCorrected'])).toEqual(['inspector', 'sign', 0])
    expect(jobSummary(line, outcomeOf(['conforms']), 1)).toMatchObject({ state: 'sealing', moveBy: 'manager', move: 'seal' })
  })
  it('counts open tags and what is held out of use', () => {
    expect(jobSummary(line, outcomeOf(['doesNotConform'], ['open', 'cannot', 'offered', 'corrected', 'endedCorrected']), 0)).toMatchObject({ openTags: 4, heldOut: 1 })
  })
})
