import { uuidv7 } from 'uuidv7'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { AcceptanceInput, PortalSite } from '#shared/api/portal'
import { acceptanceSchema } from '#shared/record/acceptance'
import { parseCanonicalJson, sha256Hex } from '#shared/record/canonicalJson'
import { checkPdf } from '../../server/documents/checkPdf'
import { signAcceptance } from '../../server/services/acceptance/signAcceptance'
import { readAcceptanceFile } from '../../server/services/acceptance/readAcceptance'
import { checkFile, checkKey } from '../../server/services/check/checkRecord'
import { listPortalSites, readPortalSite } from '../../server/services/portal/readPortal'
import { changeStanding } from '../../server/services/record/changeStanding'
import { listRecords, readRecord, readRecordFile } from '../../server/services/record/readRecord'
import { sealRecord } from '../../server/services/record/sealRecord'
import { witnessKey } from '../../server/services/record/signingKey'
import { mailRecord } from '../../server/services/transmittal/mailRecord'
import { sendRecord } from '../../server/services/transmittal/sendRecord'
import { drawLineOf, makeSealingScene, offer, signAndRequest, walkAll, type SealingScene } from '../helpers/signedRound'

let scene: SealingScene
let interim: string
let reading: string
let offered: string
const manager = () => scene.one.as('manager') as ReturnType<SealingScene['one']['as']> & { organisationId: string }
const client = () => scene.one.as('client')
const site = (): Promise<PortalSite> => readPortalSite(client(), scene.one.siteId)
const digestOf = async (id: string) => (await scene.admin.query<{ document_digest: string }>('select document_digest from record where id = $1', [id])).rows[0]!.document_digest
const named = (accepts: boolean) => scene.admin.query('update contact set accepts = $2 where id = $1', [scene.one.contactId, accepts])

const signing = async (recordId: string, more: Partial<AcceptanceInput>): Promise<AcceptanceInput> => ({
  id: uuidv7(), meaning: 'receivedCopy', document: await digestOf(recordId), language: 'en', deviation: null, named: false, typed: 'Cara Mole', strokes: null, words: null, ...more,
})

beforeAll(async () => {
  scene = await makeSealingScene()
  await drawLineOf(scene.one)
  reading = (await walkAll(scene.one, true))!
  offered = await offer(scene.one, reading)
  interim = await signAndRequest(scene.one, 'interim')
  await sealRecord(scene.one.id, interim)
}, 120_000)
afterAll(() => scene.end())

