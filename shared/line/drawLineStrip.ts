import { poly, seg, type Drawing, type Shape } from '../drawing/displayList'
import type { Length } from '../measure/length'
import { fabricOf } from './drawElement'
import { lineLength } from './layLine'
import { elementsOf, type Line } from './line'
import type { LineMarks } from './lineMark'

/** Room at both ends, so that half a gate's diamond or a tag stays on the picture. */
const MARGIN = 2

/**
 * A whole line on one row of 30, for lists: rail in pine where it was read, a diamond at each gate, flagging tape where something is open.
 * All strips of a list are to one scale: `longest` is the longest line among them and takes all of `width`.
 */
export function drawLineStrip(line: Line, { width, longest, marks = {} }: { width: number, longest: Length, marks?: LineMarks }): Drawing {
  const whole = lineLength(line)
  const scale = (width - 2 * MARGIN - 4) / Math.max(longest, whole, 1)
  const y = 18
  const at = (station: Length) => MARGIN + station * scale
  const list: Shape[] = [seg('rail', MARGIN, y, at(whole), y, { role: 'mark' })]
  let station = 0
  let woven: { from: number, to: number } | null = null
  const weave = () => { if (woven) list.push(seg('rail', woven.from, y, woven.to, y, { role: 'pine', width: 4 })) }
  let lastGate = -Infinity
  let lastTag = -Infinity
  for (const element of elementsOf(line)) {
    const mark = marks[element.id]
    const [from, to] = [at(station), at(station + element.length)]
    if (fabricOf(mark)) {
      // Neighbours that were both read make one stroke.
      if (woven && from - woven.to < 0.01) woven.to = to
      else { weave(); woven = { from, to } }
    }
    if (element.kind === 'gate') {
      const x = Math.max((from + to) / 2, lastGate + 6)
      lastGate = x
      list.push(poly('leaf', [[x, y - 5], [x + 5, y], [x, y + 5], [x - 5, y]], { fill: 'paper', role: 'ink', width: 1.25 }))
    }
    for (const tag of mark?.tags ?? []) {
      const x = at(station + (tag.along ?? element.length / 2))
      // Tapes nearer than 4 to one another read as one.
      if (tag.state === 'settled' || Math.abs(x - lastTag) < 4) continue
      lastTag = x
      const role = tag.state === 'readAgain' ? 'brass' : 'rust'
      list.push(poly('tag', [[x, 3], [x + 11, 3], [x + 8, 6.5], [x + 11, 10], [x, 10]], { fill: role }), seg('tag', x, 3, x, y, { role, width: 1.25 }))
    }
    station += element.length
  }
  weave()
  for (const x of [MARGIN, at(whole)]) list.push(seg('post', x, y - 6, x, y + 6))
  return { list, width, height: 30 }
}
