import { ground, open, poly, seg, tapeTag, text, textWidth, type Drawing, type Point, type Role, type Shape } from '../drawing/displayList'
import { FOOT, type Length, type System } from '../measure/length'
import { drawElement, fabricOf, groundUnder, type DrawnPiece } from './drawElement'
import { bayAt, bayEnd, lineLength, stationOf } from './layLine'
import { elementsOf, type Line, type LineElement } from './line'
import type { LineMarks, LineTag } from './lineMark'
import { stationWords } from './lineScene'

export interface DrawWalkOptions {
  width: number
  /** Where the inspector stands. */
  here: { element: string, along: Length }
  marks?: LineMarks
  /** True when the pass goes from the end of the line to its start: seen from the other face, so the picture is mirrored. */
  backwards?: boolean
  words: { youAreHere: string }
}

/** Heights of the picture: rail, brackets, and the ground of the bays. */
const RAIL = 30
const GROUND = 146
/** A bay of the close view is about this wide, and no element higher than this. */
const BAY = 82
const HIGHEST = 52
const MARGIN = 14

interface View { x: (station: number) => number, back: boolean }

function gateDiamond(x: number): Shape {
  return poly('leaf', [[x, RAIL - 5], [x + 5, RAIL], [x, RAIL + 5], [x - 5, RAIL]], { fill: 'paper', role: 'ink', width: 1.5 })
}

/** The whole line as a rail with a post between elements and a diamond at each gate, woven up to where one stands. */
function drawRail(line: Line, at: number, { x, back }: View, width: number, system: System): Shape[] {
  const whole = lineLength(line)
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
  const [left, middle, right] = [stationWords(back ? whole : 0, system), stationWords(at, system), stationWords(back ? 0 : whole, system)]
  const half = textWidth(middle, 14) / 2
  const stands = Math.max(half, Math.min(width - half, here))
  // The figures of both ends give way to the one of the place.
  if (stands - half > MARGIN + textWidth(left, 14) + 8) list.push(text(MARGIN, 16, left, { role: 'soft' }))
  if (stands + half < width - MARGIN - textWidth(right, 14) - 8) list.push(text(width - MARGIN, 16, right, { role: 'soft', anchor: 'end' }))
  list.push(text(stands, 16, middle, { anchor: 'middle', weight: 500 }))
  list.push(seg('state', here, RAIL, here, RAIL + 12), poly('state', [[here, RAIL + 9], [here + 7, RAIL + 16], [here, RAIL + 23], [here - 7, RAIL + 16]], { fill: 'pine' }))
  list.push(seg('dim', here - 7, 56, 2, 78, { role: 'mark', width: 'hair' }), seg('dim', here + 7, 56, width - 2, 78, { role: 'mark', width: 'hair' }))
  return list
}

/** Where bay or leaf `of` at `along` begins and ends, from the element's start. */
function bayAround(element: LineElement, along: Length): { bay: number, from: Length, to: Length } {
  if (element.kind !== 'run') return { bay: 1, from: 0, to: element.length }
  const bay = bayAt(element, along)
  return { bay, from: bayEnd(element, bay - 1), to: bayEnd(element, bay) }
}

/** Swings a list of elements round for a pass the other way: ends, rise and hinge change sides. */
function mirrored(element: LineElement): LineElement {
  return {
    ...element,
    rise: -element.rise,
    ...(element.gate && { gate: { ...element.gate, leaves: [...element.gate.leaves].reverse(), hinge: element.gate.hinge === 'start' ? 'end' : 'start', opens: element.gate.opens === 'outer' ? 'inner' : 'outer' } }),
  }
}

/**
 * The head of the walk: the whole line as a rail with the place on it, and under it the bays around the place, drawn large and true to one scale.
 * `width` by 170. Throws RangeError when the line has no such element.
 */
