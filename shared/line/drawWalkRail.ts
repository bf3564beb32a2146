import { poly, seg, text, textWidth, type Shape } from '../drawing/displayList'
import type { Length } from '../measure/length'
import { lineLength } from './layLine'
import { elementsOf, type Line } from './line'
import { stationWords } from './lineScene'

const RAIL = 30
const MARGIN = 14

function gateDiamond(x: number): Shape {
  return poly('leaf', [[x, RAIL - 5], [x + 5, RAIL], [x, RAIL + 5], [x - 5, RAIL]], { fill: 'paper', role: 'ink', width: 1.5 })
}

/** The whole line as a rail at the head of the walk: a post between elements, a diamond at each gate, woven up to where one stands, with brackets to the close view below. */
export function drawWalkRail(line: Line, at: Length, { width, backwards }: { width: number, backwards: boolean }): Shape[] {
  const whole = lineLength(line)
  const scale = (width - 2 * MARGIN) / Math.max(whole, 1)
  const x = (station: Length) => MARGIN + (backwards ? whole - station : station) * scale
  const here = x(at)
  const list: Shape[] = [seg('rail', MARGIN, RAIL, here, RAIL, { role: 'pine', width: 4 }), seg('rail', here, RAIL, width - MARGIN, RAIL, { role: 'mark' })]
  let station = 0
  let lastPost = -Infinity
  const post = (s: number) => {
    const place = x(s)
    if (Math.abs(place - lastPost) < 1) return
    lastPost = place
    list.push(seg('post', place, RAIL - 6, place, RAIL + 6, { width: 1.25 }))
  }
  for (const element of elementsOf(line)) {
    post(station)
    if (element.kind === 'gate') list.push(gateDiamond(x(station + element.length / 2)))
    station += element.length
  }
  post(station)
  const [left, middle, right] = [stationWords(backwards ? whole : 0, line.system), stationWords(at, line.system), stationWords(backwards ? 0 : whole, line.system)]
  const half = textWidth(middle, 14) / 2
  const stands = Math.max(half + 6, Math.min(width - half - 6, here))
  // The figures of both ends give way to the one of the place.
  if (stands - half > MARGIN + textWidth(left, 14) + 8) list.push(text(MARGIN, 16, left, { role: 'soft' }))
  if (stands + half < width - MARGIN - textWidth(right, 14) - 8) list.push(text(width - MARGIN, 16, right, { role: 'soft', anchor: 'end' }))
  list.push(text(stands, 16, middle, { anchor: 'middle', weight: 500 }))
  list.push(seg('state', here, RAIL, here, RAIL + 12), poly('state', [[here, RAIL + 9], [here + 7, RAIL + 16], [here, RAIL + 23], [here - 7, RAIL + 16]], { fill: 'pine' }))
  list.push(seg('dim', here - 7, 56, 2, 78, { role: 'mark', width: 'hair' }), seg('dim', here + 7, 56, width - 2, 78, { role: 'mark', width: 'hair' }))
  return list
}
