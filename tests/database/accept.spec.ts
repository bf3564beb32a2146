import { randomUUID } from 'node:crypto'
import fc from 'fast-check'
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest'
import type { WireEntry } from '#shared/entry/entry'
import { canonicalJson, sha256Hex } from '#shared/record/canonicalJson'
import { fold } from '#shared/round/fold'
import { tasksFor } from '#shared/round/makeBasis'
import type { RoundOutcome } from '#shared/round/outcome'
import { readEntry } from '#shared/entry/readEntry'
import { readOutcome } from '../../server/database/queries/state'
import { withSession } from '../../server/database/withSession'
import { acceptEntries } from '../../server/services/entry/acceptEntries'
import { pullEntries } from '../../server/services/entry/pullEntries'
import { refoldAll } from '../../server/services/round/refold'
import type { StoryAt } from '../helpers/roundAt'
import { makeRound, makeStoryOrganisation, senderOf, wireOf } from '../helpers/roundAt'
import { bay, gap, GATE, look, ORGANISATION, PEOPLE, RUN } from '../helpers/roundStory'
import { makeScene, type Scene } from '../helpers/scene'
import { deeds, written } from '../helpers/storyDeeds'

vi.setConfig({ testTimeout: 120_000 })
let scene: Scene
let ground: Awaited<ReturnType<typeof makeStoryOrganisation>>
beforeAll(async () => {
  scene = await makeScene()
  ground = await makeStoryOrganisation(scene.admin)
})
afterAll(() => scene.end())

const ana = senderOf(PEOPLE.ana)
const newRound = () => makeRound(scene.admin, ground)
const push = async (story: StoryAt, wires: WireEntry[], who = ana) => (await acceptEntries(who, story.round, wires)).results
const states = (results: Awaited<ReturnType<typeof push>>) => results.map(one => one.state)
const numbersOf = async (story: StoryAt) => (await scene.admin.query<{ number: number }>('select number from entry where round_id = $1 order by number', [story.round])).rows.map(row => row.number)
const asideOf = async (story: StoryAt) => (await scene.admin.query<{ why: string, envelope_text: string }>('select why, envelope_text from entry_aside where round_id = $1 order by received_at', [story.round])).rows
const walk = (story: StoryAt, at: number, inches: number) => story.reading({ element: RUN, check: 'gap-below', place: bay(at % 4 + 1, at) }, gap(inches))

/** Another payload under the same id, as a device with a broken clock of ids would make it. */
function changed(wire: WireEntry, words: string): WireEntry {
  const payload = canonicalJson({ ...JSON.parse(wire.payload), words })
  return { payload, envelope: canonicalJson({ ...JSON.parse(wire.envelope), payload: sha256Hex(payload) }) }
}
/** An entry as only a foreign hand makes it: the texts are canonical, whatever stands in them. */
function forged(wire: WireEntry, envelope: object, payload?: object): WireEntry {
  const body = payload ? canonicalJson({ ...JSON.parse(wire.payload), ...payload }) : wire.payload
  return { payload: body, envelope: canonicalJson({ ...JSON.parse(wire.envelope), ...(payload ? { payload: sha256Hex(body) } : {}), ...envelope }) }
}

