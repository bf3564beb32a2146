import { box, hatch, meshPath, open, path, poly, seg, type Point, type Role, type Shape } from '../drawing/displayList'
import { INCH } from '../measure/length'
import type { LineElement } from './line'
import type { LineMark } from './lineMark'
import { bayEnd } from './layLine'
import type { Verdict } from '../round/outcome'

/** A piece of an element on paper: where its ground line runs, how high it is, and which part of the element it is. */
export interface DrawnPiece {
  element: LineElement
  from: number
  to: number
  x: number
  width: number
  /** Ground at its left and right end. */
  left: number
  right: number
  height: number
}

/** Colour of the fabric by what was found; null where nobody has read it: then posts and rails stand bare. */
const FABRIC: Record<Verdict, Role | null> = {
  conforms: 'pine', doesNotConform: 'soft', withinError: 'brass', groundNotFinished: 'brass', noLimit: 'brass',
  notApplicable: null, notInspected: null, notRead: null,
}

/** The fabric that an element's state gives it, null for none. */
export function fabricOf(mark: LineMark | undefined): Role | null {
  return mark ? FABRIC[mark.verdict] : null
}

/** Wire of 9 gauge, 0.148 in: COMMON PRACTICE, no source; it only makes the drawn mesh a little wider than its opening. */
const WIRE = 0.148 * INCH
/** Fabric is drawn 2 in over the ground: COMMON PRACTICE, no source; a reading never comes from here. */
const FOOT_GAP = 2 * INCH

/** The diagonal of a drawn mesh: its true one where that is 5 or more, else a texture of `texture`. */
export function meshDiagonal(element: LineElement, scale: number, texture: number): number {
  const diagonal = ((element.mesh ?? 2 * INCH) + WIRE) * Math.SQRT2 * scale
  return diagonal >= 5 ? diagonal : texture
}

interface ElementStyle { scale: number, texture: number, fabric: Role | null }

function slopeOf(piece: DrawnPiece) {
  const slope = piece.width ? (piece.right - piece.left) / piece.width : 0
  return (u: number, v: number): Point => [piece.x + u, piece.left - piece.height + v + slope * u]
}

function drawPanel(piece: DrawnPiece, { scale, texture, fabric }: ElementStyle): Shape[] {
  const { element, width, height } = piece
  const at = slopeOf(piece)
  const bottom = Math.max(height - FOOT_GAP * scale, height * 0.9)
  const wire = fabric ?? 'mark'
  const kept = element.work === 'existing' || element.work === 'byOthers'
  const size = meshDiagonal(element, scale, texture)
  const list: Shape[] = [
    ...(fabric ? [path('mesh', meshPath(width, bottom, size, size, at), { role: fabric, width: 'wire', opacity: 0.85 })] : []),
    open('rail', [at(0, 0), at(width, 0)], { role: kept ? 'mark' : 'ink', width: element.topRail ? 'line' : 'wire', ...(element.work === 'byOthers' && { dash: [6, 3] }) }),
    ...(element.bottom === 'none' ? [] : [open('rail', [at(0, bottom), at(width, bottom)], { role: wire, width: element.bottom === 'rail' ? 'hair' : 'wire' })]),
  ]
  // Posts that would stand closer than 3 say nothing more than the fabric does.
  const bayWidth = element.length * scale / element.bays
  if (element.kind === 'run' && bayWidth >= 3) {
    for (let bay = 1; bay < element.bays; bay++) {
      const post = bayEnd(element, bay)
      if (post <= piece.from || post >= piece.to) continue
      const [x, top] = at((post - piece.from) * scale, 0)
      list.push(seg('post', x, top - 1.5, x, at((post - piece.from) * scale, height)[1], { role: kept ? 'mark' : 'ink', width: 'hair' }))
    }
  }
  return list
}

/** Leaves hang level, over the higher end of their ground. */
function drawGate(piece: DrawnPiece, { scale, texture, fabric }: ElementStyle): Shape[] {
  const { element, x, width, height } = piece
  const gate = element.gate
  const ground = Math.min(piece.left, piece.right)
  const top = ground - height + 2
  const bottom = ground - Math.max(FOOT_GAP * scale * 1.3, 1) - 0.5
  const size = meshDiagonal(element, scale, texture)
  const leaves = gate?.leaves ?? [element.length]
  const whole = leaves.reduce((sum, leaf) => sum + leaf, 0)
  const list: Shape[] = []
  let start = x
  leaves.forEach((leaf, i) => {
    const wide = width * leaf / whole
    const inset = Math.min(1.5, wide / 6)
    const [a, b] = [start + inset, start + wide - inset]
    const hingeAtStart = leaves.length === 2 ? i === 0 : gate?.hinge !== 'end'
    const swing = path('plan', hingeAtStart
      ? `M${two(start + wide)} ${two(ground)}A${two(wide)} ${two(wide)} 0 0 1 ${two(start)} ${two(ground + wide)}L${two(start)} ${two(ground)}`
      : `M${two(start)} ${two(ground)}A${two(wide)} ${two(wide)} 0 0 0 ${two(start + wide)} ${two(ground + wide)}L${two(start + wide)} ${two(ground)}`,
    { role: 'mark', width: 'hair', ...(gate?.opens === 'inner' && { dash: [3, 2] }) })
    const middle = (top + bottom) / 2
    if (fabric) list.push(path('mesh', meshPath(b - a, bottom - top, size, size, (u, v) => [a + u, top + v]), { role: fabric, width: 'wire', opacity: 0.85 }))
    list.push(box('leaf', a, top, b - a, bottom - top, { width: 'line' }))
    if (gate?.form === 'slide' || gate?.form === 'cantilever') list.push(...slideArrow(hingeAtStart ? b - 6 : a + 6, hingeAtStart ? a + 6 : b - 6, middle))
    else list.push(open('leaf', hingeAtStart ? [[b, top], [a, middle], [b, bottom]] : [[a, top], [b, middle], [a, bottom]], { width: 'wire', dash: [3, 2] }), swing)
    start += wide
  })
  return list
}