export function drawWalk(line: Line, { width, here, marks = {}, backwards = false, words }: DrawWalkOptions): Drawing {
  const start = stationOf(line, here.element)
  if (start === undefined) throw new RangeError('the line has no such element; take the place from the line in force')
  const whole = lineLength(line)
  const at = start + here.along
  const railScale = (width - 2 * MARGIN) / Math.max(whole, 1)
  const list = drawRail(line, at, { back: backwards, x: station => MARGIN + (backwards ? whole - station : station) * railScale }, width, line.system)

  const elements = elementsOf(line)
  const stood = elements.find(element => element.id === here.element)!
  const own = bayAround(stood, here.along)
  const scale = Math.min(BAY / Math.max(own.to - own.from, FOOT), HIGHEST / stood.height)
  const centre = start + (own.from + own.to) / 2
  const x = (station: number) => width / 2 + (backwards ? centre - station : station - centre) * scale

  // Walk the line in the order of the picture, ground carried along, its height under the place at GROUND.
  const laid: { element: LineElement, seen: LineElement, station: Length, ground: number }[] = []
  let station = 0
  let rise = 0
  for (const element of elements) {
    laid.push({ element, seen: backwards ? mirrored(element) : element, station, ground: rise })
    station += element.length
    rise += element.rise
  }
  const groundAt = (place: typeof laid[number], along: number) => place.ground + (place.element.length ? place.element.rise * along / place.element.length : 0)
  const datum = groundAt(laid.find(place => place.element === stood)!, (own.from + own.to) / 2)
  const y = (height: number) => GROUND - 2 - (height - datum) * scale
  if (backwards) laid.reverse()
  const points: Point[] = []
  for (const place of laid) {
    const { element, seen } = place
    const [first, last] = [x(place.station), x(place.station + element.length)]
    const [left, right] = [Math.min(first, last), Math.max(first, last)]
    if (right < -2 || left > width + 2) continue
    const end = (along: number) => y(groundAt(place, along))
    const piece = (from: number, to: number): DrawnPiece => {
      const [a, b] = backwards ? [to, from] : [from, to]
      return { element: seen, from: backwards ? element.length - to : from, to: backwards ? element.length - from : to, x: x(place.station + a), width: (to - from) * scale, left: end(a), right: end(b), height: element.height * scale }
    }
    const mark = marks[element.id] && { ...marks[element.id]!, tags: [] }
    const draw = (from: number, to: number, fabric: Role | null) => to > from || element.length === 0 ? drawElement(piece(from, to), mark, { scale, texture: 6, ground: 'paper', fabric }) : []
    const seenBays = element.kind === 'run' ? visibleBays(element, place.station, x, width) : { from: 0, to: element.length }
    if (element === stood && element.kind === 'run') {
      // Woven up to the bay in hand, grey from there on.
      const edge = backwards ? own.to : own.from
      list.push(...draw(backwards ? Math.max(edge, seenBays.from) : seenBays.from, backwards ? seenBays.to : Math.min(edge, seenBays.to), 'pine'))
      list.push(...draw(backwards ? seenBays.from : Math.max(edge, seenBays.from), backwards ? Math.min(edge, seenBays.to) : seenBays.to, 'line'))
    }
    else list.push(...draw(seenBays.from, seenBays.to, fabricOf(mark) ?? 'line'))
    const drawn = piece(seenBays.from, seenBays.to)
    points.push(...groundUnder(drawn), [drawn.x + drawn.width, drawn.right])
    list.push(...closePosts(place.element, place.station, x, end, element.height * scale, seenBays), ...bayNumbers(element, place.station, x, seenBays, element === stood ? own.bay : 0), ...closeTags(marks[element.id]?.tags ?? [], element, place.station, x, end, element.height * scale, width))
  }
  if (points.length > 1) list.push(...ground(points, { depth: 5, step: 9 }))

  const top = GROUND - 2 - stood.height * scale
  const middle = width / 2
  list.push(seg('state', middle, top, middle, top + 18, { width: 2 }), poly('state', [[middle, top + 14], [middle + 14, top + 28], [middle, top + 42], [middle - 14, top + 28]], { fill: 'pine', role: 'paper', width: 2 }))
  list.push(text(middle, top - 7, words.youAreHere, { anchor: 'middle', halo: 'paper' }))
  return { list, width, height: 170 }
}

/** The bays of a run that the picture shows, whole ones. */
function visibleBays(element: LineElement, station: Length, x: (s: number) => number, width: number): { from: Length, to: Length } {
  const shows = (bay: number) => {
    const [a, b] = [x(station + bayEnd(element, bay - 1)), x(station + bayEnd(element, bay))]
    return Math.max(a, b) > 0 && Math.min(a, b) < width
  }
  let [first, last] = [1, element.bays]
  while (first < last && !shows(first)) first++
  while (last > first && !shows(last)) last--
  return { from: bayEnd(element, first - 1), to: bayEnd(element, last) }
}

function closePosts(element: LineElement, station: Length, x: (s: number) => number, foot: (along: number) => number, height: number, seen: { from: Length, to: Length }): Shape[] {
  if (element.kind !== 'run') return []
  const list: Shape[] = [open('rail', [[x(station + seen.from), foot(seen.from) - height + 3], [x(station + seen.to), foot(seen.to) - height + 3]], { width: 'hair' })]
  for (let bay = 1; bay < element.bays; bay++) {
    const along = bayEnd(element, bay)
    if (along < seen.from || along > seen.to) continue
    list.push(seg('post', x(station + along), foot(along) - height - 2, x(station + along), foot(along) + 1, { width: 3 }))
  }
  return list
}

/** Numbers of bays under the ground, the one in hand large; other elements by their tag. */
function bayNumbers(element: LineElement, station: Length, x: (s: number) => number, seen: { from: Length, to: Length }, inHand: number): Shape[] {
  const number = (words: string, at: number, chosen: boolean) => text(x(station + at), 166, words, { size: chosen ? 18 : 15, weight: chosen ? 600 : 400, role: chosen ? 'ink' : 'soft', anchor: 'middle' })
  if (element.kind !== 'run') return [number(element.tag, element.length / 2, inHand > 0)]
  const list: Shape[] = []
  for (let bay = 1; bay <= element.bays; bay++) {
    const [from, to] = [bayEnd(element, bay - 1), bayEnd(element, bay)]
    if (from < seen.from || to > seen.to) continue
    list.push(number(String(bay), (from + to) / 2, bay === inHand))
  }
  return list
}

/** Tape tied to the fabric at the very place. */
function closeTags(tags: readonly LineTag[], element: LineElement, station: Length, x: (s: number) => number, foot: (along: number) => number, height: number, width: number): Shape[] {
  return tags.flatMap((tag) => {
    const along = tag.along ?? element.length / 2
    const place = x(station + along)
    if (place < 0 || place > width) return []
    const top = foot(along) - height + 2
    return [seg('tag', place, top, place, top + 12, { role: tag.state === 'settled' ? 'slate' : tag.state === 'readAgain' ? 'brass' : 'rust' }), ...tapeTag(place, top + 10, tag.words, { state: tag.state, height: 20, size: 14 })]
  })
}