describe('numbers', () => {
  it('are gapless, in order of commit, under eight pushes at once', async () => {
    const stories = await newRound()
    for (let at = 0; at < 200; at++) walk(stories, at, 1)
    const wires = stories.wires()
    const answers = await Promise.all(Array.from({ length: 8 }, (_, device) => acceptEntries(ana, stories.round, wires.filter((_, at) => at % 8 === device))))
    const given = answers.flatMap(answer => answer.results.map(one => one.number!)).sort((a, b) => a - b)
    expect(given).toEqual(Array.from({ length: 200 }, (_, at) => at + 1))
    expect(await numbersOf(stories)).toEqual(given)
    // Whoever pulls by cursor in between misses nothing: a number is never committed after a higher one.
    const order = await scene.admin.query<{ number: number }>('select number from entry where round_id = $1 order by xmin::text::bigint, number', [stories.round])
    const commits = await scene.admin.query<{ xmin: string, low: number, high: number, n: number }>('select xmin::text, min(number) as low, max(number) as high, count(*)::int as n from entry where round_id = $1 group by xmin::text', [stories.round])
    expect(order.rows).toHaveLength(200)
    for (const { low, high, n } of commits.rows) expect(high - low + 1).toBe(n)
  })

  it('are read by a cursor that misses nothing while others write', async () => {
    const story = await newRound()
    for (let at = 0; at < 120; at++) walk(story, at, 1)
    const wires = story.wires()
    const seen: number[] = []
    let done = false
    const reader = (async () => {
      for (let last = false; !last;) {
        last = done
        const { entries } = await pullEntries(ana, story.round, seen.at(-1) ?? 0)
        seen.push(...entries.map(one => one.number))
      }
    })()
    await Promise.all(Array.from({ length: 6 }, async (_, device) => { for (let at = device; at < 120; at += 6) await acceptEntries(ana, story.round, [wires[at]!]) }))
    done = true
    await reader
    expect(seen).toEqual(Array.from({ length: 120 }, (_, at) => at + 1))
  })
})

describe('the same again', () => {
  it('gets the same answer, and is kept once', async () => {
    const story = await newRound()
    for (let at = 0; at < 5; at++) walk(story, at, 1)
    const first = await push(story, story.wires())
    expect(states(first)).toEqual(Array(5).fill('accepted'))
    const again = await push(story, story.wires())
    expect(again).toEqual(first.map(one => ({ ...one, state: 'resent' })))
    expect(await numbersOf(story)).toEqual([1, 2, 3, 4, 5])
  })

  it('is kept once when two devices send it at the same moment', async () => {
    const story = await newRound()
    for (let at = 0; at < 20; at++) walk(story, at, 1)
    const answers = await Promise.all([1, 2, 3, 4].map(() => push(story, story.wires())))
    for (const at of story.entries.keys()) expect(answers.map(answer => answer[at]!.state).sort()).toEqual(['accepted', 'resent', 'resent', 'resent'])
    for (const at of story.entries.keys()) expect(new Set(answers.map(answer => answer[at]!.number)).size).toBe(1)
    expect(await numbersOf(story)).toEqual(Array.from({ length: 20 }, (_, at) => at + 1))
  })

  it('twice in one push has one fate, also where that is a refusal', async () => {
    const story = await newRound()
    const reading = walk(story, 1, 3)
    const [wire] = story.wires()
    const bad = forged(wireOf(story.get(story.reading({ element: GATE, check: 'tie-ends', place: bay(1), replaces: [reading] }, look('clear')))), {})
    expect((await push(story, [wire!, wire!])).map(one => one.number)).toEqual([1, 1])
    const twice = await push(story, [bad, bad])
    expect(states(twice)).toEqual(['refused', 'refused'])
  })
})

describe('the same id with another text', () => {
  it('is set aside with both texts kept, and the first one stands', async () => {
    const story = await newRound()
    story.write('note', { words: 'First', photos: [] })
    const [first] = story.wires()
    const second = changed(first!, 'Second')
    await push(story, [first!])
    const results = await push(story, [second])
    expect(states(results)).toEqual(['quarantined'])
    expect(states(await push(story, [second]))).toEqual(['quarantined'])
    expect(await asideOf(story)).toEqual([{ why: 'quarantined', envelope_text: second.envelope }])
    const { rows } = await scene.admin.query('select envelope_text, payload_text from entry where round_id = $1', [story.round])
    expect(rows).toEqual([{ envelope_text: first!.envelope, payload_text: first!.payload }])
  })

  it('holds up nothing, also where both wait for the same entry', async () => {
    const story = await newRound()
    const target = walk(story, 1, 3)
    story.write('note', { words: 'Of that', photos: [] }, { answers: [target] })
    const [wire, note] = story.wires()
    const other = changed(note!, 'Of this')
    expect(states(await push(story, [note!, other]))).toEqual(['held', 'quarantined'])
    expect(states(await push(story, [wire!]))).toEqual(['accepted'])
    expect(states(await push(story, [note!, other]))).toEqual(['resent', 'quarantined'])
    expect(await numbersOf(story)).toEqual([1, 2])
  })

  it('holds up nothing where the waiting one was first and another took its id', async () => {
    const story = await newRound()
    const target = walk(story, 1, 3)
    const id = story.write('note', { words: 'Of that', photos: [] }, { answers: [target] })
    const [wire, waiting] = story.wires()
    expect(states(await push(story, [waiting!]))).toEqual(['held'])
    const plain = forged(waiting!, { answers: [] })
    expect(JSON.parse(plain.envelope).id).toBe(id)
    await push(story, [plain])
    expect(states(await push(story, [wire!]))).toEqual(['accepted'])
    walk(story, 2, 1)
    expect(states(await push(story, story.wires(2)))).toEqual(['accepted'])
    expect(new Set(await numbersOf(story))).toEqual(new Set(Array.from({ length: (await numbersOf(story)).length }, (_, at) => at + 1)))
  })
})

