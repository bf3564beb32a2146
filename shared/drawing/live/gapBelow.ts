import type { Slope } from '../../gate/leaf'
import { INCH, type Length } from '../../measure/length'
import { dimV, ground, meshPath, open, path, seg, text, type Point, type Shape } from '../displayList'
import { FIELD_WIDTH, PAPER, type LiveDrawing, type LiveInput } from './live'
import { bareFigure, figure, placeLimits, summaryOf, type PlacedLimit } from './placedLimit'
import { cutText, figureThatFits, textWidth } from './textWidth'
import { uprightGauge, zigzag } from './uprightGauge'
import { groundFromEdge } from './groundFromEdge'

export interface GapBelowInput extends LiveInput {
  /** What ends over the ground. */
  edge: 'rail' | 'wire' | 'leaf' | 'none'
  /** How the ground runs under it; level where absent. */
  slope?: Slope
  /** What is still to come on unfinished ground, in the words of the desk, and how thick where it is known. */
  coming?: { words: string, thickness: Length | null }
}

const HEIGHT = 198
const EDGE_WIDTH = { rail: 4, leaf: 4, wire: 1.5, none: 0.75 } as const

/** The gap under fabric, rail or leaf over flat or sloping ground, on one scale with the stick that stands in it. Throws what `judge` throws. */
export function drawGapBelow(input: GapBelowInput): LiveDrawing {
  const placed = placeLimits(input)
  const summary = [summaryOf(input, placed), comingWords(input)].filter(Boolean).join('; ')
  const alt = { code: 'gapBelow', params: { summary } }
  return input.size === 'paper'
    ? { list: onPaper(input, placed), ...PAPER, alt }
    : { list: inField(input, placed), width: FIELD_WIDTH, height: HEIGHT, alt }
}

function comingWords({ coming, say, system }: GapBelowInput): string {
  if (!coming) return ''
  return say('comes', { what: coming.thickness === null ? coming.words : `${figure(coming.thickness, system)} ${coming.words}` })
}

/** Ground from left to right through a height at `through`, leaning by its slope, kept within `most` of it. */
function groundLine(slope: Slope | undefined, width: number, through: number, y: number, most: number): Point[] {
  const ratio = slope && slope.over > 0 ? slope.rise / slope.over : 0
  const lean = (x: number) => y - Math.max(-most, Math.min(most, ratio * (x - through)))
  return [[0, lean(0)], [through, y], [width, lean(width)]]
}

/** Fabric down to its bottom edge. */
function fabric(width: number, top: number, edgeY: number, diamond: number, edge: GapBelowInput['edge']): Shape[] {
  const lower = edgeY - EDGE_WIDTH[edge] / 2
  return [
    path('mesh', meshPath(width, lower - top, diamond, diamond, (u, v) => [u, top + v], diamond / 2), { role: 'mark', width: 'wire' }),
    seg('rail', 0, lower, width, lower, { width: EDGE_WIDTH[edge] }),
  ]
}

function inField(input: GapBelowInput, placed: PlacedLimit[]): Shape[] {
  const { reading, coming } = input
  const frame = { tape: 104, steel: 150, steelWidth: 34, right: FIELD_WIDTH, top: 8, bottom: 180 }
  const thickness = coming?.thickness ?? null
  const gauge = uprightGauge(input, placed, frame, {
    floor: 0, fromFloor: true, nominal: 2 * INCH,
    ...(coming && { notes: [{ at: thickness ?? 0, words: comingWords(input) }] }),
  })
  const floorSeen = !gauge.axis.beyond(0)
  const groundY = floorSeen ? gauge.yOf(0) : frame.bottom
  const edgeY = reading === null ? 64 : Math.max(frame.top + 14, Math.min(groundY, gauge.yOf(Math.max(0, reading))))
  const list: Shape[] = [
    ...fabric(88, 0, edgeY, 18, input.edge),
    ...groundFromEdge(groundLine(input.slope, 100, 44, groundY, 7), { depth: 7 }),
    ...ground([[frame.steel - 8, groundY], [frame.steel + frame.steelWidth + 8, groundY]], { depth: 6 }),
    ...gauge.list,
  ]
  if (!floorSeen && groundY - edgeY > 30) list.push(...[-3, 3].map(dy => open('dim', zigzag(30, 58, groundY - 14 + dy), { width: 'hair' })))
  if (thickness !== null && !gauge.axis.beyond(thickness)) list.push(seg('fit', 0, gauge.yOf(thickness), frame.tape - 4, gauge.yOf(thickness), { role: 'brass', dash: [7, 3] }))
  if (reading !== null && groundY - edgeY > 10) {
    const words = bareFigure(reading, input.system, placed.flatMap(({ ends }) => ends))
    list.push(...dimV(44, edgeY, groundY, ''))
    if (groundY - edgeY > 26 && textWidth(words, 15) < 48) list.push(text(52, (edgeY + groundY) / 2 + 5, words, { size: 15, halo: 'paper' }))
  }
  return list
}

function onPaper(input: GapBelowInput, placed: PlacedLimit[]): Shape[] {
  const { reading, coming, system } = input
  const groundY = 79
  // As large as it may be drawn: the greater of reading and limit takes the room under half of the picture.
  const ends = placed.flatMap(limit => limit.ends)
  const largest = Math.max(reading ?? 0, ends[0] ?? 0, coming?.thickness ?? 0, INCH)
  const per = 51 / largest
  const edgeY = reading === null ? 42 : Math.min(groundY, groundY - Math.max(0, reading) * per)
  const list: Shape[] = [...fabric(PAPER.width, 0, edgeY, 12, input.edge === 'leaf' ? 'rail' : input.edge), ...groundFromEdge(groundLine(input.slope, PAPER.width, 95, groundY, 5), { depth: 5, step: 7 })]
  const [limit] = placed
  let limitY = -100
  if (limit && ends[0] !== undefined && ends[0] > 0) {
    const y = groundY - ends[0] * per
    limitY = Math.max(10, Math.abs(y - edgeY) < 9 ? Math.min(y, edgeY) - 6 : y + 4)
    list.push(seg('fit', 80, y, 110, y, { role: limit.role, width: 2 }), ...figureThatFits(76, limitY, figure(ends[0], system, [ends[0]]), [11], 70, { role: limit.role, anchor: 'end', halo: 'paper' }))
  }
  if (coming) {
    const y = groundY - Math.max(8, Math.min(36, (coming.thickness ?? largest / 3) * per))
    list.push(seg('fit', 0, y, PAPER.width, y, { role: 'brass', dash: [6, 3], width: 1.25 }), text(2, [y - 4, y + 12, y - 17].find(each => Math.abs(each - limitY) >= 12 && Math.abs(each - 4 - edgeY) >= 7) ?? y - 4, cutText(input.say('comes', { what: coming.words }), 11, 88), { size: 11, role: 'brass', halo: 'paper' }))
  }
  if (reading !== null) {
    const figureY = Math.max(12, Math.min(groundY - 12, (edgeY + groundY) / 2 + 5))
    list.push(...(groundY - edgeY > 3 ? dimV(95, edgeY, groundY, '') : []), ...figureThatFits(113, figureY, bareFigure(reading, system, ends), [14, 11], 36, { halo: 'paper' }))
  }
  return list
}
