import { VERDICTS } from '../round/outcome'

/**
 * The display list: a drawing as plain shapes with a layer and a colour role, in the drawing's own units (one is a CSS pixel on a desk, 3/4 pt on paper).
 * Pure functions make it; two painters read it (SVG on screens, vectors in the PDF) and only paint.
 * Paths hold absolute `M`, `L`, `A` (circles alone: equal radii, no rotation), `Q`, `C` and `Z` and nothing else, numbers to 1/100, so that a PDF painter can read them.
 */

/** Layers from back to front; within a layer the order of the list holds. */
export const LAYERS = ['band', 'ground', 'plan', 'mesh', 'rail', 'post', 'leaf', 'fit', 'dim', 'chalk', 'state', 'tag', 'text'] as const
export type Layer = (typeof LAYERS)[number]

/** The colour roles of the tokens (app/assets/css/tokens.css); a painter turns one into a colour of its theme. */
export const ROLES = [
  'page', 'paper', 'ink', 'soft', 'line', 'mark', 'pine', 'on-pine', 'rust', 'on-rust', 'brass', 'slate', 'chalk',
  'pine-wash', 'rust-wash', 'brass-wash', 'steel', 'steel-edge', 'chalk-mark', 'focus-ring', 'focus-ground',
] as const
export type Role = (typeof ROLES)[number]

/** Named line widths in units, as in daylight and on paper; the sun theme doubles them through its tokens. */
export const WIDTHS = { wire: 0.75, hair: 1, line: 1.5, heavy: 3 } as const
/** A named width follows the theme, a number stays; 0 paints no stroke. */
export type StrokeWidth = keyof typeof WIDTHS | number

export interface PathShape {
  layer: Layer
  kind: 'path'
  d: string
  /** Colour of the stroke. */
  role: Role
  width: StrokeWidth
  fill?: Role
  fillOpacity?: number
  /** Of the whole shape. */
  opacity?: number
  /** Lengths of stroke and gap. */
  dash?: readonly number[]
  /** Ends of strokes; butt where absent. Joins are always mitred. */
  cap?: 'round'
}

export interface TextShape {
  layer: Layer
  kind: 'text'
  x: number
  /** Of the baseline. */
  y: number
  /** Plain, with fractions as `53 5/8`; painters set them by {@link fractionRuns}. */
  text: string
  role: Role
  size: number
  anchor: 'start' | 'middle' | 'end'
  /** 300, 400, 500 or 600; 400 where absent. */
  weight?: 300 | 400 | 500 | 600
  /** Degrees, clockwise about x, y. */
  rotate?: number
  /** A ground of this role around the letters, `haloWidth` (4 where absent) wide in all. */
  halo?: Role
  haloWidth?: number
}

export type Shape = PathShape | TextShape
/** A display list with the size of its picture; its top left is 0, 0. */
export interface Drawing { list: Shape[], width: number, height: number }
export type Point = readonly [x: number, y: number]

export type PathStyle = Partial<Omit<PathShape, 'layer' | 'kind' | 'd'>>
export type TextStyle = Partial<Omit<TextShape, 'kind' | 'x' | 'y' | 'text'>>

const round = (n: number) => Math.round(n * 100) / 100
const at = (p: Point) => `${round(p[0])} ${round(p[1])}`

/**
 * The same picture with fewer shapes: strokes of one style become one path where nothing of another colour lies between them. The forty marks of a tape are then one
 * element to lay out and paint. Only bare strokes are joined: fills and what is seen through would come out otherwise.
 */
export function joinStrokes(shapes: readonly Shape[]): Shape[] {
  const joined: Shape[] = []
  const bare = (shape: Shape): shape is PathShape => shape.kind === 'path' && !shape.fill && shape.opacity === undefined
  for (const shape of shapes) {
    let to = -1
    for (let i = joined.length - 1; i >= 0 && bare(shape); i--) {
      const other = joined[i]!
      if (!bare(other) || other.role !== shape.role || other.layer !== shape.layer) break
      if (other.width === shape.width && other.cap === shape.cap && String(other.dash) === String(shape.dash)) { to = i; break }
    }
    if (to < 0) joined.push(shape)
    else joined[to] = { ...(joined[to] as PathShape), d: (joined[to] as PathShape).d + (shape as PathShape).d }
  }
  return joined
}

