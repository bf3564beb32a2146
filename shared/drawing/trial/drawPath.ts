import { DEGREE, radians, type Angle } from '../../gate/leaf'
import { swingEnvelope, type Envelope } from '../../gate/swingEnvelope'
import type { TrialOf } from '../../trial/trial'
import { box, open, poly, seg, text, type Drawing, type Point, type Shape } from '../displayList'

const WIDTH = 360
const [LEAST, MOST] = [120, 320]

/** A leaf's way round, from above, against one thing that stands about it; the leaf at the angle that is looked at. Throws what `swingEnvelope` throws. */
export function drawPath({ leaf, obstacle, to }: TrialOf<'path'>, angle: Angle): Drawing & { envelope: Envelope } {
  const envelope = swingEnvelope(leaf, obstacle, to)
  const { width } = leaf
  const turned = Array.from({ length: 37 }, (_, i) => to * i / 36)
  const arc = (reach: number): Point[] => turned.map(each => [reach * Math.cos(radians(each)), reach * Math.sin(radians(each))])
  // What is seen: the swing, and as much of the obstacle as lies within two leaves of it.
  const near = (value: number) => Math.max(-2 * width, Math.min(2 * width, value))
  const corners: Point[] = [...arc(width), [0, 0], ...(obstacle.kind === 'post' ? [[-1, -1], [1, 1]].map(([u, v]): Point => [near(obstacle.along + u! * obstacle.diameter / 2), near(obstacle.across + v! * obstacle.diameter / 2)])
    : obstacle.kind === 'facingWall' ? [[0, near(obstacle.across)] as Point] : obstacle.kind === 'wallBehind' ? [[-near(obstacle.back), 0] as Point]
      : obstacle.along.flatMap(x => obstacle.across.map((y): Point => [near(x), near(y)])))]
  const [left, right] = [Math.min(...corners.map(([x]) => x)), Math.max(...corners.map(([x]) => x))]
  const [top, bottom] = [Math.min(...corners.map(([, y]) => y)), Math.max(...corners.map(([, y]) => y))]
  const per = Math.min((WIDTH - 72) / (right - left), (MOST - 44) / (bottom - top || 1))
  const height = Math.max(LEAST, (bottom - top) * per + 44)
  const [x0, y0] = [(WIDTH - (right - left) * per) / 2 - left * per, 22 - top * per]
  const at = ([x, y]: Point): Point => [Math.max(0, Math.min(WIDTH, x0 + x * per)), Math.max(0, Math.min(height, y0 + y * per))]
  const stands = obstacle.kind !== 'clearSpace'
  const stuff = { fill: stands ? 'steel' : 'brass-wash', role: stands ? 'steel-edge' : 'brass', width: 'line', ...(!stands && { dash: [6, 3] }) } as const
  const block = (x1: number, y1: number, x2: number, y2: number): Shape => { const [a, b] = [at([x1, y1]), at([x2, y2])]; return box('plan', a[0], a[1], b[0] - a[0], b[1] - a[1], stuff) }
  const far = 4 * width
  const thick = Math.max(4, Math.min(40, leaf.thickness * per))
  const swung = (to: Angle, from = 0) => turned.filter(each => each > from && each < to)
  const reach = (each: Angle): Point => at([width * Math.cos(radians(each)), width * Math.sin(radians(each))])
  const list: Shape[] = [
    obstacle.kind === 'post' ? poly('plan', round(obstacle.along, obstacle.across, Math.max(3 / per, obstacle.diameter / 2)).map(at), { ...stuff, width: 'hair' })
      : obstacle.kind === 'facingWall' ? block(-far, obstacle.across, far, far) : obstacle.kind === 'wallBehind' ? block(-far, -far, -obstacle.back, far)
        : block(obstacle.along[0], obstacle.across[0], obstacle.along[1], obstacle.across[1]),
    poly('band', [at([0, 0]), ...[0, ...swung(envelope.opens), envelope.opens].map(reach)], { fill: 'pine-wash', fillOpacity: 0.7 }),
    open('plan', [0, ...swung(envelope.opens), envelope.opens].map(reach), { width: 'hair' }),
    ...[0, to].map(each => seg('leaf', ...at([0, 0]), ...reach(each), { role: 'mark', dash: [6, 3] })),
    ...(envelope.opens < to ? [open('plan', [envelope.opens, ...swung(to, envelope.opens), to].map(reach), { role: 'rust', width: 'hair', dash: [3, 3] })] : []),
    seg('leaf', ...at([0, 0]), ...reach(angle), { width: thick, role: angle > envelope.opens ? 'rust' : 'ink' }),
    box('post', x0 - 6, y0 - 6, 12, 12, { fill: 'steel', role: 'steel-edge', width: 'hair' }),
  ]
  if (envelope.contact !== null) {
    const [x, y] = reach(envelope.contact)
    list.push(seg('fit', ...at([0, 0]), x, y, { role: 'rust', width: 'heavy' }))
    list.push(text(Math.max(20, Math.min(WIDTH - 24, x)), Math.max(16, Math.min(height - 5, y + 18)), `${Math.floor(envelope.contact / DEGREE)}°`, { size: 17, weight: 500, role: 'rust', anchor: 'middle', halo: 'paper' }))
  }
  return { list, width: WIDTH, height, envelope }
}

/** A circle as a polygon, so that what leaves the picture ends at its edge. */
function round(x: number, y: number, radius: number): Point[] {
  return Array.from({ length: 24 }, (_, i) => [x + radius * Math.cos(i * Math.PI / 12), y + radius * Math.sin(i * Math.PI / 12)])
}
