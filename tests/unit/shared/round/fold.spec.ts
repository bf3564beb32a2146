// Over 400 lines: one rule of the fold a test, side by side, so that what contracts.md 2 says can be read through in one place.
import { describe, expect, it } from 'vitest'
import type { AnyEntry, Place } from '#shared/entry/entry'
import { INCH } from '#shared/measure/length'
import { fold } from '#shared/round/fold'
import { basisOf, bay, element, gap, GATE, look, PEOPLE, RoundStory, RUN, RUN2, trial, uuid } from '../../../helpers/roundStory'

const GAP = { element: RUN, check: 'gap-below' }
const TIES = { element: RUN, check: 'tie-ends' }
const CLOSING = { element: GATE, check: 'self-closing' }
const SPACING = { element: RUN, check: 'post-spacing' }
function story() {
  const it = new RoundStory()
  it.open()
  return it
}
const outcomeOf = (it: RoundStory) => fold(it.entries, it.bases)
const checkOf = (it: RoundStory, { element, check }: { element: string, check: string }) => outcomeOf(it).checks.find(one => one.element === element && one.check === check)!
const stateOf = (it: RoundStory, id: string) => outcomeOf(it).deficiencies.find(one => one.id === id)?.state
const elementOf = (it: RoundStory, id: string) => outcomeOf(it).elements.find(one => one.element === id)!

