import { uuidv7 } from 'uuidv7'
import type { RecordPageOf, RecordRow } from '../../../shared/api/record'
import type { RecordDocument } from '../../../shared/record/record'
import { photoIsErased } from '../../database/queries/photo'
import * as records from '../../database/queries/record'
import type { Session } from '../../database/withSession'
import { forOrganisation, withSession } from '../../database/withSession'
import { useStorage } from '../../storage/storage'
import { Failure, notFound } from '../failure'
import { photoKey, thumbnailKey } from '../photo/storePhoto'
import { documentKey, pdfKey } from './sealRecord'

export const listRecords = (who: Session, query: { find: string, most: number }): Promise<RecordRow[]> => withSession(who, tx => records.listRecords(tx, query.find, query.most))

/** The canonical document of a record by its digest; null before it is built, or where the store has lost it. */
export async function documentOf(organisationId: string, digest: string | null): Promise<RecordDocument | null> {
  const bytes = digest ? await useStorage().get(documentKey(organisationId, digest)) : null
  return bytes ? JSON.parse(bytes.toString('utf8')) as RecordDocument : null
}

/** A record with its document; for staff with the delivery log and who it can be sent to. That a client opened it is noted, once an hour at most. */
export async function readRecord(who: Session, recordId: string): Promise<RecordPageOf> {
  const found = await withSession(who, async (tx) => {
    const row = await records.recordRow(tx, recordId)
    if (!row) throw notFound('record')
    const more = await records.recordDetails(tx, recordId)
    if (who.standing === 'client') await records.noteDelivery(tx, recordId, 'opened', uuidv7)
    return {
      ...more,
      record: { ...row, ...more.record },
      deliveries: who.standing === 'client' ? [] : await records.deliveriesOf(tx, recordId),
      contacts: who.standing === 'client' ? [] : await records.contactsForRecord(tx, recordId),
    }
  })
  const { organisationId, ...page } = found
  return { ...page, document: await documentOf(organisationId, page.record.documentDigest) }
}

/** The sealed file's bytes and the name that it is saved under. */
export async function readRecordFile(who: Session, recordId: string): Promise<{ bytes: Buffer, name: string }> {
  const row = await withSession(who, async (tx) => {
    const found = await records.recordRow(tx, recordId)
    if (!found || found.sealing !== 'sealed') throw notFound('record')
    const { record, organisationId } = await records.recordDetails(tx, recordId)
    if (who.standing === 'client') await records.noteDelivery(tx, recordId, 'downloaded', uuidv7)
    return { code: found.code, scope: found.scope, fileDigest: record.fileDigest!, organisationId }
  })
  const bytes = await useStorage().get(pdfKey(row.organisationId, row.fileDigest))
  if (!bytes) throw notFound('record')
  return { bytes, name: `${row.code}-${row.scope}.pdf` }
}

/** A photo of a record, for whoever may read the record; small ones for the page. */
export async function readRecordPhoto(who: Session, recordId: string, digest: string): Promise<Buffer> {
  const { organisationId, documentDigest } = await withSession(who, async (tx) => {
    const row = await records.recordRow(tx, recordId)
    if (!row) throw notFound('record')
    return { organisationId: (await records.recordDetails(tx, recordId)).organisationId, documentDigest: row.documentDigest }
  })
  const document = await documentOf(organisationId, documentDigest)
  const there = document?.photos.some(photo => photo.digest === digest)
  const bytes = there ? await useStorage().get(photoKey(organisationId, digest)) ?? await useStorage().get(thumbnailKey(organisationId, digest)) : null
  if (there && !bytes && await withSession(forOrganisation(organisationId), tx => photoIsErased(tx, digest))) throw new Failure('erased', 'This picture was erased, with a reason and by two people. The record stays as it was sealed.')
  if (!bytes) throw notFound('photo')
  return bytes
}
