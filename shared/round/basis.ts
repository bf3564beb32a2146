import type { Check } from '../checklist/check'
import type { Limit } from '../limit/limit'
import type { Face, Line } from '../line/line'
import type { Provision } from '../provision/provision'

/** The version of the rules in shared/; a round keeps the one that it was opened under. */
export const RULES_VERSION = 1

/** One thing to be answered on the walk: a check on an element (and face, where the check is of a face), with the limits that hold there. */
export interface WalkTask {
  /** Element id. */
  element: string
  /** Check id. */
  check: string
  /** Which face it is of; null when it is of the element as a whole. */
  face: Face | null
  /** Keys into {@link RoundBasis.limits}; none means "recorded, no limit set" where the method measures. */
  limits: string[]
  /** One answer stands for the whole line: it is read where it is worst, on any of the elements that have this task. */
  line?: true
}

/** What a walk is held against, pinned by digest: a change at the desk is a new basis, never an edit. Serialised by RFC 8785, named by its SHA-256. */
export interface RoundBasis {
  rules: number
  line: Line
  /** Checklists and versions that the checks come from. */
  checklists: { id: string, version: number }[]
  checks: Check[]
  limits: Record<string, Limit>
  /** In walking order: along the line, within an element in the order of the checklist. */
  tasks: WalkTask[]
  /** Local numbers and notes of the job, pinned whole so that an element added in the field gets its limits with no signal. */
  provisions?: Provision[]
  /** Limits that would have held, and the key of the limit that stands in their place; printed with the record. */
  setAside?: { limit: Limit, by: string, why: 'replaced' | 'looser' }[]
}
