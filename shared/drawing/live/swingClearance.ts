import { bottomClearanceRange, type ClearanceRange, type Ground } from '../../gate/bottomClearanceRange'
import { DEGREE, type Angle, type Leaf } from '../../gate/leaf'
import type { Swing } from '../../gate/swing'
import { latchGapOverArc, swingOverArc } from '../../gate/swingOverArc'
import { latchGapOverPlane, swingOverPlane } from '../../gate/swingOverPlane'
import type { Length } from '../../measure/length'
import { FIELD_WIDTH, PAPER, type LiveDrawing, type LiveInput, type Say } from './live'
import { figure, limitWords, marginWords, placeLimits } from './placedLimit'
import { clearanceRange } from './swingRange'
import { swingElevation } from './swingElevation'
import { swingOnPaper, swingPlan } from './swingPlan'

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

/**
 * The gap under a leaf through its swing: from the side at one angle with heights exaggerated, from above as a ribbon along the arc, and the range of bottom clearance that works.
 * Throws what the gate functions and `judge` throw.
 */
export function drawSwingClearance(input: SwingClearanceInput): LiveDrawing {
  const { leaf, ground, to, system, say, closedAtMost } = input
  const [asked] = placeLimits({ ...input, reading: null })
  const margin = Math.max(0, asked?.allowed[0] && Number.isFinite(asked.allowed[0].low) ? asked.allowed[0].low : 0)
  const swing = 'plane' in ground ? swingOverPlane(leaf, ground.plane, margin, to) : swingOverArc(leaf, ground.arc, margin, to)
  const seen: SwingSeen = {
    input, swing, margin,
    angle: Math.max(0, Math.min(to, input.angle ?? swing.least.angle)),
    gapAt: angle => 'plane' in ground ? latchGapOverPlane(leaf, ground.plane, angle) : latchGapOverArc(leaf, ground.arc, angle),
    range: closedAtMost === null ? null : bottomClearanceRange({ width: leaf.width, ...(leaf.rake && { rake: leaf.rake }), margin, closedAtMost, to }, ground),
  }
  const least = input.reading ?? swing.least.gap
  const placed = placeLimits({ ...input, reading: least })
  const summary = [
    `${figure(least, system, [0])} ${say('atAngle', { angle: degrees(swing.least.angle, say) })}`,
    ...input.limits.map(({ limit }, i) => `${limitWords(limit, system, say)} (${limit.basis.name}), ${marginWords(placed[i]!, system, say).words}`),
    ...swingWords(seen).words,
    seen.range ? (seen.range.window ? `${say('works')}: ${say('between', { low: figure(seen.range.low, system), high: figure(seen.range.high, system) })}` : say('nothingWorks', { amount: figure(seen.range.shortBy, system, [0]) })) : '',
  ]
  const alt = { code: 'swingClearance', params: { summary: summary.filter(Boolean).join('; ') } }
  if (input.size === 'paper') return { list: swingOnPaper(seen, least), ...PAPER, alt }
  let top = 0
  const list = (input.parts ?? ['elevation', 'plan', 'range']).flatMap((part) => {
    const drawn = part === 'elevation' ? swingElevation(seen, top) : part === 'plan' ? swingPlan(seen, top) : clearanceRange(seen, top)
    top += drawn.height
    return drawn.list
  })
  return { list, width: FIELD_WIDTH, height: top, alt }
}
