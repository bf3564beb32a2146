import type { Limit } from '../../limit/limit'
import type { Length, System } from '../../measure/length'
import type { Drawing } from '../displayList'

/**
 * Words that a live drawing asks for; the screen (or the PDF) gives them in its language, with figures already set in.
 * Every text of a live drawing comes from here, from a limit's basis, or is a figure.
 */
export const LIVE_WORDS = [
  'atLeast', 'over', 'atMost', 'under', 'between', 'keepOut', 'short', 'tooMuch', 'inside', 'atLimit', 'atLimitOut', 'inBand', 'clash', 'more', 'noLimit', 'noReading',
  'seenAt', 'exaggerated', 'asked', 'groundClosed', 'tightest', 'atAngle', 'underFrom', 'underBetween', 'clearsAll', 'touchesAt', 'angle', 'works', 'nothingWorks', 'hinge',
  'sphere', 'side', 'diagonal', 'width', 'passed', 'stopped', 'turnedIn', 'standsOut', 'notFelt', 'tries', 'comes',
] as const
export type LiveWord = (typeof LIVE_WORDS)[number]
export type Say = (word: LiveWord, params?: Readonly<Record<string, string>>) => string

/** A limit in force, and how far its datum lies above the datum of the reading (0 where they are the same). It keeps its own figure in words. */
export interface LiveLimit { limit: Limit, shift?: Length }

/** What every live drawing takes. */
export interface LiveInput {
  /** What was read, in the unit and datum of the check; null before. */
  reading: Length | null
  limits: readonly LiveLimit[]
  /** The system that figures are shown and compared in. */
  system: System
  say: Say
  /** `field`: 360 wide for a phone; `paper`: 150 wide for a record, where the words stand beside it. */
  size: 'field' | 'paper'
}

/** A drawing with what it says to who does not see it: a code for the screen to translate, with texts already in its language. */
export interface LiveDrawing extends Drawing { alt: { code: string, params: Readonly<Record<string, string>> } }

export const FIELD_WIDTH = 360
export const PAPER = { width: 150, height: 92 } as const
