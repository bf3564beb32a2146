import { combineLimits } from '../limit/combineLimits'
import type { Limit } from '../limit/limit'
import type { Window } from '../limit/window'
import { INCH, MILLIMETRE, type Length, type System } from '../measure/length'
import { box, dimH, hatch, seg, text, type Drawing, type Shape } from './displayList'
import { clashOf, placeLimits, type PlacedLimit } from './live/placedLimit'
import { textWidth } from './live/textWidth'

export interface LimitBandInput {
  /** Each limit on one datum, as {@link placeLimits} lays them; one lane each, the first three. */
  placed: readonly PlacedLimit[]
  /** What meets all of them; none draws the empty window. */
  windows: readonly Window[]
  /** The system of the tape under the lanes; null for what is no length. */
  tape: System | null
  /** How an end is written. */
  figure: (amount: number) => string
  width?: number
}

const LANE = 13
const STEP = 18
const MOST_LANES = 3
const STEPS: Record<System, readonly number[]> = { imperial: [INCH / 16, INCH / 4, INCH, 6 * INCH, 12 * INCH], metric: [MILLIMETRE, 5 * MILLIMETRE, 10 * MILLIMETRE, 50 * MILLIMETRE, 100 * MILLIMETRE, 500 * MILLIMETRE] }

/**
 * Limits lying over a stretch of tape, to scale: a hatched lane each towards what it allows, a wash through all lanes where all of them are met, and where they never are
 * the gap between them, dimensioned. Amounts in the unit of the limits. Its words stand beside it on the screen.
 */
export function limitBand({ placed, windows, tape, figure, width = 300 }: LimitBandInput): Drawing {
  const lanes = placed.slice(0, MOST_LANES)
  const ends = [...new Set(placed.flatMap(lane => lane.ends))].sort((one, other) => one - other)
  const [least, most] = [ends[0] ?? 0, ends.at(-1) ?? 0]
  const pad = Math.max((most - least) * 0.45, Math.abs(most) * 0.06, 1)
  const [from, to] = [least >= 0 ? Math.max(0, least - pad) : least - pad, most + pad]
  const at = (amount: number) => Math.max(0, Math.min(width, (amount - from) / (to - from) * width))
  const foot = 4 + lanes.length * STEP
  const list: Shape[] = []

  for (const { low, high } of windows) {
    const [left, right] = [at(low?.amount ?? -Infinity), at(high?.amount ?? Infinity)]
    // A single value that is left is as wide as a mark, so that it can be seen.
    list.push(box('band', Math.min(left, width - 3), 0, Math.max(3, right - left), foot, { fill: 'pine-wash' }))
    for (const [end, x] of [[low, left], [high, right]] as const) if (end) list.push(seg('fit', x, 0, x, foot, { role: 'pine', width: 'heavy' }))
  }
  lanes.forEach(({ allowed, ends: own, role }, index) => {
    const y = 4 + index * STEP
    for (const { low, high } of allowed) {
      const [left, right] = [at(low), at(high)]
      if (right - left >= 1) list.push(hatch(left, y, right - left, LANE, { role, step: 6, lean: index === 0 ? 1 : -1 }))
    }
    for (const end of own) list.push(seg('fit', at(end), y - 2, at(end), y + LANE + 2, { role, width: 'line' }))
  })
  if (windows.length === 0 && most > least) {
    // The gap that nothing lies in: between the nearest ends that turn away from each other.
    const clash = clashOf(placed)
    if (clash) {
      for (const end of [clash.from, clash.to]) list.push(seg('fit', at(end), 0, at(end), foot, { role: 'brass', dash: [4, 3] }))
      list.push(...dimH(at(clash.from), at(clash.to), foot / 2 + 2, '', { role: 'brass' }))
    }
  }
  list.push(seg('dim', 0, foot, width, foot), ...ticks(tape, from, to, width, foot), ...labels(ends.map(end => ({ x: at(end), words: figure(end) })), width, foot))
  const rows = Math.max(0, ...list.flatMap(shape => shape.kind === 'text' ? [shape.y] : []))
  return { list, width, height: Math.max(rows, foot + 8) + 5 }
}

/** The limits on the first one's measurand of one datum (or of two, the upper lying over the lower by `gap.at`) as a band: combined as {@link combineLimits} does. Throws what it throws. */
export function bandOfLimits(limits: readonly Limit[], { gap, system, figure, width }: { gap: { upper: string, lower: string, at: Length } | null, system: System, figure: (amount: number) => string, width?: number }): Drawing | null {
  const datum = gap?.lower ?? limits[0]?.datum
  const held = limits.filter(limit => limit.measurand === limits[0]!.measurand && (limit.datum === datum || (gap && limit.datum === gap.upper)))
  if (datum === undefined || held.length === 0) return null
  const { windows, unit } = combineLimits(held, { datum, ...(gap && { offsets: { [gap.upper]: gap.at } }), system })
  const placed = placeLimits({ limits: held.map(limit => ({ limit, shift: limit.datum === datum ? 0 : gap!.at })), reading: null, system, say: () => '' })
  return limitBand({ placed, windows, tape: unit === 'length' ? system : null, figure, ...(width !== undefined && { width }) })
}

function ticks(tape: System | null, from: number, to: number, width: number, foot: number): Shape[] {
  const step = tape && STEPS[tape].find(each => each / (to - from) * width >= 6)
  if (!step) return []
  const first = Math.ceil(from / step)
  return Array.from({ length: Math.floor(to / step) - first + 1 }, (_, k) => (first + k) * step)
    .map(amount => (amount - from) / (to - from) * width).map(x => seg('dim', x, foot, x, foot + 5, { width: 'hair' }))
}

/** Figures under their ends; one that would run into the figure before it stands a row lower. */
function labels(wanted: readonly { x: number, words: string }[], width: number, foot: number): Shape[] {
  const taken = [-Infinity, -Infinity]
  return wanted.flatMap(({ x, words }) => {
    const room = textWidth(words, 14)
    const left = Math.max(0, Math.min(width - room, x - room / 2))
    const row = taken.findIndex(end => end + 6 <= left)
    if (row < 0) return []
    taken[row] = left + room
    return [text(left, foot + 20 + row * 17, words)]
  })
}
