import { INCH, type Length } from '../../measure/length'
import { largestSphere, type Opening } from '../../opening/largestSphere'
import { box, dimH, dimV, meshPath, path, poly, seg, text, type Point, type Shape } from '../displayList'
import { LEVEL_GAUGE, levelGauge } from './levelGauge'
import { FIELD_WIDTH, PAPER, type LiveDrawing, type LiveInput } from './live'
import { bareFigure, figure, placeLimits, summaryOf } from './placedLimit'
import { readout } from './readout'
import { cutText, textWidth } from './textWidth'
import { groundFromEdge } from './groundFromEdge'

/** An opening and how it was measured. `reading` is what was measured and what the limits are on; the sphere follows from it. */
export interface OpeningInput extends LiveInput {
  /** A stretched diamond and a triangle of any sides are drawn from `measures` alone. */
  shape: 'mesh' | 'bars' | 'rightTriangle' | 'underRail' | 'diamond' | 'triangle'
  /** Which dimension of a mesh was taken; the clear distance between wires where absent. */
  dimension?: 'side' | 'diagonal' | 'width'
  /** All measures, where more than one was taken: then the sphere is computed from them and not from the reading. */
  measures?: Opening
  /** For a template: what the gauge did. Its size is the reading. */
  gauge?: 'passed' | 'stopped'
}

const HEIGHT = 150 + LEVEL_GAUGE.height

/** An opening with the largest sphere that passes it and the dimension that was taken. Throws what `judge` and `largestSphere` throw. */
export function drawOpening(input: OpeningInput): LiveDrawing {
  const placed = placeLimits(input)
  const sphere = sphereOf(input)
  const { say, system } = input
  const parts = [
    // A gauge that goes through or not stands for no figure of its own.
    input.gauge && input.reading === null ? '' : summaryOf(input, placed),
    input.shape === 'mesh' && !input.gauge ? say(input.dimension ?? 'side') : '',
    input.gauge ? say(input.gauge) : sphere !== null && sphere !== input.reading ? say('sphere', { amount: figure(sphere, system) }) : '',
  ]
  const alt = { code: 'opening', params: { summary: parts.filter(Boolean).join('; ') } }
  if (input.size === 'paper') return { list: picture(input, sphere, { ...PAPER, size: 14, least: 11 }), ...PAPER, alt }
  const list = [
    ...picture(input, sphere, { width: 196, height: 142, size: 17, least: 14 }),
    ...readout(input, placed, { left: 212, right: FIELD_WIDTH - 4, top: 4, bottom: 146 }),
    ...levelGauge(input, placed, { top: 150, width: FIELD_WIDTH, nominal: 2 * INCH }).list,
  ]
  return { list, width: FIELD_WIDTH, height: HEIGHT, alt }
}

function sphereOf({ measures, reading, shape, dimension = 'side' }: OpeningInput): Length | null {
  if (measures) return largestSphere(measures).diameter
  if (reading === null || reading <= 0) return null
  return shape === 'mesh' ? largestSphere({ kind: 'mesh', dimension, measured: reading }).diameter : reading
}

interface Frame { width: number, height: number, size: number, least: number }

function picture(input: OpeningInput, sphere: Length | null, frame: Frame): Shape[] {
  switch (input.shape) {
    case 'mesh': return mesh(input, frame)
    case 'bars': return bars(input, frame)
    case 'rightTriangle': return triangle(input, sphere, frame)
    case 'underRail': return underRail(input, sphere, frame)
    case 'diamond': return outlined(input, sphere, diamondOf(input.measures), frame)
    case 'triangle': return outlined(input, sphere, triangleOf(input.measures), frame)
  }
}

/** How large the opening is drawn against its usual size, so that it moves with the reading: against its first limit, within reason. */
function moved({ reading, limits, system, say }: OpeningInput): number {
  const end = placeLimits({ limits: limits.slice(0, 1), reading: null, system, say })[0]?.ends[0]
  if (reading !== null && reading <= 0) return 0.04
  return reading === null || !end || end <= 0 ? 1 : Math.max(0.45, Math.min(1.3, reading / end))
}

/** A sphere seen from the front, dashed where the gauge stopped. */
function ball([x, y]: Point, radius: number, { gauge }: Pick<OpeningInput, 'gauge'>): Shape[] {
  if (radius < 4) return []
  const d = `M${x - radius} ${y}A${radius} ${radius} 0 1 1 ${x + radius} ${y}A${radius} ${radius} 0 1 1 ${x - radius} ${y}Z`
    .replace(/-?\d+\.\d{3,}/g, each => String(Math.round(Number(each) * 100) / 100))
  return [path('plan', d, { role: 'ink', width: 'hair', fill: 'chalk', ...(gauge === 'stopped' && { dash: [4, 3] }) })]
}

function written(input: OpeningInput): string {
  return input.reading === null ? '' : bareFigure(input.reading, input.system, [])
}

