import type { Face } from '../line/line'
import type { RoundOutcome } from './outcome'
import { isEnded } from './outcome'

/** What a signature is given for: work may stay open and is listed, or nothing is open. */
export const SIGN_SCOPES = ['interim', 'final'] as const
export type SignScope = (typeof SIGN_SCOPES)[number]

/**
 * Why a record cannot be signed yet. The first four stand against any record: what is signed would not be what is known.
 * The others are what is open; an interim record lists them.
 */
export const SIGN_REASONS = [
  'unknownEntries', 'entriesWaiting', 'twoEntriesOneId', 'conflict',
  'notRead', 'readAgain', 'measureAgain', 'groundNotFinished', 'notYetInspected', 'nobodyLooked', 'openDeficiency', 'notHeld',
] as const
export type SignReasonCode = (typeof SIGN_REASONS)[number]

/** One reason; what it is about is named where it is about something. */
export interface SignReason {
  why: SignReasonCode
  /** False where it is only listed in a record of that scope. */
  stops: boolean
  element: string | null
  check: string | null
  face: Face | null
  /** Id of a deficiency. */
  deficiency: string | null
  /** Entries to look at. */
  entries: string[]
}

/** All that stands against signing a record of that scope, and what an interim one must list; `ready` when nothing stops it. */
export function readyToSign(outcome: RoundOutcome, scope: SignScope): { ready: boolean, reasons: SignReason[] } {
  const reasons: SignReason[] = []
  const say = (why: SignReasonCode, about: Partial<SignReason> = {}, stops = scope === 'final') =>
    reasons.push({ why, stops, element: null, check: null, face: null, deficiency: null, entries: [], ...about })

  if (outcome.unknown.length > 0) say('unknownEntries', { entries: outcome.unknown }, true)
  if (outcome.waiting.length > 0) say('entriesWaiting', { entries: outcome.waiting }, true)
  const twice = outcome.ignored.filter(one => one.why === 'twoEntriesOneId').map(one => one.entry)
  if (twice.length > 0) say('twoEntriesOneId', { entries: twice }, true)
  for (const conflict of outcome.conflicts) say('conflict', { entries: conflict.entries }, true)

  for (const { element, check, face, verdict, readAgain, disturbedBy, heads, setAside } of outcome.checks) {
    const about = { element, check, face }
    if (verdict === 'notRead') say('notRead', about)
    else if (heads.some(head => head.verdict === 'notRead' && head.overruledBy === null)) say('notRead', { ...about, entries: heads.filter(head => head.verdict === 'notRead').map(head => head.entry) })
    if (readAgain) say('readAgain', { ...about, entries: disturbedBy })
    for (const [on, why] of [['withinError', 'measureAgain'], ['groundNotFinished', 'groundNotFinished']] as const) {
      const entries = heads.filter(head => head.verdict === on && head.overruledBy === null).map(head => head.entry)
      if (entries.length > 0) say(why, { ...about, entries })
    }
    if (verdict === 'notInspected' && setAside?.why === 'notYet') say('notYetInspected', { ...about, entries: [setAside.entry] })
  }
  for (const { element } of outcome.elements) {
    const checks = outcome.checks.filter(check => check.element === element)
    if (checks.length > 0 && checks.every(check => check.verdict === 'notInspected' && check.setAside?.why !== 'outOfScope')) say('nobodyLooked', { element })
  }
  for (const { id, element, check, class: weight, held, state, standing } of outcome.deficiencies) {
    if (isEnded({ state })) continue
    const about = { element, check, deficiency: id, entries: standing.map(one => one.entry) }
    say('openDeficiency', about)
    if (weight === 'outOfUse' && held === null) say('notHeld', about)
  }
  return { ready: reasons.every(reason => !reason.stops), reasons }
}