describe('readings at places', () => {
  it('leaves what nobody read as not read, and says so of the element', () => {
    const round = outcomeOf(story())
    expect(round.checks.map(check => check.verdict)).toEqual(Array(8).fill('notRead'))
    expect(round.elements[0]).toEqual({ element: RUN, verdict: 'notRead', settled: false, released: false, outOfUse: false, tasks: 3, answered: 0 })
    expect(round.tally).toMatchObject({ notRead: 8, conforms: 0 })
  })

  it('adds readings at different places up and lets the worst govern', () => {
    const it = story()
    const good = it.reading({ ...GAP, place: bay(1) }, gap(1))
    const bad = it.reading({ ...GAP, place: bay(2) }, gap(2.5))
    const check = checkOf(it, GAP)
    expect(check.verdict).toBe('doesNotConform')
    expect(check.governs).toBe(bad)
    expect(check.heads.map(head => [head.entry, head.margin, head.disagreesWith])).toEqual([[bad, -INCH / 2, []], [good, INCH, []]])
  })

  it('lets only readings at the same place disagree, and the worse count until a person settles it', () => {
    const it = story()
    const bad = it.reading({ ...GAP, place: bay(2, 10) }, gap(2.5))
    const good = it.reading({ ...GAP, place: bay(2, 16), author: PEOPLE.bo }, gap(1.5))
    const far = it.reading({ ...GAP, place: bay(2, 17) }, gap(1.5))
    const check = checkOf(it, GAP)
    expect(check.verdict).toBe('doesNotConform')
    expect(Object.fromEntries(check.heads.map(head => [head.entry, head.disagreesWith]))).toEqual({ [bad]: [good], [good]: [bad], [far]: [] })
    const word = it.settle(good, [bad])
    const after = checkOf(it, GAP)
    expect(after).toMatchObject({ verdict: 'conforms', settled: true })
    expect(after.heads.find(head => head.entry === bad)).toMatchObject({ overruledBy: word, disagreesWith: [] })
    expect(stateOf(it, bad)).toBe('endedInError')
  })

  it('does not let people settle their own finding away, nor settle what they did not name', () => {
    const it = story()
    const bad = it.reading({ ...GAP, place: bay(2) }, gap(2.5))
    const good = it.reading({ ...GAP, place: bay(2), author: PEOPLE.bo }, gap(1.5))
    const word = it.settle(good, [bad], PEOPLE.ana)
    expect(outcomeOf(it).ignored).toEqual([{ entry: word, why: 'ownReading' }])
    expect(checkOf(it, GAP).verdict).toBe('doesNotConform')
    it.settle(good, [bad], PEOPLE.manager)
    expect(checkOf(it, GAP).verdict).toBe('conforms')
    const later = it.reading({ ...GAP, place: bay(2), author: PEOPLE.crew }, gap(3))
    expect(checkOf(it, GAP)).toMatchObject({ verdict: 'doesNotConform', governs: later })
  })

  it('leaves a disagreement as it was when two settlements contradict one another', () => {
    const it = story()
    const bad = it.reading({ ...GAP, place: bay(2) }, gap(2.5))
    const good = it.reading({ ...GAP, place: bay(2), author: PEOPLE.bo }, gap(1.5))
    it.settle(good, [bad])
    it.settle(bad, [good])
    expect(checkOf(it, GAP)).toMatchObject({ verdict: 'doesNotConform', governs: bad })
  })

  it('lets a settlement fall when the reading that it names is replaced', () => {
    const it = story()
    const bad = it.reading({ ...GAP, place: bay(2) }, gap(2.5))
    const good = it.reading({ ...GAP, place: bay(2), author: PEOPLE.bo }, gap(1.5))
    const word = it.settle(good, [bad])
    it.reading({ ...GAP, place: bay(2), author: PEOPLE.bo, replaces: [good] }, gap(1.75))
    expect(outcomeOf(it).ignored).toEqual([{ entry: word, why: 'fallen' }])
    expect(stateOf(it, bad)).toBe('open')
  })

  it('measures distances from both ends on one element', () => {
    const it = story()
    const fromEnd: Place = { face: null, bay: null, from: { end: 'end', distance: 80 * INCH }, height: null }
    const fromStart: Place = { face: null, bay: null, from: { end: 'start', distance: 400 * INCH }, height: null }
    const a = it.reading({ ...GAP, place: fromEnd }, gap(1))
    const b = it.reading({ ...GAP, place: fromStart }, gap(3))
    expect(checkOf(it, GAP).heads.find(head => head.entry === b)!.disagreesWith).toEqual([a])
  })

  it('wants every bay where bays are answered one by one; a look at the whole run answers them all', () => {
    const it = story()
    for (const number of [1, 2, 3]) it.reading({ ...SPACING, place: bay(number) }, look('clear'))
    expect(checkOf(it, SPACING)).toMatchObject({ verdict: 'notRead', baysMissing: 1 })
    it.write('setAside', { as: 'notInspected', why: 'noAccess', photos: [] }, { ...SPACING, place: bay(4) })
    expect(checkOf(it, SPACING)).toMatchObject({ verdict: 'notInspected', baysMissing: 0 })
    const whole = story()
    whole.reading(SPACING, look('clear'))
    expect(checkOf(whole, SPACING)).toMatchObject({ verdict: 'conforms', baysMissing: 0 })
  })

  it('shows a measure over unfinished ground as read, and does not release the element on it', () => {
    const it = story()
    it.reading(GAP, gap(4), { groundUnfinished: true })
    expect(checkOf(it, GAP)).toMatchObject({ verdict: 'groundNotFinished' })
    expect(outcomeOf(it).deficiencies).toEqual([])
    const sharp = it.reading(TIES, look('finding'), { groundUnfinished: true })
    expect(stateOf(it, sharp)).toBe('open')
  })

  it('records a measure without a limit, and a trial that was not made to its end as not read', () => {
    const basis = basisOf()
    const it = new RoundStory({ ...basis, tasks: basis.tasks.map(task => ({ ...task, limits: [] })) })
    it.open()
    it.reading(GAP, gap(9))
    expect(checkOf(it, GAP).verdict).toBe('noLimit')
    it.reading(CLOSING, trial(2, 2))
    expect(checkOf(it, CLOSING).verdict).toBe('notRead')
    it.reading(CLOSING, trial(3))
    const [worst] = checkOf(it, CLOSING).heads
    expect(worst!.verdict).toBe('notRead')
  })

  it('takes a group only for looks that may be grouped, and a finding however it was entered', () => {
    const it = story()
    const group = uuid(9, 1)
    it.reading(TIES, look('clear'), { group })
    expect(checkOf(it, TIES).verdict).toBe('conforms')
    const wrong = it.reading(SPACING, look('clear'), { group })
    const method = it.reading(GAP, look('clear'))
    expect(checkOf(it, SPACING).verdict).toBe('notRead')
    expect(outcomeOf(it).ignored).toEqual([{ entry: wrong, why: 'groupNotAllowed' }, { entry: method, why: 'methodDiffers' }])
    const seen = it.reading(GAP, look('finding'))
    expect(stateOf(it, seen)).toBe('open')
  })

  it('keeps a finding where nobody asked for one', () => {
    const it = story()
    const found = it.reading({ element: GATE, check: 'gap-below' }, look('finding'))
    expect(checkOf(it, { element: GATE, check: 'gap-below' })).toMatchObject({ verdict: 'doesNotConform', governs: found })
    const unknown = it.reading({ element: GATE, check: 'no-such-check' }, look('finding'))
    expect(outcomeOf(it).ignored).toEqual([{ entry: unknown, why: 'notInBasis' }])
  })
})

