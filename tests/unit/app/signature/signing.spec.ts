import { describe, expect, it } from 'vitest'
import en from '~~/i18n/locales/en/signature.json'
import es from '~~/i18n/locales/es/signature.json'
import { meaningsFor, picturesOf, replacedSignatures, signaturesNow, signersOf, strokesOf } from '~/composables/useSigning'
import { MEANINGS, PAYLOADS, strokeSchema, type PayloadOf } from '#shared/entry/entry'
import { consentOf } from '#shared/round/consent'
import { fold } from '#shared/round/fold'
import { SIGN_REASONS, SIGN_SCOPES } from '#shared/round/readyToSign'
import { makeSignSheet } from '#shared/round/signSheet'
import { GATE, look, PEOPLE, RoundStory, RUN } from '../../../helpers/roundStory'

describe('strokes', () => {
  it('are integers in hundredths of the height of the pad, from the first touch on', () => {
    // Worked by hand: a pad of 118 px; 59 px is half of it.
    const strokes = strokesOf([{ points: [{ x: 59, y: 118, time: 1_700_000_000_000 }, { x: 354.2, y: 0.4, time: 1_700_000_000_016 }] }, { points: [] }, { points: [{ x: 118, y: 29.5, time: 1_700_000_000_900 }] }], 118)
    expect(strokes).toEqual([[{ x: 50, y: 100, t: 0 }, { x: 300, y: 0, t: 16 }], [{ x: 100, y: 25, t: 900 }]])
  })

  it('always fit what an entry holds, however long somebody draws', () => {
    const points = Array.from({ length: 20_000 }, (_, i) => ({ x: i / 50, y: (i * 7) % 118, time: i }))
    const strokes = strokesOf(Array.from({ length: 300 }, () => ({ points: points.slice(0, 30) })).concat({ points }), 118)
    expect(PAYLOADS.signature.shape.strokes.safeParse(strokes).success).toBe(true)
    const [long] = strokesOf([{ points }], 118)
    expect(strokeSchema.safeParse(long).success).toBe(true)
    expect(long!.length).toBeGreaterThan(2000)
    expect(long!.at(-1)!.t).toBeGreaterThan(19_990)
  })
})

describe('who signs and what it means', () => {
  const signers = signersOf({
    me: { accountId: PEOPLE.ana, name: 'Ana', role: 'inspector' },
    contacts: [{ id: 'c1', accountId: PEOPLE.client, name: 'Mara Holt', title: 'Clerk', phone: '', accepts: true }, { id: 'c2', accountId: null, name: 'Tom Reyes', title: '', phone: '', accepts: false }],
    people: [{ accountId: PEOPLE.ana, name: 'Ana', role: 'inspector' }, { accountId: PEOPLE.bo, name: 'Bo', role: 'crew' }],
  })
  it('offers the own account once, the client\'s contacts, colleagues and a name alone', () => {
    expect(signers.map(one => [one.as, one.name])).toEqual([['own', 'Ana'], ['contact', 'Mara Holt'], ['contact', 'Tom Reyes'], ['ours', 'Bo'], ['other', '']])
  })
  it('lets nobody of ours accept the work, and only who is named accept a deviation that is offered', () => {
    const whyNot = (at: number, offered: number) => meaningsFor(signers[at]!, offered).map(one => one.whyNot)
    expect(whyNot(0, 1)).toEqual([null, null, 'ownersOnly', 'notNamed'])
    expect(whyNot(1, 1)).toEqual([null, null, null, null])
    expect(whyNot(1, 0)).toEqual([null, null, null, 'noneOffered'])
    expect(whyNot(2, 1)).toEqual([null, null, null, 'notNamed'])
    expect(whyNot(4, 1)).toEqual([null, null, null, 'notNamed'])
  })
})

