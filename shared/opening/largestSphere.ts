import type { Length } from '../measure/length'
import { OpeningRefusal } from './openingRefusal'

/** An opening by the measures that a person took. All are clear, between the inner sides of wires, bars or rails. */
export type Opening =
  /** Square mesh by the distance between parallel wires (the mesh size), whatever its pull. */
  | { kind: 'mesh', dimension: 'side', measured: Length }
  /** Square mesh from corner to corner, or across at its widest: the same in a diamond that is square. */
  | { kind: 'mesh', dimension: 'diagonal' | 'width', measured: Length }
  /** A stretched diamond by its clear width and height. */
  | { kind: 'rhombus', width: Length, height: Length }
  /** A square mesh that was pulled out of square: the clear length of a side of the diamond, and its clear width. */
  | { kind: 'pulledSquare', side: Length, width: Length }
  | { kind: 'bars', gap: Length }
  | { kind: 'rightTriangle', base: Length, height: Length }
  | { kind: 'triangle', sides: readonly [Length, Length, Length] }
  /** Under a rail between two posts: clear width between them, gap at either post, and how much the rail rises from first to second (0: level). */
  | { kind: 'underRail', between: Length, first: Length, second: Length, railRise?: Length }

export interface LargestSphere {
  /** Diameter of the largest sphere that passes. */
  diameter: Length
  /** Whether the mesh was taken as square because only one measure is known. */
  assumesSquare: boolean
}

/**
 * The largest sphere that passes a flat opening: the diameter of the largest circle inside it.
 *
 * @throws {OpeningRefusal} notALength, notPositive, notAnOpening (nothing open), tooWide (a pulled square wider than twice its side), notATriangle
 *
 * Mesh size is the clear distance between parallel wires (CLFMI PM 2445): a 2 in mesh passes a 2 in sphere. The wires are taken as stiff: a child can push fabric wider.
 * Method: arithmetic.md 6. Diameter p q / hypot(p, q) of a rhombus with diagonals p, q; a + b - c of a right triangle; 2 area / half the girth of any.
 *
 * @example
 * largestSphere({ kind: 'rightTriangle', base: 4 * INCH, height: 3 * INCH }).diameter // => 2 in
 */
export function largestSphere(opening: Opening): LargestSphere {
  const square = (diameter: number) => ({ diameter: Math.round(diameter), assumesSquare: true })
  const exact = (diameter: number) => ({ diameter: Math.round(diameter), assumesSquare: false })
  switch (opening.kind) {
    case 'mesh': {
      const measured = positive(opening.measured, opening.dimension)
      return opening.dimension === 'side' ? exact(measured) : square(measured / Math.SQRT2)
    }
    case 'rhombus':
      return exact(inRhombus(positive(opening.width, 'width'), positive(opening.height, 'height')))
    case 'pulledSquare': {
      const [side, width] = [positive(opening.side, 'side'), positive(opening.width, 'width')]
      if (width >= 2 * side) throw new OpeningRefusal('tooWide', 'width', 'A diamond is narrower than two of its sides: measure side and width again.')
      return exact(inRhombus(width, Math.sqrt((2 * side - width) * (2 * side + width))))
    }
    case 'bars':
      return exact(positive(opening.gap, 'gap'))
    case 'rightTriangle': {
      const [base, height] = [positive(opening.base, 'base'), positive(opening.height, 'height')]
      return exact(2 * base * (height / (base + height + Math.hypot(base, height))))
    }
    case 'triangle':
      return exact(inTriangle(opening.sides))
    case 'underRail':
      return exact(underRail(opening))
  }
}

function positive(value: Length, field: string): Length {
  if (!Number.isSafeInteger(value)) throw new OpeningRefusal('notALength', field, `Give ${field} as a length.`)
  if (value <= 0) throw new OpeningRefusal('notPositive', field, `Give ${field} as a length over 0.`)
  return value
}

/** Distance between opposite sides of a rhombus from its diagonals. */
function inRhombus(p: number, q: number): number {
  return p * (q / Math.hypot(p, q))
}

function inTriangle(sides: readonly [Length, Length, Length]): number {
  sides.forEach((side, i) => positive(side, `side ${i + 1}`))
  const [c, b, a] = [...sides].sort((x, y) => x - y) as [number, number, number]
  if (c - (a - b) <= 0) throw new OpeningRefusal('notATriangle', 'sides', 'The longest side must be shorter than the other two together: measure the sides again.')
  // Kahan's order of Heron's terms: a needle keeps its digits.
  const area = Math.sqrt((a + (b + c)) * (c + (a - b))) * Math.sqrt((c - (a - b)) * (a + (b - c))) / 4
  return 4 * area / (a + b + c)
}

/** Between rail, ground and two upright posts: the circle lies against the rail, the ground and the post at the wider end, or between both posts. */
function underRail({ between, first, second, railRise = 0 }: Extract<Opening, { kind: 'underRail' }>): number {
  positive(between, 'width between the posts')
  for (const [field, value] of [['gap at the first post', first], ['gap at the second post', second], ['rise of the rail', railRise]] as const) {
    if (!Number.isSafeInteger(value)) throw new OpeningRefusal('notALength', field, `Give ${field} as a length.`)
  }
  if (first < 0 || second < 0 || first + second === 0) throw new OpeningRefusal('notAnOpening', 'gap', 'A gap under the rail is 0 or more, and over 0 at one post: measure it again.')
  // Looked at from the wider end.
  const [wide, narrow, rise] = first >= second ? [first, second, railRise] : [second, first, -railRise]
  const rail = rise / between
  const ground = rail + (wide - narrow) / between
  const radius = wide / (Math.hypot(1, rail) + Math.hypot(1, ground) + ground - rail)
  return Math.min(2 * radius, between)
}
