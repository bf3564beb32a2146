import type { PayloadOf } from '../entry/entry'
import type { Line, LineElement } from './line'
import { elementsOf } from './line'

/** An edit of the line as it is entered in the field. */
export type LineEdit = PayloadOf<'lineEdit'>['edit']

/** Why an edit cannot be made; the sentence says what to do. */
export const LINE_EDIT_REFUSALS = {
  noSuchElement: 'There is no such element on the line any more; take the round along again and look.',
  noSuchSide: 'There is no such side of the line; choose one that is drawn.',
  idTaken: 'An element with this id stands on the line already; the edit was made before.',
  tagTaken: 'Another element has this tag; choose one that is free.',
  lastOfSide: 'This is the only element of its side; add another before it is struck.',
  otherLength: 'The two parts must be as long together as the element was; measure again or re-measure the element first.',
} as const
export type LineEditRefusalCode = keyof typeof LINE_EDIT_REFUSALS

/** An edit that cannot be made on this line, with its stable code. */
export class LineEditRefused extends Error {
  override readonly name = 'LineEditRefused'
  constructor(readonly code: LineEditRefusalCode) {
    super(LINE_EDIT_REFUSALS[code])
  }
}

/**
 * The line with an edit made, a new value; sides, faces and all other elements stay the very same objects. For the screen that makes the edit:
 * throws {@link LineEditRefused} for whatever a person should put right first.
 */
export function applyLineEdit(line: Line, edit: LineEdit): Line {
  const tags = new Map(elementsOf(line).map(element => [element.tag, element.id]))
  const wanted = edit.kind === 'add' ? [edit.element] : edit.kind === 'split' ? edit.into : edit.kind === 'rename' ? [{ id: edit.element, tag: edit.tag }] : []
  const owner = edit.kind === 'split' ? edit.element : null
  for (const { id, tag } of wanted) {
    const taken = tags.get(tag)
    if (taken !== undefined && taken !== id && taken !== owner) throw new LineEditRefused('tagTaken')
  }
  if (edit.kind === 'split') {
    if (edit.into[0].tag === edit.into[1].tag) throw new LineEditRefused('tagTaken')
    const whole = elementsOf(line).find(element => element.id === edit.element)
    if (whole && edit.into[0].length + edit.into[1].length !== whole.length) throw new LineEditRefused('otherLength')
  }
  return editLine(line, edit)
}

/**
 * Makes an edit that was entered already, where two devices may have chosen one tag or measured for themselves: nothing that stands in an entry is
 * dropped for that. Throws {@link LineEditRefused} only where there is no place for it.
 */
export function editLine(line: Line, edit: LineEdit): Line {
  const has = (id: string) => line.sides.some(side => side.elements.some(element => element.id === id))
  const put = (id: string, into: (element: LineElement) => LineElement[]): Line => {
    if (!has(id)) throw new LineEditRefused('noSuchElement')
    return { ...line, sides: line.sides.map(side => side.elements.some(element => element.id === id) ? { ...side, elements: side.elements.flatMap(element => element.id === id ? into(element) : [element]) } : side) }
  }
  switch (edit.kind) {
    case 'add': {
      if (has(edit.element.id)) throw new LineEditRefused('idTaken')
      const side = line.sides.find(side => side.key === edit.side)
      if (!side) throw new LineEditRefused('noSuchSide')
      const at = edit.after === null ? 0 : side.elements.findIndex(element => element.id === edit.after) + 1
      if (edit.after !== null && at === 0) throw new LineEditRefused('noSuchElement')
      return { ...line, sides: line.sides.map(one => one === side ? { ...one, elements: [...one.elements.slice(0, at), edit.element, ...one.elements.slice(at)] } : one) }
    }
    case 'split':
      if (has(edit.into[1].id)) throw new LineEditRefused('idTaken')
      return put(edit.element, () => [...edit.into])
    case 'rename':
      return put(edit.element, element => [{ ...element, tag: edit.tag, ...(edit.name ? { name: edit.name } : {}) }])
    case 'remeasure':
      return put(edit.element, element => [{ ...element, length: edit.length, height: edit.height, rise: edit.rise, bays: edit.bays }])
    case 'strike':
      if (line.sides.some(side => side.elements.length === 1 && side.elements[0]!.id === edit.element)) throw new LineEditRefused('lastOfSide')
      return put(edit.element, () => [])
  }
}