describe('signatures of a round', () => {
  const mara = { account: PEOPLE.client, name: 'Mara Holt' }
  const said = (state: PayloadOf<'signature'>['state'], more: Partial<PayloadOf<'signature'>> = {}): Omit<PayloadOf<'signature'>, 'salt'> => ({
    state, meaning: 'receivedCopy', signer: mara, role: 'Clerk', known: 'onDevice', presence: { account: PEOPLE.ana, name: 'Ana' }, sheet: null, sheetDigest: null, strokes: null, typed: null, ...more,
  })
  function sign(story: RoundStory, meaning: PayloadOf<'signature'>['meaning'] = 'receivedCopy') {
    const outcome = fold(story.entries, story.bases, { basis: story.basis })
    const { text, digest } = makeSignSheet(story.entries, outcome, story.bases.get(story.basis)!, { scope: 'interim', meaning, consent: consentOf(meaning, 'en'), signer: mara, role: 'Clerk', known: 'onDevice', presence: { account: PEOPLE.ana, name: 'Ana' } })
    return story.write('signature', said('signed', { meaning, sheet: text, sheetDigest: digest, typed: 'Mara Holt' }), { replaces: replacedSignatures(story.entries, mara, meaning) })
  }

  it('counts what came after a signature and does not count signatures', () => {
    const story = new RoundStory()
    story.reading({ element: RUN, check: 'tie-ends' }, look('clear'))
    sign(story)
    story.write('signature', said('absent', { signer: { account: null, name: 'Tom Reyes' } }))
    expect(signaturesNow(story.entries).map(one => one.after)).toEqual([0, 0])
    story.reading({ element: GATE, check: 'tie-ends' }, look('finding'), { tag: 'B1' })
    expect(signaturesNow(story.entries).map(one => [one.scope, one.after])).toEqual([['interim', 1], [null, 0]])
  })

  it('lets a signature take the place of "signs later" and of the same meaning, not of another', () => {
    const story = new RoundStory()
    story.reading({ element: RUN, check: 'tie-ends' }, look('clear'))
    story.write('signature', said('toFollow', { meaning: 'acceptsWork' }))
    sign(story)
    expect(signaturesNow(story.entries).map(one => one.payload.state)).toEqual(['signed'])
    sign(story, 'acceptsWork')
    expect(signaturesNow(story.entries).map(one => one.payload.meaning)).toEqual(['receivedCopy', 'acceptsWork'])
    sign(story)
    expect(signaturesNow(story.entries).map(one => one.payload.meaning)).toEqual(['acceptsWork', 'receivedCopy'])
    expect(replacedSignatures(story.entries, { account: null, name: 'Mara Holt' }, 'receivedCopy')).toEqual([])
  })

  it('shows a picture once, though several tags share it', () => {
    const story = new RoundStory()
    const photo = { digest: 'a'.repeat(64), width: 800, height: 600, taken: { digest: 'b'.repeat(64), at: null, origin: 'camera' as const } }
    const first = story.reading({ element: RUN, check: 'tie-ends' }, look('finding'), { tag: 'B1', photos: [photo] })
    story.write('correction', { photos: [photo, { ...photo, digest: 'c'.repeat(64) }], by: mara }, story.about([first]))
    expect(picturesOf(story.entries).map(one => [one.photo.digest[0], one.entry.envelope.kind])).toEqual([['a', 'reading'], ['c', 'correction']])
  })
})

type Words = { [key: string]: string | Words }
const flat = (words: Words, under = ''): [string, string][] => Object.entries(words).flatMap(([key, value]) => typeof value === 'string' ? [[under + key, value] as [string, string]] : flat(value, `${under}${key}.`))
const names = (text: string) => [...new Set([...text.matchAll(/\{(\w+)\}/g)].map(one => one[1]))].sort()
describe('the words of signing', () => {
  const [english, spanish] = [new Map(flat(en)), new Map(flat(es))]
  it('stand whole in both languages, with the same names and forms', () => {
    expect([...spanish.keys()].sort()).toEqual([...english.keys()].sort())
    for (const [key, text] of english) {
      expect(names(spanish.get(key)!), key).toEqual(names(text))
      expect(spanish.get(key)!.split(' | ').length, key).toBe(text.split(' | ').length)
    }
  })
  it('has words for every reason, meaning and scope', () => {
    const wanted = [...SIGN_REASONS.map(why => `signature.why.${why}`), ...MEANINGS.flatMap(one => [`signature.meaning.${one}`, `signature.sign.${one}`]), ...SIGN_SCOPES.flatMap(one => [`signature.scope.${one}`, `signature.scopeHint.${one}`, `signature.stops.${one}`])]
    expect(wanted.filter(key => !english.has(key))).toEqual([])
  })
})