/** A path of this style; ink and 1.5 wide where nothing is said. */
export function path(layer: Layer, d: string, style: PathStyle = {}): PathShape {
  return { layer, kind: 'path', d, role: 'ink', width: 'line', ...style }
}
/** A straight stroke. */
export function seg(layer: Layer, x1: number, y1: number, x2: number, y2: number, style?: PathStyle): PathShape {
  return path(layer, `M${at([x1, y1])}L${at([x2, y2])}`, style)
}
/** A closed polygon, without a stroke unless a width is given. */
export function poly(layer: Layer, points: readonly Point[], style?: PathStyle): PathShape {
  return path(layer, `M${points.map(at).join('L')}Z`, { width: 0, ...style })
}
/** An open line through points. */
export function open(layer: Layer, points: readonly Point[], style?: PathStyle): PathShape {
  return path(layer, `M${points.map(at).join('L')}`, style)
}
/** An upright rectangle, without a stroke unless a width is given. */
export function box(layer: Layer, x: number, y: number, width: number, height: number, style?: PathStyle): PathShape {
  return poly(layer, [[x, y], [x + width, y], [x + width, y + height], [x, y + height]], style)
}
/** Text at its baseline; 14 units, ink, from the left where nothing is said. */
export function text(x: number, y: number, words: string, style: TextStyle = {}): TextShape {
  return { layer: 'text', kind: 'text', x: round(x), y: round(y), text: words, role: 'ink', size: 14, anchor: 'start', ...style }
}

/** About how wide a text comes out in Lexend 400, to keep labels apart; widths in em by kind of letter, measured on the font and rounded up. */
export function textWidth(words: string, size: number): number {
  let em = 0
  for (const letter of words) em += /[iljI.,:;'|! ]/.test(letter) ? 0.3 : /[mwMW@]/.test(letter) ? 0.92 : /[A-Z]/.test(letter) ? 0.7 : 0.6
  return em * size
}

/** Breaks words into lines of about `width` at most; a word that is longer stands alone. */
export function wrapText(words: string, width: number, size: number): string[] {
  const lines: string[] = []
  for (const word of words.split(' ').filter(Boolean)) {
    const last = lines.at(-1)
    if (last !== undefined && textWidth(`${last} ${word}`, size) <= width) lines[lines.length - 1] = `${last} ${word}`
    else lines.push(word)
  }
  return lines
}

/** A piece of a text: `scale` of its size, `rise` of its baseline and `kern` before it, both in em of the whole text. */
export interface TextRun { text: string, scale: number, rise: number, kern: number }

/**
 * Cuts a text into runs that set its fractions: figures at 0.66 em, the upper one raised 0.24 em, the space before at 0.7 em.
 * Dates with strokes (3/4/2027) are left alone. Both painters use it, so that a fraction looks the same on screen and paper.
 */
export function fractionRuns(words: string): TextRun[] {
  const runs: TextRun[] = []
  const plain = (piece: string) => { if (piece) runs.push({ text: piece, scale: 1, rise: 0, kern: 0 }) }
  let from = 0
  for (const found of words.matchAll(/(\d )?(?<![\d/.,])(\d{1,3})\/(\d{1,3})(?![\d/])/g)) {
    const spaced = found[1] !== undefined
    plain(words.slice(from, found.index) + (spaced ? found[1]!.charAt(0) : ''))
    if (spaced) runs.push({ text: ' ', scale: 0.7, rise: 0, kern: 0 })
    runs.push(
      { text: found[2]!, scale: 0.66, rise: 0.24, kern: 0 },
      { text: '\u2044', scale: 1, rise: 0, kern: -0.02 },
      { text: found[3]!, scale: 0.66, rise: 0, kern: -0.02 },
    )
    from = found.index + found[0].length
  }
  plain(words.slice(from))
  return runs
}

/**
 * Fabric: two families of straight wires, clipped to a panel `width` x `height` and then mapped (a slope is only another map).
 * Half a diamond stands at the top rail (v = 0). `diamondWidth` and `diamondHeight` are the diagonals of one mesh.
 */
export function meshPath(width: number, height: number, diamondWidth: number, diamondHeight: number, map: (u: number, v: number) => Point, phase = 0): string {
  if (!(width > 0 && height > 0 && diamondWidth > 0 && diamondHeight > 0)) return ''
  let d = ''
  const reach = height / diamondHeight
  const count = Math.ceil(width / diamondWidth + reach) + 2
  for (let k = -count; k <= count; k++) {
    const start = phase + k * diamondWidth
    for (const lean of [1, -1]) {
      const a = -start / (lean * diamondWidth)
      const b = (width - start) / (lean * diamondWidth)
      const from = Math.max(0, Math.min(a, b))
      const to = Math.min(reach, Math.max(a, b))
      if (to - from > 1e-6) {
        d += `M${at(map(start + lean * from * diamondWidth, from * diamondHeight))}L${at(map(start + lean * to * diamondWidth, to * diamondHeight))}`
      }
    }
  }
  return d
}

/** A small generator of numbers in [0, 1) that is the same on every device: a linear congruential one, multiplier of Numerical Recipes (FROM MEMORY; only its sameness matters). */
function seeded(seed: number): () => number {
  let state = seed >>> 0
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0
    return state / 4294967296
  }
}

