import { INCH } from '../../measure/length'
import { text, type Shape } from '../displayList'
import { LEVEL_GAUGE, levelGauge } from './levelGauge'
import { FIELD_WIDTH } from './live'
import { bareFigure, figure } from './placedLimit'
import type { SwingSeen } from './swingSeen'
import { cutText, textWidth } from './textWidth'

const HEAD = 24
const BAND = 40
const HEIGHT = HEAD + BAND + LEVEL_GAUGE.steel + LEVEL_GAUGE.tape + 4

/** The range of bottom clearance at the hinge that works, with what hangs there now in chalk. Where none works, both bounds stand with the gap between them. */
export function clearanceRange({ input, swing, range }: SwingSeen, top: number): { list: Shape[], height: number } {
  const { leaf, system, say } = input
  const low = range?.low ?? swing.needed
  const high = range?.high ?? Infinity
  const works = low <= high
  const ends = [low, ...(Number.isFinite(high) ? [high] : [])]
  const gauge = levelGauge(
    { reading: leaf.clearance, system },
    [{ ends, allowed: works ? [{ low, high }] : [], role: works ? 'pine' : 'brass', wash: 'pine-wash' }],
    { top: top + HEAD, width: FIELD_WIDTH, nominal: 2 * INCH, band: BAND },
  )
  const head = works ? say('works') : say('nothingWorks', { amount: figure(range!.shortBy, system, [0]) })
  const list: Shape[] = [
    text(14, top + 16, cutText(head, 15, 336, works ? 400 : 500), { size: 15, role: works ? 'soft' : 'rust', ...(!works && { weight: 500 as const }) }),
    ...gauge.list,
  ]
  const y = top + HEAD + 20
  const chalkX = gauge.xOf(leaf.clearance)
  const [x1, x2] = works ? [gauge.xOf(low), Number.isFinite(high) ? gauge.xOf(high) : FIELD_WIDTH] : [gauge.xOf(high), gauge.xOf(low)]
  // Words stand clear of the edges and of one another; the reading comes first.
  const written = ends.filter(end => !gauge.axis.beyond(end)).map(end => ({ from: gauge.xOf(end) - 1, to: gauge.xOf(end) + 1 }))
  const role = works ? 'pine' : 'brass'
  const [first, last] = works ? [low, high] : [high, low]
  const put = (words: string, size: number, choices: number[], style: Parameters<typeof text>[3]) => {
    const width = textWidth(words, size, style?.weight)
    const x = choices.find(each => each >= 0 && each + width <= FIELD_WIDTH && written.every(({ from, to }) => each > to + 4 || each + width < from - 4))
    if (x === undefined) return
    written.push({ from: x, to: x + width })
    list.push(text(x, y, words, { size, ...style }))
  }
  const shown = bareFigure(leaf.clearance, system, ends)
  const width = textWidth(shown, 28, 300)
  put(shown, 28, [chalkX - width - 8, chalkX + 8, chalkX - width / 2, 8, FIELD_WIDTH - width - 4], { weight: 300 })
  // Each bound just inside its edge where there is room, else just outside.
  if (!gauge.axis.beyond(first)) {
    const words = bareFigure(first, system, [leaf.clearance])
    put(words, 19, [x1 + 8, x1 - 8 - textWidth(words, 19, 500)], { weight: 500, role })
  }
  if (Number.isFinite(last) && !gauge.axis.beyond(last)) {
    const words = figure(last, system, [leaf.clearance])
    put(words, 19, [x2 - 8 - textWidth(words, 19, 500), x2 + 8], { weight: 500, role })
  }
  return { list, height: HEIGHT }
}
