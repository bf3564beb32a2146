import { latchEndDrop, type LatchEndDrop } from '../../gate/latchEndDrop'
import { squareness, type Squareness } from '../../gate/squareness'
import type { TrialOf } from '../../trial/trial'
import { dimV, meshPath, open, path, poly, seg, text, type Drawing, type Point, type Shape } from '../displayList'
import { bareFigure } from '../live/placedLimit'
import { groundFromEdge } from '../live/groundFromEdge'
import { textWidth } from '../live/textWidth'

const [WIDTH, HEIGHT] = [360, 232]
/** What is small is drawn so many times, the most that stays inside. */
const TIMES = [100, 50, 30, 20, 10, 5, 3, 2, 1, 0.5, 0.2, 0.1] as const
const timesFor = (amount: number, per: number, most: number) => TIMES.find(each => Math.abs(amount) * per * each <= most) ?? TIMES.at(-1)!

/** A frame from the side with its two diagonals, leaning as they tell, many times. Throws what `squareness` throws. */
export function drawFrame({ width, height, first, second, error, system }: TrialOf<'frame'>): Drawing & { square: Squareness, times: number } {
  const square = squareness({ width, height, first, second }, error)
  const per = Math.min(210 / width, 160 / height)
  const times = timesFor(square.lean, per, 40)
  const [w, h, lean] = [width * per, height * per, Math.max(-60, Math.min(60, square.lean * per * times))]
  const [x, y] = [(WIDTH - w) / 2, 24]
  const [a, b, c, d]: Point[] = [[x + lean / 2, y], [x + w + lean / 2, y], [x + w - lean / 2, y + h], [x - lean / 2, y + h]] as [Point, Point, Point, Point]
  const list: Shape[] = [
    poly('band', [[x, y], [x + w, y], [x + w, y + h], [x, y + h]], { role: 'mark', width: 'hair', dash: [4, 3] }),
    path('mesh', meshPath(w, h, 14, 14, (u, v) => [x + u + lean * (0.5 - v / h), y + v]), { role: 'line', width: 'wire' }),
    poly('leaf', [a!, b!, c!, d!], { role: 'ink', width: 5 }),
    seg('dim', ...d!, ...b!, { role: 'pine', width: 'heavy' }), seg('dim', ...a!, ...c!, { role: 'brass', width: 'heavy', dash: [7, 3] }),
    ...diagonal(d!, b!, 0.24, bareFigure(first, system), 'pine'), ...diagonal(a!, c!, 0.24, bareFigure(second, system), 'brass'),
    ...groundFromEdge([[0, y + h + 14], [WIDTH, y + h + 14]], { depth: 6 }),
    text(WIDTH - 8, 18, `× ${times}`, { role: 'soft', anchor: 'end' }),
  ]
  return { list, width: WIDTH, height: HEIGHT, square, times }
}

function diagonal(from: Point, to: Point, share: number, words: string, role: 'pine' | 'brass'): Shape[] {
  return [text(from[0] + (to[0] - from[0]) * share, from[1] + (to[1] - from[1]) * share + 6, words, { size: 17, weight: 500, role, anchor: 'middle', halo: 'paper', haloWidth: 7 })]
}

/** A leaf whose hinge line leans, from the side, the drop of its latch end drawn many times. Throws what `latchEndDrop` throws. */
export function drawDrop({ width, out, apart, opened, system }: TrialOf<'drop'>): Drawing & { drop: LatchEndDrop, times: number } {
  const drop = latchEndDrop(width, { out, apart }, opened)
  const per = 250 / width
  const times = timesFor(drop.closed, per, 40)
  const fall = drop.closed * per * times
  const [x, y, h] = [56, 48, 120]
  const lean = fall * h / 250
  const list: Shape[] = [
    seg('post', x - 10 + lean, y - 18, x - 10, y + h + 60, { role: 'steel', width: 10 }),
    seg('dim', x, y - 18, x, y + h + 54, { role: 'mark', width: 'hair', dash: [2, 3] }),
    poly('band', [[x, y], [x + 250, y], [x + 250, y + h], [x, y + h]], { role: 'mark', width: 'hair', dash: [4, 3] }),
    poly('leaf', [[x + lean, y], [x + 250 + lean, y + fall], [x + 250, y + h + fall], [x, y + h]], { fill: 'chalk', fillOpacity: 0.6, role: 'ink', width: 3 }),
    ...groundFromEdge([[0, 222], [WIDTH, 222]], { depth: 6 }),
    text(WIDTH - 8, 18, `× ${times}`, { role: 'soft', anchor: 'end' }),
  ]
  const words = bareFigure(Math.abs(drop.closed), system, [0])
  if (Math.abs(fall) > 6) list.push(...dimV(x + 250 + 12, y + h, y + h + fall, '', { role: 'rust' }))
  list.push(text(Math.min(WIDTH - textWidth(words, 22, 300) - 2, x + 250 + 20), y + h + fall / 2 + 8, words, { size: 22, weight: 300, role: drop.closed === 0 ? 'ink' : 'rust', halo: 'paper' }))
  list.push(open('dim', [[x, y - 18], [x + lean, y - 18]], { role: 'rust', width: 'line' }))
  return { list, width: WIDTH, height: 234, drop, times }
}
