import type { z } from 'zod'
import type { Drawing } from '../drawing/displayList'
import { path } from '../drawing/displayList'
import type { strokeSchema } from '../entry/entry'

/** A signature from its strokes, cropped to what was drawn: curves through the middles between points, as the pad showed them. */
export function signatureDrawing(strokes: z.infer<typeof strokeSchema>[]): Drawing {
  const points = strokes.flat()
  const [left, top] = [Math.min(...points.map(point => point.x)), Math.min(...points.map(point => point.y))]
  const [right, bottom] = [Math.max(...points.map(point => point.x)), Math.max(...points.map(point => point.y))]
  const room = 3
  const at = (point: { x: number, y: number }) => `${point.x - left + room} ${point.y - top + room}`
  const middle = (a: { x: number, y: number }, b: { x: number, y: number }) => ({ x: Math.round((a.x + b.x) / 2 * 100) / 100, y: Math.round((a.y + b.y) / 2 * 100) / 100 })
  const d = strokes.map((stroke) => {
    const first = stroke[0]!
    // A tap is a dot: a stroke of no length with round ends.
    if (stroke.length === 1) return `M${at(first)}L${at({ x: first.x + 0.01, y: first.y })}`
    const curves = stroke.slice(1, -1).map((point, i) => `Q${at(point)} ${at(middle(point, stroke[i + 2]!))}`)
    return `M${at(first)}${curves.join('')}L${at(stroke[stroke.length - 1]!)}`
  }).join('')
  return { list: [path('text', d, { width: 2, cap: 'round' })], width: right - left + 2 * room, height: bottom - top + 2 * room }
}
