import type { Length } from '../../measure/length'
import type { LiveInput } from './live'
import { box, chalk, hatch, open, seg, text, type Shape } from '../displayList'
import { packed } from './packed'
import { bareFigure, clashOf, figure, governing, marginWords, type PlacedLimit } from './placedLimit'
import { tapeAxis, type TapeAxis } from './tapeAxis'
import { cutText, figureThatFits, textWidth, wrapText } from './textWidth'

/** Where the parts of an upright gauge stand: tape, steel with the chalk, then bands and words up to `right`. */
export interface UprightFrame { tape: number, steel: number, steelWidth: number, right: number, top: number, bottom: number }

interface UprightOptions {
  floor?: Length
  fromFloor?: boolean
  nominal: Length
  /** More words beside the steel, at the length they belong to. */
  notes?: readonly { at: Length, words: string }[]
}

/** Marks of a tape by rank, longest first. */
const TICK = [36, 18, 13, 9, 5.5] as const
const STRIP = 14

/**
 * A stretch of post drawn large: tape with its marks, steel with the reading in chalk, limits as bands with hatch and words, the margin dimensioned.
 * Answers its shapes and where a length lies.
 */
export function uprightGauge(input: LiveInput, placed: readonly PlacedLimit[], frame: UprightFrame, { floor, fromFloor, nominal, notes = [] }: UprightOptions): { list: Shape[], yOf: (value: number) => number, axis: TapeAxis } {
  const { reading, system } = input
  const { tape, steel, steelWidth, right, top, bottom } = frame
  const axis = tapeAxis({ reading, ends: placed.flatMap(({ ends }) => ends), span: bottom - top, system, nominal, labelRoom: 34, ...(floor !== undefined && { floor, fromFloor: fromFloor ?? false }) })
  const yOf = (value: number) => bottom - axis.at(value)
  const edge = steel + steelWidth
  return { list: [...tapeShapes(), ...steelShapes(), ...bandShapes(), ...wordShapes()], yOf, axis }

  function tapeShapes(): Shape[] {
    const line = steel - 5
    const wide = line - tape
    return [
      ...axis.ticks.flatMap(({ place, rank, label }) => {
        const y = bottom - place
        const length = rank === 0 ? wide : TICK[Math.min(rank, TICK.length - 1)]!
        // A label stands under its mark and runs out of room at the foot.
        const shown = label && y + 17 < bottom ? [text(tape + 3, y + 16, label, { size: textWidth(label, 16, 600) > wide - 20 ? 13 : 16, weight: 600 })] : []
        return [seg('dim', line, y, line - length, y, { width: rank === 0 ? 'line' : 0.9 }), ...shown]
      }),
      seg('dim', line, bottom - axis.true.end, line, bottom - axis.true.start, { width: 'line' }),
    ]
  }

  function steelShapes(): Shape[] {
    const list: Shape[] = [
      box('post', steel, top, steelWidth, bottom - top, { fill: 'steel' }),
      ...[steel, edge].map(x => seg('post', x, top, x, bottom, { role: 'steel-edge' })),
      seg('post', steel + 11, top, steel + 11, bottom, { role: 'chalk-mark', opacity: 0.13 }),
      seg('post', steel + 15, top, steel + 15, bottom, { role: 'chalk-mark', width: 4, opacity: 0.06 }),
    ]
    if (axis.broken) {
      const y = bottom - (axis.broken === 1 ? axis.true.end + 8 : axis.true.start - 8)
      for (const dy of [-3, 3]) list.push(open('fit', zigzag(tape, edge, y + dy), { role: 'paper', width: 'line' }))
      list.push(open('fit', zigzag(tape, edge, y), { role: 'paper', width: 5 }), ...[-3, 3].map(dy => open('fit', zigzag(tape, edge, y + dy), { width: 'hair' })))
    }
    if (reading !== null) {
      const y = Math.max(top + 6, Math.min(bottom - 6, yOf(reading)))
      list.push(...chalk(steel + 3, y, edge - 4, y, { thick: 5, seed: 11 }))
    }
    return list
  }

  function bandShapes(): Shape[] {
    return placed.flatMap(({ allowed, role, wash }, index) => {
      const strip = edge + (crowded() ? Math.min(index, 1) * STRIP : 0)
      return allowed.flatMap(({ low, high }) => {
        const [y1, y2] = [high === Infinity ? top : yOf(high), low === -Infinity ? bottom : yOf(low)]
        if (y2 - y1 < 0.5) return []
        return [
          ...(index === 0 || !overlapsFirst(low, high) ? [box('band', edge, y1, right - edge, y2 - y1, { fill: wash })] : []),
          hatch(strip, y1, STRIP, y2 - y1, { role, lean: index === 0 ? 1 : -1 }),
        ]
      })
    })
  }

  /** Edges of limits; where words lie across one it ends before them. */
  function edgeShapes(crossed: (y: number) => boolean, left: number): Shape[] {
    return placed.flatMap(({ ends, role }, index) => ends.filter(end => !axis.beyond(end)).flatMap((end) => {
      const y = yOf(end)
      const to = crossed(y) ? left : right
      return [
        seg('fit', index === 0 ? steel - 5 : edge, y, to, y, index === 0 ? { role, width: 'heavy' } : { role, dash: [7, 3] }),
        ...(index === 0 ? [] : [seg('fit', steel - 5, y, steel, y, { role })]),
      ]
    }))
  }

  function overlapsFirst(low: number, high: number): boolean {
    return placed[0]!.allowed.some(part => part.low < high && low < part.high)
  }

  /** Whether two limits both allow some of the same heights: then their hatches stand side by side. */
  function crowded(): boolean {
    return placed.length > 1 && placed[1]!.allowed.some(({ low, high }) => overlapsFirst(low, high))
  }

  function wordShapes(): Shape[] {
    const { say } = input
    const shown = placed.slice(0, 2)
    const left = edge + 6 + STRIP * (crowded() ? 2 : 1)
    const width = right - left - 1
    const blocks: { wanted: number, height: number, paint: (y: number) => Shape[] }[] = []

    shown.forEach(({ words, basis, role, allowed }, index) => {
      const size = index === 0 && textWidth(words, 19, 500) <= width ? 19 : 15
      const lines = wrapText(words, size, width, 2, 500)
      const whose = wrapText(basis, 14, width, placed.length === 1 ? 2 : 1)
      const height = lines.length * (size + 3) + whose.length * 17 + 1
      // Words hang from the edge they belong to, on the side that conforms.
      const part = allowed.find(({ low, high }) => !axis.beyond(low) || !axis.beyond(high)) ?? allowed[0]
      const above = part !== undefined && part.low !== -Infinity && (part.high === Infinity || !axis.beyond(part.low))
      const wanted = !part ? top : above ? yOf(part.low) - height - 7 : yOf(part.high === Infinity ? part.low : part.high) + 6
      blocks.push({
        wanted, height,
        paint: y => [
          ...lines.map((line, i) => text(left, y + size + i * (size + 3) - 1, line, { size, weight: 500, role })),
          ...whose.map((line, i) => text(left, y + lines.length * (size + 3) + 14 + i * 17, line, { role })),
        ],
      })
    })
    for (const note of notes) {
      const lines = wrapText(note.words, 14, width, 2)
      blocks.push({ wanted: yOf(note.at) - lines.length * 17 - 3, height: lines.length * 17 + 2, paint: y => lines.map((line, i) => text(left, y + 13 + i * 17, line, { role: 'brass' })) })
    }
    if (placed.length > 2) blocks.push({ wanted: bottom, height: 17, paint: y => [text(left, y + 13, cutText(say('more', { count: String(placed.length - 2) }), 14, width), { role: 'soft' })] })
    if (placed.length === 0) blocks.push({ wanted: top + 4, height: 22, paint: y => [text(left, y + 15, cutText(say('noLimit'), 15, width), { size: 15, role: 'brass', weight: 500 })] })

    const list: Shape[] = []
    if (reading === null) {
      blocks.push({ wanted: (top + bottom) / 2, height: 22, paint: y => [text(left, y + 15, cutText(say('noReading'), 15, width), { size: 15, role: 'soft' })] })
    } else {
      const shownReading = bareFigure(reading, system, placed.flatMap(({ ends }) => ends))
      const size = [42, 34, 26, 20, 16].find(each => textWidth(shownReading, each, 300) <= width - (clashOf(placed) ? 18 : 0)) ?? 14
      const y = yOf(reading)
      const worst = governing(placed)
      const margin = marginWords(worst, system, say)
      const near = worst && nearestOf(worst.ends, reading)
      const lines = margin.words ? wrapText(margin.words, 15, width - 5, 2, 500) : []
      const height = size + 2 + lines.length * 18
      // Margin and figure stand together on the side of the limit where the reading is.
      const under = near === null || y >= yOf(near)
      blocks.push({
        wanted: near === null ? y - size / 2 : under ? Math.max((y + yOf(near)) / 2 - 9, yOf(near) + 2) : Math.min((y + yOf(near)) / 2 + 9, yOf(near) - 3) - height,
        height,
        paint: at => [
          ...figureThatFits(left - 2, (under ? at + lines.length * 18 : at) + size * 0.84, shownReading, [size], width, { weight: 300 }),
          ...lines.map((line, i) => text(left + 3, (under ? at + 14 : at + size + 15) + i * 18, line, { size: 15, weight: 500, role: margin.role })),
        ],
      })
      if (near !== null && Math.abs(yOf(near) - y) >= 5) {
        const x = edge + 10
        list.push(
          seg('dim', x, y, x, yOf(near), { role: margin.role === 'pine' ? worst!.wash : 'paper', width: 7 }),
          seg('dim', x, y, x, yOf(near), { role: margin.role, width: 'hair' }),
          seg('dim', edge, y, x + 5, y, { role: margin.role, width: 'hair' }),
          ...[y, yOf(near)].map(end => seg('dim', x - 4, end + 4, x + 4, end - 4, { role: margin.role })),
        )
      }
    }
    const clash = clashOf(placed)
    if (clash && Math.abs(yOf(clash.to) - yOf(clash.from)) > 4) {
      const [y1, y2, x] = [yOf(clash.to), yOf(clash.from), right - 7]
      const words = say('clash', { amount: figure(clash.to - clash.from, system, [0]) })
      list.push(seg('dim', x, y1, x, y2, { role: 'brass', width: 'hair' }), ...[y1, y2].map(y => seg('dim', x - 4, y + 4, x + 4, y - 4, { role: 'brass' })))
      if (textWidth(words, 14, 500) < y2 - y1 - 6) list.push(text(x - 6, (y1 + y2) / 2, words, { role: 'brass', weight: 500, rotate: -90, anchor: 'middle', halo: 'paper' }))
    }
    const middle = ({ wanted, height }: { wanted: number, height: number }) => wanted + height / 2
    const order = [...blocks].sort((a, b) => middle(a) - middle(b))
    const tops = packed(order, top + 2, bottom - 2)
    const crossed = (y: number) => order.some(({ height }, i) => y > tops[i]! && y < tops[i]! + height)
    return [...edgeShapes(crossed, left - 5), ...list, ...order.flatMap((block, i) => block.paint(tops[i]!))]
  }
}

function nearestOf(ends: readonly Length[], value: Length): Length | null {
  return ends.length === 0 ? null : ends.reduce((best, end) => Math.abs(end - value) < Math.abs(best - value) ? end : best)
}

/** A break line across a drawing: level with one sharp kink in its middle. */
export function zigzag(x1: number, x2: number, y: number): [number, number][] {
  const middle = (x1 + x2) / 2
  return [[x1, y], [middle - 6, y], [middle - 3, y - 5], [middle + 3, y + 5], [middle + 6, y], [x2, y]]
}
