import { doubleLeaves, type DoubleLeaves } from '../../gate/doubleLeaves'
import type { TrialOf } from '../../trial/trial'
import { box, dimH, open, seg, text, type Drawing, type Shape } from '../displayList'
import { bareFigure } from '../live/placedLimit'
import { middleWithin } from '../live/textWidth'

const [WIDTH, HEIGHT] = [360, 230]

/** Two leaves that meet, from the side over their ground and their meeting edges large from above. Throws what `doubleLeaves` throws. */
export function drawLeaves({ first, second, opening, thickness, hingeRise, system }: TrialOf<'leaves'>): Drawing & { meet: DoubleLeaves } {
  const meet = doubleLeaves({ first, second, opening, thickness, hingeRise })
  const per = 316 / opening
  const [x, top, floor] = [22, 14, 96]
  // Heights many times, as much as the room under the leaves bears.
  const high = Math.max(Math.abs(hingeRise), first.clearance, Math.abs(hingeRise + second.clearance), 1)
  const times = 26 / high
  const [y1, y2] = [floor - first.clearance * times, floor - (hingeRise + second.clearance) * times]
  const [w1, w2] = [first.width * per, second.width * per]
  const list: Shape[] = [
    ...[x - 8, x + 316].map(px => box('post', px, top - 8, 8, floor - top + 14, { fill: 'steel', role: 'steel-edge', width: 'hair' })),
    box('leaf', x, top, w1, y1 - top, { fill: 'chalk', role: 'ink', width: 'line' }),
    box('leaf', x + 316 - w2, top, w2, y2 - top, { fill: 'chalk', role: 'ink', width: 'line' }),
    open('ground', [[0, floor], [x, floor], [x + 316, floor - hingeRise * times], [WIDTH, floor - hingeRise * times]], {}),
  ]
  // From above, the edges that meet: at true thickness against a gap that is never drawn under 6.
  const y = 152
  const thick = 40
  const gap = Math.max(6, Math.min(120, meet.closed * thick / thickness))
  const middle = WIDTH / 2
  list.push(
    box('leaf', 20, y, middle - gap / 2 - 20, thick, { fill: 'steel', role: 'steel-edge', width: 'line' }),
    box('leaf', middle + gap / 2, y, WIDTH - 20 - middle - gap / 2, thick, { fill: 'steel', role: 'steel-edge', width: 'line' }),
    ...(meet.binds ? [seg('fit', middle - gap / 2, y, middle + gap / 2, y + thick, { role: 'rust', width: 'heavy' })] : []),
    ...dimH(middle - gap / 2, middle + gap / 2, y - 9, ''),
  )
  const words = bareFigure(meet.closed, system, [meet.needed])
  list.push(text(middleWithin(words, 22, middle, 4, WIDTH - 4), y - 17, words, { size: 22, weight: 300, anchor: 'middle', role: meet.binds ? 'rust' : 'ink' }))
  return { list, width: WIDTH, height: HEIGHT - 28, meet }
}
