import type { Entry, KeptEntry } from '../../../shared/entry/entry'
import { isKnown } from '../../../shared/entry/entry'
import { contactNamed, entriesNamed } from '../../database/queries/portal'
import { forOrganisation, withSession } from '../../database/withSession'
import { sha256 } from '../entry/sha256'
import { readSheet } from '../entry/signatureRefusal'
import { Failure } from '../failure'
import { offeredDeviations } from '../portal/offeredDeviations'
import { writeAnswer } from './writeAnswer'

/** The same id however often it is worked out, so that a signature sent again answers nothing twice. */
function answerId(signature: string, deficiency: string): string {
  const hex = sha256(`${signature} ${deficiency}`)
  return `${hex.slice(0, 8)}-${hex.slice(8, 12)}-8${hex.slice(13, 16)}-8${hex.slice(17, 20)}-${hex.slice(20, 32)}`
}

/**
 * "Accepts this deviation", signed on the inspector's device, ends the tag as the client's own page does, where the signer is named by the owner. It answers
 * the offers that the sign sheet holds with their readings and no others; what was offered anew meanwhile stays offered.
 */
export async function acceptOnDevice(organisationId: string, entry: KeptEntry): Promise<void> {
  if (!isKnown(entry) || entry.envelope.kind !== 'signature') return
  const { envelope, payload } = entry as Entry<'signature'>
  const sheet = payload?.state === 'signed' && payload.meaning === 'acceptsDeviation' ? readSheet(payload.sheet) : null
  if (!payload || !sheet) return
  const staff = { ...forOrganisation(organisationId), organisationId }
  const { contact, found, digests, there } = await withSession(staff, async (tx) => {
    const found = await offeredDeviations(tx, envelope.job)
    const offers = found?.offers ?? []
    return {
      found, contact: await contactNamed(tx, envelope.job, payload.signer),
      digests: new Map((await entriesNamed(tx, offers.flatMap(one => [one.offer, ...one.readings]))).map(one => [one.id, sha256(one.envelope)])),
      there: (await entriesNamed(tx, offers.map(one => answerId(envelope.id, one.deficiency)))).map(one => one.id),
    }
  })
  if (!contact?.accepts || found?.round.id !== envelope.round || found.round.state !== 'open') return
  const seen = new Set(sheet.entries)
  for (const offer of found.offers) {
    const id = answerId(envelope.id, offer.deficiency)
    const signedOver = [offer.offer, ...offer.readings].every(one => seen.has(digests.get(one) ?? ''))
    if (there.includes(id) || offer.state !== 'offered' || offer.class !== 'ownerMayAccept' || offer.readings.length !== 1 || !signedOver) continue
    const answer = { id, jobId: envelope.job, roundId: envelope.round, author: payload.signer.account ?? envelope.author, account: payload.signer.account, accepted: true, words: null }
    // What changed at this very moment is not what was signed over: the offer stands, and the signature too.
    await writeAnswer(staff, offer, contact, answer).catch((error: unknown) => { if (!(error instanceof Failure)) throw error })
  }
}
