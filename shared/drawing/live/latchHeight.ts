import { INCH, type Length } from '../../measure/length'
import { box, chalk, dimV, hatch, seg, text, type Shape } from '../displayList'
import { leafPicture, lens } from './leafPicture'
import { FIELD_WIDTH, PAPER, type LiveDrawing, type LiveInput } from './live'
import { bareFigure, placeLimits, summaryOf, type PlacedLimit } from './placedLimit'
import { cutText, figureThatFits, textWidth } from './textWidth'
import { uprightGauge } from './uprightGauge'

/** From where the release is measured: up from the ground or the bottom of the leaf, or down from its top. */
export interface LatchHeightInput extends LiveInput {
  from: 'ground' | 'leaf' | 'top'
  leafHeight: Length
  /** Gap under the leaf. */
  gapBelow: Length
}

const HEIGHT = 198
const USUAL_LATCH = 54 * INCH

/** Latch release on its post: the whole gate at the left, the spot large at the right, with tape, chalk, limits and margin. Throws what `judge` throws. */
export function drawLatchHeight(input: LatchHeightInput): LiveDrawing {
  const placed = placeLimits(input)
  const alt = { code: 'latchHeight', params: { summary: summaryOf(input, placed) } }
  return input.size === 'paper'
    ? { list: onPaper(input, placed), ...PAPER, alt }
    : { list: inField(input, placed), width: FIELD_WIDTH, height: HEIGHT, alt }
}

/** Where the leaf and the release lie in a picture of the whole gate, `top` to `groundY`; a release off the leaf is kept at its end. */
function gate({ reading, from, leafHeight, gapBelow }: LatchHeightInput, top: number, groundY: number) {
  const whole = Math.max(leafHeight, 1) + Math.max(0, gapBelow)
  const bottom = groundY - Math.max(3, Math.min(groundY - top - 20, Math.max(0, gapBelow) / whole * (groundY - top)))
  const height = reading ?? USUAL_LATCH
  const scale = (bottom - top) / Math.max(leafHeight, 1)
  const y = from === 'top' ? top + height * scale : from === 'leaf' ? bottom - height * scale : groundY - height / whole * (groundY - top)
  return { bottom, y: Math.max(top + 4, Math.min(bottom - 4, y)), datumY: from === 'top' ? top : from === 'leaf' ? bottom : groundY }
}

function inField(input: LatchHeightInput, placed: PlacedLimit[]): Shape[] {
  const [top, groundY] = [16, 186]
  const { bottom, y, datumY } = gate(input, top, groundY)
  const frame = { tape: 98, steel: 150, steelWidth: 44, right: FIELD_WIDTH, top: 8, bottom: 193 }
  const gauge = uprightGauge(input, placed, frame, { nominal: USUAL_LATCH, ...(input.from !== 'top' && { floor: 0 }) })
  const list: Shape[] = [
    ...leafPicture({ right: 56, post: 66, top, bottom, groundY, groundRight: 96 }),
    seg('fit', 50, y, 71, y, { width: 'heavy' }),
    seg('fit', 62, y - 7, 62, y + 7, { width: 'heavy' }),
    ...lens(58, y - 7, 23, 14, { x: frame.tape, top: frame.top, bottom: frame.bottom }),
    ...gauge.list,
  ]
  if (input.reading === null) return list
  const words = bareFigure(input.reading, input.system, placed.flatMap(({ ends }) => ends))
  const room = Math.abs(datumY - y)
  list.push(...dimV(22, datumY, y, ''), seg('dim', 22, y, 50, y, { width: 'hair', dash: [2, 3] }))
  if (textWidth(words, 15) < room - 8) list.push(text(17, (datumY + y) / 2, words, { size: 15, rotate: -90, anchor: 'middle', halo: 'paper', haloWidth: 7 }))
  return list
}

function onPaper(input: LatchHeightInput, placed: PlacedLimit[]): Shape[] {
  const [top, groundY] = [9, 84]
  const { bottom, y } = gate(input, top, groundY)
  const list: Shape[] = leafPicture({ right: 54, post: 61, top, bottom, groundY, groundRight: 112, diamond: 5, frame: 2 })
  const [limit] = placed
  const end = limit?.ends[0]
  if (limit && end !== undefined) {
    // The limit stands where it is on the gate; where reading and limit would fall together they are drawn a little apart.
    const { y: true_ } = gate({ ...input, reading: end }, top, groundY)
    const up = limit.allowed[0]?.high === Infinity ? input.from !== 'top' : input.from === 'top'
    const differs = input.reading !== null && input.reading !== end
    const limitY = differs && Math.abs(true_ - y) < 3 ? y + (input.reading! > end === (input.from !== 'top') ? 3 : -3) : true_
    const [from, to] = up ? [Math.max(2, limitY - 23), limitY] : [limitY, Math.min(90, limitY + 23)]
    list.push(
      box('band', 70, from, 78, to - from, { fill: limit.wash }),
      hatch(70, from, 9, to - from, { role: limit.role, step: 4 }),
      seg('fit', 60, limitY, 148, limitY, { role: limit.role, width: 2 }),
      text(81, (from + to) / 2 + 4, cutText(limit.words, 11, 67), { size: 11, role: limit.role }),
    )
    if (input.reading !== null) list.push(...written(up ? Math.min(limitY + 20, 82) : Math.max(limitY - 10, 14)))
  } else if (input.reading !== null) {
    list.push(...written(Math.max(14, Math.min(80, y + 12))))
  }
  return list

  function written(at: number): Shape[] {
    return [
      ...chalk(61, y, 69, y, { thick: 3, seed: 5 }),
      seg('dim', 69, y, 90, at - 5, { width: 0.75 }),
      ...figureThatFits(92, at, bareFigure(input.reading!, input.system, placed.flatMap(({ ends }) => ends)), [14, 11], 57),
    ]
  }
}
