import { ground, seg, type Point, type Shape } from '../displayList'

/** Ground that runs in from the left edge of a picture: its first strokes stand far enough in to stay inside. */
export function groundFromEdge(points: readonly Point[], options: { depth?: number, step?: number } = {}): Shape[] {
  const [first, second, ...rest] = points
  if (!first || !second) return []
  const inset = Math.min(second[0] - first[0], (options.depth ?? 7) * 0.7)
  const start: Point = [first[0] + inset, first[1] + (second[1] - first[1]) * inset / (second[0] - first[0])]
  return [seg('ground', first[0], first[1], start[0], start[1]), ...ground([start, second, ...rest], options)]
}
