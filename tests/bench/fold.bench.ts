import type { AnyEntry, ReadingValue } from '#shared/entry/entry'
import { makeEntry } from '#shared/entry/makeEntry'
import { readEntry } from '#shared/entry/readEntry'
import { elementsOf } from '#shared/line/line'
import { sha256 } from '#server/services/entry/sha256'
import { fold, foldWhole } from '#shared/round/fold'
import { foldOn } from '#shared/round/foldOn'
import { digestOf } from '#shared/record/canonicalJson'
import { basisOf, bay, element, JOB, ORGANISATION, PEOPLE, ROUND, uuid, WALK } from '../helpers/roundStory'
import { INCH } from '#shared/measure/length'
import type { Figure } from './measure'
import { compare } from './measure'

const READINGS = 10_000
const ELEMENTS = 200

/**
 * 10,000 readings of a long line: 200 runs, four checks each, twelve or thirteen places a check; one in twenty does not conform and is corrected
 * and read again. Folded, against JSON.parse of the same entries' texts.
 */
export default async function bench(): Promise<Figure[]> {
  const shape = basisOf()
  const checks = ['tie-ends', 'gap-below', 'post-spacing']
  const runs = Array.from({ length: ELEMENTS }, (_, at) => element(uuid(7, at), `R${at + 1}`, { bays: 17 }))
  const basis = {
    ...shape,
    line: { ...shape.line, sides: [{ key: 'A', name: 'Long', elements: runs }] },
    tasks: runs.flatMap(run => checks.map(check => ({ element: run.id, check, face: null, limits: check === 'gap-below' ? ['gap'] : [] }))),
  }
  const digest = digestOf(basis)
  const texts: { envelope: string, payload: string }[] = []
  let count = 0
  const write = (draft: { kind: 'reading' | 'correction', element: string, check: string, bay: number, answers?: string[], payload: object }): string => {
    count++
    const { wire, entry } = makeEntry({
      id: uuid(8, count), salt: count.toString(16).padStart(32, '5c0ffee7'), madeAt: '2026-11-30T09:00:00-05:00', organisation: ORGANISATION, job: JOB, round: ROUND, walk: WALK,
      author: PEOPLE.ana, device: uuid(5, 1), basis: digest, kind: draft.kind, element: draft.element, check: draft.check, place: bay(draft.bay), answers: draft.answers ?? [], payload: draft.payload as never,
    })
    texts.push(wire)
    return entry.envelope.id
  }
  for (let at = 0, readings = 0; readings < READINGS; at++) {
    const run = elementsOf(basis.line)[at % ELEMENTS]!
    const check = checks[Math.floor(at / ELEMENTS) % checks.length]!
    const place = 1 + Math.floor(at / ELEMENTS / checks.length)
    const bad = at % 20 === 0
    const value = (good: boolean): ReadingValue => check === 'gap-below'
      ? { method: 'measure', amount: (good ? 1 : 3) * INCH + at, text: good ? '1 in' : '3 in', system: 'imperial' }
      : good ? { method: 'look', found: 'clear' } : { method: 'look', found: 'finding', finding: 'tieEnd' }
    const found = write({ kind: 'reading', element: run.id, check, bay: place, payload: { value: value(!bad), photos: [], ...(bad ? { tag: `A${at % 9000 + 1}` } : {}) } })
    readings++
    if (!bad || readings >= READINGS) continue
    const fixed = write({ kind: 'correction', element: run.id, check, bay: place, answers: [found], payload: { photos: [], by: { account: PEOPLE.crew, name: 'Nilo Arce' } } })
    write({ kind: 'reading', element: run.id, check, bay: place, answers: [found, fixed], payload: { value: value(true), photos: [] } })
    readings++
  }
  const entries = texts.map(wire => (readEntry(wire) as { entry: AnyEntry }).entry)
  const bases = new Map([[digest, basis]])
  const ended = fold(entries, bases, { basis: digest }).deficiencies
  if (ended.length === 0 || ended.some(one => one.state !== 'endedCorrected')) throw new Error('The folded round is not the one that was written.')

  const parse = (wires: typeof texts) => wires.map(wire => [JSON.parse(wire.envelope), JSON.parse(wire.payload)])
  const some = texts.slice(0, 5000)
  // As they are walked: one element after the other.
  const walked = texts.map((wire, at) => ({ wire, entry: entries[at]! })).sort((a, b) => (a.entry.envelope.element! < b.entry.envelope.element! ? -1 : a.entry.envelope.element === b.entry.envelope.element ? 0 : 1))
  const newest = walked.slice(-2000)
  const earlier = foldWhole(walked.slice(0, -2000).map(one => one.entry), bases, { basis: digest })
  const goOn = () => {
    let held = earlier
    for (let at = 0; at < newest.length; at += 100) held = foldOn(held, newest.slice(at, at + 100).map(one => one.entry), bases, { basis: digest })
  }
  return [
    await compare('folding 10,000 readings, against JSON.parse of the same entries', 1, { ours: () => fold(entries, bases, { basis: digest }), base: () => parse(texts) }),
    // What a device or the accepting service does with each new batch.
    await compare('going on with the last 2,000 of them in batches of 100, against JSON.parse of those', null, { ours: goOn, base: () => parse(newest.map(one => one.wire)) }),
    // The accepting service reads each entry so: schema, canonical form and two digests come on top of the parsing.
    await compare('reading 5,000 entries strictly, against JSON.parse of them', 12, { ours: () => some.map(wire => readEntry(wire)), base: () => parse(some) }),
    await compare('the same with the server\'s own SHA-256', 4, { ours: () => some.map(wire => readEntry(wire, { sha256 })), base: () => parse(some) }),
  ]
}
