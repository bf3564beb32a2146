import type { LiveInput } from './live'
import { box, seg, text, type Shape } from '../displayList'
import { bareFigure, clashOf, figure, governing, marginWords, type PlacedLimit } from './placedLimit'
import { cutText, textWidth, wrapText } from './textWidth'

/** The column of words beside a picture: reading large, margin, then each limit and whose it is. Runs from `top`, no lower than `bottom`. */
export function readout(input: LiveInput, placed: readonly PlacedLimit[], { left, right, top, bottom }: { left: number, right: number, top: number, bottom: number }, shown?: string): Shape[] {
  const { reading, system, say } = input
  const width = right - left
  const list: Shape[] = []
  let y = top
  const line = (words: string, height: number, style: Parameters<typeof text>[3]) => {
    if (y + height > bottom) return
    y += height
    list.push(text(left, y - height * 0.24, words, style))
  }
  const worst = governing(placed)
  const words = shown ?? (reading === null ? '' : bareFigure(reading, system, placed.flatMap(({ ends }) => ends)))
  if (!words) {
    line(cutText(say('noReading'), 15, width), 22, { size: 15, role: 'soft' })
  } else {
    // One that fits at no size stands under the picture, on its own tape.
    const size = [42, 34, 26, 20, 16, 14].find(each => textWidth(words, each, 300) <= width)
    if (size) line(words, size, { size, weight: 300 })
  }
  const margin = marginWords(worst, system, say)
  if (margin.words) for (const each of wrapText(margin.words, 15, width, 2, 500)) line(each, 19, { size: 15, weight: 500, role: margin.role })
  y += 5
  if (placed.length === 0) line(cutText(say('noLimit'), 15, width), 20, { size: 15, weight: 500, role: 'brass' })
  for (const [index, limit] of placed.slice(0, 2).entries()) {
    const start = y
    for (const each of wrapText(limit.words, 15, width - 10, 2, 500)) indented(each, 18, { size: 15, weight: 500, role: limit.role })
    for (const each of wrapText(limit.basis, 14, width - 10, placed.length === 1 ? 2 : 1)) indented(each, 17, { role: limit.role })
    // The stroke says which edge of the bar below is meant: whole and heavy, or dashed.
    if (y > start) list.push(index === 0 ? box('fit', left, start + 3, 3, y - start - 4, { fill: limit.role }) : seg('fit', left + 1.5, start + 3, left + 1.5, y - 1, { role: limit.role, dash: [5, 2], width: 2 }))
    y += 3
  }
  const clash = clashOf(placed)
  if (clash) line(cutText(say('clash', { amount: figure(clash.to - clash.from, system, [0]) }), 14, width), 18, { role: 'brass', weight: 500 })
  else if (placed.length > 2) line(cutText(say('more', { count: String(placed.length - 2) }), 14, width), 17, { role: 'soft' })
  return list

  function indented(words: string, height: number, style: Parameters<typeof text>[3]) {
    if (y + height > bottom) return
    y += height
    list.push(text(left + 10, y - height * 0.24, words, style))
  }
}