describe('an entry that names what has not come', () => {
  it('is held, and accepted with what it waits for, across pushes and devices', async () => {
    const story = await newRound()
    const reading = walk(story, 1, 3)
    story.correct([reading])
    story.reading({ element: RUN, check: 'gap-below', place: bay(2, 1), answers: [reading, story.entries[1]!.envelope.id] }, gap(1))
    const [first, correction, again] = story.wires()
    expect(states(await push(story, [again!]))).toEqual(['held'])
    expect(states(await push(story, [correction!], senderOf(PEOPLE.crew)))).toEqual(['held'])
    expect(await numbersOf(story)).toEqual([])
    expect((await push(story, [first!]))[0]).toMatchObject({ state: 'accepted', number: 1 })
    expect(await numbersOf(story)).toEqual([1, 2, 3])
    expect(await asideOf(story)).toEqual([])
    expect((await push(story, [again!]))[0]).toMatchObject({ state: 'resent', number: 3 })
  })

  it('is accepted in the same push when its target stands later in it, and says so', async () => {
    const story = await newRound()
    const reading = walk(story, 1, 3)
    story.write('note', { words: 'Of that', photos: [] }, { answers: [reading] })
    const results = await push(story, story.wires().reverse())
    expect(states(results)).toEqual(['accepted', 'accepted'])
    expect(results.map(one => one.number)).toEqual([2, 1])
  })

  it('is refused with words once what came is nothing that it may name', async () => {
    const story = await newRound()
    const reading = walk(story, 1, 3)
    story.reading({ element: GATE, check: 'tie-ends', place: bay(1), replaces: [reading] }, look('clear'))
    const [wire, wrong] = story.wires()
    expect(states(await push(story, [wrong!]))).toEqual(['held'])
    expect(states(await push(story, [wire!]))).toEqual(['accepted'])
    expect((await push(story, [wrong!]))[0]).toMatchObject({ state: 'refused', refusal: { code: 'target', pointer: '/envelope/replaces/0' } })
    expect(await numbersOf(story)).toEqual([1])
  })
})

