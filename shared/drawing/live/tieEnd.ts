import { box, meshPath, path, poly, seg, text, type Shape } from '../displayList'
import { FIELD_WIDTH, PAPER, type LiveDrawing, type LiveInput } from './live'
import { tie } from './spacing'
import { cutText, wrapText } from './textWidth'

/** What the hand felt: ends turned in, an end that stands out, or nothing felt yet. */
export interface TieEndInput extends Pick<LiveInput, 'say' | 'size'> { ends: 'in' | 'out' | null }

const HEIGHT = 150

/** A tie on its rail: as the hand meets it along the rail, and cut through, where its end shows. */
export function drawTieEnd(input: TieEndInput): LiveDrawing {
  const { ends, say, size } = input
  const words = say(ends === null ? 'notFelt' : ends === 'in' ? 'turnedIn' : 'standsOut')
  const alt = { code: 'tieEnd', params: { summary: words } }
  const role = ends === null ? 'soft' : ends === 'in' ? 'pine' : 'rust'
  if (size === 'paper') {
    return {
      list: [
        ...elevation(PAPER.width, PAPER.height, 42, 8, [24, 79, 134], ends === 'out' ? 1 : -1, 1),
        text(148, 14, cutText(words, 11, 140), { size: 11, anchor: 'end', role, halo: 'paper' }),
      ],
      ...PAPER, alt,
    }
  }
  const list = [
    ...elevation(200, HEIGHT, 66, 17, [38, 138], ends === 'out' ? 1 : -1, 1.7),
    ...section(274, 66, 24, ends),
    ...wrapText(words, 17, 144, 2, 500).map((line, i, all) => text(212, 143 - (all.length - 1 - i) * 20, line, { size: 17, weight: 500, role })),
  ]
  return { list, width: FIELD_WIDTH, height: HEIGHT, alt }
}

/** Rail and ties from the touched face; the tie at index `out` has an end that stands out. */
function elevation(width: number, height: number, railY: number, half: number, places: number[], out: number, scale: number): Shape[] {
  const across = 16 * scale
  return [
    path('mesh', meshPath(width, height, across, across, (u, v) => [u, v], places[0]! % across), { role: 'mark', width: 'wire' }),
    box('rail', 0, railY - half, width, 2 * half, { fill: 'paper', role: 'ink', width: 1.25 }),
    seg('rail', 0, railY - half / 2, width, railY - half / 2, { role: 'line', width: 'hair' }),
    ...places.flatMap((x, i) => i === out ? [...loose(x, railY, half, scale)] : tie([x, railY], half, 'level', scale)),
  ]
}

/** A tie whose end was left straight: it points at the hand. */
function loose(x: number, y: number, half: number, scale: number): Shape[] {
  const [w, h] = [4 * scale, half + 7 * scale]
  const loop = `M${x - w} ${y + h}L${x - w} ${y - h + 3}Q${x - w} ${y - h} ${x} ${y - h}Q${x + w} ${y - h} ${x + w} ${y - h + 3}L${x + w} ${y + h - 3}`
  return [path('fit', loop, { width: 1.5 }), path('fit', `M${x + w} ${y + h - 3}Q${x + w + 1} ${y + h + 2} ${x + w + 9 * scale} ${y + h + 5 * scale}`, { role: 'rust', width: 'heavy' })]
}

/** The same cut across the rail; the touched face is at the right, where the fabric hangs. */
function section(x: number, y: number, radius: number, ends: TieEndInput['ends']): Shape[] {
  const face = x + radius + 4
  const round = (r: number) => `M${x - r} ${y}A${r} ${r} 0 1 1 ${x + r} ${y}A${r} ${r} 0 1 1 ${x - r} ${y}Z`
  const loop = radius + 3
  const list: Shape[] = [
    path('rail', round(radius), { fill: 'chalk', width: 'line' }),
    path('rail', round(radius - 4), { fill: 'paper', width: 'hair' }),
    // Wires of the fabric, cut and running on.
    seg('mesh', face, y - 58, face, y + 40, { role: 'mark', width: 2 }),
    path('fit', `M${face + 5} ${y - 6}L${face + 5} ${y - 14}Q${face + 4} ${y - loop} ${x} ${y - loop}A${loop} ${loop} 0 0 0 ${x} ${y + loop}Q${face + 4} ${y + loop} ${face + 5} ${y + 12}`, { width: 2.5 }),
  ]
  if (ends === 'out') list.push(path('fit', `M${face + 5} ${y + 12}Q${face + 6} ${y + 6} ${face + 26} ${y + 3}`, { role: 'rust', width: 'heavy' }), poly('fit', [[face + 26, y], [face + 34, y + 2], [face + 26, y + 6]], { fill: 'rust' }))
  else if (ends === 'in') list.push(path('fit', `M${face + 5} ${y + 12}Q${face + 6} ${y + 4} ${face - 1} ${y + 5}`, { role: 'pine', width: 'heavy' }))
  else list.push(path('fit', `M${face + 5} ${y + 12}Q${face + 6} ${y + 4} ${face - 1} ${y + 5}`, { role: 'mark', width: 'line', dash: [2, 2] }), path('fit', `M${face + 5} ${y + 12}Q${face + 6} ${y + 6} ${face + 26} ${y + 3}`, { role: 'mark', width: 'line', dash: [2, 2] }))
  return list
}
