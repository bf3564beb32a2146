import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { fold } from '#shared/round/fold'
import { isEnded } from '#shared/round/outcome'
import { readyToSign } from '#shared/round/readyToSign'
import { basisOf, bay, CHECKS, gap, GATE, RoundStory, RUN, RUN2 } from '../../../helpers/roundStory'
import { deeds, written } from '../../../helpers/storyDeeds'

const whole = { face: null, bay: null, from: null, height: null }
/** R1 and R2 each owe the gap, but one answer stands for the line; the ties are asked of each element. */
const basis = () => basisOf({ tasks: [
  ...[RUN, GATE, RUN2].map(element => ({ element, check: 'tie-ends', face: null, limits: [] })),
  ...[RUN, RUN2].map(element => ({ element, check: 'gap-below', face: null, limits: ['gap'], line: true as const })),
] })
const outcomeOf = (round: RoundStory, startsFrom?: ReturnType<typeof fold>) => fold(round.entries, round.bases, { basis: round.basis, startsFrom })
const gaps = (outcome: ReturnType<typeof fold>) => outcome.checks.filter(one => one.check === 'gap-below').map(one => [one.element, one.verdict])
const released = (outcome: ReturnType<typeof fold>) => outcome.elements.filter(one => one.released).map(one => one.element)
const tiesIn = (round: RoundStory) => [RUN, GATE, RUN2].forEach(element => round.reading({ element, check: 'tie-ends', place: whole }, { method: 'look', found: 'clear' }))

describe('a check that is answered once for the line', () => {
  it('is asked once, on the first element that calls for it', () => {
    expect(gaps(outcomeOf(new RoundStory(basis())))).toEqual([[RUN, 'notRead']])
  })
  it('is answered where it was read, and stays there', () => {
    const round = new RoundStory(basis())
    round.reading({ element: RUN2, check: 'gap-below', place: bay(3) }, gap(1))
    expect(gaps(outcomeOf(round))).toEqual([[RUN2, 'conforms']])
  })
  it('holds every element that calls for it until it is answered, and no other', () => {
    const round = new RoundStory(basis())
    tiesIn(round)
    expect(released(outcomeOf(round))).toEqual([GATE])
    round.reading({ element: RUN2, check: 'gap-below', place: bay(3) }, gap(1))
    expect(released(outcomeOf(round))).toEqual([RUN, GATE, RUN2])
    expect(readyToSign(outcomeOf(round), 'final').reasons).toEqual([])
  })
  it('keeps a finding where it was found, beside a reading elsewhere', () => {
    const round = new RoundStory(basis())
    round.reading({ element: RUN, check: 'gap-below', place: bay(1) }, gap(1))
    round.reading({ element: RUN2, check: 'gap-below', place: bay(2) }, gap(3), { tag: 'A1' })
    const outcome = outcomeOf(round)
    expect(gaps(outcome)).toEqual([[RUN, 'conforms'], [RUN2, 'doesNotConform']])
    expect(outcome.deficiencies.map(one => [one.tag, one.element])).toEqual([['A1', RUN2]])
  })
  it('is set aside by a word on the check, not by one on a whole element', () => {
    const round = new RoundStory(basis())
    round.write('setAside', { as: 'notInspected', why: 'noAccess', photos: [] }, { element: RUN })
    expect(gaps(outcomeOf(round))).toEqual([[RUN2, 'notRead']])
    const aside = new RoundStory(basis())
    aside.write('setAside', { as: 'notApplicable', why: 'notHere', photos: [] }, { element: RUN2, check: 'gap-below' })
    expect(gaps(outcomeOf(aside))).toEqual([[RUN2, 'notApplicable']])
    // Nobody came near any of it: that is said on the first.
    round.write('setAside', { as: 'notInspected', why: 'noAccess', photos: [] }, { element: RUN2 })
    expect(gaps(outcomeOf(round))).toEqual([[RUN, 'notInspected']])
  })
  it('goes to the next element when its first one is struck from the line', () => {
    const round = new RoundStory(basis())
    round.write('lineEdit', { edit: { kind: 'strike', element: RUN, reason: 'Never built.' } }, { element: RUN })
    expect(gaps(outcomeOf(round))).toEqual([[RUN2, 'notRead']])
  })
  it('comes back where a correction disturbed it, read there before or not', () => {
    const round = new RoundStory(basisOf({ ...basis(), checks: Object.values({ ...CHECKS, ties: { ...CHECKS.ties!, disturbs: ['gap-below'] } }) }))
    round.reading({ element: RUN, check: 'gap-below', place: bay(1) }, gap(1))
    const found = round.reading({ element: RUN2, check: 'tie-ends', place: bay(2) }, { method: 'look', found: 'finding', finding: 'tieEnd' }, { tag: 'A1' })
    round.correct([found])
    expect(gaps(outcomeOf(round))).toEqual([[RUN, 'conforms'], [RUN2, 'notRead']])
  })
  it('is still answered in the round that follows', () => {
    const before = new RoundStory(basis())
    before.write('setAside', { as: 'notApplicable', why: 'notHere', photos: [] }, { element: RUN2, check: 'gap-below' })
    expect(gaps(outcomeOf(new RoundStory(basis(), 9), outcomeOf(before)))).toEqual([[RUN2, 'notApplicable']])
    const read = new RoundStory(basis())
    read.reading({ element: RUN2, check: 'gap-below', place: bay(3) }, gap(1))
    expect(gaps(outcomeOf(new RoundStory(basis(), 9), outcomeOf(read)))).toEqual([[RUN2, 'conforms']])
  })
})

describe('laws of what is answered once for the line', () => {
  const story = (list: Parameters<typeof written>[0]) => written(list, new RoundStory(basis()))

  it('hold whatever people do: it is asked somewhere, each open finding stands on its element, and nothing that was read is lost', () => {
    fc.assert(fc.property(deeds, (list) => {
      const round = story(list)
      const outcome = outcomeOf(round)
      const shown = outcome.checks.filter(one => one.check === 'gap-below')
      expect(shown.length).toBeGreaterThan(0)
      for (const one of outcome.deficiencies.filter(one => one.check === 'gap-below' && !isEnded(one))) expect(shown.find(check => check.element === one.element)?.verdict).toBe('doesNotConform')
      const standing = new Set(outcome.elements.map(one => one.element))
      const told = new Set([...shown.flatMap(one => [...one.heads.map(head => head.entry), ...one.earlier]), ...outcome.waiting, ...outcome.ignored.map(one => one.entry)])
      const read = round.entries.filter(({ envelope }) => envelope.kind === 'reading' && envelope.check === 'gap-below' && standing.has(envelope.element!))
      expect(read.map(({ envelope }) => envelope.id).filter(id => !told.has(id))).toEqual([])
    }), { numRuns: 200 })
  }, 60_000)
  it('come to the same in any order', () => {
    fc.assert(fc.property(deeds, (list) => {
      const round = story(list)
      expect(fold([...round.entries].reverse(), round.bases, { basis: round.basis })).toEqual(outcomeOf(round))
    }), { numRuns: 100 })
  }, 60_000)
})
