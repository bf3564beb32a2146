import { ground, open, poly, seg, tapeTag, tapeTagWidth, text, type Drawing, type Point, type Role, type Shape } from '../drawing/displayList'
import { FOOT, type Length } from '../measure/length'
import { drawElement, fabricOf, groundUnder, type DrawnPiece } from './drawElement'
import { bayAt, bayEnd, stationOf } from './layLine'
import { elementsOf, type Line, type LineElement } from './line'
import type { LineMarks, LineTag } from './lineMark'
import { drawWalkRail } from './drawWalkRail'

export interface DrawWalkOptions {
  width: number
  /** Where the inspector stands. */
  here: { element: string, along: Length }
  marks?: LineMarks
  /** True when the pass goes from the end of the line to its start: seen from the other face, so the picture is mirrored. */
  backwards?: boolean
  words: { youAreHere: string }
}

/** Where the ground of the bay in hand lies. */
const GROUND = 146
/** A bay of the close view is about this wide; what one stands at is 44 to 52 high, and nothing reaches the brackets. */
const BAY = 82
const [LOWEST, HIGHEST, CEILING] = [44, 52, 62]
/** Between these the close view may reach on a slope; the element in hand always stays. */
const [TOP, FOOT_LINE] = [60, 165]

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
  const list = drawWalkRail(line, start + here.along, { width, backwards })

  const elements = elementsOf(line)
  const stood = elements.find(element => element.id === here.element)!
  const own = bayAround(stood, here.along)
  const index = elements.indexOf(stood)
  const ceiling = CEILING / Math.max(...elements.slice(Math.max(0, index - 1), index + 2).map(element => element.height))
  const scale = Math.min(ceiling, Math.max(LOWEST / stood.height, Math.min(HIGHEST / stood.height, BAY / Math.max(own.to - own.from, FOOT))))
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
    const inSight = (along: number) => end(along) - element.height * scale >= TOP && end(along) <= FOOT_LINE
    const seenBays = element.kind === 'run' ? visibleBays(element, along => x(place.station + along), inSight, width) : inSight(0) && inSight(element.length) ? { from: 0, to: element.length } : null
    if (!seenBays) continue
    if (element === stood && element.kind === 'run') {
      // Woven up to the bay in hand, grey from there on.
      const edge = Math.min(Math.max(backwards ? own.to : own.from, seenBays.from), seenBays.to)
      list.push(...draw(seenBays.from, edge, backwards ? 'line' : 'pine'), ...draw(edge, seenBays.to, backwards ? 'pine' : 'line'))
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

/** The bays of a run that the picture shows, whole ones; on a steep slope those that would climb into the brackets or sink under the figures stay away. */
function visibleBays(element: LineElement, x: (along: number) => number, inSight: (along: number) => boolean, width: number): { from: Length, to: Length } | null {
  let [first, last] = [Infinity, 0]
  for (let bay = 1; bay <= element.bays; bay++) {
    const ends = [bayEnd(element, bay - 1), bayEnd(element, bay)]
    const places = ends.map(x)
    if (Math.max(...places) <= 0 || Math.min(...places) >= width || !ends.every(inSight)) continue
    first = Math.min(first, bay)
    last = bay
  }
  return last ? { from: bayEnd(element, first - 1), to: bayEnd(element, last) } : null
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
  const number = (words: string, at: number, chosen: boolean) => text(x(station + at), 166, words, { size: chosen ? 18 : 15, weight: chosen ? 600 : 400, role: chosen ? 'ink' : 'soft', anchor: 'middle', halo: 'paper' })
  if (element.kind !== 'run') return [number(element.tag, element.length / 2, inHand > 0)]
  const list: Shape[] = []
  for (let bay = 1; bay <= element.bays; bay++) {
    const [from, to] = [bayEnd(element, bay - 1), bayEnd(element, bay)]
    if (from < seen.from || to > seen.to) continue
    list.push(number(String(bay), (from + to) / 2, bay === inHand))
  }
  return list
}

/** Tape tied to the fabric at the very place; it flies clear of the sign for "here" in the middle. */
function closeTags(tags: readonly LineTag[], element: LineElement, station: Length, x: (s: number) => number, foot: (along: number) => number, height: number, width: number): Shape[] {
  return tags.flatMap((tag) => {
    const along = tag.along ?? element.length / 2
    const place = x(station + along)
    if (place < 0 || place > width) return []
    const top = foot(along) - height + 2
    const wide = tapeTagWidth(tag.words, 14)
    const clear = 18
    const left = place >= width / 2 + clear || place + wide <= width / 2 - clear ? place : place < width / 2 ? width / 2 - clear - wide : width / 2 + clear
    return [open('tag', [[place, top], [place, top + 12], [left, top + 12]], { role: tag.state === 'settled' ? 'slate' : tag.state === 'readAgain' ? 'brass' : 'rust' }), ...tapeTag(left, top + 10, tag.words, { state: tag.state, height: 20, size: 14 })]
  })
}
