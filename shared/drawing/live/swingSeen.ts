import type { ClearanceRange, Ground } from '../../gate/bottomClearanceRange'
import { DEGREE, type Angle, type Leaf } from '../../gate/leaf'
import type { Swing } from '../../gate/swing'
import type { Length } from '../../measure/length'
import type { LiveInput, Say } from './live'
import { figure } from './placedLimit'

/** A leaf over its ground. Limits are on the least gap through the swing; the first one's low end is the margin that is drawn. `reading` is a least gap that was measured, null where it is to be computed. */
export interface SwingClearanceInput extends LiveInput {
  leaf: Leaf
  ground: Ground
  /** How far the leaf is to open. */
  to: Angle
  /** At which angle it is looked at; the tightest when null. */
  angle: Angle | null
  /** Largest gap allowed under the closed leaf; null where no limit is set. */
  closedAtMost: Length | null
  /** Which pictures, one under another; all three when not given. On paper the plan alone is drawn. */
  parts?: readonly ('elevation' | 'plan' | 'range')[]
}

/** What the pictures of a swing share: all is computed once. */
export interface SwingSeen {
  input: SwingClearanceInput
  swing: Swing
  margin: Length
  angle: Angle
  /** Gap under the latch end at an angle. */
  gapAt: (angle: Angle) => Length
  range: ClearanceRange | null
}

/** An angle in whole degrees: the nearest, or the one before it or after it where a stretch must not be told shorter than it is. */
export function degrees(angle: Angle, say: Say, rounding: 'round' | 'floor' | 'ceil' = 'round'): string {
  return say('angle', { degrees: String(Math[rounding](angle / DEGREE)) })
}

/** What the swing comes to, in words with the colour that repeats it. */
export function swingWords({ swing, margin, input }: SwingSeen): { words: string[], role: 'rust' | 'pine' } {
  const { say, system, to } = input
  const words: string[] = []
  if (swing.contact !== null) words.push(say('touchesAt', { angle: degrees(swing.contact, say, 'floor') }))
  const [under] = swing.under
  if (under) {
    const amount = figure(margin, system)
    const from = degrees(under.from, say, 'floor')
    words.push(under.to >= to ? say('underFrom', { amount, from }) : say('underBetween', { amount, from, to: degrees(under.to, say, 'ceil') }))
  }
  return words.length > 0 ? { words, role: 'rust' } : { words: [say('clearsAll')], role: 'pine' }
}
