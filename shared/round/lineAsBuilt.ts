import type { PayloadOf } from '../entry/entry'
import type { LineEdit } from '../line/applyLineEdit'
import { editLine, LineEditRefused } from '../line/applyLineEdit'
import type { Line, LineElement } from '../line/line'
import { elementsOf } from '../line/line'
import type { RoundBasis } from './basis'
import type { EntryLinks } from './linkEntries'
import type { RoundOutcome } from './outcome'

/** Adding comes before what is done to what was added; striking comes last, so that "after that element" finds its place. */
const TURNS: readonly (readonly LineEdit['kind'][])[] = [['add', 'split'], ['remeasure'], ['rename'], ['strike']]

export interface LineAsBuilt {
  line: Line
  /** Elements that edits brought, with the element that they were split from. */
  brought: { element: LineElement, from: string | null }[]
  conflicts: RoundOutcome['conflicts']
  ignored: RoundOutcome['ignored']
}

/**
 * The line of a basis with the edits that were entered on the walk. Edits that follow one another are made in that order; what was added or split stays, also
 * when a newer line of the desk does not know of it yet; names, measures and strikes count only on the version of the line that they were made on, since
 * the desk has drawn over them. Two edits of one kind of one element that do not know of one another are a conflict.
 */
export function lineAsBuilt(basis: RoundBasis, bases: ReadonlyMap<string, RoundBasis>, links: EntryLinks, edits: readonly number[]): LineAsBuilt {
  const built: LineAsBuilt = { line: basis.line, brought: [], conflicts: [], ignored: [] }
  const replaced = new Set(edits.flatMap(at => links.counts[at] ? links.replaces[at]! : []))
  const standing = edits.flatMap((at) => {
    const { envelope, payload, digest } = links.entries[at]!
    const edit = (payload as PayloadOf<'lineEdit'> | null)?.edit
    return links.counts[at] === 0 || replaced.has(at) || !edit ? [] : [{ at, id: envelope.id, digest, edit, basis: envelope.basis, depth: links.depth[at]! }]
  })
  standing.sort((a, b) => a.depth - b.depth || (a.digest < b.digest ? -1 : 1))
  const wanted = standing.filter(({ edit, basis: of }) => {
    const version = of === null ? undefined : bases.get(of)?.line.version
    return edit.kind === 'add' || edit.kind === 'split' || version === undefined || version === basis.line.version
  })
  for (const kinds of TURNS) {
    // An element may be added after one that was itself added: go round until nothing more finds its place.
    let left = wanted.filter(({ edit }) => kinds.includes(edit.kind))
    for (let before = -1; left.length > 0 && left.length !== before;) {
      before = left.length
      left = left.filter(({ edit }) => !make(built, edit))
    }
    built.ignored.push(...left.map(({ id }) => ({ entry: id, why: 'noSuchElement' as const })))
  }
  built.conflicts = [...sideBySide(wanted, links), ...sameTag(wanted, built.line)].sort((a, b) => a.entries.join() < b.entries.join() ? -1 : 1)
  return built
}

/** Makes one edit; false when there is no place for it (yet). */
function make(built: LineAsBuilt, edit: LineEdit): boolean {
  try {
    built.line = editLine(built.line, edit)
  }
  catch (error) {
    if (!(error instanceof LineEditRefused)) throw error
    // The desk has taken it into its line already.
    return error.code === 'idTaken'
  }
  if (edit.kind === 'add') built.brought.push({ element: edit.element, from: null })
  if (edit.kind === 'split') built.brought.push({ element: edit.into[1], from: edit.element })
  return true
}

interface Standing { at: number, id: string, edit: LineEdit }

function sideBySide(edits: readonly Standing[], links: EntryLinks): RoundOutcome['conflicts'] {
  const groups = new Map<string, Standing[]>()
  for (const one of edits) {
    if (one.edit.kind === 'add' || one.edit.kind === 'strike') continue
    const key = `${one.edit.kind} ${one.edit.element}`
    groups.set(key, [...groups.get(key) ?? [], one])
  }
  // A later edit that names the earlier one knows of it: only what no other of the group names stands side by side.
  return [...groups.values()].flatMap((group) => {
    const named = new Set(group.flatMap(one => links.answers[one.at]!))
    const tips = group.filter(one => !named.has(one.at))
    return tips.length > 1 ? [{ of: 'line' as const, entries: tips.map(one => one.id).sort() }] : []
  })
}

/** Two devices may have chosen the same tag for what they added. */
function sameTag(edits: readonly Standing[], line: Line): RoundOutcome['conflicts'] {
  const owners = new Map<string, string[]>()
  for (const { tag, id } of elementsOf(line)) owners.set(tag, [...owners.get(tag) ?? [], id])
  return [...owners.values()].filter(ids => ids.length > 1).flatMap((ids) => {
    const named = edits.filter(({ edit }) => edit.kind === 'add' ? ids.includes(edit.element.id) : edit.kind === 'split' ? edit.into.some(one => ids.includes(one.id)) : edit.kind === 'rename' && ids.includes(edit.element))
    return named.length > 0 ? [{ of: 'line' as const, entries: named.map(one => one.id).sort() }] : []
  })
}

/** Ids of elements that stand next to each, along the whole line. */
export function neighboursOf(line: Line): Map<string, string[]> {
  const ids = elementsOf(line).map(element => element.id)
  return new Map(ids.map((id, at) => [id, [ids[at - 1], ids[at + 1]].filter(one => one !== undefined)]))
}
