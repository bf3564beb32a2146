import fc from 'fast-check'
import { expect, it, vi } from 'vitest'
import { fold } from '#shared/round/fold'
import { readyToSign } from '#shared/round/readyToSign'
import { checkSignSheet, makeSignSheet } from '#shared/round/signSheet'
import type { SignerStatement } from '#shared/round/signSheet'
import { bay, gap, GATE, look, PEOPLE, RoundStory, RUN, RUN2, trial } from '../../../helpers/roundStory'

vi.setConfig({ testTimeout: 120_000 })

/** A bay of a run, as somebody with a notebook would keep it: the model knows nothing of links. */
interface Spot { run: string, bay: number, state: 'unread' | 'good' | 'bad' | 'corrected', findings: number }
interface Notebook {
  spots: Spot[]
  /** Elements whose ties were read before a correction moved the fabric beside them. */
  tiesToReadAgain: Set<string>
}
/** Corrections of the gap move the ties of the run and of what stands next to it; along the line stand run, gate, run. */
const BESIDE: Record<string, string[]> = { [RUN]: [RUN, GATE], [RUN2]: [GATE, RUN2] }

const statement: SignerStatement = {
  scope: 'final', meaning: 'present', consent: { id: 'present-1', language: 'en', text: 'I was present.' }, signer: { account: PEOPLE.bo, name: 'Bo Lind' }, role: 'Inspector', known: 'ownAccount', presence: null,
}

const outcomeOf = (round: RoundStory) => fold(round.entries, round.bases)
const deficiencyAt = (round: RoundStory, spot: Spot) => outcomeOf(round).deficiencies.find(one => one.element === spot.run && one.place?.bay === spot.bay && !one.state.startsWith('ended'))

/** After each step the fold says what the notebook says. */
function compare(book: Notebook, round: RoundStory): void {
  const outcome = outcomeOf(round)
  const open = outcome.deficiencies.filter(one => !one.state.startsWith('ended'))
  expect(open.map(one => `${one.element} ${one.place?.bay} ${one.state}`).sort())
    .toEqual(book.spots.filter(spot => spot.state === 'bad' || spot.state === 'corrected').map(spot => `${spot.run} ${spot.bay} ${spot.state === 'bad' ? 'open' : 'corrected'}`).sort())
  expect(outcome.deficiencies).toHaveLength(book.spots.reduce((sum, spot) => sum + spot.findings, 0))
  expect(new Set(outcome.checks.filter(check => check.check === 'tie-ends' && check.readAgain).map(check => check.element))).toEqual(book.tiesToReadAgain)
}

class Step implements fc.Command<Notebook, RoundStory> {
  constructor(private readonly name: string, private readonly may: (book: Notebook) => boolean, private readonly act: (book: Notebook, round: RoundStory) => void) {}
  check(book: Readonly<Notebook>) {
    return this.may(book)
  }

  run(book: Notebook, round: RoundStory) {
    this.act(book, round)
    compare(book, round)
  }

  toString() {
    return this.name
  }
}
const step = (name: string, may: (book: Notebook) => boolean, act: (book: Notebook, round: RoundStory) => void) => new Step(name, may, act)