describe('sending', { timeout: 60_000 }, () => {
  it('shows a client nothing before it was sent', async () => {
    expect(await listRecords(client(), { find: '', most: 10 })).toEqual([])
    expect(await listPortalSites(client())).toEqual([])
    await expect(site()).rejects.toMatchObject({ code: 'notFound' })
  })

  it('writes into the delivery log what the mail server said, and what the person did, and nothing else', async () => {
    const transmittal = uuidv7()
    await sendRecord(manager(), interim, { id: transmittal, contacts: [scene.one.contactId], message: 'Thank you.' })
    // Pressed again it is the same transmittal.
    await sendRecord(manager(), interim, { id: transmittal, contacts: [scene.one.contactId], message: 'Thank you.' })
    const recipients = await scene.admin.query<{ id: string }>('select id from recipient where record_id = $1', [interim])
    expect(recipients.rows).toHaveLength(1)
    const kinds = async () => (await readRecord(manager(), interim)).deliveries.map(row => row.kind).reverse()
    expect(await kinds()).toEqual(['queued'])
    await mailRecord(scene.one.id, recipients.rows[0]!.id)
    await mailRecord(scene.one.id, recipients.rows[0]!.id)
    expect(scene.mail.taken).toHaveLength(1)
    expect(scene.mail.taken[0]).toContain('Thank you.')
    expect(await kinds()).toEqual(['queued', 'handed'])
    await readRecord(client(), interim)
    await readRecord(client(), interim)
    await readRecordFile(client(), interim)
    expect(await kinds()).toEqual(['queued', 'handed', 'opened', 'downloaded'])
  })

  it('refuses an id that was used for another record or for other people, and takes the very same at one moment for one', async () => {
    const { rows: [first] } = await scene.admin.query<{ id: string }>('select id from transmittal where record_id = $1', [interim])
    const other = uuidv7()
    await scene.admin.query(`insert into record (organisation_id, id, job_id, round_id, number, scope, code, border, requested_by, sealing, sealed_at) select organisation_id, $2, job_id, round_id, 90, scope, 'AA-90', border, requested_by, 'sealed', now() from record where id = $1`, [interim, other])
    await expect(sendRecord(manager(), other, { id: first!.id, contacts: [scene.one.contactId], message: '' })).rejects.toMatchObject({ code: 'differs' })
    await expect(sendRecord(manager(), interim, { id: first!.id, contacts: [uuidv7()], message: 'Thank you.' })).rejects.toMatchObject({ code: 'differs' })
    const twice = { id: uuidv7(), contacts: [scene.one.contactId], message: '' }
    expect(await Promise.all([sendRecord(manager(), other, twice), sendRecord(manager(), other, twice)])).toEqual([{ sentTo: 1 }, { sentTo: 1 }])
    expect((await scene.admin.query('select from recipient where transmittal_id = $1', [twice.id])).rowCount).toBe(1)
    for (const table of ['delivery_event', 'recipient', 'transmittal', 'record']) {
      await scene.admin.query(`alter table ${table} disable trigger all`)
      await scene.admin.query(table === 'delivery_event' ? `delete from delivery_event d using recipient p where p.id = d.recipient_id and p.record_id = $1` : `delete from ${table} where ${table === 'record' ? 'id' : 'record_id'} = $1`, [other])
      await scene.admin.query(`alter table ${table} enable trigger all`)
    }
  })

  it('says returned where the mail server refuses the address', async () => {
    scene.mail.refuse = true
    await sendRecord(manager(), interim, { id: uuidv7(), contacts: [scene.one.contactId], message: '' })
    const { rows: [newest] } = await scene.admin.query<{ id: string }>('select id from recipient where record_id = $1 order by id desc limit 1', [interim])
    await mailRecord(scene.one.id, newest!.id)
    scene.mail.refuse = false
    expect((await readRecord(manager(), interim)).deliveries[0]).toMatchObject({ kind: 'returned', detail: expect.stringContaining('550') as string })
  })

  it('lets the client see that record and its site, and the other contractor\'s client nothing', async () => {
    expect((await listRecords(client(), { find: '', most: 10 })).map(row => row.id)).toEqual([interim])
    expect(await listPortalSites(client())).toMatchObject([{ id: scene.one.siteId, records: 1, offers: 1 }])
    expect(await listRecords(scene.other.as('client'), { find: '', most: 10 })).toEqual([])
    await expect(readPortalSite(scene.other.as('client'), scene.one.siteId)).rejects.toMatchObject({ code: 'notFound' })
    expect((await readRecord(client(), interim)).deliveries).toEqual([])
  })
})