/** A diamond in the middle, drawn at one size: only what lies in it is to scale. */
function mesh(input: OpeningInput, { width, height, size, least }: Frame): Shape[] {
  const dimension = input.dimension ?? 'side'
  const across = height * 0.6 * Math.max(0.45, moved(input))
  const [cx, cy, half] = [width / 2, height / 2, across / 2]
  const wire = Math.max(2, height / 36)
  // Clear diagonals lie inside the wires.
  const clear = half - wire * 0.7071
  const radius = clear / Math.SQRT2
  const list: Shape[] = [path('mesh', centredMesh(width, height, cx, cy, across), { role: 'mark', width: wire })]
  list.push(...ball([cx, cy], input.reading !== null && input.reading <= 0 ? 0 : radius, input))
  const words = written(input)
  if (!words && !input.gauge) return list
  if (!words) {
    // The gauge alone: nothing was measured.
  } else if (dimension === 'side') {
    // Square across the wires, from one to the one beside it.
    const reach = radius / Math.SQRT2
    list.push(...slanted([cx - reach, cy + reach], [cx + reach, cy - reach]))
    list.push(text(cx, cy + size * 0.36, words, { size, anchor: 'middle', halo: 'chalk', haloWidth: 6 }))
  } else if (dimension === 'width') {
    list.push(...dimH(cx - clear, cx + clear, cy, words, { size }))
  } else {
    list.push(...dimV(cx, cy - clear, cy + clear, ''), text(cx, cy + size * 0.36, words, { size, anchor: 'middle', halo: 'chalk', haloWidth: 6 }))
  }
  const note = cutText(input.gauge ? input.say(input.gauge) : input.say(dimension), least, width - 8)
  list.push(text(4, height - 4, note, { size: least, role: 'soft', halo: 'paper', haloWidth: 5 }))
  return list
}

/** Wires of a mesh with one whole diamond in the middle, clipped to the picture. */
function centredMesh(width: number, height: number, cx: number, cy: number, across: number): string {
  // Two half-turned panels meet at the middle line, where a diamond is widest.
  const down = meshPath(width, height - cy, across, across, (u, v) => [u, cy + v], cx + across / 2)
  const up = meshPath(width, cy, across, across, (u, v) => [u, cy - v], cx + across / 2)
  return up + down
}

function slanted(a: Point, b: Point): Shape[] {
  return [seg('dim', a[0], a[1], b[0], b[1], { width: 'hair' }), ...[a, b].map(([x, y]) => seg('dim', x - 4, y, x + 4, y))]
}

/** Two upright bars (pickets, a post and a leaf) with the gap between their faces. */
function bars(input: OpeningInput, { width, height, size, least }: Frame): Shape[] {
  const gap = height * 0.5 * moved(input)
  const foot = input.gauge ? height - least - 8 : height
  const [x1, x2, cy] = [(width - gap) / 2, (width + gap) / 2, height * 0.44]
  const thick = height * 0.13
  const list: Shape[] = [x1 - thick, x2].flatMap((x) => {
    const [from, to] = [Math.max(0, x), Math.min(width, x + thick)]
    return to > from ? [box('post', from, 0, to - from, foot, { fill: 'steel', role: 'steel-edge', width: 'hair' })] : []
  })
  list.push(...ball([width / 2, cy], gap / 2, input))
  const words = written(input)
  if (words) list.push(...dimH(x1, x2, cy, ''), text(width / 2, cy - 6, words, { size, anchor: 'middle', halo: 'chalk', haloWidth: 5 }))
  if (input.gauge) list.push(text(width / 2, height - 5, cutText(input.say(input.gauge), least, width - 8), { size: least, role: 'soft', anchor: 'middle', halo: 'paper' }))
  return list
}

/** Under a corner or a step in grade: legs of the triangle and the circle that lies in it. */
function triangle(input: OpeningInput, sphere: Length | null, { width, height, size, least }: Frame): Shape[] {
  const legs = input.measures?.kind === 'rightTriangle' ? input.measures : { base: 2, height: 1 }
  const scale = Math.min((width - 46) / legs.base, (height - 34) / legs.height)
  const [w, h] = [Math.max(8, legs.base * scale), Math.max(8, legs.height * scale)]
  const [x, y] = [34, 12]
  const list: Shape[] = [
    seg('rail', 0, y, width, y, { width: 4 }),
    box('post', x - 10, 0, 10, height, { fill: 'steel', role: 'steel-edge', width: 'hair' }),
    poly('band', [[x, y], [x + w, y], [x, y + h]], { fill: 'chalk', fillOpacity: 0.6 }),
    ...groundFromEdge([[x, y + h], [x + w, y], ...(x + w < width ? [[width, y] as const] : [])], { depth: 6 }),
  ]
  return [...list, ...sphereNote(input, sphere, [x + w * h / (w + h + Math.sqrt(w * w + h * h)), y + w * h / (w + h + Math.sqrt(w * w + h * h))], w * h / (w + h + Math.sqrt(w * w + h * h)), { width, height, size, least })]
}

