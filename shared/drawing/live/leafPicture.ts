import { box, meshPath, open, path, poly, seg, type Point, type Shape } from '../displayList'
import { groundFromEdge } from './groundFromEdge'

/** The latch side of a gate in elevation: leaf with its frame up to the post; ground under it. */
export function leafPicture({ right, post, top, bottom, groundY, groundRight, diamond = 6, frame = 4 }: {
  /** Right side of the leaf; its left runs out of the picture. */
  right: number
  /** Left side of the post. */
  post: number
  top: number
  bottom: number
  groundY: number
  groundRight: number
  diamond?: number
  frame?: number
}): Shape[] {
  const half = frame / 2
  return [
    path('mesh', meshPath(right, bottom - top - frame, diamond, diamond, (u, v) => [u, top + half + v]), { role: 'mark', width: 'wire' }),
    seg('leaf', 0, top, right + half, top, { width: frame }),
    seg('leaf', 0, bottom, right + half, bottom, { width: frame }),
    seg('leaf', right, top, right, bottom, { width: frame }),
    ...postPicture(post, top - frame * 2, groundY + frame, frame * 2),
    ...groundFromEdge([[0, groundY], [groundRight, groundY]], frame < 4 ? { depth: 4, step: 6 } : {}),
  ]
}

/** A steel post with its cap. */
export function postPicture(left: number, top: number, bottom: number, width: number): Shape[] {
  const cap = width * 0.55
  return [
    box('post', left, top + cap, width, bottom - top - cap, { fill: 'steel', role: 'steel-edge', width: 'hair' }),
    poly('post', [[left - 1, top + cap], [left + width / 2, top], [left + width + 1, top + cap]], { fill: 'steel-edge' }),
  ]
}

/** The frame round a spot that is drawn large elsewhere, with the two lines that lead there. */
export function lens(x: number, y: number, width: number, height: number, to: { x: number, top: number, bottom: number }): Shape[] {
  const corners: Point[] = [[x, y], [x + width, y], [x + width, y + height], [x, y + height]]
  return [
    open('dim', [...corners, corners[0]!], { width: 'hair' }),
    seg('dim', x + width, y, to.x, to.top, { role: 'mark', width: 'hair' }),
    seg('dim', x + width, y + height, to.x, to.bottom, { role: 'mark', width: 'hair' }),
  ]
}