describe('a client\'s signature', { timeout: 60_000 }, () => {
  it('under a document that was not the one read is refused', async () => {
    await expect(signAcceptance(client(), interim, await signing(interim, { document: 'a'.repeat(64) }))).rejects.toMatchObject({ code: 'stale' })
  })

  it('for a copy needs nobody\'s leave, becomes a sealed paper, and is the same paper when sent again', async () => {
    const input = await signing(interim, {})
    const first = await signAcceptance(client(), interim, input)
    expect(await signAcceptance(client(), interim, input)).toMatchObject({ id: first.id })
    const { rows } = await scene.admin.query<{ file_digest: string, sheet: string, leaf: string }>('select file_digest, sheet, leaf from acceptance where record_id = $1', [interim])
    expect(rows).toHaveLength(1)
    const { bytes } = await readAcceptanceFile(manager(), first.id)
    const { chain } = await witnessKey()
    const check = await checkPdf(bytes, [chain[1]!])
    expect(check).toMatchObject({ verdict: 'genuine', document: { kind: 'acceptance' } })
    const paper = acceptanceSchema.parse(parseCanonicalJson(check.attachment!.text))
    expect(paper).toMatchObject({ typed: 'Cara Mole', record: { id: interim, document: await digestOf(interim) }, sheetDigest: sha256Hex(rows[0]!.sheet) })
    expect(await checkFile(bytes)).toMatchObject({ verdict: 'genuine', acceptance: { meaning: 'receivedCopy' }, log: { verified: true, headSigned: true } })
    await expect(readAcceptanceFile(scene.other.as('manager'), first.id)).rejects.toMatchObject({ code: 'notFound' })
    await expect(signAcceptance(client(), interim, await signing(interim, {}))).rejects.toMatchObject({ code: 'conflict' })
  })

  it('for the owner needs a person whom the owner named, who says so', async () => {
    await named(false)
    await expect(signAcceptance(client(), interim, await signing(interim, { meaning: 'acceptsWork', named: true }))).rejects.toMatchObject({ code: 'notAllowed' })
    await named(true)
    await expect(signAcceptance(client(), interim, await signing(interim, { meaning: 'acceptsWork' }))).rejects.toMatchObject({ code: 'invalid' })
    await expect(signAcceptance(scene.other.as('client'), interim, await signing(interim, { meaning: 'acceptsWork', named: true }))).rejects.toMatchObject({ code: 'notFound' })
  })

  it('shows the offer in its own words, and refuses an answer to another offer', async () => {
    const [job] = (await site()).jobs
    expect(job!.offers).toMatchObject([{ deficiency: reading, offer: offered, state: 'offered', tag: 'A1', condition: 'No wind screen is hung there.', until: '2028-06-30', value: { amount: expect.any(Number) as number } }])
    await expect(signAcceptance(client(), interim, await signing(interim, { meaning: 'acceptsDeviation', named: true, deviation: { deficiency: reading, offer: uuidv7() } }))).rejects.toMatchObject({ code: 'stale' })
    await expect(signAcceptance(client(), interim, await signing(interim, { meaning: 'acceptsDeviation', named: true, deviation: { deficiency: uuidv7(), offer: offered } }))).rejects.toMatchObject({ code: 'notFound' })
  })

  it('for a deviation is told to the round, signed by the client\'s account, and ends the deficiency', async () => {
    const input = await signing(interim, { meaning: 'acceptsDeviation', named: true, typed: null, strokes: [[{ x: 10, y: 50, t: 0 }, { x: 60, y: 40, t: 30 }]], deviation: { deficiency: reading, offer: offered } })
    await signAcceptance(client(), interim, input)
    await signAcceptance(client(), interim, input)
    const { rows } = await scene.admin.query<{ author_id: string, payload: { for: string, accepted: boolean }, envelope_text: string }>(`select author_id, payload, envelope_text from entry where kind = 'deviationAccepted'`)
    expect(rows).toHaveLength(1)
    expect(rows[0]).toMatchObject({ author_id: scene.one.accounts.client, payload: { accepted: true } })
    expect((JSON.parse(rows[0]!.envelope_text) as { answers: string[] }).answers).toEqual([reading, offered].sort())
    expect((await site()).jobs[0]!.offers).toMatchObject([{ state: 'endedAccepted' }])
    await expect(signAcceptance(client(), interim, { ...input, id: uuidv7() })).rejects.toMatchObject({ code: 'stale' })
  })
})

