import { fewestFasteners, spacingFaults, type SpacingFault } from '../../count/spacing'
import type { Length } from '../../measure/length'
import type { TrialOf } from '../../trial/trial'
import { box, dimH, meshPath, path, seg, type Drawing, type Shape } from '../displayList'
import { figureThatFits } from '../live/textWidth'
import { bareFigure } from '../live/placedLimit'
import { tie } from '../live/spacing'

const [WIDTH, HEIGHT] = [360, 140]
/** More than this are drawn as strokes: loops would run together. */
const LOOPS = 40

export interface FastenersDrawn extends Drawing {
  fewest: number
  faults: SpacingFault[]
  /** Where they stand that are drawn: those that were given, else the fewest at even distances. */
  positions: Length[]
}

/** Where the fewest would stand: ends at their largest distance or nearer, the rest even. */
export function evenPositions(count: number, length: Length, { start, end }: TrialOf<'fasteners'>['rule']): Length[] {
  if (count === 1) return [Math.max(0, Math.min(start, Math.max(length - end, Math.round(length / 2))))]
  const [first, last] = [Math.min(start, length), Math.max(0, length - end)]
  return Array.from({ length: count }, (_, i) => Math.round(first + (last - first) * i / (count - 1)))
}

/** Ties or bands along a length: those that were given with what stands too far apart, or the fewest that hold it. Throws what the functions of shared/count throw. */
export function drawFasteners({ of, length, rule, positions, system }: TrialOf<'fasteners'>): FastenersDrawn {
  const fewest = fewestFasteners(length, rule)
  const faults = positions.length > 0 ? spacingFaults(positions, length, rule) : []
  const drawn = positions.length > 0 ? [...positions].sort((a, b) => a - b) : fewest <= 400 ? evenPositions(fewest, length, rule) : []
  const [x, wide, y] = [16, 328, 44]
  const at = (place: Length) => x + place / length * wide
  const list: Shape[] = [
    path('mesh', meshPath(WIDTH, 92, 14, 14, (u, v) => [u, v], 7), { role: 'line', width: 'wire' }),
    box('rail', 0, y - 7, WIDTH, 14, of === 'ties' ? { fill: 'paper', role: 'ink', width: 1.25 } : { fill: 'steel', role: 'steel-edge', width: 'hair' }),
    ...[0, length].map(end => seg('post', at(end), 6, at(end), y + 34, { width: 'heavy' })),
    ...drawn.flatMap(place => drawn.length > LOOPS ? [seg('fit', at(place), y - 12, at(place), y + 12, { width: 'hair' })]
      : of === 'ties' ? tie([at(place), y], 7, 'level') : [box('fit', at(place) - 2.5, y - 12, 5, 24, { fill: 'paper', role: 'ink', width: 1.25 })]),
  ]
  for (const fault of faults) {
    const [from, to] = [at(fault.start), at(fault.start + fault.gap)]
    list.push(box('band', from, y - 20, to - from, 40, { fill: 'rust-wash' }), ...dimH(from, to, 108, '', { role: 'rust' }))
    list.push(...figureThatFits((from + to) / 2, 128, bareFigure(fault.gap, system, [fault.allowed]), [15, 14], Math.max(to - from - 4, 0), { role: 'rust', weight: 500, anchor: 'middle' }))
  }
  if (faults.length === 0 && drawn.length > 1 && drawn.length <= LOOPS) {
    // The widest distance there is.
    const widest = drawn.slice(1).map((place, i) => ({ from: drawn[i]!, gap: place - drawn[i]! })).reduce((best, next) => next.gap > best.gap ? next : best)
    list.push(...dimH(at(widest.from), at(widest.from + widest.gap), 108, ''))
    list.push(...figureThatFits((at(widest.from) + at(widest.from + widest.gap)) / 2, 128, bareFigure(widest.gap, system), [15, 14], Math.max(40, widest.gap / length * wide), { anchor: 'middle' }))
  }
  return { list, width: WIDTH, height: HEIGHT, fewest, faults, positions: drawn }
}
