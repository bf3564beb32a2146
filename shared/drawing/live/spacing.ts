import { FOOT, type Length } from '../../measure/length'
import { box, dimH, dimV, meshPath, open, path, seg, type Point, type Shape } from '../displayList'
import { LEVEL_GAUGE, levelGauge } from './levelGauge'
import { FIELD_WIDTH, PAPER, type LiveDrawing, type LiveInput } from './live'
import { bareFigure, placeLimits, summaryOf, type PlacedLimit } from './placedLimit'
import { readout } from './readout'
import { figureThatFits, middleWithin } from './textWidth'
import { groundFromEdge } from './groundFromEdge'

/** What stands apart: ties on rail, post or wire, bands on their bar, a bar's end and its first band, horizontal members, or the fence and an object by it. */
export interface SpacingInput extends LiveInput {
  between: 'tiesOnRail' | 'tiesOnPost' | 'tiesOnWire' | 'bands' | 'bandEnd' | 'horizontals' | 'object'
}

const HEIGHT = 150 + LEVEL_GAUGE.height

/** The distance between two things along or by the fence, with the limit marked where it would end. Throws what `judge` throws. */
export function drawSpacing(input: SpacingInput): LiveDrawing {
  const placed = placeLimits(input)
  const alt = { code: 'spacing', params: { summary: summaryOf(input, placed) } }
  if (input.size === 'paper') return { list: picture(input, placed, { ...PAPER, size: 14, least: 11 }), ...PAPER, alt }
  const list = [
    ...picture(input, placed, { width: 196, height: 142, size: 17, least: 14 }),
    ...readout(input, placed, { left: 212, right: FIELD_WIDTH - 4, top: 4, bottom: 146 }),
    ...levelGauge(input, placed, { top: 150, width: FIELD_WIDTH, nominal: FOOT }).list,
  ]
  return { list, width: FIELD_WIDTH, height: HEIGHT, alt }
}

interface Frame { width: number, height: number, size: number, least: number }

/** How far apart reading and limit are drawn in `room`: on one scale, the larger of them taking most of it. */
function apart(reading: Length | null, placed: readonly PlacedLimit[], room: number): { read: number, limit: number | null } {
  const end = placed[0]?.ends[0]
  const limit = end !== undefined && end > 0 ? end : null
  const largest = Math.max(reading ?? 0, limit ?? 0, 1)
  const per = room / largest
  const least = 8
  return {
    read: reading === null ? (limit === null ? room * 0.7 : limit * per) : Math.max(least, reading * per),
    limit: limit === null ? null : Math.max(least, limit * per),
  }
}

function picture(input: SpacingInput, placed: readonly PlacedLimit[], frame: Frame): Shape[] {
  const { between } = input
  return between === 'tiesOnRail' || between === 'tiesOnWire' || between === 'object' ? along(input, placed, frame) : upright(input, placed, frame)
}

/** Things in a row from left to right. */
function along(input: SpacingInput, placed: readonly PlacedLimit[], { width, height, size }: Frame): Shape[] {
  const { between } = input
  const first = between === 'object' ? width * 0.12 : width * 0.15
  const { read, limit } = apart(input.reading, placed, width * 0.66)
  const second = first + read
  const dimY = height - 14
  const list: Shape[] = []
  if (between === 'object') {
    const groundY = height - 46
    list.push(
      path('mesh', meshPath(first - 3, groundY - 8, 7, 7, (u, v) => [u, 8 + v]), { role: 'mark', width: 'wire' }),
      box('post', first - 5, 4, 6, groundY - 2, { fill: 'steel', role: 'steel-edge', width: 'hair' }),
      ...groundFromEdge([[0, groundY], [width, groundY]], { depth: 5, step: 8 }),
    )
    // A bench: whatever a child could climb from.
    const bench: Point[] = [[second, groundY], [second, groundY - height * 0.2], [Math.min(width - 2, second + height * 0.3), groundY - height * 0.2], [Math.min(width - 2, second + height * 0.3), groundY]]
    list.push(open('leaf', bench, { width: 'heavy' }))
  } else {
    const railY = height * 0.4
    const half = between === 'tiesOnRail' ? height * 0.09 : 1.5
    list.push(path('mesh', meshPath(width, height - 26, height * 0.17, height * 0.17, (u, v) => [u, v], first), { role: 'mark', width: 'wire' }))
    list.push(between === 'tiesOnRail'
      ? box('rail', 0, railY - half, width, 2 * half, { fill: 'paper', role: 'ink', width: 1.25 })
      : seg('rail', 0, railY, width, railY, { width: 'heavy' }))
    for (const x of [first - read, first, second, second + read].filter(each => each > 8 && each < width - 8)) list.push(...tie([x, railY], half, 'level'))
  }
  if (limit !== null) list.push(...limitMark(placed[0]!, first + limit, 'x', { width, height }))
  if (input.reading !== null) {
    const label = bareFigure(input.reading, input.system)
    list.push(...dimH(first, second, dimY, ''))
    list.push(...figureThatFits(middleWithin(label, size, (first + second) / 2, 4, width - 4), dimY - 6, label, [size], width - 8, { anchor: 'middle', halo: 'paper', haloWidth: 6 }))
  }
  return list
}

