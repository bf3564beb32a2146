import type { JobMove, JobState, LineStripOf, Mover } from '../../../shared/api/job'
import type { Line } from '../../../shared/line/line'
import { elementsOf } from '../../../shared/line/line'
import { lineMarksOf } from '../../../shared/line/lineMark'
import type { RoundOutcome } from '../../../shared/round/outcome'

/** What the list of jobs shows of a round: whose move it is, which, and the strip of its line. */
export interface JobSummary { state: JobState, moveBy: Mover, move: JobMove, moveCount: number, openTags: number, heldOut: number, strip: LineStripOf }

export function stripOf(line: Line, outcome: RoundOutcome | null): LineStripOf {
  const marks = outcome ? lineMarksOf(line, outcome) : {}
  return {
    elements: elementsOf(line).map(({ id, kind, length }) => ({ id, kind, length })),
    // Only what a row draws: tags keep their state and place.
    marks: Object.fromEntries(Object.entries(marks).filter(([, mark]) => mark.verdict !== 'notRead' || mark.tags.length > 0)),
  }
}

/**
 * Whose move it is while a round is open, gravest first: what the crew can correct, what it waits for, what the client or the authority is asked,
 * what is to be read again, what is still to be walked; and when all is read, the manager has it signed and sealed.
 */
export function jobSummary(line: Line, outcome: RoundOutcome, signatures: number): JobSummary {
  const counted = (...states: RoundOutcome['deficiencies'][number]['state'][]) => outcome.deficiencies.filter(one => states.includes(one.state)).length
  const toCorrect = counted('open', 'assigned', 'disputed')
  const waiting = counted('cannot')
  const offered = counted('offered')
  const corrected = counted('corrected')
  const unread = outcome.checks.filter(check => check.verdict === 'notRead' || check.readAgain).length
  const walked = outcome.checks.some(check => check.verdict !== 'notRead')
  const shared = { openTags: toCorrect + waiting + offered + corrected, heldOut: outcome.elements.filter(element => element.outOfUse).length, strip: stripOf(line, outcome) }
  const move = (state: JobState, moveBy: Mover, what: JobMove, moveCount = 0): JobSummary => ({ ...shared, state, moveBy, move: what, moveCount })
  if (!walked) return move('walking', 'inspector', 'walk')
  if (unread > 0 && corrected === 0) return move('walking', 'inspector', 'walk', unread)
  if (toCorrect > 0) return move('correcting', 'crew', 'correct', toCorrect)
  if (corrected > 0 || unread > 0) return move('correcting', 'inspector', 'walkAgain', Math.max(corrected, 1))
  if (offered > 0) return move('correcting', 'client', 'acceptDeviation', offered)
  if (waiting > 0) return move('correcting', 'manager', 'orderPart', waiting)
  return signatures > 0 ? move('sealing', 'manager', 'seal', signatures) : move('signing', 'inspector', 'sign')
}
