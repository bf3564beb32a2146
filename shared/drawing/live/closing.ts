import type { Angle } from '../../gate/leaf'
import { radians } from '../../gate/leaf'
import { box, diamond, path, seg, text, type Shape } from '../displayList'
import { FIELD_WIDTH, PAPER, type LiveDrawing, type LiveInput } from './live'
import { cutText, wrapText } from './textWidth'

/** One way of letting the gate close: from how far open, how often it closed and latched, of how many times asked. */
export interface ClosingTrial { label: string, angle: Angle, good: number | null, of: number }
export interface ClosingInput extends Pick<LiveInput, 'say' | 'size'> { trials: readonly ClosingTrial[] }

/** Closing trials from above: the leaf closed, dashed where it was let go, and a diamond for each try. */
export function drawClosing(input: ClosingInput): LiveDrawing {
  const { say, trials } = input
  const summary = trials.map(({ label, good, of }) => `${label}: ${good === null ? say('noReading') : say('tries', { good: String(good), of: String(of) })}`).join('; ')
  const alt = { code: 'closing', params: { summary } }
  if (input.size === 'paper') {
    const list = plan(trials, { x: 20, y: 14, reach: 64, post: 7 })
    const most = 6
    trials.slice(0, 3).forEach((trial, i) => list.push(...diamonds(trial, 96, 24 + i * 20, 13, most, 48 / most)))
    return { list, ...PAPER, alt }
  }
  const list = plan(trials, { x: 24, y: 20, reach: 116, post: 12 })
  let top = 8
  for (const trial of trials.slice(0, 4)) {
    const { label, good, of } = trial
    const lines = wrapText(label, 15, FIELD_WIDTH - 180, 2)
    lines.forEach((line, i) => list.push(text(176, top + 14 + i * 18, line, { size: 15 })))
    const y = top + 3 + lines.length * 18
    list.push(...diamonds(trial, 176, y, 20, 5, 23))
    if (good !== null) list.push(text(FIELD_WIDTH - 4, y + 16, cutText(say('tries', { good: String(good), of: String(of) }), 15, 62), { size: 15, anchor: 'end', role: good < of ? 'rust' : 'soft' }))
    top = y + 26
  }
  return { list, width: FIELD_WIDTH, height: Math.max(150, top), alt }
}

/** One diamond a try, good ones first; no more than `most`. */
function diamonds({ good, of }: ClosingTrial, x: number, y: number, size: number, most: number, step: number): Shape[] {
  return Array.from({ length: Math.min(of, most) }, (_, i) => diamond(good === null ? 'notRead' : i < good ? 'conforms' : 'doesNotConform', x + i * step, y, size)).flat()
}

function plan(trials: readonly ClosingTrial[], { x, y, reach, post }: { x: number, y: number, reach: number, post: number }): Shape[] {
  const at = (angle: Angle, distance = reach) => [x + distance * Math.cos(radians(angle)), y + distance * Math.sin(radians(angle))] as const
  const widest = Math.max(30_000, ...trials.map(({ angle }) => Math.max(0, Math.min(90_000, angle))))
  const [endX, endY] = at(widest)
  const half = post / 2
  return [
    ...[x, x + reach + half + 2].map(px => box('post', px - half, y - half, post, post, { fill: 'steel', role: 'steel-edge', width: 'hair' })),
    path('plan', `M${r(x + reach)} ${r(y)}A${r(reach)} ${r(reach)} 0 0 1 ${r(endX)} ${r(endY)}`, { role: 'mark', width: 'hair' }),
    seg('leaf', x, y, x + reach, y, { width: post * 0.36 }),
    ...trials.map(({ angle, good, of }) => {
      const [ex, ey] = at(Math.max(0, Math.min(90_000, angle)))
      return seg('leaf', x, y, ex, ey, good !== null && good < of ? { role: 'rust', width: 2, dash: [6, 3] } : { role: 'mark', width: 'line', dash: [6, 3] })
    }),
  ]
}

const r = (n: number) => Math.round(n * 100) / 100
