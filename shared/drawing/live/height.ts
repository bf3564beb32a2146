import { FOOT, type Length } from '../../measure/length'
import { box, chalk, dimV, hatch, meshPath, path, seg, text, type Shape } from '../displayList'
import { lens, postPicture } from './leafPicture'
import { FIELD_WIDTH, PAPER, type LiveDrawing, type LiveInput } from './live'
import { bareFigure, placeLimits, summaryOf, type PlacedLimit } from './placedLimit'
import { cutText, figureThatFits, textWidth } from './textWidth'
import { uprightGauge } from './uprightGauge'
import { groundFromEdge } from './groundFromEdge'

/** What is measured from the ground up: the top of the fence, or barbed wire over it. */
export interface HeightInput extends LiveInput { of: 'fence' | 'barbedWire' }

const HEIGHT = 198
const USUAL: Length = 6 * FOOT

/** Height over the ground: the whole fence at the left, its top large at the right. Throws what `judge` throws. */
export function drawHeight(input: HeightInput): LiveDrawing {
  const placed = placeLimits(input)
  const alt = { code: 'height', params: { summary: summaryOf(input, placed) } }
  return input.size === 'paper'
    ? { list: onPaper(input, placed), ...PAPER, alt }
    : { list: inField(input, placed), width: FIELD_WIDTH, height: HEIGHT, alt }
}

/** Fence of a picture from `groundY` up to `topY`, its post at `post`, drawn from 0 to `right`. */
function fence({ of }: HeightInput, topY: number, groundY: number, post: number, right: number, diamond: number): Shape[] {
  const railY = of === 'barbedWire' ? Math.min(groundY - 4, topY + 14) : topY
  const list: Shape[] = [
    ...(groundY - railY > 8 ? [path('mesh', meshPath(right, groundY - railY - 3, diamond, diamond, (u, v) => [u, railY + v]), { role: 'mark', width: 'wire' as const })] : []),
    seg('rail', 0, railY, right, railY, { width: 3 }),
    ...postPicture(post, Math.max(1, (of === 'barbedWire' ? topY : railY) - 5), groundY + 2, 7),
  ]
  if (of === 'fence') return list
  for (const y of [topY, topY + 6]) {
    list.push(seg('rail', 0, y, right, y, { width: 'hair' }))
    for (let x = 8; x < right - 4; x += 14) list.push(seg('rail', x - 2, y - 2, x + 2, y + 2, { width: 'hair' }), seg('rail', x - 2, y + 2, x + 2, y - 2, { width: 'hair' }))
  }
  return list
}

function inField(input: HeightInput, placed: PlacedLimit[]): Shape[] {
  const { reading, system } = input
  const groundY = 186
  const frame = { tape: 98, steel: 150, steelWidth: 44, right: FIELD_WIDTH, top: 8, bottom: 193 }
  const gauge = uprightGauge(input, placed, frame, { floor: 0, nominal: USUAL })
  const topY = heightIn(reading, placed, groundY, groundY - 20)
  const list: Shape[] = [
    ...fence(input, topY, groundY, 50, 84, 7),
    ...groundFromEdge([[0, groundY], [94, groundY]]),
    ...lens(46, topY - 7, 16, 14, { x: frame.tape, top: frame.top, bottom: frame.bottom }),
    ...gauge.list,
  ]
  if (reading !== null && groundY - topY > 10) {
    const words = bareFigure(reading, system, placed.flatMap(({ ends }) => ends))
    list.push(...dimV(22, topY, groundY, ''))
    if (textWidth(words, 15) < groundY - topY - 8) list.push(text(17, (topY + groundY) / 2, words, { size: 15, rotate: -90, anchor: 'middle', halo: 'paper', haloWidth: 7 }))
  }
  return list
}

/** Where a height lies in a picture whose largest of reading and limit takes most of `room`. */
function heightIn(value: Length | null, placed: readonly PlacedLimit[], groundY: number, room: number, reading = value): number {
  const largest = Math.max(reading ?? 0, 1.3 * (placed[0]?.ends[0] ?? 0), reading === null && placed.length === 0 ? USUAL : 1)
  return groundY - Math.max(0, value ?? placed[0]?.ends[0] ?? USUAL) / largest * room * 0.9
}

function onPaper(input: HeightInput, placed: PlacedLimit[]): Shape[] {
  const { reading, system } = input
  const groundY = 84
  const topY = heightIn(reading, placed, groundY, 80)
  const list: Shape[] = [...fence(input, topY, groundY, 61, 64, 6), ...groundFromEdge([[0, groundY], [112, groundY]], { depth: 4, step: 6 })]
  const [limit] = placed
  const end = limit?.ends[0]
  if (limit && end !== undefined) {
    const y = heightIn(end, placed, groundY, 80, reading)
    const up = limit.allowed[0]?.high === Infinity
    const [from, to] = up ? [Math.max(1, y - 22), y] : [y, Math.min(91, y + 22)]
    list.push(
      box('band', 70, from, 79, to - from, { fill: limit.wash }),
      hatch(70, from, 9, to - from, { role: limit.role, step: 4 }),
      seg('fit', 60, y, 149, y, { role: limit.role, width: 2 }),
    )
    // A limit at the top of the picture leaves no band above: its words go below.
    const wordsY = to - from >= 14 ? (from + to) / 2 + 4 : Math.min(90, up ? y + 14 : y - 5)
    list.push(text(81, wordsY, cutText(limit.words, 11, 68), { size: 11, role: limit.role, halo: limit.wash }))
  }
  if (reading !== null) {
    list.push(...chalk(61, topY, 68, topY, { thick: 3, seed: 5 }), ...(groundY - topY > 6 ? dimV(10, topY, groundY, '') : []))
    list.push(...figureThatFits(15, Math.max(13, Math.min(82, (topY + groundY) / 2 + 5)), bareFigure(reading, system, placed.flatMap(({ ends }) => ends)), [14, 11], 42, { halo: 'paper', haloWidth: 6 }))
  }
  return list
}
