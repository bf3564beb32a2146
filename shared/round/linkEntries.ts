import type { AnyEntry, KeptEntry } from '../entry/entry'
import { isKnown } from '../entry/entry'
import { ENTRY_RULES, mayName } from '../entry/entryRules'
import type { RoundOutcome } from './outcome'

/** The entries of a round with their links resolved to positions; a position is an index into `entries` and means nothing outside. */
export interface EntryLinks {
  /** Known entries, each once. */
  entries: AnyEntry[]
  position: Map<string, number>
  /** 1 where an entry counts; 0 where it waits or is set aside. */
  counts: Uint8Array
  /** Positions of the entries that name others, targets first. */
  order: number[]
  /** How many links an entry stands from one that names nothing: for display in the order in which entries answer one another. */
  depth: Int32Array
  replaces: (readonly number[])[]
  answers: (readonly number[])[]
  waiting: string[]
  unknown: string[]
  ignored: RoundOutcome['ignored']
  refusedLinks: RoundOutcome['refusedLinks']
}

const NONE: readonly number[] = Object.freeze([])

/**
 * Resolves what entries name. An entry whose target has not come waits, and whoever names it waits too; links in a circle and links that the rules of naming
 * do not allow are not followed; two entries under one id are set aside both. No order of the entries matters.
 * `settledIds` are ids of earlier rounds that may be named without effect.
 */
export function linkEntries(given: readonly KeptEntry[], settledIds: ReadonlySet<string> = new Set()): EntryLinks {
  const entries: AnyEntry[] = []
  const position = new Map<string, number>()
  const unknown = new Set<string>()
  const clashes = new Set<string>()
  for (const entry of given) {
    const { id } = entry.envelope
    if (!isKnown(entry)) {
      unknown.add(id)
      continue
    }
    const before = position.get(id)
    if (before === undefined) {
      position.set(id, entries.length)
      entries.push(entry)
    }
    else if (entries[before]!.digest !== entry.digest) clashes.add(id)
    // One copy may come from a device that has not heard of the erasure yet.
    else if (entry.payload === null) entries[before] = entry
  }

  const counts = new Uint8Array(entries.length).fill(1)
  const depth = new Int32Array(entries.length)
  const replaces: (readonly number[])[] = new Array(entries.length).fill(NONE)
  const answers: (readonly number[])[] = new Array(entries.length).fill(NONE)
  const links: EntryLinks = { entries, position, counts, order: [], depth, replaces, answers, waiting: [], unknown: [...unknown].sort(), ignored: [], refusedLinks: [] }

  const linked: number[] = []
  const missing = new Set<number>()
  const resolve = (ids: readonly string[], at: number): readonly number[] => {
    if (ids.length === 0) return NONE
    const found: number[] = []
    for (const id of ids) {
      const target = clashes.has(id) ? undefined : position.get(id)
      if (target !== undefined) found.push(target)
      else if (!settledIds.has(id)) missing.add(at)
    }
    return found
  }
  for (let at = 0; at < entries.length; at++) {
    const { envelope } = entries[at]!
    if (clashes.size > 0 && clashes.has(envelope.id)) {
      counts[at] = 0
      links.ignored.push({ entry: envelope.id, why: 'twoEntriesOneId' })
    }
    else if (envelope.answers.length + envelope.replaces.length > 0) {
      replaces[at] = resolve(envelope.replaces, at)
      answers[at] = resolve(envelope.answers, at)
      linked.push(at)
    }
  }
  if (linked.length === 0) return links
  sortLinked(links, linked, missing)
  for (const at of links.order) applyRules(links, at)
  links.waiting.sort()
  return links
}

/** Puts targets first, lets wait what must, and cuts circles. */
function sortLinked(links: EntryLinks, linked: readonly number[], missing: ReadonlySet<number>): void {
  const { entries, replaces, answers, counts, depth, order } = links
  const pending = new Int32Array(entries.length)
  const namedBy: (number[] | undefined)[] = new Array(entries.length)
  const isLinked = new Uint8Array(entries.length)
  for (const at of linked) isLinked[at] = 1
  const targetsOf = (at: number) => replaces[at]!.length === 0 ? answers[at]! : answers[at]!.length === 0 ? replaces[at]! : [...replaces[at]!, ...answers[at]!]
  for (const at of linked) {
    for (const target of targetsOf(at)) {
      if (isLinked[target] === 0) continue
      pending[at]!++
      ;(namedBy[target] ??= []).push(at)
    }
  }
  const wait = (at: number) => {
    counts[at] = 0
    links.waiting.push(entries[at]!.envelope.id)
  }
  const place = (at: number) => {
    for (const target of targetsOf(at)) depth[at] = Math.max(depth[at]!, depth[target]! + 1)
    order.push(at)
  }
  const ready = linked.filter(at => pending[at] === 0)
  const reached = new Uint8Array(entries.length)
  for (let next = 0; next < ready.length; next++) {
    const at = ready[next]!
    reached[at] = 1
    if (missing.has(at) || targetsOf(at).some(target => counts[target] === 0)) wait(at)
    else place(at)
    for (const by of namedBy[at] ?? []) if (--pending[by]! === 0) ready.push(by)
  }
  if (ready.length === linked.length) return

  // What is left stands on a circle or names one that does. First whatever waits, then the links among the rest are cut.
  const left = linked.filter(at => reached[at] === 0)
  const waitingNow = left.filter(at => missing.has(at) || targetsOf(at).some(target => counts[target] === 0))
  waitingNow.forEach(wait)
  for (let next = 0; next < waitingNow.length; next++) {
    for (const by of namedBy[waitingNow[next]!] ?? []) {
      if (counts[by] === 0) continue
      wait(by)
      waitingNow.push(by)
    }
  }
  const circling = new Set(left.filter(at => counts[at] === 1))
  for (const at of circling) {
    for (const list of [replaces, answers]) {
      list[at] = list[at]!.filter((target) => {
        if (!circling.has(target)) return true
        links.refusedLinks.push({ entry: entries[at]!.envelope.id, target: entries[target]!.envelope.id, why: 'cycle' })
        return false
      })
    }
  }
  for (const at of circling) place(at)
}

/** The rules of naming (shared/entry/entryRules.ts) for one entry whose targets are known. */
function applyRules(links: EntryLinks, at: number): void {
  const { entries, replaces, answers, counts, ignored, refusedLinks } = links
  const { envelope } = entries[at]!
  for (const [list, name] of [[replaces, 'replaces'], [answers, 'answers']] as const) {
    const kept = list[at]!
    for (const target of kept) {
      if (mayName(envelope, name, entries[target]!.envelope)) continue
      refusedLinks.push({ entry: envelope.id, target: entries[target]!.envelope.id, why: 'kindOrSubject' })
      list[at] = list[at]!.filter(one => one !== target)
    }
  }
  const wanted = ENTRY_RULES[envelope.kind].readings
  if (wanted === 'any') return
  const readings = answers[at]!.filter(target => entries[target]!.envelope.kind === 'reading')
  const why = readings.length === 0 || (wanted === 'one' && readings.length > 1)
    ? 'namesNoReading'
    : envelope.kind === 'enteredInError' && entries[readings[0]!]!.envelope.author === envelope.author ? 'ownReading' : null
  if (why === null) return
  counts[at] = 0
  ignored.push({ entry: envelope.id, why })
}
