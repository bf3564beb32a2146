import { ground, seg, type Point, type Shape } from '../displayList'

/** Ground that runs over the whole of a picture: its strokes stand far enough in from both ends to stay inside. */
export function groundFromEdge(points: readonly Point[], options: { depth?: number, step?: number } = {}): Shape[] {
  const [first, last] = [points[0], points.at(-1)]
  if (points.length < 2 || !first || !last) return []
  const start = inward(first, points[1]!, (options.depth ?? 7) * 0.7)
  const end = inward(last, points.at(-2)!, 3)
  return [seg('ground', ...first, ...start), ...ground([start, ...points.slice(1, -1), end], options), seg('ground', ...end, ...last)]
}

/** The point so far along from one to the next, at most halfway. */
function inward(from: Point, to: Point, by: number): Point {
  const share = Math.min(0.5, by / Math.max(1e-6, Math.abs(to[0] - from[0])))
  return [from[0] + (to[0] - from[0]) * share, from[1] + (to[1] - from[1]) * share]
}
