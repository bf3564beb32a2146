import { diamond, ground, poly, seg, text, textWidth, type Point, type Shape } from '../drawing/displayList'
import { FOOT, MILLIMETRE } from '../measure/length'
import { drawElement, groundUnder } from './drawElement'
import { hangTags } from './hangTags'
import type { LineRow } from './layLine'
import { diamondOf } from './lineMark'
import { piecesOf, stationFigure, type HitArea, type PieceOnRow, type Scene, type Style } from './lineScene'
import { placeLabels } from './placeLabels'

/** Lowest ink under a piece: its hatched ground and the swing of its leaves. */
function footOf(piece: PieceOnRow): number {
  const swing = piece.element.gate && ['singleSwing', 'doubleSwing'].includes(piece.element.gate.form)
    ? Math.min(piece.left, piece.right) + piece.width * Math.max(...piece.element.gate.leaves) / piece.element.gate.leaves.reduce((sum, leaf) => sum + leaf, 0)
    : -Infinity
  return Math.max(piece.left + 8, piece.right + 8, swing + 3)
}

interface Label { piece: PieceOnRow, name: string, state: boolean, centre: number, width: number }

function labelsOf(pieces: readonly PieceOnRow[], style: Style): Label[] {
  return pieces.map((piece) => {
    const state = piece.first && piece.mark !== undefined
    const name = piece.element.tag
    return { piece, name, state, centre: piece.x + piece.width / 2, width: (state ? style.diamond + 4 : 0) + textWidth(name, style.name) }
  })
}

const LANES = 3
/** Names may reach a little beyond the fence, but not under the names of the sides. */
const roomFor = ({ x0, right, style }: Scene) => ({ from: Math.max(0, x0 - 6), to: right, lanes: LANES, shift: style.diamond * 2 })

/** How many names find no room at this scale; the scale grows until all do or it is as large as it may be. */
export function crowded(rows: readonly LineRow[], scene: Scene): number {
  return rows.reduce((sum, row) => sum + placeLabels(labelsOf(piecesOf(row, scene, 0), scene.style), roomFor(scene)).filter(label => !label).length, 0)
}

/** How far a row reaches over the ground at its start, tags included. */
export function reachOver(row: LineRow, scene: Scene): number {
  const pieces = piecesOf(row, scene, 0)
  return -Math.min(hangTags(pieces, scene).top, ...pieces.map(piece => Math.min(piece.left, piece.right) - piece.height - 5))
}

/** Draws one row with the ground at its start at `datum`. */
export function drawRow(row: LineRow, scene: Scene, datum: number): { list: Shape[], areas: HitArea[], bottom: number } {
  const { scale, right, style, options } = scene
  const pieces = piecesOf(row, scene, datum)
  const list: Shape[] = pieces.flatMap(piece => drawElement(piece, piece.mark, { scale, texture: style.texture, ground: style.ground }))
  const last = pieces.at(-1)!
  const points: Point[] = [...pieces.flatMap(groundUnder), [last.x + last.width, last.right]]
  list.push(...ground(points, { depth: 5, step: 8 }))

  list.push(...hangTags(pieces, scene).list)

  // Names stand on one line under the row; on a steep row each follows its own ground.
  const feet = pieces.map(footOf)
  const deepest = Math.max(...feet)
  const steep = deepest - Math.min(...feet) > 48
  const labels = labelsOf(pieces, style)
  const placed = placeLabels(labels, roomFor(scene))
  let bottom = deepest + 2
  placed.forEach((place, i) => {
    const { piece, name, state } = labels[i]!
    const floor = steep
      ? Math.max(...pieces.filter(other => place && other.x < place.left + labels[i]!.width && other.x + other.width > place.left).map(footOf), feet[i]!)
      : deepest
    if (!place) {
      // No room for the name at the largest scale: the diamond alone still tells the state.
      if (state && piece.width >= 9) list.push(...diamond(diamondOf(piece.mark!), piece.x + piece.width / 2 - 4, floor + 3, 8))
      return
    }
    const y = floor + 2 + place.lane * style.lane
    const chosen = options.selected === piece.element.id
    const nameAt = place.left + (state ? style.diamond + 4 : 0)
    if (place.lane > 0) list.push(seg('dim', labels[i]!.centre, floor, labels[i]!.centre, y - 1, { role: 'line', width: 'hair' }))
    if (state) list.push(...diamond(diamondOf(piece.mark!), place.left, y, style.diamond))
    list.push(text(nameAt, y + style.diamond * 0.77, name, { size: style.name, weight: chosen ? 600 : 400, role: piece.first ? 'ink' : 'soft', ...(place.lane > 0 && { halo: style.ground }) }))
    if (chosen) list.push(seg('dim', place.left - 3, y + style.diamond + 4, place.left + labels[i]!.width + 3, y + style.diamond + 4, { width: 'heavy' }))
    bottom = Math.max(bottom, y + style.diamond + (chosen ? 6 : 2))
  })

  const here = options.here
  const stood = here && pieces.find(piece => piece.element.id === here.element && here.along >= piece.from && here.along <= piece.to)
  if (here && stood) {
    const t = stood.width ? (here.along - stood.from) * scale / stood.width : 0
    const [x, y] = [stood.x + stood.width * t, stood.left + (stood.right - stood.left) * t - stood.height]
    list.push(seg('state', x, y, x, y + 6, { width: 2 }), poly('state', [[x, y + 4], [x + 7, y + 11], [x, y + 18], [x - 7, y + 11]], { fill: 'pine', role: 'paper', width: 1.5 }))
    bottom = Math.max(bottom, y + 22)
  }

  const areas = pieces.map((piece): HitArea => {
    const width = Math.max(piece.width, 24)
    const left = Math.max(0, Math.min(right - width, piece.x + (piece.width - width) / 2))
    const upper = Math.min(piece.left, piece.right) - piece.height - 6
    return { element: piece.element.id, turn: piece.first ? 0 : 1, x: left, y: upper, width, height: bottom - upper }
  })

  if (scene.station) {
    bottom += 8
    list.push(...drawStations(row, bottom, scene))
    bottom += 24
  }
  return { list, areas, bottom }
}

/** Ticks every 10 ft (5 m), a longer one with its figure every 50 ft (25 m); every tick gets its figure where they stand far apart. */
function drawStations(row: LineRow, y: number, { scale, x0, right, style, system }: Scene): Shape[] {
  const unit = system === 'imperial' ? FOOT : 1000 * MILLIMETRE
  const [step, each] = system === 'imperial' ? [10, 50] : [5, 25]
  const end = x0 + row.length * scale
  const list: Shape[] = [seg('dim', x0, y, end, y, { role: 'mark', width: 'hair' })]
  const close = step * unit * scale < 60
  const first = Math.ceil(row.station / unit / step) * step
  for (let at = first; at * unit <= row.station + row.length; at += step) {
    const x = x0 + (at * unit - row.station) * scale
    const major = !close || at % each === 0
    list.push(seg('dim', x, y, x, y + (at % each === 0 ? 8 : 4), { role: 'mark', width: 'hair' }))
    if (!major) continue
    const words = stationFigure(at, system) + (at === 0 ? (system === 'imperial' ? ' ft' : ' m') : '')
    const wide = textWidth(words, style.station)
    // At the very ends a figure leans inwards, so that it stays on the page.
    const anchor = at === 0 ? 'start' : x + wide / 2 > right + 4 ? 'end' : 'middle'
    list.push(text(x, y + 21, words, { size: style.station, role: 'soft', anchor }))
  }
  return list
}
