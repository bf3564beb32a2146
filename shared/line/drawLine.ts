import { text, wrapText, type Shape } from '../drawing/displayList'
import { crowded, drawRow, reachOver } from './drawLineRow'
import { layLine, lineScale, type LineRow } from './layLine'
import type { Line } from './line'
import { stationWords, STYLES, type DrawLineOptions, type HitArea, type LineDrawing, type Scene } from './lineScene'

/** Breadth of screen under which a column for the sides' names would take too much. */
const NARROW = 560

/** A side's name in the lines that it takes beside its row. */
function sideLines(row: LineRow, style: Scene['style']): string[] {
  const lines = wrapText(row.side.name, style.column - 8, style.note)
  return lines.length > 3 ? [...lines.slice(0, 2), `${lines[2]} …`] : lines
}

/** The name of a side: beside its first row, or over it on a narrow page; on paper, which has no ruler, where it starts. */
function drawSideName(row: LineRow, ground: number, top: number, { style, options, system, right }: Scene, narrow: boolean): Shape[] {
  const { key, name } = row.side
  const starts = (y: number) => text(0, y, stationWords(row.station, system), { size: style.note, role: 'soft' })
  if (row.turn > 0) return options.variant === 'paper' ? [starts(ground + 4)] : []
  if (narrow) return [text(0, top + 20, key, { size: 22, weight: 300 }), text(22, top + 20, wrapText(name, right - 30, 14)[0] ?? '', { size: 14, role: 'soft' })]
  if (options.variant === 'paper') return [text(0, ground, key, { size: style.key, weight: 300 }), starts(ground + 13)]
  return [text(0, ground - 10, key, { size: style.key, weight: 300 }), ...sideLines(row, style).map((words, i) => text(0, ground + 6 + i * 16, words, { size: style.note, role: 'soft' }))]
}

/**
 * The line drawing: an elevation of the whole line in walking order, true to one scale both ways, broken into its sides like lines of text;
 * swings in plan below the ground (dashed where a leaf opens to the inner face). Pure: the same line draws the same list everywhere.
 * `width` is in units of drawing (pixels on a screen, 3/4 pt on paper), at least 240.
 */
export function drawLine(line: Line, options: DrawLineOptions): LineDrawing {
  const width = Math.max(240, options.width)
  const style = STYLES[options.variant]
  const narrow = options.variant === 'desk' && width < NARROW
  const x0 = narrow ? 4 : style.column
  const right = width - 4
  const { fit, largest } = lineScale(line, right - x0)
  const scene: Scene = { scale: fit, x0, right, style, options, system: line.system, station: options.variant === 'desk' }
  const lay = () => layLine(line, Math.ceil((right - x0) / scene.scale))
  let rows = lay()
  while (scene.scale < largest && crowded(rows, scene) > 0) {
    scene.scale = Math.min(largest, scene.scale * 1.25)
    rows = lay()
  }

  // Rows that are broken anyway may as well fill the page: larger while it costs no row and no name.
  const count = rows.length
  let best = scene.scale
  while (count > line.sides.length && rows.length === count && scene.scale < largest) {
    scene.scale = Math.min(largest, scene.scale * 1.04)
    rows = lay()
    if (rows.length === count && crowded(rows, scene) === 0) best = scene.scale
  }
  scene.scale = best
  rows = lay()

  const list: Shape[] = []
  const areas: HitArea[] = []
  let y = 0
  rows.forEach((row, i) => {
    const begins = row.turn === 0
    const heading = narrow && begins ? 30 : 0
    const names = !narrow && begins ? sideLines(row, style) : []
    // A side's name needs room over the ground even where its fence is low and carries no tag.
    const above = Math.max(reachOver(row, scene), begins && !narrow ? style.key * 0.75 + 12 : 0)
    const datum = y + heading + above + 2
    const drawn = drawRow(row, scene, datum)
    list.push(...drawSideName(row, datum, y, scene, narrow), ...drawn.list)
    areas.push(...drawn.areas)
    y = Math.max(drawn.bottom, datum + names.length * 16 - 6) + (i < rows.length - 1 ? (options.variant === 'desk' ? 12 : 6) : 2)
  })
  areas.sort((a, b) => b.width - a.width)
  return { list, areas, width, height: Math.ceil(y) }
}