/** Things one over another. */
function upright(input: SpacingInput, placed: readonly PlacedLimit[], { width, height, size, least }: Frame): Shape[] {
  const { between } = input
  const { read, limit } = apart(input.reading, placed, height * 0.7)
  const postX = width * 0.3
  const half = height * 0.08
  const first = height * 0.1
  const second = first + read
  const list: Shape[] = [path('mesh', meshPath(width - postX, height, height * 0.17, height * 0.17, (u, v) => [postX + u, v], 0), { role: 'mark', width: 'wire' })]
  if (between === 'horizontals') {
    list[0] = path('mesh', meshPath(width, height - first, height * 0.12, height * 0.12, (u, v) => [u, first + v], 0), { role: 'mark', width: 'wire' })
    // From top to top.
    for (const y of [first, second]) list.push(box('rail', 0, y, width, Math.min(6, height - y), { fill: 'paper', role: 'ink', width: 1.25 }))
  } else {
    list.push(box('post', postX - half, 0, 2 * half, height, { fill: 'steel', role: 'steel-edge', width: 'hair' }))
    const bar = postX + half + 6
    const marks = between === 'bandEnd' ? [second] : [first - read, first, second, second + read]
    if (between !== 'tiesOnPost') list.push(seg('leaf', bar, between === 'bandEnd' ? first : 0, bar, height, { width: 4 }))
    for (const y of marks.filter(each => each > 4 && each < height - 4)) {
      list.push(...(between === 'tiesOnPost' ? tie([postX, y], half, 'upright') : band(postX - half, bar, y)))
    }
  }
  if (limit !== null) list.push(...limitMark(placed[0]!, first + limit, 'y', { width, height }))
  if (input.reading !== null) {
    const x = width * 0.68
    list.push(...dimV(x, first, second, ''))
    list.push(...figureThatFits(x + 8, Math.max(size, Math.min(height - 4, (first + second) / 2 + size * 0.36)), bareFigure(input.reading, input.system), [size, 14, 11].filter(each => each >= least), width - x - 10, { halo: 'paper', haloWidth: 6 }))
  }
  return list
}

/** Where the spacing would end if it were the limit: a stroke with hatch towards what conforms. */
function limitMark(limit: PlacedLimit, at: number, axis: 'x' | 'y', { width, height }: Pick<Frame, 'width' | 'height'>): Shape[] {
  const inward = limit.allowed[0]?.high === Infinity ? 1 : -1
  const [from, to] = axis === 'x' ? [height - 30, height - 2] : [width * 0.55, width * 0.82]
  const place = Math.min(at, (axis === 'x' ? width : height) - 2)
  const point = (along: number, across: number): Point => axis === 'x' ? [place + along, across] : [across, place + along]
  const list: Shape[] = [open('fit', [point(0, from), point(0, to)], { role: limit.role, width: 'heavy' })]
  for (let across = from + 2; across < to - 4; across += 5) list.push(open('fit', [point(0, across), point(inward * 5, across + 5)], { role: limit.role, width: 'wire' }))
  return list
}

/** A wire tie round a rail or post, its end turned in behind. */
export function tie([x, y]: Point, half: number, lies: 'level' | 'upright', scale = 1): Shape[] {
  const [w, h] = [4 * scale, half + 7 * scale]
  const at = (u: number, v: number) => {
    const [px, py] = lies === 'level' ? [x + u, y + v] : [x + v, y + u]
    return `${Math.round(px * 100) / 100} ${Math.round(py * 100) / 100}`
  }
  const loop = `M${at(-w, h)}L${at(-w, -h + 3)}Q${at(-w, -h)} ${at(0, -h)}Q${at(w, -h)} ${at(w, -h + 3)}L${at(w, h)}`
  const end = `M${at(w, h - 2)}Q${at(w - 2, h + 5)} ${at(-w + 1, h + 1)}`
  return [path('fit', loop + end, { width: 1.5 })]
}

/** A tension band from behind the post to the bar, with its bolt. */
function band(left: number, bar: number, y: number): Shape[] {
  return [box('fit', left - 2, y - 2.5, bar - left + 6, 5, { fill: 'paper', role: 'ink', width: 1.25 }), box('fit', bar + 4, y - 3.5, 4, 7, { fill: 'ink' })]
}
