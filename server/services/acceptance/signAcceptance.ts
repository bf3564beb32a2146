import { createHash } from 'node:crypto'
import type { AcceptanceInput, OfferedDeviation } from '../../../shared/api/portal'
import { jobCode } from '../../../shared/api/job'
import { acceptanceSchema, type AcceptanceDocument } from '../../../shared/record/acceptance'
import { acceptanceConsent, makeAcceptanceSheet } from '../../../shared/record/acceptanceSheet'
import { RENDERER_VERSION } from '../../../shared/record/record'
import type { RecordRow } from '../../../shared/api/record'
import { readJobRow } from '../../database/queries/job'
import * as portal from '../../database/queries/portal'
import * as records from '../../database/queries/record'
import type { Session } from '../../database/withSession'
import { forOrganisation, withSession } from '../../database/withSession'
import { buildAcceptancePdf } from '../../documents/acceptancePdf'
import { signPdf } from '../../documents/signPdf'
import { useSettings } from '../../settings'
import { useStorage } from '../../storage/storage'
import { Failure, notFound } from '../failure'
import { appendLeaf } from '../log/appendLeaf'
import { writeHead } from '../log/writeHead'
import { offeredDeviations } from '../portal/offeredDeviations'
import { witnessKey } from '../record/signingKey'
import { instantAt, zoneNames } from '../record/zoneNames'
import { acceptanceKey } from './readAcceptance'
import { writeAnswer } from './writeAnswer'

type Who = Session & { accountId: string }
export interface SignedAcceptance { id: string, at: string }

/** Why this contact may not sign that about this record, as a refusal; nothing where they may. */
function refuse(row: RecordRow, contact: portal.AcceptingContact, input: AcceptanceInput, before: portal.AcceptanceRow[]): void {
  if (row.documentDigest !== input.document) throw new Failure('stale', 'This is not the document that you read. Load the page again and read it before you sign.')
  if (input.meaning === 'receivedCopy') {
    if (before.some(one => one.meaning === 'receivedCopy' && one.contactId === contact.id)) throw new Failure('conflict', 'You have signed for a copy of this record already. Your receipt stands below.')
    return
  }
  if (!contact.accepts) throw new Failure('notAllowed', `${contact.clientName} has not named you to accept for the owner. Ask the contractor who is named, or have them name you.`)
  if (!input.named) throw new Failure('invalid', 'Say that you are named to accept for the owner, or leave it to the person who is.', [{ pointer: '/named', code: 'required', detail: 'Tick that you are named to accept.' }])
  if (row.standing === 'withdrawn') throw new Failure('conflict', 'This record was withdrawn. There is nothing in it to accept any more.')
  if (row.standing === 'superseded' && input.meaning === 'acceptsWork') throw new Failure('conflict', 'A later record holds instead of this one. Accept the work on that one.')
  if (row.standing === 'underQuestion' && input.meaning === 'acceptsWork') throw new Failure('conflict', 'This record is under question. Wait until the contractor has answered it, then accept the work.')
  if (input.meaning === 'acceptsWork' && before.some(one => one.meaning === 'acceptsWork' && one.contactId === contact.id)) throw new Failure('conflict', 'You have accepted this work already. Your acceptance stands below.')
}

/** Tells the round what the owner's person answered, as an entry with the acceptance's own id; answered already by this very acceptance, it is left as it is. */
async function answerOffer(who: Who, organisationId: string, jobId: string, contact: portal.AcceptingContact, input: AcceptanceInput): Promise<OfferedDeviation> {
  const staff = { ...forOrganisation(organisationId), organisationId }
  const seen = await withSession(who, tx => portal.offeredOf(tx, organisationId, jobId))
  const { found, there } = await withSession(staff, async tx => ({ found: await offeredDeviations(tx, jobId), there: await portal.entriesNamed(tx, [input.id]) }))
  const offer = found?.offers.find(one => one.deficiency === input.deviation!.deficiency)
  if (there.length > 0 && there[0]!.kind === 'deviationAccepted' && offer) return offer
  if (!offer || !seen.includes(offer.deficiency)) throw notFound('deviation')
  if (offer.state !== 'offered' || offer.offer !== input.deviation!.offer) throw new Failure('stale', 'This deviation is not offered like that any more: it was answered, corrected or offered anew. Load the page again and read it.')
  if (offer.class !== 'ownerMayAccept') throw new Failure('conflict', 'This deficiency is of a class that no owner may accept. It has to be corrected, or decided by the authority.')
  if (offer.readings.length !== 1) throw new Failure('notReady', 'Readings at this place disagree. Ask the contractor which one stands before you answer.')
  if (found!.round.state !== 'open') throw new Failure('frozen', 'A record of this job is being sealed at this moment. Try again in a minute.')
  await writeAnswer(staff, offer, contact, { id: input.id, jobId, roundId: found!.round.id, author: who.accountId, account: who.accountId, accepted: input.meaning === 'acceptsDeviation', words: input.words })
  return offer
}

