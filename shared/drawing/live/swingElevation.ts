import { box, dimV, meshPath, open, path, poly, seg, text, type Point, type Shape } from '../displayList'
import { FIELD_WIDTH } from './live'
import { bareFigure, figure } from './placedLimit'
import { degrees, type SwingSeen } from './swingSeen'
import { cutText, figureThatFits, textWidth } from './textWidth'
import { zigzag } from './uprightGauge'
import { groundFromEdge } from './groundFromEdge'

const HEAD = 24
const HEIGHT = HEAD + 180
const [HINGE, LATCH] = [26, 325]
/** How often heights may be exaggerated; the largest that fits is taken. */
const TIMES = [12, 10, 8, 6, 5, 4, 3, 2, 1, 0.5, 0.2, 0.1, 0.05, 0.02, 0.01] as const
/** Heights have this room over the foot. */
const [FOOT, ROOM] = [HEAD + 142, 84]
const TUBE = 18

/** The leaf from the side at one angle, over the ground that it stands over; heights drawn many times. */
export function swingElevation({ input, angle, gapAt, margin }: SwingSeen, top: number): { list: Shape[], height: number } {
  const { leaf, system, say } = input
  const rake = leaf.rake ? leaf.rake.rise / leaf.rake.over * leaf.width : 0
  const edge = leaf.clearance + rake
  const latchGap = gapAt(angle)
  const rise = edge - latchGap
  const closedRise = edge - gapAt(0)
  const heights = [0, rise, leaf.clearance, edge, ...(margin > 0 ? [margin, rise + margin] : []), ...(angle > 0 ? [closedRise] : [])]
  const [low, high] = [Math.min(...heights), Math.max(...heights)]
  const level = (LATCH - HINGE) / leaf.width
  const times = TIMES.find(each => (high - low) * level * each <= ROOM) ?? TIMES.at(-1)!
  const yOf = (height: number) => top + Math.max(HEAD + 26, FOOT - (height - low) * level * times)
  const [edge0, edge1, ground0, ground1] = [yOf(leaf.clearance), yOf(edge), yOf(0), yOf(rise)]
  const tight = latchGap < margin || latchGap <= 0
  const role = tight ? 'rust' : 'ink'
  const lean = (edge1 - edge0) / (LATCH - HINGE)
  const [tubeTop, headTop] = [Math.min(edge0, edge1) - TUBE, top + HEAD + 12]

  const list: Shape[] = [
    text(14, top + 15, cutText(say('seenAt', { angle: degrees(angle, say) }), 14, 226), { role: 'soft' }),
    text(346, top + 15, say('exaggerated', { times: String(times) }), { role: 'soft', anchor: 'end' }),
    box('post', HINGE - 16, top + HEAD + 4, 10, ground0 + 8 - top - HEAD - 4, { fill: 'steel', role: 'steel-edge', width: 'hair' }),
    ...groundFromEdge([[0, ground0], [HINGE, ground0], [LATCH, ground1], [FIELD_WIDTH, ground1 + (ground1 - ground0) * (FIELD_WIDTH - LATCH) / (LATCH - HINGE) * 0.5]].map(([x, y]) => [x!, clampY(y!)] as Point), { depth: 8 }),
    poly('leaf', [[HINGE, edge0 - TUBE], [LATCH, edge1 - TUBE], [LATCH, edge1], [HINGE, edge0]], { fill: 'chalk', role: 'ink', width: 'line' }),
    open('leaf', [[HINGE, edge0 - TUBE + 5], [LATCH, edge1 - TUBE + 5]], { role: 'paper', width: 4 }),
    ...[HINGE, LATCH].map((x, i) => seg('leaf', x, headTop - 4, x, [edge0, edge1][i]! - TUBE)),
    open('dim', zigzag(HINGE - 8, LATCH + 10, headTop), { width: 'hair' }),
  ]
  if (tubeTop - headTop > 8) {
    list.push(path('mesh', meshPath(LATCH - HINGE, tubeTop - headTop - 2, 25, 40, (u, v) => [HINGE + u, headTop + 2 + v * (edge0 + lean * u - TUBE - headTop - 2) / (tubeTop - headTop - 2)], 12), { role: 'mark', width: 'wire' }))
  }
  // Where the gap is under the margin: from there to the latch end, or from the hinge.
  if (margin > 0 || latchGap < 0) {
    const asked = Math.max(margin, 0)
    const crossing = leaf.clearance === latchGap ? 0 : (leaf.clearance - asked) / (leaf.clearance - latchGap)
    const stretch: [number, number] | null = leaf.clearance < asked ? [0, latchGap < asked ? 1 : Math.max(0, Math.min(1, crossing))] : latchGap < asked ? [Math.max(0, Math.min(1, crossing)), 1] : null
    if (stretch) {
      const at = (share: number, [from, to]: [number, number]): Point => [HINGE + share * (LATCH - HINGE), from + share * (to - from)]
      list.push(poly('band', [at(stretch[0], [edge0, edge1]), at(stretch[1], [edge0, edge1]), at(stretch[1], [ground0, ground1]), at(stretch[0], [ground0, ground1])], { fill: 'rust-wash' }))
    }
  }
  if (margin > 0) {
    list.push(seg('fit', HINGE, yOf(margin), LATCH + 10, yOf(rise + margin), { role: 'brass', dash: [7, 3] }))
    const words = cutText(say('asked', { amount: figure(margin, system) }), 14, 120)
    const wide = textWidth(words, 14)
    const askedY = (x: number) => yOf(margin) + (yOf(rise + margin) - yOf(margin)) * (x + wide / 2 - HINGE) / (LATCH + 10 - HINGE) - 6
    // On its line where that runs clear under the leaf, else at the foot with a piece of it.
    const x = [74, 104, 140].map(each => HINGE + each).find(each => askedY(each) - 15 > Math.max(edge0 + lean * (each - HINGE), edge0 + lean * (each + wide - HINGE)))
    const foot = top + HEIGHT - 24
    list.push(...x === undefined
      ? [seg('fit', 92, foot - 5, 120, foot - 5, { role: 'brass', dash: [7, 3] }), text(128, foot, words, { role: 'brass', halo: 'paper' })]
      : [text(x, askedY(x), words, { role: 'brass', halo: 'paper', haloWidth: 5 })])
  }
  if (angle > 0) list.push(seg('fit', HINGE, ground0, LATCH + 10, yOf(closedRise), { role: 'mark', width: 'hair', dash: [2, 3] }))
  list.push(text(58, top + HEIGHT - 6, cutText(angle > 0 ? say('groundClosed') : '', 14, 216), { role: 'soft' }))
  // The gap at the hinge, and the one at the latch end, large.
  const hingeFigure = bareFigure(leaf.clearance, system)
  if (ground0 - edge0 > 6) list.push(...dimV(HINGE + 9, edge0, ground0, ''))
  list.push(text(HINGE + 18, ground0 - edge0 > 22 ? (edge0 + ground0) / 2 + 6 : ground0 + 19, hingeFigure, { size: 17, halo: 'paper' }))
  const latchFigure = bareFigure(latchGap, system, [0, margin])
  list.push(seg('dim', LATCH - 4, edge1, LATCH - 4, ground1, { role, width: tight ? 'heavy' : 'hair' }))
  const figureY = Math.min(top + HEIGHT - 6, Math.max(edge1, ground1) + 40)
  list.push(seg('dim', LATCH - 4, Math.max(edge1, ground1) + 2, LATCH - 4, figureY - 22, { role, width: 'hair' }))
  list.push(...figureThatFits(346, figureY, latchFigure, [...(textWidth(latchFigure, 28, 300) < 90 ? [28] : []), 18, 14], 150, { anchor: 'end', weight: 300, role, halo: 'paper' }))
  return { list: list.filter(shape => shape.kind !== 'text' || shape.text !== ''), height: HEIGHT }

  function clampY(y: number): number {
    return Math.max(top + HEAD + 20, Math.min(top + HEIGHT - 12, y))
  }
}