describe('what is not theirs', () => {
  it('is refused and named, and what is theirs is taken', async () => {
    const story = await newRound()
    for (let at = 0; at < 8; at++) walk(story, at, 1)
    const [a, b, c, d, e, good] = story.wires()
    const results = await push(story, [
      forged(a!, { round: randomUUID() }), forged(b!, { organisation: scene.other.id }), forged(c!, { author: PEOPLE.bo }), forged(d!, { job: randomUUID() }),
      forged(e!, { kind: 'basisChanged', element: null, check: null, place: null }, {}), good!,
    ])
    expect(results.map(one => [one.state, one.refusal?.code, one.refusal?.pointer])).toEqual([
      ['refused', 'notYours', '/envelope/round'], ['refused', 'notYours', '/envelope/organisation'], ['refused', 'notYours', '/envelope/author'], ['refused', 'notYours', '/envelope/job'],
      ['refused', 'payload', expect.any(String)], ['accepted', undefined, undefined],
    ])
    for (const one of results.slice(0, 5)) expect(one.refusal!.message.length).toBeGreaterThan(20)
  })

  it('is refused by role: crew assigns nothing, an inspector changes no basis', async () => {
    const story = await newRound()
    const reading = walk(story, 1, 3)
    story.assign([reading], { author: PEOPLE.crew })
    story.write('basisChanged', { basis: story.basis, why: 'No' })
    const [wire, assignment, basis] = story.wires()
    await push(story, [wire!])
    expect((await push(story, [assignment!], senderOf(PEOPLE.crew)))[0]).toMatchObject({ state: 'refused', refusal: { code: 'notYours', pointer: '/envelope/kind' } })
    expect((await push(story, [basis!]))[0]).toMatchObject({ state: 'refused', refusal: { code: 'notYours', pointer: '/envelope/kind' } })
  })

  it('is not there: another organisation\'s round is 404 to read and to write', async () => {
    const story = await newRound()
    walk(story, 1, 1)
    await expect(acceptEntries(scene.one.as('inspector'), story.round, story.wires())).rejects.toMatchObject({ code: 'notFound' })
    await expect(pullEntries(scene.one.as('inspector'), story.round, 0)).rejects.toMatchObject({ code: 'notFound' })
  })
})

describe('a bad entry', () => {
  const bad: [string, (wire: WireEntry) => WireEntry, string][] = [
    ['U+0000 in its words', wire => changed(wire, 'a\u0000b'), 'nulCharacter'],
    ['half of a surrogate pair', wire => ({ ...wire, payload: wire.payload.replace('Note', 'N\\ud800te') }), 'payloadDigest'],
    ['half of a surrogate pair under its own digest', (wire) => { const payload = wire.payload.replace('Note', 'N\\ud800te'); return { payload, envelope: wire.envelope.replace(/"payload":"[0-9a-f]{64}"/, `"payload":"${sha256Hex(payload)}"`) } }, 'notCanonical'],
    ['no JSON', wire => ({ ...wire, envelope: wire.envelope.slice(0, -1) }), 'notJson'],
    ['a bare U+0000 in its text', wire => ({ ...wire, envelope: wire.envelope.replace('{', '{\u0000') }), 'notJson'],
    ['white space that no canonical form has', wire => ({ ...wire, envelope: wire.envelope.replace('{', '{ ') }), 'notCanonical'],
    ['the same key twice', wire => ({ ...wire, envelope: wire.envelope.replace('"version":1', '"version":1,"version":1') }), 'notCanonical'],
    ['lists nested ten thousand deep', wire => ({ ...wire, envelope: `{"a":${'['.repeat(9000)}${']'.repeat(9000)}}` }), 'notCanonical'],
    ['an unknown kind whose payload is nested ten thousand deep', (wire) => { const payload = '['.repeat(10_000) + ']'.repeat(10_000); return { payload, envelope: canonicalJson({ ...JSON.parse(wire.envelope), kind: 'weighed', payload: sha256Hex(payload) }) } }, 'notCanonical'],
    ['a year that no calendar of the database has', wire => forged(wire, { madeAt: '0000-01-01T00:00:00Z' }), 'envelope'],
    ['an offset that no place has', wire => forged(wire, { madeAt: '2026-11-30T09:00:00+23:59' }), 'envelope'],
    ['an envelope longer than any', wire => ({ ...wire, envelope: wire.envelope + ' '.repeat(20_000) }), 'envelope'],
    ['more in its envelope than there is', wire => forged(wire, { surplus: 1 }), 'envelope'],
  ]

  it.each(bad)('with %s is refused with words and holds up no good one', async (_, spoil, code) => {
    const story = await newRound()
    story.write('note', { words: 'Note', photos: [] })
    walk(story, 1, 1)
    const [note, good] = story.wires()
    const results = await push(story, [spoil(note!), good!])
    expect(results.map(one => [one.state, one.refusal?.code])).toEqual([['refused', code], ['accepted', undefined]])
    expect(results[0]!.refusal!.message.length).toBeGreaterThan(20)
  })

  it('whose subject is nothing that this round knows is kept, and folds', async () => {
    const story = await newRound()
    const unknown = randomUUID()
    story.reading({ element: unknown, check: 'gap-below', place: bay(1) }, gap(3), { tag: 'Z1' })
    story.reading({ element: RUN, check: 'never-heard-of', place: bay(1) }, look('finding'), { tag: 'Z2' })
    story.reading({ element: RUN, check: 'gap-below', place: bay(1), basis: 'f'.repeat(64) }, gap(3), { tag: 'Z3' })
    story.write('lineEdit', { edit: { kind: 'strike', element: unknown, reason: 'Never there' } }, { element: unknown })
    story.write('assignment', { to: { account: PEOPLE.crew, name: 'Nilo Arce' }, due: '2026-12-01T15:00:00-05:00' }, { author: PEOPLE.manager, ...story.about([story.entries[0]!.envelope.id]) })
    expect(states(await push(story, story.wires(0).slice(0, 4)))).toEqual(Array(4).fill('accepted'))
    expect(states(await push(story, story.wires(4), senderOf(PEOPLE.manager)))).toEqual(['accepted'])
    walk(story, 1, 1)
    expect(states(await push(story, story.wires(5)))).toEqual(['accepted'])
  })

  it('of a kind that this program does not know is kept as it came', async () => {
    const story = await newRound()
    story.write('note', { words: 'Note', photos: [] })
    const strange = forged(story.wires()[0]!, { kind: 'weighed', version: 3 })
    expect(states(await push(story, [strange]))).toEqual(['accepted'])
    const { entries } = await pullEntries(ana, story.round, 0)
    expect(entries).toEqual([{ number: 1, ...strange }])
    expect((await withSession(ana, tx => readOutcome(tx, story.round)))!.unknown).toHaveLength(1)
  })

  it('comes back letter by letter, whatever its words', async () => {
    await fc.assert(fc.asyncProperty(fc.string({ unit: 'grapheme', minLength: 1, maxLength: 40 }).filter(text => text.trim().length > 0 && !text.includes('\u0000')), async (words) => {
      const story = await newRound()
      story.write('note', { words, photos: [] })
      expect(states(await push(story, story.wires()))).toEqual(['accepted'])
      expect((await pullEntries(ana, story.round, 0)).entries).toEqual([{ number: 1, ...story.wires()[0] }])
    }), { numRuns: 40 })
  })
})