describe('replacing', () => {
  it('counts the newer word and prints both', () => {
    const it = story()
    const first = it.reading(GAP, gap(1))
    const second = it.reading({ ...GAP, replaces: [first] }, gap(1.5))
    expect(checkOf(it, GAP)).toMatchObject({ heads: [{ entry: second }], earlier: [first] })
  })

  it('wants a reason for replacing what does not conform; the deficiency stays until a second person says that it was an error', () => {
    const it = story()
    const bad = it.reading(GAP, gap(21))
    const silent = it.reading({ ...GAP, replaces: [bad] }, gap(2))
    expect(outcomeOf(it).refusedLinks).toEqual([{ entry: silent, target: bad, why: 'noReason' }])
    expect(checkOf(it, GAP)).toMatchObject({ verdict: 'doesNotConform', governs: bad })

    it.reading({ ...GAP, replaces: [bad] }, gap(2), { reason: 'Typed 21 for 2.1' })
    expect(checkOf(it, GAP)).toMatchObject({ verdict: 'doesNotConform', earlier: [bad] })
    expect(stateOf(it, bad)).toBe('open')
    it.inError(bad)
    expect(stateOf(it, bad)).toBe('endedInError')
    expect(checkOf(it, GAP)).toMatchObject({ verdict: 'conforms', settled: true })
  })

  it('goes on with the same deficiency when the newer word does not conform either', () => {
    const it = story()
    const bad = it.reading(GAP, gap(21), { tag: 'B1' })
    const still = it.reading({ ...GAP, replaces: [bad] }, gap(2.5), { reason: 'Typed 21 for 2.5' })
    expect(outcomeOf(it).deficiencies).toMatchObject([{ id: bad, tag: 'B1', state: 'open', history: [bad, still], standing: [{ entry: still, kind: 'reading' }] }])
  })

  it('does not void a reading by its own author, and brings back what a voided reading had replaced', () => {
    const it = story()
    const good = it.reading(GAP, gap(1))
    const bad = it.reading({ ...GAP, replaces: [good] }, gap(5))
    const own = it.inError(bad, PEOPLE.ana)
    expect(outcomeOf(it).ignored).toEqual([{ entry: own, why: 'ownReading' }])
    it.inError(bad)
    expect(checkOf(it, GAP)).toMatchObject({ verdict: 'conforms', governs: good })
    expect(stateOf(it, bad)).toBe('endedInError')
  })
})