/** A chalk stroke, for steel only: ragged edge and crumbs from a fixed seed; its middle is the true line, which is the reading. */
export function chalk(x1: number, y1: number, x2: number, y2: number, { thick = 5, seed = 7, role = 'chalk-mark' as Role } = {}): PathShape[] {
  const random = seeded(seed)
  const length = Math.sqrt((x2 - x1) ** 2 + (y2 - y1) ** 2)
  if (!(length > 0)) return []
  const count = Math.max(6, Math.round(length / 3))
  const [dx, dy] = [(x2 - x1) / count, (y2 - y1) / count]
  const [nx, ny] = [-(y2 - y1) / length, (x2 - x1) / length]
  const upper: Point[] = []
  const lower: Point[] = []
  for (let i = 0; i <= count; i++) {
    const half = thick / 2 * Math.min(1, 0.35 + Math.min(i, count - i) * 0.3)
    const [a, b] = [half * (0.62 + random() * 0.55), half * (0.62 + random() * 0.55)]
    upper.push([x1 + dx * i + nx * a, y1 + dy * i + ny * a])
    lower.unshift([x1 + dx * i - nx * b, y1 + dy * i - ny * b])
  }
  let crumbs = ''
  for (let i = 0; i < count * 1.2; i++) {
    const [t, off, size] = [random(), (random() - 0.5) * thick * 2.4, 0.35 + random() * 0.8]
    const x = x1 + (x2 - x1) * t + nx * off
    const y = y1 + (y2 - y1) * t + ny * off
    crumbs += `M${[[x - size, y], [x + size, y], [x + size, y + size], [x - size, y + size]].map(p => at(p as unknown as Point)).join('L')}Z`
  }
  return [poly('chalk', [...upper, ...lower], { fill: role }), path('chalk', crumbs, { width: 0, fill: role })]
}

/** Ground through points from left to right: one line, and short strokes of wire under it that lean the way of the walk. */
export function ground(points: readonly Point[], { depth = 7, step = 9, role = 'ink' as Role, layer = 'ground' as Layer } = {}): PathShape[] {
  let d = ''
  for (let i = 0; i + 1 < points.length; i++) {
    const [a, b] = [points[i]!, points[i + 1]!]
    const length = b[0] - a[0]
    for (let x = 0; x < length; x += step) {
      const foot: Point = [a[0] + x + 3, a[1] + (b[1] - a[1]) * x / length + 2]
      d += `M${at(foot)}L${at([foot[0] - depth * 0.7, foot[1] + depth])}`
    }
  }
  return [open(layer, points, { role }), ...(d ? [path(layer, d, { role: 'mark', width: 'wire' })] : [])]
}

