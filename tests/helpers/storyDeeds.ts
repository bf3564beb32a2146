import fc from 'fast-check'
import { bay, gap, GATE, look, PEOPLE, RoundStory, RUN, RUN2, trial } from './roundStory'

/** One thing that somebody does; numbers choose among what stands, so that any sequence makes sense or is plainly nonsense, as on a bad day. */
export type Deed = { what: 'read' | 'reread' | 'replace' | 'correct' | 'accept' | 'refuse' | 'refer' | 'decide' | 'void' | 'settle' | 'assign' | 'dispute' | 'aside' | 'strike' | 'remeasure', subject: number, other: number, good: boolean, bay: number, who: number }
export const deeds = fc.array(fc.record<Deed>({
  what: fc.constantFrom('read', 'read', 'read', 'reread', 'reread', 'replace', 'correct', 'correct', 'accept', 'refuse', 'refer', 'decide', 'void', 'settle', 'assign', 'dispute', 'aside', 'strike', 'remeasure'),
  subject: fc.nat(30), other: fc.nat(30), good: fc.boolean(), bay: fc.integer({ min: 1, max: 3 }), who: fc.nat(4),
}), { maxLength: 25 })

const SUBJECTS = [
  { element: RUN, check: 'gap-below', value: (good: boolean) => gap(good ? 1 : 3) },
  { element: RUN, check: 'tie-ends', value: (good: boolean) => look(good ? 'clear' : 'finding') },
  { element: RUN, check: 'post-spacing', value: (good: boolean) => look(good ? 'clear' : 'finding') },
  { element: GATE, check: 'self-closing', value: (good: boolean) => trial(good ? 3 : 1) },
  { element: GATE, check: 'tie-ends', value: (good: boolean) => look(good ? 'clear' : 'finding') },
  { element: RUN2, check: 'gap-below', value: (good: boolean) => gap(good ? 1 : 3) },
]

/** The story that these deeds come to. */
export function written(list: readonly Deed[], it = new RoundStory()): RoundStory {
  it.open()
  for (const deed of list) {
    const people = Object.values(PEOPLE)
    const author = people[deed.who]!
    const subject = SUBJECTS[deed.subject % SUBJECTS.length]!
    const readings = it.entries.filter(entry => entry.envelope.kind === 'reading')
    const some = readings[deed.subject % Math.max(readings.length, 1)]
    if (deed.what === 'read') it.reading({ ...subject, place: bay(deed.bay), author }, subject.value(deed.good))
    if (deed.what === 'aside') it.write('setAside', { as: 'notInspected', why: 'noAccess', photos: [] }, { element: subject.element, check: subject.check, author })
    if (deed.what === 'strike') it.write('lineEdit', { edit: { kind: 'strike', element: RUN2, reason: 'Drawn twice' } }, { element: RUN2, author })
    if (deed.what === 'remeasure') it.write('lineEdit', { edit: { kind: 'remeasure', element: RUN, length: 1_000_000 * deed.bay, height: 1_000_000, rise: 0, bays: deed.bay } }, { element: RUN, author })
    if (!some) continue
    const { id, element, check, place } = some.envelope
    const of = SUBJECTS.find(one => one.element === element && one.check === check)!
    const here = it.entries.filter(entry => entry.envelope.check === check && entry.envelope.element === element)
    const another = here[deed.other % here.length]!
    const corrections = it.entries.filter(entry => entry.envelope.kind === 'correction')
    const correction = corrections[deed.other % Math.max(corrections.length, 1)]
    const about = { element: element!, check: check!, place, author }
    if (deed.what === 'reread') it.reading({ ...about, answers: [id, ...(correction ? [correction.envelope.id] : [])] }, of.value(deed.good))
    if (deed.what === 'replace') it.reading({ ...about, replaces: [id] }, of.value(deed.good), deed.bay === 1 ? {} : { reason: 'Typed wrong' })
    if (deed.what === 'correct') it.correct([id])
    if (deed.what === 'accept') it.accept([id])
    if (deed.what === 'refuse') it.accept([id], false)
    if (deed.what === 'refer') it.refer(id)
    if (deed.what === 'decide') it.decide(id)
    if (deed.what === 'void') it.inError(id, author)
    if (deed.what === 'settle' && another.envelope.kind === 'reading' && another !== some) it.settle(id, [another.envelope.id], author)
    if (deed.what === 'assign') it.assign([id, ...(['assignment', 'cannot', 'correction'].includes(another.envelope.kind) ? [another.envelope.id] : [])])
    if (deed.what === 'dispute') it.write('disputed', { words: 'Not ours' }, { ...it.about([id]), author })
  }
  return it
}