describe('deficiencies', () => {
  it('is not ended by a correction, only by a conforming reading that names finding and correction', () => {
    const it = story()
    const bad = it.reading({ ...GAP, place: bay(2) }, gap(3), { tag: 'B1' })
    const fixed = it.correct([bad])
    expect(outcomeOf(it).deficiencies).toMatchObject([{ state: 'corrected', standing: [{ entry: bad }, { entry: fixed, kind: 'correction' }] }])
    expect(checkOf(it, GAP).verdict).toBe('doesNotConform')

    const blind = it.reading({ ...GAP, place: bay(2) }, gap(1))
    expect(stateOf(it, bad)).toBe('corrected')
    expect(checkOf(it, GAP).heads.find(head => head.entry === blind)!.disagreesWith).toEqual([bad])
    it.reading({ ...GAP, place: bay(2), answers: [bad] }, gap(1))
    expect(stateOf(it, bad)).toBe('corrected')

    const again = it.reading({ ...GAP, place: bay(2), answers: [bad, fixed] }, gap(1))
    expect(stateOf(it, bad)).toBe('endedCorrected')
    expect(checkOf(it, GAP)).toMatchObject({ verdict: 'conforms', settled: true, earlier: [bad] })
    it.inError(again)
    expect(stateOf(it, bad)).toBe('corrected')
  })

  it('stays open under the same tag when it is read again and still does not conform', () => {
    const it = story()
    const bad = it.reading({ ...GAP, place: bay(2) }, gap(3), { tag: 'B1' })
    const first = it.correct([bad])
    const still = it.reading({ ...GAP, place: bay(2), answers: [bad, first] }, gap(2.5))
    expect(outcomeOf(it).deficiencies).toMatchObject([{ id: bad, tag: 'B1', state: 'open', standing: [{ entry: still }], history: [bad, first, still] }])
    // A device that looked after the first correction only does not end what came after it.
    const stale = it.reading({ ...GAP, place: bay(2), answers: [bad, first], author: PEOPLE.bo }, gap(1))
    expect(stateOf(it, bad)).toBe('open')
    expect(checkOf(it, GAP).heads.find(head => head.entry === stale)!.disagreesWith).toEqual([still])
    const second = it.correct([bad])
    it.reading({ ...GAP, place: bay(2), answers: [still, first] }, gap(1))
    expect(stateOf(it, bad)).toBe('corrected')
    it.reading({ ...GAP, place: bay(2), answers: [still, second] }, gap(1))
    expect(stateOf(it, bad)).toBe('endedCorrected')
  })

  it('is not ended by a reading that names a correction which an earlier reading had found wanting', () => {
    const it = story()
    const bad = it.reading({ ...GAP, place: bay(2) }, gap(3))
    const first = it.correct([bad])
    const still = it.reading({ ...GAP, place: bay(2), answers: [bad, first] }, gap(2.5))
    const second = it.correct([still])
    const yet = it.reading({ ...GAP, place: bay(2), answers: [still, second] }, gap(2.25))
    it.reading({ ...GAP, place: bay(2), answers: [yet, first] }, gap(1))
    expect(stateOf(it, bad)).toBe('open')
  })

  it('keeps a re-reading that was typed wrong and replaced', () => {
    const it = story()
    const bad = it.reading({ ...GAP, place: bay(2) }, gap(3))
    const fixed = it.correct([bad])
    const again = it.reading({ ...GAP, place: bay(2), answers: [bad, fixed] }, gap(1))
    it.reading({ ...GAP, place: bay(2), replaces: [again] }, gap(1.5))
    expect(stateOf(it, bad)).toBe('endedCorrected')
  })

  it('makes a new one of a finding at another place', () => {
    const it = story()
    const bad = it.reading({ ...GAP, place: bay(2) }, gap(3))
    const fixed = it.correct([bad])
    const other = it.reading({ ...GAP, place: bay(4), answers: [bad, fixed] }, gap(3))
    // Nobody has looked again where the first one was.
    expect(stateOf(it, bad)).toBe('corrected')
    expect(stateOf(it, other)).toBe('open')
  })

  it('may be accepted where its class allows, by a word that falls when the reading is no longer the newest', () => {
    const it = story()
    const bad = it.reading({ ...SPACING, place: bay(2) }, look('finding'))
    const yes = it.accept([bad], true, '2027-06-30')
    expect(outcomeOf(it).deficiencies).toMatchObject([{ state: 'endedAccepted', until: '2027-06-30' }])
    expect(checkOf(it, SPACING)).toMatchObject({ verdict: 'doesNotConform', settled: true })
    it.reading({ ...SPACING, place: bay(2), replaces: [bad] }, look('finding'), { reason: 'Wider than I wrote' })
    expect(outcomeOf(it).deficiencies).toMatchObject([{ state: 'open', until: null }])
    expect(outcomeOf(it).ignored).toEqual([{ entry: yes, why: 'fallen' }])

    const grave = story()
    const gate = grave.reading(CLOSING, trial(1))
    const never = grave.accept([gate])
    expect(stateOf(grave, gate)).toBe('open')
    expect(outcomeOf(grave).ignored).toEqual([{ entry: never, why: 'classDoesNotAllow' }])
  })

  it('is not accepted while a refusal stands beside the acceptance', () => {
    const it = story()
    const bad = it.reading({ ...SPACING, place: bay(2) }, look('finding'))
    it.accept([bad])
    it.accept([bad], false)
    expect(stateOf(it, bad)).toBe('open')
  })

  it('gives the class that is graver, never below what the concern asks for', () => {
    const it = story()
    it.reading({ ...SPACING, place: bay(1) }, look('finding'), { class: 'outOfUse' })
    it.reading(CLOSING, trial(0), { class: 'ownerMayAccept' })
    expect(outcomeOf(it).deficiencies.map(one => one.class)).toEqual(['outOfUse', 'outOfUse'])
    expect(elementOf(it, RUN)).toMatchObject({ outOfUse: true, released: false })
  })

  it('ends by referral and by decision, each about one reading', () => {
    const it = story()
    const one = it.reading({ ...GAP, place: bay(1) }, gap(3))
    const two = it.reading({ ...GAP, place: bay(2) }, gap(3))
    it.refer(one)
    it.decide(two)
    expect([stateOf(it, one), stateOf(it, two)]).toEqual(['endedReferred', 'endedDecided'])
  })

  it('says whose move it is', () => {
    const it = story()
    const bad = it.reading({ ...SPACING, place: bay(1) }, look('finding'))
    const to = it.assign([bad])
    expect(outcomeOf(it).deficiencies).toMatchObject([{ state: 'assigned', assignedTo: PEOPLE.crew, due: '2026-12-01T15:00:00-05:00' }])
    const cannot = it.write('cannot', { waitsFor: 'Bands' }, { author: PEOPLE.crew, ...it.about([bad]) })
    expect(outcomeOf(it).deficiencies).toMatchObject([{ state: 'cannot', waitsFor: 'Bands', assignedTo: PEOPLE.crew }])
    it.assign([bad, cannot], { replaces: [to] })
    expect(outcomeOf(it).deficiencies).toMatchObject([{ state: 'assigned', waitsFor: null }])
    const offered = it.write('deviationOffered', { words: 'Two inches wide', until: null }, { author: PEOPLE.manager, ...it.about([bad]) })
    expect(stateOf(it, bad)).toBe('offered')
    it.accept([bad, offered], false)
    expect(stateOf(it, bad)).toBe('assigned')
    const said = it.write('disputed', { words: 'Not our post' }, { author: PEOPLE.crew, ...it.about([bad]) })
    expect(stateOf(it, bad)).toBe('disputed')
    it.correct([bad, said])
    expect(stateOf(it, bad)).toBe('corrected')
    it.write('dangerNow', { done: 'taped', told: { account: null, name: 'Bea Lund' }, toldAt: '2026-11-30T09:15:00-05:00', photos: [] }, it.about([bad]))
    expect(outcomeOf(it).deficiencies).toMatchObject([{ held: 'taped', state: 'corrected' }])
  })
})