interface DimensionStyle { size?: number, role?: Role, tick?: number, weight?: TextShape['weight'] }

/** An upright dimension: hair line, ends mitred at 45 degrees, the figure to the right (`side` 1) or left (-1). */
export function dimV(x: number, y1: number, y2: number, figure: string, { side = 1 as 1 | -1, size = 14, role = 'ink' as Role, tick = 4, weight }: DimensionStyle & { side?: 1 | -1 } = {}): Shape[] {
  return [
    seg('dim', x, y1, x, y2, { role, width: 'hair' }),
    ...[y1, y2].map(y => seg('dim', x - tick, y + tick, x + tick, y - tick, { role })),
    ...(figure ? [text(x + side * 8, (y1 + y2) / 2 + size * 0.36, figure, { size, role, anchor: side > 0 ? 'start' : 'end', ...(weight && { weight }) })] : []),
  ]
}

/** A level dimension, its figure above or below the line on a ground of paper. */
export function dimH(x1: number, x2: number, y: number, figure: string, { above = true, size = 14, role = 'ink' as Role, tick = 4, weight }: DimensionStyle & { above?: boolean } = {}): Shape[] {
  return [
    seg('dim', x1, y, x2, y, { role, width: 'hair' }),
    ...[x1, x2].map(x => seg('dim', x - tick, y + tick, x + tick, y - tick, { role })),
    ...(figure ? [text((x1 + x2) / 2, above ? y - 6 : y + size + 4, figure, { size, role, anchor: 'middle', halo: 'paper', ...(weight && { weight }) })] : []),
  ]
}

/** Hatch of a band at 45 degrees; `lean` 1 rises to the right, -1 falls. */
export function hatch(x: number, y: number, width: number, height: number, { step = 7, role = 'pine' as Role, layer = 'band' as Layer, lean = 1 as 1 | -1 } = {}): PathShape {
  let d = ''
  for (let k = -height; k < width; k += step) {
    const [from, to] = [Math.max(0, k), Math.min(width, k + height)]
    if (to <= from) continue
    const up = (u: number) => lean > 0 ? y + height - (u - k) : y + (u - k)
    d += `M${at([x + from, up(from)])}L${at([x + to, up(to)])}`
  }
  return path(layer, d, { role, width: 'wire' })
}

/** How a deficiency stands, as its tape shows it: solid, or outlined in the colour of who is awaited. */
export const TAPE_STATES = ['open', 'waits', 'readAgain', 'settled'] as const
export type TapeState = (typeof TAPE_STATES)[number]
const TAPE_ROLE: Record<TapeState, Role> = { open: 'rust', waits: 'rust', readAgain: 'brass', settled: 'slate' }

/** Width that {@link tapeTag} takes for a tag. */
export function tapeTagWidth(words: string, size = 13): number {
  return words.length * size * 0.66 + 15
}

/** Flagging tape with a tag: a strip with a notch, tied by its left end; settled tape has a knot there. */
export function tapeTag(x: number, y: number, words: string, { state = 'open' as TapeState, height = 18, size = 13 } = {}): Shape[] {
  const width = tapeTagWidth(words, size)
  const role = TAPE_ROLE[state]
  const middle = y + height / 2
  return [
    poly('tag', [[x, y], [x + width, y], [x + width - 5, middle], [x + width, y + height], [x, y + height]], { fill: state === 'open' ? role : 'paper', role, width: 1.25 }),
    ...(state === 'settled' ? [poly('tag', [[x, middle - 4], [x + 4, middle], [x, middle + 4], [x - 4, middle]], { fill: role })] : []),
    text(x + (state === 'settled' ? 8 : 6), middle + size * 0.36, words, { layer: 'tag', size, weight: 600, role: state === 'open' ? 'on-rust' : role }),
  ]
}