describe('the public check', { timeout: 120_000 }, () => {
  let bytes: Buffer
  beforeAll(async () => { ({ bytes } = await readRecordFile(manager(), interim)) })

  it('says genuine and current of the file, and that it stands in the log', async () => {
    expect(await checkFile(bytes)).toMatchObject({ by: 'file', verdict: 'genuine', record: { standing: 'current' }, log: { verified: true, headSigned: true, leafText: expect.stringContaining('"salt"') as string } })
    expect(await checkKey(await digestOf(interim))).toMatchObject({ verdict: 'found' })
  })

  it('tells the code alone as found, without the leaf\'s text, in any case of letters', async () => {
    const { rows: [row] } = await scene.admin.query<{ code: string }>('select code from record where id = $1', [interim])
    expect(await checkKey(row!.code.toLowerCase())).toMatchObject({ by: 'code', verdict: 'found', record: { code: row!.code }, log: { leafText: null, verified: true } })
    expect(await checkKey('ZZ-9999-9')).toMatchObject({ verdict: 'unknown', record: null })
  })

  it.each([0.1, 0.35, 0.6, 0.9])('tells a flipped byte at %s of the file', async (at) => {
    const flipped = Buffer.from(bytes)
    flipped[Math.floor(flipped.length * at)]! ^= 1
    expect(await checkFile(flipped)).toMatchObject({ verdict: 'altered', record: null })
  })

  it('tells what was added, what is not from here, and what is no PDF', async () => {
    expect(await checkFile(Buffer.concat([bytes, Buffer.from('\n')]))).toMatchObject({ verdict: 'altered', findings: ['addedAfter'] })
    expect(await checkFile(Buffer.from('%PDF-1.7\n%%EOF\n'))).toMatchObject({ verdict: 'notFromHere', findings: ['noSeal'] })
    expect(await checkFile(Buffer.from('a letter'))).toMatchObject({ verdict: 'notPdf' })
  })

  it('tells under question, and takes it back', async () => {
    await changeStanding(manager(), interim, 'underQuestion', 'A post was found loose.')
    const asked = await checkFile(bytes)
    expect(asked).toMatchObject({ verdict: 'genuine', record: { standing: 'underQuestion', standingAt: expect.any(String) as string } })
    expect(JSON.stringify(asked)).not.toContain('loose')
    await expect(signAcceptance(client(), interim, await signing(interim, { meaning: 'acceptsWork', named: true }))).rejects.toMatchObject({ code: 'conflict' })
    await changeStanding(manager(), interim, 'current', 'It was another fence.')
    expect((await checkFile(bytes)).record?.standing).toBe('current')
  })

  it('tells that a later record replaces it, for which elements and by which', async () => {
    const final = await signAndRequest(scene.one, 'final')
    await sealRecord(scene.one.id, final)
    const { rows: [row] } = await scene.admin.query<{ code: string }>('select code from record where id = $1', [final])
    const answer = await checkFile(bytes)
    expect(answer).toMatchObject({ verdict: 'genuine', record: { standing: 'superseded' } })
    expect(answer.record!.replaced.map(one => one.by)).toEqual(Array.from({ length: answer.record!.elements }, () => row!.code))
    // The client was not sent the later one: it learns that there is one, and sees nothing of it.
    expect((await listRecords(client(), { find: '', most: 10 })).map(one => [one.id, one.standing])).toEqual([[interim, 'superseded']])
    await expect(readRecord(client(), final)).rejects.toMatchObject({ code: 'notFound' })
    await expect(signAcceptance(client(), interim, await signing(interim, { meaning: 'acceptsWork', named: true }))).rejects.toMatchObject({ code: 'conflict' })
  })

  it('tells a withdrawn one, which is never current again', async () => {
    await changeStanding(manager(), interim, 'withdrawn', 'Wrong site.')
    expect((await checkFile(bytes)).record?.standing).toBe('withdrawn')
    await expect(changeStanding(manager(), interim, 'current', 'No.')).rejects.toMatchObject({ code: 'conflict' })
  })

  it('does not take the log\'s word where the head was written over', async () => {
    await scene.admin.query('alter table log_head disable trigger all')
    await scene.admin.query('update log_head set root = $1 where size = (select max(size) from log_head)', ['0'.repeat(64)])
    await scene.admin.query('alter table log_head enable trigger all')
    expect((await checkFile(bytes)).log?.verified).toBe(false)
  })
})