describe('what a correction disturbs', () => {
  it('is read again on the element and beside it, by a reading that names the correction', () => {
    const it = story()
    const ties = it.reading(TIES, look('clear'))
    const beside = it.reading({ element: GATE, check: 'tie-ends' }, look('clear'))
    const far = it.reading({ element: RUN2, check: 'tie-ends' }, look('clear'))
    const bad = it.reading({ ...GAP, place: bay(2) }, gap(3))
    const fixed = it.correct([bad])
    expect(checkOf(it, TIES)).toMatchObject({ readAgain: true, disturbedBy: [fixed] })
    expect(checkOf(it, { element: GATE, check: 'tie-ends' })).toMatchObject({ readAgain: true })
    expect(checkOf(it, { element: RUN2, check: 'tie-ends' })).toMatchObject({ readAgain: false, heads: [{ entry: far }] })
    const again = it.reading({ ...TIES, answers: [ties, fixed] }, look('clear'))
    expect(checkOf(it, TIES)).toMatchObject({ readAgain: false, disturbedBy: [], heads: [{ entry: again }], earlier: [ties] })
    it.reading({ element: GATE, check: 'tie-ends', answers: [fixed] }, look('clear'))
    expect(checkOf(it, { element: GATE, check: 'tie-ends' })).toMatchObject({ readAgain: false, heads: [{}, {}] })
    expect(outcomeOf(it).refusedLinks).toEqual([])
    expect(beside).toBeTruthy()
  })

  it('does not forget what was read again when a later correction disturbs it anew', () => {
    const it = story()
    const ties = it.reading(TIES, look('clear'))
    const one = it.correct([it.reading({ ...GAP, place: bay(1) }, gap(3))])
    const again = it.reading({ ...TIES, answers: [ties, one] }, look('clear'))
    const other = it.correct([it.reading({ ...GAP, place: bay(2) }, gap(3))])
    expect(checkOf(it, TIES).disturbedBy).toEqual([other])
    it.reading({ ...TIES, answers: [again, other] }, look('clear'))
    expect(checkOf(it, TIES)).toMatchObject({ readAgain: false, disturbedBy: [] })
  })

  it('asks for nothing where nothing was read yet, but says what the first reading must name', () => {
    const it = story()
    const fixed = it.correct([it.reading({ ...GAP, place: bay(2) }, gap(3))])
    expect(checkOf(it, TIES)).toMatchObject({ verdict: 'notRead', readAgain: false, disturbedBy: [fixed] })
  })

  it('does not let a reading name a correction that has nothing to do with it', () => {
    const it = story()
    const fixed = it.correct([it.reading({ ...TIES }, look('finding'))])
    const reading = it.reading({ ...CLOSING, answers: [fixed] }, trial(3))
    expect(outcomeOf(it).refusedLinks).toEqual([{ entry: reading, target: fixed, why: 'doesNotDisturb' }])
  })
})

