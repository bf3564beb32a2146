import { DEGREE, ratioOf, radians, type Angle } from '../../gate/leaf'
import { INCH, MILLIMETRE, type Length } from '../../measure/length'
import { box, open, poly, seg, text, type Point, type Shape } from '../displayList'
import { bareFigure } from './placedLimit'
import { degrees, swingWords, type SwingSeen } from './swingSeen'
import { cutText, figureThatFits, textWidth, wrapText } from './textWidth'

const HEIGHT = 208
const COLUMN = 240

interface PlanFrame { x: number, y: number, reach: number, perGap: number }

/** A point of the plan at an angle and a distance from the hinge. */
const pointAt = ({ x, y }: PlanFrame, angle: Angle, distance: number): Point => [x + distance * Math.cos(radians(angle)), y + distance * Math.sin(radians(angle))]

/** Largest plan whose ribbon stays inside [left, right] and above `bottom`. */
function fitted(seen: SwingSeen, y: number, left: number, right: number, bottom: number, most: number, perGap: number): PlanFrame {
  const { input, gapAt, margin } = seen
  const stops = steps(input.to)
  const largest = Math.max(margin, 1, ...stops.map(gapAt))
  const scale = Math.min(perGap, most * 0.2 / largest)
  for (let reach = most; ; reach -= 2) {
    const outer = (angle: Angle) => reach + 4 + Math.max(0, gapAt(angle), margin) * scale
    const shape = stops.map(angle => [outer(angle) * Math.cos(radians(angle)), outer(angle) * Math.sin(radians(angle))] as const)
    const back = Math.max(0, ...shape.map(([u]) => -u))
    const frame = { x: left + back, y, reach, perGap: scale }
    if (reach <= 20 || (frame.x + Math.max(...shape.map(([u]) => u)) <= right && y + Math.max(...shape.map(([, v]) => v)) <= bottom)) return frame
  }
}

function steps(to: Angle): Angle[] {
  const count = Math.max(12, Math.ceil(to / (2 * DEGREE)))
  return Array.from({ length: count + 1 }, (_, i) => Math.round(to * i / count))
}

/** The gap under the latch end drawn outward along the arc, in two colours where it is under the margin; stretches meet at the exact angles. */
function ribbon(seen: SwingSeen, frame: PlanFrame, start: number): Shape[] {
  const { input, swing, gapAt } = seen
  const borders = [...new Set([0, input.to, ...swing.under.flatMap(({ from, to }) => [from, to])])].sort((a, b) => a - b)
  return borders.slice(1).flatMap((end, i) => {
    const begin = borders[i]!
    if (end - begin < 1) return []
    const middle = (begin + end) / 2
    const role = swing.under.some(({ from, to }) => middle > from && middle < to) ? 'rust' : 'pine'
    const angles = [begin, ...steps(input.to).filter(angle => angle > begin && angle < end), end]
    const outer = angles.map(angle => pointAt(frame, angle, start + Math.max(0.6, gapAt(angle) * frame.perGap)))
    return [poly('band', [...outer, ...angles.map(angle => pointAt(frame, angle, start)).reverse()], { fill: role, role, width: 0 })]
  })
}

function arc(frame: PlanFrame, to: Angle, distance: number): Point[] {
  return steps(to).map(angle => pointAt(frame, angle, distance))
}

/** The leaf from above through its swing. */
export function swingPlan(seen: SwingSeen, top: number): { list: Shape[], height: number } {
  const { input, angle, margin, swing } = seen
  const { to, say } = input
  const frame = fitted(seen, top + 22, 48, COLUMN, top + HEIGHT - 6, 162, 22 / INCH)
  const { x, y, reach, perGap } = frame
  const at = (each: Angle, distance: number) => pointAt(frame, each, distance)
  const start = reach + 3
  const list: Shape[] = [
    ...contours(seen, frame, top),
    ...ribbon(seen, frame, start),
    open('plan', arc(frame, to, reach), { width: 'hair' }),
    ...[x, x + reach + 10].map(px => box('post', px - 6, y - 6, 12, 12, { fill: 'steel', role: 'steel-edge', width: 'hair' })),
    ...[0, to].map(each => open('leaf', [[x, y], at(each, reach)], { role: 'mark', dash: [6, 3] })),
    open('leaf', [[x, y], at(angle, reach)], { width: 5 }),
  ]
  if (margin > 0) list.push(open('fit', arc(frame, to, start + margin * perGap), { role: 'brass', dash: [7, 3] }))
  if (angle > 12 * DEGREE) {
    list.push(open('plan', arc(frame, angle, 34), { width: 'hair' }))
    const [ax, ay] = at(angle / 2, 42)
    list.push(text(ax, ay + 6, degrees(angle, say), { size: 15, halo: 'paper' }))
  }
  const shown = degrees(angle, say)
  const [right, width] = [346, 346 - COLUMN]
  list.push(text(right, top + 100, shown, { size: textWidth(shown, 40, 300) <= width ? 40 : 28, weight: 300, anchor: 'end' }))
  if (angle === swing.least.angle && swing.least.at === 'latch') list.push(text(right, top + 122, cutText(say('tightest'), 15, width), { size: 15, role: 'soft', anchor: 'end' }))
  const { words, role } = swingWords(seen)
  const lines = words.slice(0, 2).flatMap(each => wrapText(each, 15, width, 3, 500)).slice(0, 4)
  lines.forEach((line, i) => list.push(text(right, top + 142 + i * 18 + (lines.length < 4 ? 8 : 0), line, { size: 15, weight: 500, role, anchor: 'end' })))
  return { list, height: HEIGHT }
}

