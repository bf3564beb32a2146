import { FOOT, MILLIMETRE } from '../measure/length'
import { elementsOf, type ElementKind, type Line, type LineElement, type LineSide } from './line'
import { freeTag, lineDefaults, usualBays, usualLeaves } from './lineDefaults'
import type { System } from '../measure/length'

/** Edits of a line at the desk, each a new value; the field's edits are entries (applyLineEdit.ts). */

const KEYS = [...'ABCDEFGHIJKLMNOPQRSTUVWXYZ']

function withSide(line: Line, at: number, change: (side: LineSide) => LineSide): Line {
  return { ...line, sides: line.sides.map((side, i) => i === at ? change(side) : side) }
}

/** A new element that is like its neighbour where that says something (height, mesh, faces, work), ready to be changed: a run of 10 ft (3 m), a gate of 4 ft (1.2 m), a crossing of 4 ft (1.2 m); 6 ft (1.8 m) high without a neighbour. */
export function newElement(kind: ElementKind, { id, system, like, taken }: { id: string, system: System, like?: LineElement, taken: ReadonlySet<string> }): LineElement {
  const usual = lineDefaults(system)
  const imperial = system === 'imperial'
  const short = imperial ? 4 * FOOT : 1200 * MILLIMETRE
  const length = kind === 'run' ? usual.spacing : kind === 'gate' || kind === 'crossing' ? short : 0
  return {
    id, kind,
    // All 999 tags of a letter taken means a line far beyond 400 elements; checkLine tells it.
    tag: freeTag(kind, taken) ?? 'R999',
    work: like?.work ?? usual.work, length, height: like?.height ?? (imperial ? 6 * FOOT : 1800 * MILLIMETRE), rise: 0,
    bays: kind === 'run' ? usualBays(length, usual.spacing) : 1,
    ...(like?.mesh && { mesh: like.mesh }),
    topRail: like?.topRail ?? usual.topRail, bottom: like?.bottom ?? usual.bottom,
    ...(kind === 'gate' && { gate: { form: 'singleSwing' as const, leaves: usualLeaves(length, 'singleSwing'), hinge: 'start' as const, opens: 'outer' as const, exit: false, selfClosing: false, automatic: false } }),
    ...(kind === 'terminalPost' && { post: 'corner' as const }),
    ...(kind === 'tieIn' && { tieIn: 'building' as const }),
    ...(kind === 'crossing' && { crossing: 'swale' as const }),
    faces: like?.faces ?? usual.faces,
  }
}

/** A line of one side with one run, to begin with. */
export function newLine(system: System, newId: () => string): Line {
  return { version: 1, system, sides: [{ key: 'A', name: '', elements: [newElement('run', { id: newId(), system, taken: new Set() })] }] }
}

const tagsOf = (line: Line) => new Set(elementsOf(line).map(element => element.tag))

/** Adds an element after another one; like it in height, mesh, faces and work. Throws RangeError when `after` is not on the line. */
export function addElement(line: Line, after: string, kind: ElementKind, id: string): Line {
  const at = line.sides.findIndex(side => side.elements.some(element => element.id === after))
  if (at < 0) throw new RangeError('the line has no such element; take one that is drawn')
  return withSide(line, at, (side) => {
    const place = side.elements.findIndex(element => element.id === after)
    return { ...side, elements: side.elements.toSpliced(place + 1, 0, newElement(kind, { id, system: line.system, like: side.elements[place], taken: tagsOf(line) })) }
  })
}

/** Adds a side with a run at the end of the line; the line itself when all 26 letters are taken. */
export function addSide(line: Line, id: string): Line {
  const key = KEYS.find(letter => !line.sides.some(side => side.key === letter))
  if (!key) return line
  const like = elementsOf(line).at(-1)
  return { ...line, sides: [...line.sides, { key, name: '', elements: [newElement('run', { id, system: line.system, like, taken: tagsOf(line) })] }] }
}

/** Takes an element away, and its side with it when it was the last there; the line itself when it was the last of all. */
export function removeElement(line: Line, id: string): Line {
  const sides = line.sides.map(side => ({ ...side, elements: side.elements.filter(element => element.id !== id) })).filter(side => side.elements.length > 0)
  return sides.length > 0 ? { ...line, sides } : line
}

/** Moves an element one place along the line, over the corner into the next side where it stands at an end; the line itself where it cannot go further, or would leave its side empty. */
export function moveElement(line: Line, id: string, by: 1 | -1): Line {
  const at = line.sides.findIndex(side => side.elements.some(element => element.id === id))
  const side = line.sides[at]
  if (!side) return line
  const place = side.elements.findIndex(element => element.id === id)
  const element = side.elements[place]!
  const next = place + by
  if (next >= 0 && next < side.elements.length) return withSide(line, at, () => ({ ...side, elements: side.elements.toSpliced(place, 1).toSpliced(next, 0, element) }))
  const beside = line.sides[at + by]
  if (!beside || side.elements.length === 1) return line
  const left = withSide(line, at, () => ({ ...side, elements: side.elements.toSpliced(place, 1) }))
  return withSide(left, at + by, () => ({ ...beside, elements: by > 0 ? [element, ...beside.elements] : [...beside.elements, element] }))
}

/** Puts a changed element in the place of the one with its id. */
export function changeElement(line: Line, element: LineElement): Line {
  return { ...line, sides: line.sides.map(side => side.elements.some(of => of.id === element.id) ? { ...side, elements: side.elements.map(of => of.id === element.id ? element : of) } : side) }
}

/** An element made another kind: what only its old kind had is left out, what its new kind needs is put in. Its tag stays. */
export function changeKind(element: LineElement, kind: ElementKind, system: System): LineElement {
  const { gate: _gate, post: _post, tieIn: _tieIn, crossing: _crossing, ...kept } = element
  const made = newElement(kind, { id: element.id, system, like: element, taken: new Set() })
  const length = kind === 'terminalPost' || kind === 'tieIn' ? made.length : element.length || made.length
  const { gate, post, tieIn, crossing } = made
  return {
    ...kept, kind, length, bays: kind === 'run' ? usualBays(length, lineDefaults(system).spacing) : 1,
    ...(gate && { gate: { ...gate, leaves: usualLeaves(length, gate.form) } }), ...(post && { post }), ...(tieIn && { tieIn }), ...(crossing && { crossing }),
  }
}

/** An element made another length; bays of a run and leaves of a gate that were the usual ones for the old length are the usual ones for the new. */
export function changeLength(element: LineElement, length: number, system: System): LineElement {
  const { spacing } = lineDefaults(system)
  const { gate } = element
  const wasUsual = gate && JSON.stringify(gate.leaves) === JSON.stringify(usualLeaves(element.length, gate.form))
  return {
    ...element, length,
    bays: element.kind === 'run' && element.bays === usualBays(element.length, spacing) ? usualBays(length, spacing) : element.bays,
    ...(gate && { gate: wasUsual && length > 1 ? { ...gate, leaves: usualLeaves(length, gate.form) } : gate }),
  }
}

/** Gives a side another name. */
export function renameSide(line: Line, key: string, name: string): Line {
  return { ...line, sides: line.sides.map(side => side.key === key ? { ...side, name: name.slice(0, 80) } : side) }
}

/** Gives the faces of one element to all others. */
export function facesForAll(line: Line, faces: LineElement['faces']): Line {
  return { ...line, sides: line.sides.map(side => ({ ...side, elements: side.elements.map(element => ({ ...element, faces })) })) }
}