/** What a verdict diamond can show: a verdict, or a finding that was settled (the torn corner with a knot in it). */
export const DIAMONDS = [...VERDICTS, 'settled'] as const
export type DiamondState = (typeof DIAMONDS)[number]

/** The colour that repeats what the shape of a diamond already says. */
export const DIAMOND_ROLE: Record<DiamondState, Role> = {
  conforms: 'pine', doesNotConform: 'rust', withinError: 'brass', groundNotFinished: 'brass', noLimit: 'brass',
  notApplicable: 'slate', notInspected: 'slate', notRead: 'mark', settled: 'rust',
}

/** In a box of 24: path, stroke width (0: filled), dash, cap. */
type DiamondPart = readonly [d: string, width: number, dash?: readonly number[], cap?: 'round']
const OUTER = 'M12 2.2L21.8 12L12 21.8L2.2 12Z'
const DIAMOND_PARTS: Record<DiamondState, readonly DiamondPart[]> = {
  notRead: [['M12 1.5L22.5 12L12 22.5L1.5 12Z', 1.25]],
  conforms: [['M12 1.5L22.5 12L12 22.5L1.5 12Z', 0]],
  doesNotConform: [['M11 3.3L15 7.3L13.2 10.8L16.6 12.9L14.6 17.1L11 20.7L2.3 12Z', 2.5], ['M19.9 8.4L23.6 12L20.9 14.7L18.9 11.9Z', 0]],
  withinError: [[OUTER, 1.5], ['M12 1.5L12 22.5L1.5 12Z', 0]],
  groundNotFinished: [['M12 1.5L22.5 12L1.5 12Z', 0], ['M2.6 13.1L12 22.4L21.4 13.1', 1.7, [2.2, 1.9]]],
  noLimit: [[OUTER, 1.5], ['M9.4 10A2.6 2.6 0 1 1 12.9 12.4Q12 12.8 12 13.8', 1.7], ['M12 14.9L13.15 16.05L12 17.2L10.85 16.05Z', 0]],
  notApplicable: [[OUTER, 1], ['M6.5 10.6L17.5 10.6L17.5 13.4L6.5 13.4Z', 0]],
  notInspected: [[OUTER, 2.7, [0.1, 4.62], 'round']],
  settled: [
    ['M15.4 7.2L12 3.3L3.3 12L12 20.7L15.4 16.8', 2.5],
    ['M13.6 5.4Q21 9.5 17.6 13.4Q14.2 17.3 12.6 12Q13 8.4 17.4 10.4Q21.8 12.4 15.2 17.6', 1.9],
  ],
}

/** Scales and moves a path of this module's commands; radii scale, the three flags of an arc stay. */
function placed(d: string, x: number, y: number, scale: number): string {
  return d.replace(/([MLQCAZ])([^MLQCAZ]*)/g, (_, command: string, rest: string) => {
    const numbers = rest.trim() ? rest.trim().split(/\s+/).map(Number) : []
    if (command === 'A') return `A${[round(numbers[0]! * scale), round(numbers[1]! * scale), ...numbers.slice(2, 5), round(x + numbers[5]! * scale), round(y + numbers[6]! * scale)].join(' ')}`
    return command + numbers.map((n, i) => round((i % 2 ? y : x) + n * scale)).join(' ')
  })
}

/** The diamond of a verdict, `size` wide and high with its top left at x, y. `role` overrides the colour, for black and white. */
export function diamond(state: DiamondState, x: number, y: number, size: number, { role = DIAMOND_ROLE[state], layer = 'state' as Layer } = {}): PathShape[] {
  const scale = size / 24
  return DIAMOND_PARTS[state].map(([d, width, dash, cap]) => path(layer, placed(d, x, y, scale), {
    role,
    width: round(width * scale),
    ...(width === 0 && { fill: role }),
    ...(dash && { dash: dash.map(n => Math.round(n * scale * 1000) / 1000) }),
    ...(cap && { cap }),
  }))
}