/**
 * A client's signature about a record: its own short document, bound to the record by both digests, sealed with the witness key, a leaf of the log. The
 * record's file is not touched. For a deviation the round is told first, so that a signature never stands without its effect; sent again with the same
 * id, it goes on from where it broke off, or answers as before.
 */
export async function signAcceptance(who: Who, recordId: string, input: AcceptanceInput): Promise<SignedAcceptance> {
  const { row, details, contact, before } = await withSession(who, async (tx) => {
    const row = await records.recordRow(tx, recordId)
    const contact = row && await portal.acceptingContact(tx, recordId, who.accountId)
    if (!row || !contact) throw notFound('record')
    return { row, contact, details: await records.recordDetails(tx, recordId), before: await portal.acceptancesOf(tx, recordId) }
  })
  const mine = before.find(one => one.id === input.id)
  if (mine) return { id: mine.id, at: mine.createdAt.toISOString() }
  refuse(row, contact, input, before)
  const { organisationId } = details
  const offer = input.deviation ? await answerOffer(who, organisationId, row.jobId, contact, input) : null
  const accepted = input.meaning === 'acceptsDeviation'

  const job = (await withSession(forOrganisation(organisationId), tx => readJobRow(tx, row.jobId)))!
  const consent = acceptanceConsent(input.meaning, input.language)
  const sheet = makeAcceptanceSheet({
    format: 'smoothside-acceptance-sheet', version: 1, record: { id: row.id, code: row.code, document: row.documentDigest!, range: details.record.rangeDigest! }, meaning: input.meaning, consent,
    signer: { account: who.accountId, name: contact.name, ...(contact.title ? { title: contact.title } : {}) }, for: contact.clientName,
    deviation: offer && { deficiency: offer.deficiency, offer: offer.offer, tag: offer.tag, words: offer.words, condition: offer.condition, until: offer.until, accepted },
  })
  const [at, sealedAt] = [instantAt(new Date(), job.timeZone), instantAt(new Date(row.sealedAt!), job.timeZone)]
  const code = `${row.code}-A${before.length + 1}`
  const document: AcceptanceDocument = acceptanceSchema.parse({
    format: 'smoothside-acceptance', version: 1, renderer: RENDERER_VERSION, id: input.id, code, language: input.language, zones: zoneNames([at, sealedAt], job.timeZone),
    checkAddress: `${useSettings().origin}/check/${code}`, witness: `Smoothside at ${new URL(useSettings().origin).host}`,
    record: { id: row.id, code: row.code, number: row.number, document: row.documentDigest!, range: details.record.rangeDigest!, sealedAt },
    organisation: row.organisationName, client: contact.clientName, site: row.siteName, job: jobCode(job.organisationCode, job.number),
    meaning: input.meaning === 'refusesDeviation' ? 'acceptsDeviation' : input.meaning, meaningText: consent.text,
    signer: { name: contact.name, ...(contact.title ? { title: contact.title } : {}) }, role: input.language === 'es' ? 'contacto del cliente' : 'client contact', known: 'ownAccount', presence: null, at,
    sheet: sheet.text, sheetDigest: sheet.digest, strokes: input.strokes, typed: input.typed, words: input.words,
    deviations: offer ? [{ deficiency: offer.deficiency, tag: offer.tag, element: offer.elementTag, title: offer.title[input.language], words: offer.words, accepted, condition: offer.condition, until: offer.until }] : [],
  })
  const { key, chain } = await witnessKey()
  const { file, rangeDigest } = signPdf(await buildAcceptancePdf(document), key, chain)
  const fileDigest = createHash('sha256').update(file).digest('hex')
  await useStorage().put(acceptanceKey(organisationId, fileDigest), file)
  const written = await withSession(who, async (tx) => {
    if (await portal.acceptanceOf(tx, input.id)) return false
    const leaf = await appendLeaf(tx, 'acceptance', organisationId, row.id, { record: row.id, code, file: fileDigest, range: rangeDigest, sheet: sheet.digest })
    // Somebody pressed twice and the other was first: the leaf goes back with the transaction.
    if (!await portal.insertAcceptance(tx, { organisationId, id: input.id, recordId: row.id, contactId: contact.id, deficiencyId: offer?.deficiency ?? null, meaning: input.meaning, sheet: sheet.text, fileDigest, leaf })) throw new Failure('stale', 'This was signed at the same moment from another place. Load the page again.')
    return true
  })
  if (written) await writeHead()
  // As it is kept, so that the same again gets the same answer.
  const kept = (await withSession(who, tx => portal.acceptancesOf(tx, recordId))).find(one => one.id === input.id)!
  return { id: kept.id, at: kept.createdAt.toISOString() }
}
