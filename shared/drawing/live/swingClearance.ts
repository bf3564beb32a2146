import { bottomClearanceRange } from '../../gate/bottomClearanceRange'
import { latchGapOverArc, swingOverArc } from '../../gate/swingOverArc'
import { latchGapOverPlane, swingOverPlane } from '../../gate/swingOverPlane'
import { FIELD_WIDTH, PAPER, type LiveDrawing } from './live'
import { figure, limitWords, marginWords, placeLimits } from './placedLimit'
import { swingElevation } from './swingElevation'
import { swingOnPaper, swingPlan } from './swingPlan'
import { clearanceRange } from './swingRange'
import { degrees, swingWords, type SwingClearanceInput, type SwingSeen } from './swingSeen'

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
