import type { Length } from '../../measure/length'
import type { LiveInput } from './live'
import { box, chalk, hatch, open, seg, text, type Shape } from '../displayList'
import type { PlacedLimit } from './placedLimit'
import { tapeAxis, type TapeAxis } from './tapeAxis'
import { textWidth } from './textWidth'

/** Height that a level gauge takes, from the top of its bands to the foot of its tape. */
export const LEVEL_GAUGE = { band: 26, steel: 18, tape: 24, height: 68 } as const
const TICK = [22, 14, 11, 7, 4.5] as const

/** A steel bar from 0 to `width` with the reading in chalk, the tape under it, limits as bands over it with their hatch. Answers its shapes and where a length lies. */
export function levelGauge(
  { reading, system }: Pick<LiveInput, 'reading' | 'system'>,
  placed: readonly Pick<PlacedLimit, 'ends' | 'allowed' | 'role' | 'wash'>[],
  { top, width, nominal, floor = 0, band = LEVEL_GAUGE.band }: { top: number, width: number, nominal: Length, floor?: Length, band?: number },
): { list: Shape[], xOf: (value: number) => number, axis: TapeAxis } {
  const axis = tapeAxis({ reading, ends: placed.flatMap(({ ends }) => ends), span: width, system, floor, fromFloor: true, nominal, labelRoom: 42 })
  const xOf = (value: number) => axis.at(value)
  const steelTop = top + band
  const tapeTop = steelTop + LEVEL_GAUGE.steel
  const foot = tapeTop + LEVEL_GAUGE.tape
  const list: Shape[] = [box('post', 0, steelTop, width, LEVEL_GAUGE.steel, { fill: 'steel' })]

  placed.forEach(({ allowed, ends, role, wash }, index) => {
    // A second limit keeps to the upper half, so that both hatches are seen.
    const [from, high] = index === 0 ? [steelTop - 12, 12] : [top, 12]
    for (const part of allowed) {
      const [x1, x2] = [part.low === -Infinity ? Math.max(0, xOf(floor)) : xOf(part.low), part.high === Infinity ? width : xOf(part.high)]
      if (x2 - x1 < 0.5) continue
      if (index === 0) list.push(box('band', x1, top, x2 - x1, band, { fill: wash }))
      list.push(hatch(x1, from, x2 - x1, high, { role, lean: index === 0 ? 1 : -1, step: 6 }))
    }
    for (const end of ends.filter(each => !axis.beyond(each))) {
      list.push(seg('fit', xOf(end), top, xOf(end), tapeTop, index === 0 ? { role, width: 'heavy' } : { role, dash: [5, 3], width: 2 }))
    }
  })
  for (const { place, rank, label } of axis.ticks) {
    list.push(seg('dim', place, tapeTop, place, tapeTop + TICK[Math.min(rank, TICK.length - 1)]!, { width: rank === 0 ? 'line' : 0.9 }))
    const size = label.length > 3 ? 13 : 15
    if (label && place + 4 + textWidth(label, size, 600) < width) list.push(text(place + 4, foot - 3, label, { size, weight: 600 }))
  }
  if (axis.broken) {
    const x = axis.broken === 1 ? axis.true.end + 8 : axis.true.start - 8
    const line = (dx: number): [number, number][] => {
      const middle = steelTop + LEVEL_GAUGE.steel / 2
      return [[x + dx, steelTop - 4], [x + dx, middle - 6], [x + dx - 5, middle - 3], [x + dx + 5, middle + 3], [x + dx, middle + 6], [x + dx, tapeTop + 8]]
    }
    list.push(open('fit', line(0), { role: 'paper', width: 6 }), ...[-3, 3].map(dx => open('fit', line(dx), { width: 'hair' })))
  }
  if (reading !== null) {
    const x = Math.max(8, Math.min(width - 8, xOf(reading)))
    list.push(...chalk(x, steelTop + 2, x, tapeTop - 2, { thick: 5, seed: 11 }))
  }
  return { list, xOf, axis }
}