describe('late entries', () => {
  it.each(['frozen', 'sealed'])('of a %s round are kept and numbered past the border, and change nothing that lists show', async (state) => {
    const story = await newRound()
    walk(story, 1, 1)
    await push(story, story.wires())
    await scene.admin.query('update round set state = $2 where id = $1', [story.round, state])
    const kept = async () => ({
      round: (await scene.admin.query('select accepted, outcome from round_state where round_id = $1', [story.round])).rows,
      checks: (await scene.admin.query('select * from check_state where round_id = $1 order by element_id, check_id, face', [story.round])).rows,
      deficiencies: (await scene.admin.query('select * from deficiency_state where round_id = $1', [story.round])).rows,
      job: (await scene.admin.query('select state, move_by, move, open_tags from job where id = $1', [story.job])).rows,
    })
    const before = await kept()
    walk(story, 2, 9)
    expect((await push(story, story.wires(1)))[0]).toMatchObject({ state: 'accepted', number: 2 })
    expect(await kept()).toEqual(before)
    const pulled = await pullEntries(ana, story.round, 1)
    expect(pulled).toMatchObject({ round: { state, accepted: 2 }, entries: [{ number: 2 }] })
  })
})

describe('the kept state', () => {
  const keptOf = async (story: StoryAt) => {
    const [outcome, round, checks, deficiencies, accepted] = await Promise.all([
      withSession(ana, tx => readOutcome(tx, story.round)),
      scene.admin.query<{ accepted: number }>('select accepted from round_state where round_id = $1', [story.round]),
      scene.admin.query('select element_id as element, check_id as check, face, verdict, settled, read_again as "readAgain" from check_state where round_id = $1', [story.round]),
      scene.admin.query('select id, tag, element_id as element, check_id as check, class, state, assigned_to as "assignedTo", due, outcome from deficiency_state where round_id = $1', [story.round]),
      scene.admin.query('select accepted from round where id = $1', [story.round]),
    ])
    return { outcome, accepted: round.rows[0]?.accepted, of: accepted.rows[0]!.accepted, checks: checks.rows, deficiencies: deficiencies.rows }
  }
  /** A fold of what the database holds, by the shared rules alone. */
  const freshOf = async (story: StoryAt): Promise<RoundOutcome> => {
    const { entries } = await pullEntries(ana, story.round, 0)
    const read = entries.map((one) => { const it = readEntry(one, { number: one.number }); if (it.state === 'refused') throw new Error(it.refusal.message); return it.entry })
    return fold(read, story.bases, { basis: story.basis, tasksFor: (element, basis) => tasksFor(basis, element).tasks })
  }
  const byText = <T>(list: T[]) => list.map(one => canonicalJson(JSON.parse(JSON.stringify(one)))).sort()

  it('equals a fresh fold after any story, pushed in any pieces by its people', async () => {
    await fc.assert(fc.asyncProperty(deeds, fc.array(fc.integer({ min: 1, max: 6 }), { minLength: 1, maxLength: 5 }), async (list, sizes) => {
      const story = await newRound()
      written(list, story)
      for (let at = 0, turn = 0; at < story.entries.length;) {
        // A push is one person's.
        const author = story.entries[at]!.envelope.author
        let to = at + 1
        while (to < story.entries.length && to - at < sizes[turn % sizes.length]! && story.entries[to]!.envelope.author === author) to++
        await push(story, story.entries.slice(at, to).map(wireOf), senderOf(author))
        at = to
        turn++
      }
      const kept = await keptOf(story)
      const fresh = await freshOf(story)
      expect(canonicalJson(kept.outcome)).toBe(canonicalJson(JSON.parse(JSON.stringify(fresh))))
      expect(kept.accepted).toBe(kept.of)
      expect(byText(kept.checks)).toEqual(byText(fresh.checks.map(({ element, check, face, verdict, settled, readAgain }) => ({ element, check, face: face ?? '', verdict, settled, readAgain }))))
      expect(byText(kept.deficiencies)).toEqual(byText(fresh.deficiencies.map(one => ({ id: one.id, tag: one.tag, element: one.element, check: one.check, class: one.class, state: one.state, assignedTo: one.assignedTo, due: one.due && new Date(one.due), outcome: one }))))
    }), { numRuns: Number(process.env.LAW_RUNS ?? 40) })
  })

  it('is what a rebuild makes of the same entries', async () => {
    const { rounds, changed } = await refoldAll()
    expect(rounds).toBeGreaterThan(20)
    expect(changed).toBe(0)
  })

  it('is rebuilt where it was spoilt', async () => {
    const story = await newRound()
    walk(story, 1, 3)
    await push(story, story.wires())
    const right = await keptOf(story)
    await scene.admin.query(`update round_state set outcome = jsonb_set(outcome, '{deficiencies}', '[]') where round_id = $1`, [story.round])
    await scene.admin.query('delete from deficiency_state where round_id = $1', [story.round])
    await scene.admin.query('delete from check_state where round_id = $1', [story.round])
    expect((await refoldAll()).changed).toBe(1)
    const mended = await keptOf(story)
    expect({ ...mended, checks: byText(mended.checks) }).toEqual({ ...right, checks: byText(right.checks) })
    expect(mended.deficiencies).toHaveLength(1)
  })

  it('is the organisation\'s own: nothing of a story stands in another', async () => {
    const { rows } = await scene.admin.query('select count(*)::int as n from round_state where organisation_id <> $1', [ORGANISATION])
    expect(rows).toEqual([{ n: 0 }])
  })
})
