import fc from 'fast-check'
import { expect, it, vi } from 'vitest'
import type { KeptEntry } from '#shared/entry/entry'
import { fold } from '#shared/round/fold'
import type { Folded } from '#shared/round/fold'
import { foldOn } from '#shared/round/foldOn'
import { basisOf, bay, element, gap, GATE, look, PEOPLE, RoundStory, RUN, RUN2, uuid } from '../../../helpers/roundStory'
import { deeds, written } from '../../../helpers/storyDeeds'

vi.setConfig({ testTimeout: 120_000 })
const RUNS = { numRuns: Number(process.env.LAW_RUNS ?? 150) }

/** A story on a line in which so many elements, on which nothing happens but now and then a look, stand between those of the deeds; one check may be answered once for the line. */
function onLongLine(between: readonly number[], ofTheLine: string | null = null): RoundStory {
  const shape = basisOf()
  const [run, gate, run2] = shape.line.sides[0]!.elements
  let count = 0
  const plain = (many: number) => Array.from({ length: many }, () => element(uuid(7, 100 + count++), `P${count}`, { bays: 2 }))
  const elements = [...plain(between[0]!), run!, ...plain(between[1]!), gate!, ...plain(between[2]!), run2!, ...plain(between[3]!)]
  const tasks = elements.flatMap(one => shape.tasks.some(task => task.element === one.id) ? shape.tasks.filter(task => task.element === one.id) : [{ element: one.id, check: 'tie-ends', face: null, limits: [] }])
    .map(task => task.check === ofTheLine ? { ...task, line: true as const } : task)
  return new RoundStory({ ...shape, line: { ...shape.line, sides: [{ ...shape.line.sides[0]!, elements }] }, tasks })
}

const ofTheLines = fc.constantFrom(null, 'gap-below', 'tie-ends')
const betweens = fc.array(fc.nat(5), { minLength: 4, maxLength: 4 })
/** Notes and looks that are strewn in: about what, naming which, and not before which turn. */
const strewn = fc.array(fc.record({ at: fc.nat(40), element: fc.nat(3), names: fc.array(fc.nat(40), { maxLength: 2 }), look: fc.boolean() }), { maxLength: 4 })

it('comes to what folding all comes to, in whatever pieces and whatever order the entries come', () => {
  let kept = 0
  fc.assert(fc.property(deeds, betweens, ofTheLines, strewn, fc.array(fc.integer({ min: 1, max: 6 }), { minLength: 1, maxLength: 12 }), fc.option(fc.array(fc.nat(7), { minLength: 3, maxLength: 20 })), (list, between, ofTheLine, extra, pieces, late) => {
    const story = written(list, onLongLine(between, ofTheLine))
    const turns = new Map(story.entries.map((entry, at) => [entry.envelope.id, at]))
    for (const one of extra) {
      const named = one.names.map(at => story.entries[at % story.entries.length]!).filter(entry => entry.envelope.kind !== 'walkOpened').map(entry => entry.envelope.id)
      const id = one.look
        ? story.reading({ element: uuid(7, 100 + one.at % 6), check: one.element === 0 ? 'gap-below' : 'tie-ends' }, one.element === 0 ? gap(3) : look('clear'))
        : story.write('note', { words: 'Seen', photos: [] }, { element: [null, RUN, GATE, RUN2][one.element]!, check: null, answers: named, author: PEOPLE.bo })
      turns.set(id, Math.max(one.at, ...named.map(other => turns.get(other)!)) + 0.5)
    }
    // Now and then as several devices send them: targets after those who name them.
    const turnOf = (entry: KeptEntry, at: number) => turns.get(entry.envelope.id)! + (late ? late[at % late.length]! : 0)
    const entries: KeptEntry[] = story.entries.map((entry, at) => ({ entry, turn: turnOf(entry, at) })).sort((a, b) => a.turn - b.turn).map(({ entry }) => entry)
    const options = { basis: story.basis }
    let held: Folded | null = null
    for (let at = 0, piece = 0; at < entries.length; piece++) {
      const end = at + pieces[piece % pieces.length]!
      const before: Folded | null = held
      // Now and then a transaction goes on and is rolled back: what it left behind must not matter.
      if (piece % 3 === 1) foldOn(before, entries.slice(at + 1, end + 2), story.bases, options)
      held = foldOn(before, entries.slice(at, end), story.bases, options)
      expect(held.outcome).toEqual(fold(entries.slice(0, end), story.bases, options))
      if (before) kept += held.outcome.checks.filter((check, index) => check === before.outcome.checks[index]).length
      at = end
    }
  }), RUNS)
  // That it was not folded whole each time: what did not change is the same object.
  expect(kept).toBeGreaterThan(2 * RUNS.numRuns)
})

it('goes on where one check is answered once for the line and nothing new speaks of it', () => {
  const story = onLongLine([0, 3, 3, 0], 'gap-below')
  story.open()
  const before = foldOn(null, story.entries, story.bases)
  story.reading({ element: RUN2, check: 'tie-ends' }, look('clear'))
  const after = foldOn(before, story.entries.slice(-1), story.bases)
  expect(after.outcome).toEqual(fold(story.entries, story.bases))
  expect(after.outcome.checks.filter((check, at) => check === before.outcome.checks[at]).length).toBeGreaterThan(3)
})

it('folds only what new entries can touch', () => {
  const story = onLongLine([0, 3, 3, 0])
  story.open()
  const found = story.reading({ element: RUN, check: 'gap-below', place: bay(1) }, gap(3))
  story.reading({ element: RUN2, check: 'gap-below', place: bay(1) }, gap(3))
  const before = foldOn(null, story.entries, story.bases)
  story.correct([found])
  const after = foldOn(before, story.entries.slice(-1), story.bases)
  const changed = new Set(after.outcome.checks.filter((check, at) => check !== before.outcome.checks[at]).map(check => check.element))
  // Its own element and the one beside it, whose ties the correction disturbs.
  expect([...changed]).toEqual([RUN, uuid(7, 100)])
  expect(after.outcome.checks.find(check => check.element === uuid(7, 100))!.disturbedBy).toHaveLength(1)
})

it('folds all anew where an entry comes a second time, waits, or moves the ground', () => {
  const story = onLongLine([0, 2, 2, 0])
  story.open()
  const found = story.reading({ element: RUN, check: 'tie-ends', place: bay(1) }, look('finding'))
  const held = foldOn(null, story.entries, story.bases)
  const erased = { ...story.get(found), payload: null } as KeptEntry
  expect(foldOn(held, [erased], story.bases).outcome).toEqual(fold([...story.entries, erased], story.bases))
  expect(foldOn(held, [erased], story.bases).outcome.erased).toEqual([found])

  const fixed = story.correct([found])
  story.reading({ element: RUN, check: 'tie-ends', place: bay(1), answers: [found, fixed] }, look('clear'))
  const [correction, again] = story.entries.slice(-2)
  const waiting = foldOn(held, [again!], story.bases)
  expect(waiting.outcome.waiting).toEqual([again!.envelope.id])
  const settled = foldOn(waiting, [correction!], story.bases)
  expect(settled.outcome).toEqual(fold(story.entries, story.bases))
  expect(settled.outcome.waiting).toEqual([])

  story.write('lineEdit', { edit: { kind: 'strike', element: RUN2, reason: 'Drawn twice' } }, { element: RUN2 })
  expect(foldOn(settled, story.entries.slice(-1), story.bases).outcome).toEqual(fold(story.entries, story.bases))
})