/** Lines of equal height of a plane, with what each lies over the hinge. */
function contours({ input }: SwingSeen, { x, y, reach }: PlanFrame, top: number): Shape[] {
  const { ground, leaf, system } = input
  if (!('plane' in ground)) return []
  const [a, b] = [ratioOf(ground.plane.along, 'ground along the leaf'), ratioOf(ground.plane.across, 'ground across')]
  const most = Math.max(Math.abs(a), Math.abs(b)) * leaf.width
  if (most < MILLIMETRE) return []
  const nice = system === 'imperial' ? [0.25, 0.5, 1, 2, 3, 6, 12, 24, 48, 96].map(n => n * INCH) : [5, 10, 20, 50, 100, 200, 500, 1000, 2000].map(n => n * MILLIMETRE)
  const step = nice.find(each => most / each <= 4) ?? nice.at(-1)!
  const list: Shape[] = []
  for (let n = -8; n <= 8; n++) {
    if (n === 0) continue
    // In the square over the arc: a x + b y = level, in units of the drawing.
    const level = n * step * reach / leaf.width
    const hits: Point[] = []
    for (const u of [0, reach]) if (b !== 0) hits.push([u, (level - a * u) / b])
    for (const v of [0, reach]) if (a !== 0) hits.push([(level - b * v) / a, v])
    const inside = hits.filter(([u, v]) => u >= -0.01 && u <= reach + 0.01 && v >= -0.01 && v <= reach + 0.01)
    if (inside.length < 2) continue
    const from = inside.reduce((best, next) => next[0] < best[0] ? next : best)
    const to = inside.reduce((best, next) => Math.abs(next[0] - from[0]) + Math.abs(next[1] - from[1]) > Math.abs(best[0] - from[0]) + Math.abs(best[1] - from[1]) ? next : best)
    list.push(seg('ground', x + from[0], y + from[1], x + to[0], y + to[1], { role: 'mark', width: 'hair', dash: [1, 3] }))
    const words = `${n > 0 ? '+' : ''}${bareFigure(n * step, system)}`
    // Once the hinge stands inside the picture there is no free side for their figures.
    if (x > 60) continue
    if (from[0] < 0.01 && from[1] > 14) list.push(...(textWidth(words, 14) < x - 9 ? [text(x - 7, y + from[1] + 5, words, { role: 'soft', anchor: 'end' })] : []))
    else if (from[1] < 0.01 && y - top > 18 && from[0] > 24) list.push(text(x + from[0], y - 8, words, { role: 'soft', anchor: 'middle' }))
  }
  return list
}

/** The plan for a record: ribbon, margin asked, and the least gap in figures. */
export function swingOnPaper(seen: SwingSeen, least: Length): Shape[] {
  const { input, angle, margin, swing } = seen
  const { to, say, system } = input
  const frame = fitted(seen, 10, 16, 102, 90, 72, 14 / INCH)
  const { x, y, reach, perGap } = frame
  const start = reach + 2
  const list: Shape[] = [
    ...ribbon(seen, frame, start).map(shape => shape.kind === 'path' && shape.fill === 'pine' ? { ...shape, fill: 'mark' as const } : shape),
    box('post', x - 4, y - 4, 7, 7, { fill: 'ink' }),
    open('leaf', [[x, y], [x + reach, y]], { role: 'mark', width: 'hair', dash: [3, 2] }),
    open('leaf', [[x, y], pointAt(frame, angle, reach)], { width: 2.5 }),
  ]
  if (margin > 0) list.push(open('fit', arc(frame, to, start + margin * perGap), { role: 'pine', width: 1.25, dash: [4, 2] }))
  list.push(
    ...figureThatFits(148, 52, bareFigure(least, system, [0, margin]), [14, 11], 46, { anchor: 'end' }),
    text(148, 66, cutText(say('atAngle', { angle: degrees(swing.least.angle, say) }), 11, 46), { size: 11, role: 'soft', anchor: 'end' }),
  )
  return list
}