describe('setting aside', () => {
  it('says why a check was not read, for one check or for a whole element, until somebody reads it', () => {
    const it = story()
    const word = it.write('setAside', { as: 'notInspected', why: 'noAccess', photos: [] }, { element: RUN })
    expect(outcomeOf(it).checks.slice(0, 3).map(one => one.verdict)).toEqual(['notInspected', 'notInspected', 'notInspected'])
    expect(elementOf(it, RUN)).toMatchObject({ released: false, verdict: 'notInspected', answered: 3 })
    it.reading({ ...TIES, answers: [word] }, look('clear'))
    expect(checkOf(it, TIES)).toMatchObject({ verdict: 'conforms', setAside: { entry: word, why: 'noAccess' } })
    expect(elementOf(it, RUN)).toMatchObject({ released: true, verdict: 'notInspected' })
  })

  it('does not release what is only not yet inspected', () => {
    const it = story()
    it.reading(TIES, look('clear'))
    it.reading(GAP, gap(1))
    it.write('setAside', { as: 'notInspected', why: 'notYet', photos: [] }, SPACING)
    expect(elementOf(it, RUN)).toMatchObject({ released: false })
    it.reading(SPACING, look('clear'))
    expect(elementOf(it, RUN)).toMatchObject({ released: true, verdict: 'conforms', answered: 3 })
  })
})

