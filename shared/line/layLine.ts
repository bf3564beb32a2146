import { FOOT, type Length } from '../measure/length'
import type { Line, LineElement, LineSide } from './line'

/** A stretch of one element on one row; a long run may be broken between two bays. */
export interface LinePiece {
  element: LineElement
  /** Its part of the element, from the element's start. */
  from: Length
  to: Length
  /** Where it starts on the row, from the row's start. */
  offset: Length
  /** Ground over the row's start, at both ends; fractions of a unit where a run is broken. */
  groundFrom: number
  groundTo: number
}

/** One row of the drawing: a side, or what fits of it. */
export interface LineRow {
  side: LineSide
  /** Which row of its side it is, from 0. */
  turn: number
  /** Along the whole line, of the row's start. */
  station: Length
  length: Length
  pieces: LinePiece[]
}

/** Length of a side along the line. */
export function sideLength(side: LineSide): Length {
  return side.elements.reduce((sum, element) => sum + element.length, 0)
}

/** Length of the whole line. */
export function lineLength(line: Line): Length {
  return line.sides.reduce((sum, side) => sum + sideLength(side), 0)
}

/** Where an element starts along the line; undefined when the line has none of that id. */
export function stationOf(line: Line, elementId: string): Length | undefined {
  let station = 0
  for (const side of line.sides) {
    for (const element of side.elements) {
      if (element.id === elementId) return station
      station += element.length
    }
  }
  return undefined
}

/** Where a line post stands between bay `bay` and the next, from the element's start. */
export function bayEnd(element: LineElement, bay: number): Length {
  return Math.round(element.length * bay / element.bays)
}

/** Which bay of a run holds a place along it, counted from 1. */
export function bayAt(element: LineElement, along: Length): number {
  if (element.length === 0) return 1
  return Math.min(element.bays, Math.floor(along * element.bays / element.length) + 1)
}

/** The last line post of a run that is no further than `limit` and beyond `from`; undefined when there is none. */
function lastPostWithin(element: LineElement, from: Length, limit: Length): Length | undefined {
  let bay = Math.min(element.bays - 1, Math.floor(limit * element.bays / element.length) + 1)
  while (bay > 0 && bayEnd(element, bay) > limit) bay--
  const post = bay > 0 ? bayEnd(element, bay) : 0
  return post > from ? post : undefined
}

function breakSide(side: LineSide, start: Length, capacity: Length): LineRow[] {
  const rows: LineRow[] = []
  let row!: LineRow
  let ground = 0
  const open = (station: Length) => {
    row = { side, turn: rows.length, station, length: 0, pieces: [] }
    rows.push(row)
    ground = 0
  }
  const add = (element: LineElement, from: Length, to: Length) => {
    const rise = element.length ? element.rise * (to - from) / element.length : 0
    row.pieces.push({ element, from, to, offset: row.length, groundFrom: ground, groundTo: ground + rise })
    row.length += to - from
    ground += rise
  }
  open(start)
  for (const element of side.elements) {
    let from = 0
    for (;;) {
      const room = capacity - row.length
      if (element.length - from <= room) {
        add(element, from, element.length)
        break
      }
      // Breaking for less than a tenth of a row would only make crumbs.
      const post = element.kind === 'run' ? lastPostWithin(element, from, from + room) : undefined
      if (post !== undefined && (row.length === 0 || post - from > capacity / 10)) {
        add(element, from, post)
        from = post
      }
      else if (row.length === 0) {
        add(element, from, from + room)
        from += room
      }
      open(row.station + row.length)
    }
  }
  return rows
}

/**
 * Breaks a line into rows of at most `capacity`: each side starts one, as lines of text do, and a side that is longer is broken
 * between elements or at a line post, into rows of about one length where that costs no row.
 */
export function layLine(line: Line, capacity: Length): LineRow[] {
  const rows: LineRow[] = []
  let station = 0
  for (const side of line.sides) {
    const length = sideLength(side)
    const most = breakSide(side, station, capacity)
    const even = Math.ceil(length / most.length * 1.06)
    const evened = most.length > 1 && even < capacity ? breakSide(side, station, even) : most
    rows.push(...(evened.length <= most.length ? evened : most))
    station += length
  }
  return rows
}

/** The height of the line's elements, weighted by their length; of the plain mean when none has any. */
function usualHeight(line: Line): number {
  const elements = line.sides.flatMap(side => side.elements)
  const length = lineLength(line)
  return length ? elements.reduce((sum, element) => sum + element.height * element.length, 0) / length : elements.reduce((sum, element) => sum + element.height, 0) / elements.length
}

/**
 * The one scale of a drawing, in units of drawing per {@link Length}: as large as lets the longest side stand on one row of `room`,
 * but never so small that a usual element is under 12 high (then sides take more rows), nor so large that the highest is over 96.
 */
export function lineScale(line: Line, room: number): { fit: number, largest: number } {
  const longest = Math.max(...line.sides.map(sideLength), FOOT)
  const highest = Math.max(...line.sides.flatMap(side => side.elements.map(element => element.height)))
  const largest = 96 / highest
  const least = Math.min(12 / usualHeight(line), largest)
  return { fit: Math.min(largest, Math.max(least, room / longest)), largest }
}
