import { FOOT, MILLIMETRE, type Length, type System } from '../measure/length'
import type { Drawing } from '../drawing/displayList'
import type { DrawnPiece } from './drawElement'
import type { LineRow } from './layLine'
import type { LineMark, LineMarks } from './lineMark'

/** Where an element stands on a drawing, for a button over it; a broken run has one area a row, `turn` 0 first. Narrow ones come last, so that they lie on top. */
export interface HitArea { element: string, turn: number, x: number, y: number, width: number, height: number }
export interface LineDrawing extends Drawing { areas: HitArea[] }

export interface DrawLineOptions {
  /** `desk` with station ruler, `paper` smaller and without. Under 560 wide the sides' names stand over their rows. */
  variant: 'desk' | 'paper'
  width: number
  marks?: LineMarks
  selected?: string | null
  /** Where somebody stands: a solid diamond that hangs on the rail. */
  here?: { element: string, along: Length } | null
}

/** Measures of a variant, in its own units. */
export const STYLES = {
  desk: { column: 86, texture: 6, name: 14, diamond: 17, key: 28, note: 13, station: 12.5, tag: 13, tape: 18, lane: 20, ground: 'page' },
  paper: { column: 52, texture: 4.2, name: 11, diamond: 12, key: 20, note: 11, station: 11, tag: 11, tape: 16, lane: 16, ground: 'paper' },
} as const
export type Style = (typeof STYLES)[keyof typeof STYLES]

/** What all rows of one drawing share. `x0` to `right` is the room of the fence. */
export interface Scene { scale: number, x0: number, right: number, style: Style, options: DrawLineOptions, system: System, station: boolean }

/** A piece with its state; `first` when it holds the element's start. */
export interface PieceOnRow extends DrawnPiece { mark: LineMark | undefined, first: boolean }

/** The pieces of a row on paper; `datum` is where the ground lies at its start. */
export function piecesOf(row: LineRow, { scale, x0, options }: Scene, datum: number): PieceOnRow[] {
  return row.pieces.map(piece => ({
    element: piece.element,
    from: piece.from,
    to: piece.to,
    x: x0 + piece.offset * scale,
    width: (piece.to - piece.from) * scale,
    left: datum - piece.groundFrom * scale,
    right: datum - piece.groundTo * scale,
    height: piece.element.height * scale,
    mark: options.marks?.[piece.element.id],
    first: piece.from === 0,
  }))
}

/** A whole figure with its thousands apart, the same on every device (no Intl): a comma beside feet, a no-break space beside metres. */
export function stationFigure(n: number, system: System): string {
  return String(n).replace(/\B(?=(\d{3})+$)/g, system === 'imperial' ? ',' : '\u00A0')
}

/** A station along the line in whole feet or metres, with its unit. */
export function stationWords(station: Length, system: System): string {
  return system === 'imperial' ? `${stationFigure(Math.round(station / FOOT), system)} ft` : `${stationFigure(Math.round(station / (1000 * MILLIMETRE)), system)} m`
}