describe('links', () => {
  it('lets wait what names an entry that has not come, and whoever names that', () => {
    const it = story()
    const bad = it.reading({ ...GAP, place: bay(2) }, gap(3))
    const fixed = it.correct([bad])
    const again = it.reading({ ...GAP, place: bay(2), answers: [bad, fixed] }, gap(1))
    const without = it.entries.filter(entry => entry.envelope.id !== bad)
    const round = fold(without, it.bases)
    expect(round.waiting).toEqual([fixed, again])
    expect(round.deficiencies).toEqual([])
    expect(fold(it.entries, it.bases).waiting).toEqual([])
  })

  it('does not follow a circle: both readings stay', () => {
    const it = story()
    const [a, b] = [uuid(8, 2), uuid(8, 3)]
    it.reading({ ...GAP, place: bay(1), replaces: [b] }, gap(1))
    it.reading({ ...GAP, place: bay(1), replaces: [a] }, gap(1.5))
    const round = outcomeOf(it)
    expect(round.checks.find(one => one.check === 'gap-below')!.heads.map(head => head.entry).sort()).toEqual([a, b])
    expect(round.refusedLinks.map(one => one.why)).toEqual(['cycle', 'cycle'])
    expect(round.waiting).toEqual([])
  })

  it('does not follow a link to another check, element or kind', () => {
    const it = story()
    const ties = it.reading(TIES, look('clear'))
    const gapThere = it.reading({ element: RUN2, check: 'gap-below' }, gap(1))
    const reading = it.reading({ ...GAP, replaces: [ties, gapThere] }, gap(1))
    expect(outcomeOf(it).refusedLinks).toEqual([{ entry: reading, target: ties, why: 'kindOrSubject' }, { entry: reading, target: gapThere, why: 'kindOrSubject' }])
    expect(checkOf(it, TIES).heads).toHaveLength(1)
    const stray = it.write('correction', { photos: [], by: { account: null, name: 'Helper' } }, { ...GAP, answers: [ties] })
    expect(outcomeOf(it).ignored).toEqual([{ entry: stray, why: 'namesNoReading' }])
  })

  it('sets two entries under one id aside, both of them', () => {
    const it = story()
    const bad = it.reading({ ...GAP, place: bay(2) }, gap(3))
    const twin = new RoundStory()
    twin.open()
    twin.reading({ ...GAP, place: bay(2) }, gap(1))
    const round = fold([...it.entries, twin.entries[1]!], it.bases)
    expect(round.ignored).toEqual([{ entry: bad, why: 'twoEntriesOneId' }])
    expect(round.checks.find(one => one.check === 'gap-below')!.verdict).toBe('notRead')
  })

  it('keeps what it does not know, and changes nothing for it', () => {
    const it = story()
    it.reading(GAP, gap(1))
    const before = outcomeOf(it)
    const unknown = { envelope: { ...it.entries[1]!.envelope, id: uuid(8, 99), version: 2 }, payloadText: '{}', digest: 'f'.repeat(64), number: null }
    expect(fold([...it.entries, unknown], it.bases)).toEqual({ ...before, unknown: [unknown.envelope.id] })
  })

  it('reads again what was erased, and takes the erasure of one copy for all', () => {
    const it = story()
    const reading = it.reading(GAP, gap(1))
    const erased = { ...it.get(reading), payload: null } as AnyEntry
    const round = fold([...it.entries, erased], it.bases)
    expect(round.erased).toEqual([reading])
    expect(round.checks.find(one => one.check === 'gap-below')).toMatchObject({ verdict: 'notRead', readAgain: true, heads: [] })
    expect(fold([erased, ...it.entries], it.bases)).toEqual(round)
  })
})

