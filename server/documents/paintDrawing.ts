import type { Drawing, PathShape, TextShape } from '../../shared/drawing/displayList'
import { fractionRuns, LAYERS, WIDTHS } from '../../shared/drawing/displayList'
import { colour, decimal } from './paper'
import type { Faces, Weight } from './typeface'
import { guardGlyphs } from './typeface'

/** What a painter needs of the page it paints on. */
export interface Ground {
  write: (operators: string) => void
  faces: Faces
  /** Name of the graphics state with this opacity of strokes and fills. */
  opacity: (stroke: number, fill: number) => string
}

/** Paints a display list with its top left at x, y (PDF points, y upwards), `scale` points a unit. Paints only: what is drawn was decided by the list. */
export function paintDrawing(ground: Ground, drawing: Drawing, x: number, y: number, scale: number): void {
  const { write } = ground
  // The list has y downwards; one matrix turns it over, texts are turned back one by one. SVG mitres up to 4.
  write(`q ${decimal(scale)} 0 0 ${decimal(-scale)} ${decimal(x)} ${decimal(y)} cm 4 M 0 j`)
  for (const layer of LAYERS) {
    for (const shape of drawing.list) {
      if (shape.layer !== layer) continue
      if (shape.kind === 'path') paintPath(ground, shape)
      else paintText(ground, shape)
    }
  }
  write('Q')
}

function paintPath({ write, opacity }: Ground, shape: PathShape): void {
  const width = typeof shape.width === 'number' ? shape.width : WIDTHS[shape.width]
  if (width === 0 && !shape.fill) return
  const whole = shape.opacity ?? 1
  const faded = whole * (shape.fillOpacity ?? 1) < 1 || whole < 1
  const set = [
    ...(faded ? [`/${opacity(whole, whole * (shape.fillOpacity ?? 1))} gs`] : []),
    ...(shape.fill ? [`${colour(shape.fill)} rg`] : []),
    ...(width > 0 ? [`${colour(shape.role)} RG ${decimal(width)} w ${shape.cap === 'round' ? 1 : 0} J [${(shape.dash ?? []).map(decimal).join(' ')}] 0 d`] : []),
  ]
  const paint = shape.fill ? (width > 0 ? 'B' : 'f') : 'S'
  write(`${faded ? 'q ' : ''}${set.join(' ')}\n${pathOperators(shape.d)} ${paint}${faded ? ' Q' : ''}`)
}

function paintText({ write, faces }: Ground, shape: TextShape): void {
  const face = faces[(shape.weight ?? 400) as Weight]
  const runs = fractionRuns(guardGlyphs(shape.text).replace(/\n/g, ' '))
  const width = runs.reduce((sum, run) => sum + (run.kern + face.widthOf(run.text) * run.scale) * shape.size, 0)
  const start = shape.anchor === 'start' ? 0 : shape.anchor === 'middle' ? -width / 2 : -width
  const angle = (shape.rotate ?? 0) * Math.PI / 180
  const [cos, sin] = [Math.cos(angle), Math.sin(angle)]
  write(`q ${[cos, sin, -sin, cos].map(decimal).join(' ')} ${decimal(shape.x)} ${decimal(shape.y)} cm`)
  if (shape.halo) {
    // A ground behind the letters: stroked letters would be read twice by those who listen to the page.
    const room = (shape.haloWidth ?? 4) / 2
    write(`${colour(shape.halo)} rg ${[start - room, -0.74 * shape.size - room / 2, width + 2 * room, 0.8 * shape.size + room].map(decimal).join(' ')} re f`)
  }
  let at = start
  write(`BT ${colour(shape.role)} rg`)
  for (const run of runs) {
    at += run.kern * shape.size
    write(`/${face.key} ${decimal(shape.size * run.scale)} Tf 1 0 0 -1 ${decimal(at)} ${decimal(-run.rise * shape.size)} Tm ${face.hexOf(run.text).length ? `<${face.hexOf(run.text)}>` : '<>'} Tj`)
    at += face.widthOf(run.text) * run.scale * shape.size
  }
  write('ET Q')
}

/** A path of M, L, A (circles), Q, C and Z as PDF path operators, which have neither arcs nor quadratic curves. */
export function pathOperators(d: string): string {
  const out: string[] = []
  let [x, y] = [0, 0]
  const put = (operator: string, ...numbers: number[]) => {
    out.push(`${numbers.map(decimal).join(' ')} ${operator}`)
    if (numbers.length > 0) [x, y] = [numbers[numbers.length - 2]!, numbers[numbers.length - 1]!]
  }
  for (const [, command, rest] of d.matchAll(/([MLAQCZ])([^MLAQCZ]*)/g)) {
    const n = rest!.trim() === '' ? [] : rest!.trim().split(/[\s,]+/).map(Number)
    if (command === 'Z') out.push('h')
    for (let at = 0; at < n.length;) {
      const take = (count: number) => n.slice(at, at += count)
      if (command === 'M' || command === 'L') {
        const [px, py] = take(2)
        put(command === 'M' && at === 2 ? 'm' : 'l', px!, py!)
      }
      else if (command === 'C') put('c', ...take(6))
      else if (command === 'Q') {
        const [cx, cy, px, py] = take(4) as [number, number, number, number]
        put('c', x + 2 / 3 * (cx - x), y + 2 / 3 * (cy - y), px + 2 / 3 * (cx - px), py + 2 / 3 * (cy - py), px, py)
      }
      else {
        const [radius, , , large, sweep, px, py] = take(7) as [number, number, number, number, number, number, number]
        for (const curve of arcCurves(x, y, radius, large === 1, sweep === 1, px, py)) put('c', ...curve)
      }
    }
  }
  return out.join(' ')
}

/** A circle's arc as cubic curves of at most a quarter turn each (the usual 4/3 tan(angle/4)); the centre as SVG 2, appendix B.2.4 finds it. */
function arcCurves(x1: number, y1: number, givenRadius: number, large: boolean, sweep: boolean, x2: number, y2: number): number[][] {
  const [dx, dy] = [(x1 - x2) / 2, (y1 - y2) / 2]
  const half = Math.sqrt(dx * dx + dy * dy)
  if (half === 0) return []
  const radius = Math.max(Math.abs(givenRadius), half)
  const off = Math.sqrt(Math.max(0, radius * radius - half * half)) / half * (large === sweep ? -1 : 1)
  const [cx, cy] = [(x1 + x2) / 2 + off * dy, (y1 + y2) / 2 - off * dx]
  const from = Math.atan2(y1 - cy, x1 - cx)
  let turn = Math.atan2(y2 - cy, x2 - cx) - from
  if (sweep && turn < 0) turn += 2 * Math.PI
  if (!sweep && turn > 0) turn -= 2 * Math.PI
  const pieces = Math.max(1, Math.ceil(Math.abs(turn) / (Math.PI / 2) - 1e-9))
  const reach = 4 / 3 * Math.tan(turn / pieces / 4) * radius
  return Array.from({ length: pieces }, (_, at) => {
    const [a, b] = [from + turn * at / pieces, from + turn * (at + 1) / pieces]
    const [ax, ay, bx, by] = [cx + radius * Math.cos(a), cy + radius * Math.sin(a), cx + radius * Math.cos(b), cy + radius * Math.sin(b)]
    return [ax - reach * Math.sin(a), ay + reach * Math.cos(a), bx + reach * Math.sin(b), by - reach * Math.cos(b), bx, by]
  })
}
