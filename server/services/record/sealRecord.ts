import { createHash } from 'node:crypto'
import { PDFDocument } from 'pdf-lib'
import { uuidv7 } from 'uuidv7'
import type { SealingState } from '../../../shared/api/record'
import { elementsOf } from '../../../shared/line/line'
import { canonicalJson, sha256Hex } from '../../../shared/record/canonicalJson'
import { anyRecordSchema } from '../../../shared/record/record'
import { usePool } from '../../database/client'
import { insertRound } from '../../database/queries/line'
import { roundOf } from '../../database/queries/round'
import type { SealingRow } from '../../database/queries/sealing'
import * as sealing from '../../database/queries/sealing'
import type { Session } from '../../database/withSession'
import { forOrganisation, withSession } from '../../database/withSession'
import { checkPdf } from '../../documents/checkPdf'
import { buildRecordPdf } from '../../documents/recordPdf'
import { signPdf } from '../../documents/signPdf'
import { logger } from '../../logger'
import { useStorage } from '../../storage/storage'
import { Failure } from '../failure'
import { appendLeaf } from '../log/appendLeaf'
import { refuseBehind, writeHead } from '../log/writeHead'
import { photoKey } from '../photo/storePhoto'
import { gatherRecord } from './gatherRecord'
import { organisationKey } from './signingKey'

export const documentKey = (organisationId: string, digest: string) => `record/${organisationId}/${digest}.json`
export const pdfKey = (organisationId: string, digest: string) => `record/${organisationId}/${digest}.pdf`
/** The one place of a record's signed file before its digest is known: written once, so that a resume never signs twice. */
const signedKey = (organisationId: string, recordId: string) => `sealing/${organisationId}/${recordId}.pdf`

const sha256 = (bytes: Uint8Array) => createHash('sha256').update(bytes).digest('hex')

async function stored(key: string): Promise<Buffer> {
  const bytes = await useStorage().get(key)
  if (!bytes) throw new Failure('unavailable', 'A file of this record is missing from the store. Restore it from a backup, then seal again.')
  return bytes
}

type Step = (session: Session & { organisationId: string }, row: SealingRow) => Promise<void>

/** One step a state (contracts.md 5): each stores its artefact by digest first, then moves the row; done again it finds what it made. */
const STEPS: Record<Exclude<SealingState, 'sealed'>, Step> = {
  async frozen(session, row) {
    const document = await gatherRecord(session, row)
    const text = canonicalJson(document)
    const documentDigest = sha256Hex(text)
    await useStorage().put(documentKey(session.organisationId, documentDigest), Buffer.from(text, 'utf8'))
    const pdf = await buildRecordPdf(document, { photoBytes: digest => stored(photoKey(session.organisationId, digest)) })
    const pdfDigest = sha256(pdf)
    await useStorage().put(pdfKey(session.organisationId, pdfDigest), pdf)
    const pages = (await PDFDocument.load(pdf, { updateMetadata: false })).getPageCount()
    await withSession(session, tx => sealing.advance(tx, row.id, 'frozen', 'built', { document_digest: documentDigest, pdf_digest: pdfDigest, pages, sentence: JSON.stringify(document.sentence) }))
  },
  async built(session, row) {
    const place = signedKey(session.organisationId, row.id)
    const { key, chain } = await organisationKey(session.organisationId)
    if (!await useStorage().has(place)) await useStorage().put(place, signPdf(await stored(pdfKey(session.organisationId, row.pdfDigest!)), key, chain).file)
    const file = await stored(place)
    // Held to our own check before anybody else sees it.
    const { verdict, rangeDigest, attachment } = await checkPdf(file, [chain[1]!])
    if (verdict !== 'genuine' || attachment?.digest !== row.documentDigest) throw new Error(`the sealed file of record ${row.id} does not stand its own check: ${verdict}`)
    await useStorage().put(pdfKey(session.organisationId, sha256(file)), file)
    await withSession(session, tx => sealing.advance(tx, row.id, 'built', 'signed', { file_digest: sha256(file), range_digest: rangeDigest, bytes: file.length }))
  },
  async signed(session, row) {
    await refuseBehind()
    await withSession(session, async (tx) => {
      const leaf = await appendLeaf(tx, 'record', session.organisationId, row.id, { record: row.id, code: row.code, document: row.documentDigest, range: row.rangeDigest })
      // Somebody else was faster: the leaf goes back with the transaction.
      if (!await sealing.advance(tx, row.id, 'signed', 'logged', { leaf })) throw new Failure('stale', 'This step was done already.')
    })
  },
  async logged(session, row) {
    await writeHead()
    const document = anyRecordSchema.parse(JSON.parse((await stored(documentKey(session.organisationId, row.documentDigest!))).toString('utf8')))
    const tags = new Map(elementsOf(document.line).map(element => [element.id, element.tag]))
    await withSession(session, async (tx) => {
      const round = await roundOf(tx, row.roundId)
      if (!await sealing.advance(tx, row.id, 'logged', 'sealed', { sealed_at: new Date(document.sealedAt) })) return
      const replaced = await sealing.writeElements(tx, row.id, row.jobId, document.elements.map(one => ({ element: one.element, tag: tags.get(one.element) ?? '', verdict: one.verdict, released: one.released ? 'released' : one.outOfUse ? 'held' : 'open' })))
      await sealing.endRound(tx, row.roundId)
      if (row.scope === 'interim') await insertRound(tx, { id: uuidv7(), jobId: row.jobId, number: round!.number + 1, basis: round!.basis, openedBy: row.requestedBy })
      await sealing.jobSealed(tx, row.jobId, row.scope)
      for (const earlier of replaced) await appendLeaf(tx, 'superseded', session.organisationId, earlier, { record: earlier, by: row.code })
    })
  },
}

/**
 * Takes a record's sealing as far as it goes, from the artefact that is there last. One at a time a record, by an advisory lock that dies with its
 * connection; a second worker leaves it alone.
 */
export async function sealRecord(organisationId: string, recordId: string): Promise<void> {
  const session = { ...forOrganisation(organisationId), organisationId }
  const guard = await usePool().connect()
  try {
    const { rows } = await guard.query<{ got: boolean }>('select pg_try_advisory_lock(hashtextextended($1, 734002)) as got', [recordId])
    if (!rows[0]!.got) return
    try {
      for (let row = await withSession(session, tx => sealing.sealingOf(tx, recordId)); row && row.sealing !== 'sealed'; row = await withSession(session, tx => sealing.sealingOf(tx, recordId))) {
        await STEPS[row.sealing](session, row)
        logger.info({ record: recordId, from: row.sealing }, 'sealing went on')
      }
    }
    catch (error) {
      const trouble = error instanceof Failure || (error as { code?: string }).code ? (error as Error).message : 'Something broke while sealing. Nothing is lost; try again from here.'
      await withSession(session, tx => sealing.writeTrouble(tx, recordId, trouble)).catch(() => undefined)
      throw error
    }
    finally { await guard.query('select pg_advisory_unlock(hashtextextended($1, 734002))', [recordId]) }
  }
  finally { guard.release() }
}