const read = (at: number, good: boolean) => step(`read ${at} ${good}`, book => book.spots[at]!.state === 'unread', (book, round) => {
  const spot = book.spots[at]!
  round.reading({ element: spot.run, check: 'gap-below', place: bay(spot.bay) }, gap(good ? 1 : 3))
  spot.state = good ? 'good' : 'bad'
  spot.findings += good ? 0 : 1
})
const correct = (at: number) => step(`correct ${at}`, book => book.spots[at]!.state === 'bad', (book, round) => {
  const spot = book.spots[at]!
  round.correct([deficiencyAt(round, spot)!.id])
  spot.state = 'corrected'
  for (const element of BESIDE[spot.run]!) book.tiesToReadAgain.add(element)
})
const walkAgain = (at: number, good: boolean) => step(`walk again ${at} ${good}`, book => book.spots[at]!.state === 'corrected', (book, round) => {
  const spot = book.spots[at]!
  const { standing } = deficiencyAt(round, spot)!
  round.reading({ element: spot.run, check: 'gap-below', place: bay(spot.bay), answers: standing.map(one => one.entry) }, gap(good ? 1 : 2.5))
  spot.state = good ? 'good' : 'bad'
})
/** Somebody reads the bay without having heard of the correction: that ends nothing. */
const readBlindly = (at: number) => step(`read blindly ${at}`, book => book.spots[at]!.state === 'corrected', (book, round) => {
  const spot = book.spots[at]!
  round.reading({ element: spot.run, check: 'gap-below', place: bay(spot.bay), author: PEOPLE.bo }, gap(1))
})
/** A finding at a bay that was good: a new one. */
const findLater = (at: number) => step(`find later ${at}`, book => book.spots[at]!.state === 'good', (book, round) => {
  const spot = book.spots[at]!
  round.reading({ element: spot.run, check: 'gap-below', place: bay(spot.bay) }, gap(4))
  spot.state = 'bad'
  spot.findings++
})
const readTiesAgain = (element: string) => step(`ties again ${element}`, book => book.tiesToReadAgain.has(element), (book, round) => {
  const check = outcomeOf(round).checks.find(one => one.element === element && one.check === 'tie-ends')!
  round.reading({ element, check: 'tie-ends', answers: [...check.heads.map(head => head.entry), ...check.disturbedBy] }, look('clear'))
  book.tiesToReadAgain.delete(element)
})
/** A final record may be signed exactly when the notebook has nothing left, and its sheet checks out. */
const sign = () => step('sign', () => true, (book, round) => {
  const outcome = outcomeOf(round)
  const done = book.tiesToReadAgain.size === 0 && [RUN, RUN2].every(run => book.spots.some(spot => spot.run === run && spot.state === 'good')) && book.spots.every(spot => spot.state === 'good' || spot.state === 'unread')
  expect(readyToSign(outcome, 'final').ready).toBe(done)
  const make = () => makeSignSheet(round.entries, outcome, round.bases.get(round.basis)!, statement)
  if (!done) expect(make).toThrow(expect.objectContaining({ code: 'notReady' }))
  else expect(checkSignSheet(make().text, round.entries, round.bases)).toMatchObject({ missing: [], late: [], differs: [] })
})

it('carries any walk, correction and re-walk to a signature exactly when a notebook says that nothing is left', () => {
  const spots = [0, 1, 2]
  const steps = fc.commands([
    ...spots.flatMap(at => [fc.constant(read(at, true)), fc.constant(read(at, false)), fc.constant(correct(at)), fc.constant(walkAgain(at, true)), fc.constant(walkAgain(at, false)), fc.constant(readBlindly(at)), fc.constant(findLater(at))]),
    ...[RUN, GATE, RUN2].map(element => fc.constant(readTiesAgain(element))),
    fc.constant(sign()), fc.constant(sign()),
  ], { maxCommands: 40, size: 'max' })
  let signed = 0
  fc.assert(fc.property(steps, (commands) => {
    fc.modelRun(() => {
      const real = new RoundStory()
      real.open()
      for (const element of [RUN, GATE, RUN2]) real.reading({ element, check: 'tie-ends' }, look('clear'))
      for (const element of [RUN, RUN2]) real.reading({ element, check: 'post-spacing' }, look('clear'))
      real.reading({ element: GATE, check: 'self-closing' }, trial(3))
      const model: Notebook = { spots: [{ run: RUN, bay: 1 }, { run: RUN, bay: 2 }, { run: RUN2, bay: 4 }].map(spot => ({ ...spot, state: 'unread', findings: 0 })), tiesToReadAgain: new Set() }
      return { model, real }
    }, commands)
    if (String(commands).includes('sign')) signed++
  }), { numRuns: 100 })
  expect(signed).toBeGreaterThan(0)
})
