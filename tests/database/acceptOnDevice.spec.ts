import { uuidv7 } from 'uuidv7'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { WireEntry } from '#shared/entry/entry'
import { makeEntry } from '#shared/entry/makeEntry'
import { consentOf } from '#shared/round/consent'
import { fold } from '#shared/round/fold'
import { makeSignSheet } from '#shared/round/signSheet'
import { withSession } from '../../server/database/withSession'
import { newestRound } from '../../server/database/queries/round'
import { pushEntries } from '../../server/services/entry/pushEntries'
import { sealRecord } from '../../server/services/record/sealRecord'
import { roundFold } from '../../server/services/round/foldRound'
import { drawLineOf, makeSealingScene, offer, signAndRequest, walkAll, type SealingScene } from '../helpers/signedRound'

let scene: SealingScene
let reading: string
let offered: string
const inspector = () => scene.one.as('inspector')

beforeAll(async () => {
  scene = await makeSealingScene()
  await drawLineOf(scene.one)
  reading = (await walkAll(scene.one, true))!
  offered = await offer(scene.one, reading)
}, 120_000)
afterAll(() => scene.end())

const signer = () => ({ account: scene.one.accounts.client, name: 'Clerk AA' })
/** The owner's person signs on the inspector's device that the offered deviation is accepted, over all that stands now. */
async function signature(who: { account: string | null, name: string }): Promise<{ round: string, wire: WireEntry }> {
  const session = inspector()
  const round = (await withSession(session, tx => newestRound(tx, scene.one.jobId)))!
  const { entries, bases, options } = await withSession(session, tx => roundFold(tx, { ...round, jobId: scene.one.jobId }))
  const said = { signer: who, role: 'Clerk', known: 'onDevice' as const, presence: { account: session.accountId, name: 'Ivo Sand' } }
  const sheet = makeSignSheet(entries, fold(entries, bases, options), bases.get(round.basis)!, { scope: 'interim', meaning: 'acceptsDeviation', consent: consentOf('acceptsDeviation', 'en'), ...said })
  const { wire } = makeEntry({
    kind: 'signature', id: uuidv7(), salt: '1'.repeat(32), madeAt: '2026-11-30T15:00:00-05:00', organisation: scene.one.id, job: scene.one.jobId, round: round.id, author: session.accountId, device: uuidv7(),
    payload: { state: 'signed', meaning: 'acceptsDeviation', ...said, sheet: sheet.text, sheetDigest: sheet.digest, strokes: null, typed: who.name },
  })
  return { round: round.id, wire }
}
const push = async ({ round, wire }: { round: string, wire: WireEntry }) => (await pushEntries(inspector(), round, { device: uuidv7(), entries: [wire], empty: false })).results[0]!.state
const accepted = async () => (await scene.admin.query<{ author_id: string, payload: object, envelope_text: string }>(`select author_id, payload, envelope_text from entry where kind = 'deviationAccepted'`)).rows
const state = async () => (await scene.admin.query<{ state: string, until: string }>(`select state, outcome->>'until' as until from deficiency_state where id = $1`, [reading])).rows[0]

describe('a deviation accepted by a signature on the inspector\'s device', { timeout: 120_000 }, () => {
  it('does not end by somebody whom the owner has not named', async () => {
    expect(await push(await signature({ account: null, name: 'A passer-by' }))).toBe('accepted')
    await scene.admin.query('update contact set accepts = false where id = $1', [scene.one.contactId])
    expect(await push(await signature(signer()))).toBe('accepted')
    await scene.admin.query('update contact set accepts = true where id = $1', [scene.one.contactId])
    expect(await accepted()).toEqual([])
    expect(await state()).toMatchObject({ state: 'offered' })
  })

  it('ends as on the client\'s own page: one word that names the reading and the offer, with its condition and end; once, though sent twice', async () => {
    const signed = await signature(signer())
    expect(await push(signed)).toBe('accepted')
    expect(await push(signed)).toBe('resent')
    const [word, ...more] = await accepted()
    expect(more).toEqual([])
    expect(word).toMatchObject({ author_id: scene.one.accounts.client, payload: { accepted: true, by: signer(), for: 'School board AA', condition: 'No wind screen is hung there.', until: '2028-06-30' } })
    expect((JSON.parse(word!.envelope_text) as { answers: string[] }).answers).toEqual([reading, offered].sort())
    expect(await state()).toEqual({ state: 'endedAccepted', until: '2028-06-30' })
  })

  it('is no more what an earlier signature saw, and lets the record be signed by the inspector and sealed', async () => {
    const id = await signAndRequest(scene.one, 'interim')
    await sealRecord(scene.one.id, id)
    expect((await scene.admin.query('select sealing, scope from record where id = $1', [id])).rows).toEqual([{ sealing: 'sealed', scope: 'interim' }])
  })
})

describe('an offer that is not the one that was signed over', { timeout: 60_000 }, () => {
  it('stays an offer', async () => {
    await drawLineOf(scene.other)
    const read = (await walkAll(scene.other, true))!
    const first = await offer(scene.other, read)
    scene = { ...scene, one: scene.other }
    const early = await signature({ account: scene.one.accounts.client, name: 'Clerk BB' })
    await offer(scene.one, read, [first])
    expect(await push(early)).toBe('accepted')
    expect((await scene.admin.query('select state from deficiency_state where id = $1', [read])).rows).toEqual([{ state: 'offered' }])
  })
})