/** A rail over sloping ground between two posts, its gaps to scale, its length as it fits. */
function underRail(input: OpeningInput, sphere: Length | null, { width, height, size, least }: Frame): Shape[] {
  const given = input.measures?.kind === 'underRail' ? input.measures : null
  const [first, second] = given ? [given.first, given.second] : [input.reading ?? 2 * INCH, input.reading ?? 2 * INCH]
  const per = (height - 58) / Math.max(first, second, 1)
  const [left, right, y] = [14, width - 14, 22]
  const [y1, y2] = [y + Math.max(0, first) * per, y + Math.max(0, second) * per]
  const radius = sphere === null ? 0 : Math.min(sphere * per / 2, (right - left) / 2)
  const wide: Point = first >= second ? [left + radius, y + radius] : [right - radius, y + radius]
  return [
    path('mesh', meshPath(width, y, 12, 12, (u, v) => [u, v], 6), { role: 'mark', width: 'wire' }),
    seg('rail', 0, y - 2, width, y - 2, { width: 4 }),
    ...[left - 8, right].map(x => box('post', x, 0, 8, height - 8, { fill: 'steel', role: 'steel-edge', width: 'hair' })),
    ...groundFromEdge([[0, y1], [left, y1], [right, y2], [width, y2]], { depth: 6 }),
    ...sphereNote(input, sphere, wide, radius, { width, height, size, least }),
  ]
}

/** Corners of a stretched diamond about 0, 0, in lengths, and the middle of the sphere. */
function diamondOf(measures: Opening | undefined): Outlined {
  if (measures?.kind === 'pulledSquare') return diamondOf({ kind: 'rhombus', width: measures.width, height: Math.sqrt(Math.max(0, 4 * measures.side ** 2 - measures.width ** 2)) })
  const { width, height } = measures?.kind === 'rhombus' ? measures : { width: 1, height: 1 }
  return { corners: [[0, -height / 2], [width / 2, 0], [0, height / 2], [-width / 2, 0]], middle: [0, 0] }
}

/** Corners of a triangle on its longest side, and the middle of the circle inside it: each corner weighed by the side across from it. */
function triangleOf(measures: Opening | undefined): Outlined {
  const [a, b, c] = [...measures?.kind === 'triangle' ? measures.sides : [1, 1, 1]].sort((one, other) => other - one) as [number, number, number]
  const x = (a * a + c * c - b * b) / (2 * a)
  const corners: Point[] = [[0, 0], [a, 0], [x, -Math.sqrt(Math.max(0, c * c - x * x))]]
  const girth = a + b + c
  return { corners, middle: [(b * corners[0]![0] + c * corners[1]![0] + a * corners[2]![0]) / girth, (b * corners[0]![1] + c * corners[1]![1] + a * corners[2]![1]) / girth] }
}

interface Outlined { corners: Point[], middle: Point }

/** An opening by its own outline, to scale. */
function outlined(input: OpeningInput, sphere: Length | null, { corners, middle }: Outlined, frame: Frame): Shape[] {
  const { width, height, least } = frame
  const [left, right] = [Math.min(...corners.map(([x]) => x)), Math.max(...corners.map(([x]) => x))]
  const [top, bottom] = [Math.min(...corners.map(([, y]) => y)), Math.max(...corners.map(([, y]) => y))]
  const per = Math.min((width - 24) / (right - left), (height - least - 26) / (bottom - top || 1))
  const [x0, y0] = [(width - (right - left) * per) / 2 - left * per, (height - least - 10 - (bottom - top) * per) / 2 - top * per]
  const at = ([x, y]: Point): Point => [x0 + x * per, y0 + y * per]
  return [poly('rail', corners.map(at), { width: 4, role: 'ink' }), ...sphereNote(input, sphere, at(middle), (sphere ?? 0) * per / 2, frame)]
}

function sphereNote(input: OpeningInput, sphere: Length | null, centre: Point, radius: number, { width, height, size, least }: Frame): Shape[] {
  const list = ball(centre, radius, input)
  if (sphere === null) return list
  const words = bareFigure(sphere, input.system)
  const wide = textWidth(words, size)
  if (wide < radius * 1.7) return [...list, text(centre[0], centre[1] + size * 0.36, words, { size, anchor: 'middle' })]
  const note = cutText(input.gauge ? input.say(input.gauge) : input.say('sphere', { amount: figure(sphere, input.system) }), least, width - 60)
  const y = height - 5
  return [...list, seg('dim', centre[0], centre[1], Math.min(width - 60, centre[0] + 24), y - 10, { role: 'mark', width: 'hair' }), text(Math.min(width - 4 - textWidth(note, least), centre[0] + 26), y, note, { size: least, halo: 'paper' })]
}
