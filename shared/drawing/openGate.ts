import { box, diamond, type Drawing, meshPath, open, path, type PathShape, poly, seg, ground } from './displayList'

const [TOP, FOOT, POST_TOP] = [29, 156, 16]

/** A gate leaf standing open towards the reader; `lean` 1 opens to the right of its post, -1 to the left. */
function leaf(x: number, lean: 1 | -1): PathShape[] {
  const far = x + 26 * lean
  const cross = Array.from({ length: 7 }, (_, i) => `M${x} ${44 + 16 * i}L${far} ${60 + 16 * i}M${x} ${58 + 16 * i}L${far} ${44 + 16 * i}`).join('')
  return [
    poly('leaf', [[x, 28], [far, 40], [far, 174], [x, 154]], { role: 'ink', width: 2, fill: 'paper' }),
    path('leaf', cross, { role: 'pine', width: 'wire' }),
  ]
}

function post(x: number): PathShape[] {
  return [box('post', x - 5, POST_TOP, 10, 150, { fill: 'steel', role: 'steel-edge', width: 1 }), poly('post', [[x - 6, POST_TOP], [x, 10], [x + 6, POST_TOP]], { fill: 'steel-edge' })]
}

/** Fence between two places, its line posts every 150 from the gate. */
function fence(from: number, to: number, gate: number): PathShape[] {
  const posts: number[] = []
  for (let x = gate + (gate === to ? -150 : 150); x > from && x < to; x += gate === to ? -150 : 150) posts.push(x)
  return [
    path('mesh', meshPath(to - from, FOOT - 26, 15, 15, (u, v) => [from + u, 26 + v]), { role: 'pine', width: 1 }),
    ...[24, TOP, FOOT].map(y => seg('rail', from, y, to, y, { width: 'hair' })),
    ...posts.map(x => seg('post', x, 19, x, 164, { width: 3 })),
  ]
}

/** The paper that stands in the opening: a small record. */
function paper(x: number): PathShape[] {
  const left = x - 44
  return [
    box('fit', left, 44, 88, 112, { role: 'ink', width: 'line', fill: 'paper' }),
    seg('fit', left + 10, 56, left + 46, 56, { width: 3 }),
    path('fit', meshPath(68, 12, 4, 4, (u, v) => [left + 10 + u, 68 + v]), { role: 'pine', width: 'wire' }),
    ...[67, 81].map(y => seg('fit', left + 10, y, left + 78, y)),
    ...[0, 19, 23, 48, 68].map(at => seg('fit', left + 10 + at, 64, left + 10 + at, 82, { width: 2 })),
    ...[0, 1, 2, 3, 4].flatMap(i => [
      seg('fit', left + 24, 95 + 12 * i, left + (i % 2 ? 62 : 76), 95 + 12 * i, { role: 'mark' }),
      ...diamond(i === 3 ? 'doesNotConform' : 'conforms', left + 9, 90 + 12 * i, 10, { layer: 'fit' }),
    ]),
  ]
}

/**
 * The picture at the head of the public check: fence, and a gate that stands open with a record in it; shut (`gate: 'shut'`) where a file was not let
 * through. Pure: `width` in units of drawing, at least 300.
 */
export function openGate({ width, gate = 'open' }: { width: number, gate?: 'open' | 'shut' }): Drawing {
  const middle = Math.round(width / 2)
  const half = width < 700 ? 110 : 165
  const [left, right] = [middle - half, middle + half]
  return {
    width, height: 188,
    list: [
      ...ground([[0, 164], [width, 164]], { depth: 8, step: 10 }),
      ...fence(0, left, left), ...fence(right, width, right), ...post(left), ...post(right),
      ...(gate === 'open'
        ? [...leaf(left, 1), ...leaf(right, -1), ...paper(middle)]
        : [
            ...[[left + 7, middle - 2], [middle + 2, right - 7]].flatMap(([from, to]) => [
              path('leaf', meshPath(to! - from!, 122, 12, 12, (u, v) => [from! + u, 32 + v]), { role: 'mark', width: 'wire' }),
              box('leaf', from!, 32, to! - from!, 122, { role: 'ink', width: 2 }),
            ]),
            box('leaf', middle - 12, 88, 24, 10, { role: 'ink', width: 2, fill: 'paper' }),
            open('fit', [[middle - 60, 60], [middle - 52, 78], [middle - 63, 92], [middle - 53, 112], [middle - 61, 130]], { role: 'rust', width: 2.5 }),
          ]),
    ],
  }
}
