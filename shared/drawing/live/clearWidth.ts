import { FOOT } from '../../measure/length'
import { box, dimH, open, path, seg, type Shape } from '../displayList'
import { LEVEL_GAUGE, levelGauge } from './levelGauge'
import { FIELD_WIDTH, PAPER, type LiveDrawing, type LiveInput } from './live'
import { bareFigure, placeLimits, summaryOf, type PlacedLimit } from './placedLimit'
import { readout } from './readout'
import { figureThatFits, middleWithin } from './textWidth'

const HEIGHT = 150 + LEVEL_GAUGE.height

/** Clear width of a gate that stands open, from above: from the face of the leaf to the stop. Throws what `judge` throws. */
export function drawClearWidth(input: LiveInput): LiveDrawing {
  const placed = placeLimits(input)
  const alt = { code: 'clearWidth', params: { summary: summaryOf(input, placed) } }
  if (input.size === 'paper') return { list: picture(input, placed, { ...PAPER, size: 14, least: 11 }), ...PAPER, alt }
  const list = [
    ...picture(input, placed, { width: 196, height: 142, size: 17, least: 14 }),
    ...readout(input, placed, { left: 212, right: FIELD_WIDTH - 4, top: 4, bottom: 146 }),
    ...levelGauge(input, placed, { top: 150, width: FIELD_WIDTH, nominal: 3 * FOOT }).list,
  ]
  return { list, width: FIELD_WIDTH, height: HEIGHT, alt }
}

function picture({ reading, system }: LiveInput, placed: readonly PlacedLimit[], { width, height, size, least }: { width: number, height: number, size: number, least: number }): Shape[] {
  const [y, post, leaf] = [height * 0.16, height * 0.1, Math.max(4, height * 0.045)]
  const face = width * 0.2 + leaf
  const end = placed[0]?.ends[0]
  const largest = Math.max(reading ?? 0, end ?? 0, 1)
  const per = width * 0.6 / largest
  const clear = reading === null ? width * 0.55 : Math.max(3, reading * per)
  const stop = face + clear
  // The leaf is as long as the way is wide, as far as the picture goes.
  const reach = Math.min(height - y - 14, clear + leaf)
  const list: Shape[] = [
    seg('rail', 0, y, face - leaf - post / 2, y, { width: 'heavy' }),
    seg('rail', stop + post, y, width, y, { width: 'heavy' }),
    box('post', face - leaf - post, y - post / 2, post, post, { fill: 'steel', role: 'steel-edge', width: 'hair' }),
    box('post', stop, y - post / 2, post, post, { fill: 'steel', role: 'steel-edge', width: 'hair' }),
    seg('leaf', face - leaf, y, stop, y, { role: 'mark', dash: [6, 3] }),
    box('leaf', face - leaf, y, leaf, reach, { fill: 'ink' }),
  ]
  if (reach > 12 && clear > 12) {
    const x = face - leaf / 2
    list.push(path('plan', `M${r(x + reach)} ${r(y)}A${r(reach)} ${r(reach)} 0 0 1 ${r(x)} ${r(y + reach)}`, { role: 'mark', width: 'hair' }))
  }
  if (end !== undefined && end > 0) {
    const x = Math.min(width - 2, face + end * per)
    const inward = placed[0]!.allowed[0]?.high === Infinity ? 1 : -1
    const [from, to] = [height * 0.42, height * 0.74]
    list.push(seg('fit', x, from, x, to, { role: placed[0]!.role, width: 'heavy' }))
    for (let at = from + 2; at < to - 5; at += 5) list.push(open('fit', [[x, at], [Math.max(0, Math.min(width, x + inward * 5)), at + 5]], { role: placed[0]!.role, width: 'wire' }))
  }
  if (reading !== null) {
    const at = height * 0.58
    list.push(...dimH(face, stop, at, ''))
    list.push(seg('dim', stop, y + post / 2, stop, at + 4, { role: 'mark', width: 'hair', dash: [2, 3] }))
    const words = bareFigure(reading, system)
    list.push(...figureThatFits(middleWithin(words, size, (face + stop) / 2, face + 4, width - 4), at - 7, words, [size, 14, 11].filter(each => each >= least), width - face - 8, { anchor: 'middle', halo: 'paper', haloWidth: 6 }))
  }
  return list
}

const r = (n: number) => Math.round(n * 100) / 100