describe('the basis and the line', () => {
  it('judges by the basis that the desk changed to, and shows two at once as a conflict', () => {
    const it = story()
    it.reading(GAP, gap(1.5))
    const stricter = basisOf()
    stricter.limits.gap = { ...stricter.limits.gap!, high: { imperial: INCH, inclusive: true } }
    const digest = it.hold(stricter)
    const first = it.write('basisChanged', { basis: digest, why: 'The town wants less' }, { basis: digest, author: PEOPLE.manager })
    expect(outcomeOf(it)).toMatchObject({ basis: digest, conflicts: [] })
    expect(checkOf(it, GAP).verdict).toBe('doesNotConform')
    const looser = it.hold(basisOf({ line: { ...basisOf().line, version: 2 } }))
    const second = it.write('basisChanged', { basis: looser, why: 'Drawn again' }, { basis: looser, author: PEOPLE.manager })
    expect(outcomeOf(it)).toMatchObject({ basis: looser, conflicts: [{ of: 'basis', entries: [first, second] }] })
    it.write('basisChanged', { basis: digest, why: 'This one' }, { basis: digest, author: PEOPLE.manager, replaces: [first, second] })
    expect(outcomeOf(it)).toMatchObject({ basis: digest, conflicts: [] })
  })

  it('refuses to fold without a basis, or over one that is not there', () => {
    const it = new RoundStory()
    expect(() => fold(it.entries, it.bases)).toThrow(expect.objectContaining({ code: 'noBasis' }))
    expect(() => fold(it.entries, new Map(), { basis: it.basis })).toThrow(expect.objectContaining({ code: 'unknownBasis' }))
    expect(fold(it.entries, it.bases, { basis: it.basis }).basis).toBe(it.basis)
  })

  it('walks an added element with the tasks that the caller gives, and a split one with those of the whole', () => {
    const it = story()
    const added = element(uuid(7, 9), 'R3', { bays: 1 })
    it.write('lineEdit', { edit: { kind: 'add', after: GATE, side: 'A', element: added } }, { element: added.id })
    const parts = [element(RUN, 'R1', { length: 240 * INCH, bays: 2 }), element(uuid(7, 8), 'R4', { length: 240 * INCH, bays: 2 })] as const
    it.write('lineEdit', { edit: { kind: 'split', element: RUN, into: [...parts] } }, { element: RUN })
    const blind = outcomeOf(it)
    expect(blind.line.sides[0]!.elements.map(one => one.tag)).toEqual(['R1', 'R4', 'G1', 'R3', 'R2'])
    expect(blind.elements.map(one => [one.tasks, one.released])).toEqual([[3, false], [3, false], [2, false], [0, false], [3, false]])
    const round = fold(it.entries, it.bases, { tasksFor: one => [{ element: one.id, check: 'tie-ends', face: null, limits: [] }] })
    expect(round.elements.map(one => one.tasks)).toEqual([3, 1, 2, 1, 3])
  })

  it('keeps an open deficiency of a struck element in sight until it ends', () => {
    const it = story()
    const bad = it.reading({ element: RUN2, check: 'gap-below' }, gap(3))
    it.write('lineEdit', { edit: { kind: 'strike', element: RUN2, reason: 'Drawn twice' } }, { element: RUN2 })
    expect(outcomeOf(it).elements.map(one => one.element)).toEqual([RUN, GATE, RUN2])
    expect(stateOf(it, bad)).toBe('open')
    it.inError(bad)
    expect(outcomeOf(it).elements.map(one => one.element)).toEqual([RUN, GATE])
    expect(stateOf(it, bad)).toBe('endedInError')
  })

  it('shows edits that do not know of one another, and not such as do', () => {
    const it = story()
    const measure = (bays: number, answers: string[] = []) => it.write('lineEdit', { edit: { kind: 'remeasure', element: RUN, length: 240 * INCH, height: 72 * INCH, rise: 0, bays } }, { element: RUN, answers })
    const first = measure(2)
    const second = measure(3)
    expect(outcomeOf(it).conflicts).toEqual([{ of: 'line', entries: [first, second] }])
    measure(5, [first, second])
    expect(outcomeOf(it).conflicts).toEqual([])
    expect(outcomeOf(it).line.sides[0]!.elements[0]!.bays).toBe(5)
    const strayed = it.write('lineEdit', { edit: { kind: 'rename', element: uuid(7, 77), tag: 'R7', name: '' } }, { element: uuid(7, 77) })
    expect(outcomeOf(it).ignored).toEqual([{ entry: strayed, why: 'noSuchElement' }])
  })
})

describe('a round that starts from a sealed outcome', () => {
  it('goes on with its readings, deficiencies, corrections and what is to be read again', () => {
    const it = story()
    it.reading(TIES, look('clear'))
    const bad = it.reading({ ...GAP, place: bay(2) }, gap(3), { tag: 'B1' })
    const to = it.assign([bad])
    const fixed = it.correct([bad, to])
    const wide = it.reading({ ...SPACING, place: bay(1) }, look('finding'), { tag: 'B2' })
    it.accept([wide], true, '2027-06-30')
    const sealed = outcomeOf(it)

    const next = new RoundStory(basisOf(), 10)
    const same = fold(next.entries, next.bases, { startsFrom: sealed })
    expect(same.deficiencies).toEqual(sealed.deficiencies)
    expect(same.tally).toEqual(sealed.tally)
    expect(same.checks.map(({ earlier: _, ...check }) => check)).toEqual(sealed.checks.map(({ earlier: _, ...check }) => check))

    const again = next.reading({ ...GAP, place: bay(2), answers: [bad, fixed] }, gap(1))
    next.assign([again], { answers: [bad, to], ...GAP })
    next.reading({ ...TIES, answers: [fixed] }, look('clear'))
    const round = fold(next.entries, next.bases, { startsFrom: sealed })
    expect(round.waiting).toEqual([])
    expect(round.deficiencies.map(one => [one.tag, one.state])).toEqual([['B1', 'endedCorrected'], ['B2', 'endedAccepted']])
    expect(round.checks[0]).toMatchObject({ readAgain: false })
    const third = fold([], next.bases, { startsFrom: round })
    expect(third.deficiencies.map(one => one.state)).toEqual(['endedCorrected', 'endedAccepted'])
  })
})