const two = (n: number) => Math.round(n * 100) / 100

/** Which way a leaf slides to open: towards the end where it hangs. */
function slideArrow(from: number, to: number, y: number): Shape[] {
  if (Math.abs(to - from) < 6) return []
  const back = to > from ? -5 : 5
  return [seg('leaf', from, y, to, y, { width: 'wire' }), open('leaf', [[to + back, y - 3.5], [to, y], [to + back, y + 3.5]], { width: 'wire' })]
}

/** Masonry where the line ties in; an existing fence goes on as bare dashed rails. */
function drawTieIn(piece: DrawnPiece): Shape[] {
  const { element, height } = piece
  const at = slopeOf(piece)
  if (element.tieIn === 'fence') return [open('rail', [at(0, 0), at(piece.width, 0)], { role: 'mark', dash: [4, 3] }), open('rail', [at(0, height / 2), at(piece.width, height / 2)], { role: 'mark', width: 'wire', dash: [4, 3] })]
  const wide = Math.max(piece.width, 7)
  const [x, top] = [piece.x + (piece.width - wide) / 2, Math.min(piece.left, piece.right) - height - 5]
  const tall = Math.max(piece.left, piece.right) - top
  return [box('post', x, top, wide, tall, { fill: 'paper', width: 'line' }), { ...hatch(x, top, wide, tall, { step: 5, role: 'ink' }), layer: 'post' as const }]
}

/** The ground line under a piece, from left to right without its last point. Drains, swales and curbs are signs 5 deep: how deep they are nobody has said. */
export function groundUnder(piece: DrawnPiece): Point[] {
  const { element, x, width, left, right } = piece
  if (element.kind !== 'crossing') return [[x, left]]
  const at = (t: number, drop: number): Point => [x + width * t, left + (right - left) * t + drop]
  switch (element.crossing) {
    case 'drain': return [[x, left], at(0.25, 0), at(0.25, 5), at(0.75, 5), at(0.75, 0)]
    case 'curb': return [[x, left], at(0.35, 0), at(0.35, -4), at(0.65, -4), at(0.65, 0)]
    default: return [[x, left], at(0.2, 2), at(0.5, 5), at(0.8, 2)]
  }
}

/** Tape across what is held out of use; an exit is attended, never taped. */
function drawTape(piece: DrawnPiece, along: number | null): Shape[] {
  const { element, height } = piece
  if (element.gate?.exit) return []
  const wide = Math.min(piece.width, 48)
  const centre = element.kind === 'run' && along !== null ? Math.min(Math.max(along, wide / 2), piece.width - wide / 2) : piece.width / 2
  const at = slopeOf(piece)
  const [a, b] = [at(centre - wide / 2, height * 0.38), at(centre + wide / 2, height * 0.5)]
  const thick = Math.min(5, height / 3)
  return [poly('tag', [[a[0] - 2, a[1]], [b[0] + 2, b[1]], [b[0] + 2, b[1] + thick], [a[0] - 2, a[1] + thick]], { fill: 'rust' })]
}

/** A torn piece of fabric at the very place of a finding. */
function drawTear(x: number, y: number, height: number, role: Role, ground: Role): Shape {
  const k = Math.min(1, height / 20)
  return poly('fit', ([[0, -7], [4, -3], [2, 0], [6, 3], [0, 8], [-6, 0]] as const).map(([dx, dy]): Point => [x + dx * k, y + dy * k]), { fill: ground, role, width: 1.5 })
}

/**
 * An elevation of one piece, true to scale, in the state that its mark gives it: panel, leaves and their swing in plan, masonry, post,
 * tears at the places of findings, tape when held out of use. Ground, names and tags are the caller's.
 */
export function drawElement(piece: DrawnPiece, mark: LineMark | undefined, { scale, texture, ground, fabric = fabricOf(mark) }: { scale: number, texture: number, ground: Role, fabric?: Role | null }): Shape[] {
  const { element, x, width, left, right, height } = piece
  const style: ElementStyle = { scale, texture, fabric }
  const list: Shape[] = []
  const post = (at: number, foot: number, wide: number) => seg('post', at, foot - height - 3, at, foot + 1, { width: wide })
  switch (element.kind) {
    case 'terminalPost':
      return [post(x, left, 4.5), ...(mark?.outOfUse ? drawTape({ ...piece, x: x - 5, width: 10 }, null) : [])]
    case 'tieIn':
      return drawTieIn(piece)
    case 'gate':
      list.push(...drawGate(piece, style))
      break
    default:
      list.push(...drawPanel(piece, style))
  }
  if (piece.from === 0) list.push(post(x, left, 3))
  if (piece.to === element.length) list.push(post(x + width, right, 3))
  const at = slopeOf(piece)
  for (const tag of element.kind === 'gate' ? [] : mark?.tags ?? []) {
    const along = tag.along ?? element.length / 2
    if (tag.state === 'settled' || along < piece.from || along > piece.to) continue
    const [tx, ty] = at((along - piece.from) * scale, height * 0.65)
    list.push(drawTear(tx, ty, height, tag.state === 'readAgain' ? 'brass' : 'rust', ground))
  }
  if (mark?.outOfUse) {
    const first = mark.tags[0]?.along ?? null
    list.push(...drawTape(piece, first === null ? null : (first - piece.from) * scale))
  }
  return list
}

