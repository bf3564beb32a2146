import { createHash } from 'node:crypto'
import { PDFDocument } from 'pdf-lib'
import { canonicalJson } from '../../shared/record/canonicalJson'
import type { RecordDocument } from '../../shared/record/record'
import { addArchiveParts } from './archiveParts'
import { DocumentError } from './documentError'
import { photoStream, readJpeg } from './photoStream'
import { paintChecking, paintNotes, paintSet, paintSignatures } from './recordEnd'
import { paintDeficiencies, paintOtherPhotos, type Images } from './recordDeficiencies'
import { paintElements, paintProvisions } from './recordElements'
import { paintFirstPage } from './recordFirstPage'
import { frameOf, paintHeadAndFoot, scopeTitle, shortDigest } from './recordFrame'
import { paintReadings } from './recordReadings'
import { leaveSealPlace } from './sealPlace'
import { Sheet } from './sheet'
import { fill } from '../../shared/record/wording'

export interface PhotoSource {
  /** The final bytes of a photo (upright, sRGB JPEG, no metadata) by the SHA-256 that the record names. */
  /** Null for one that was erased, with a reason and by two people: the page shows the gap. */
  photoBytes: (digest: string) => Promise<Uint8Array | null>
}

/**
 * The PDF of a record, from its document alone: pages, record.json attached, and a place left for the seal. The same document gives the same bytes,
 * in any time zone. Throws {@link DocumentError} when a photo is missing, was changed, or is no plain JPEG.
 */
export async function buildRecordPdf(record: RecordDocument, { photoBytes }: PhotoSource): Promise<Uint8Array> {
  const text = canonicalJson(record)
  const digest = createHash('sha256').update(text).digest('hex')
  const doc = await PDFDocument.create({ updateMetadata: false })
  const images = await embedPhotos(doc, record.photos.map(photo => photo.digest), photoBytes)

  const sheet = await Sheet.open(doc)
  const frame = frameOf(sheet, record, digest)
  const { say } = frame
  paintFirstPage(frame)
  paintElements(frame)
  paintReadings(frame)
  paintDeficiencies(frame, images)
  paintOtherPhotos(frame, images)
  paintNotes(frame)
  paintProvisions(frame)
  paintSignatures(frame)
  paintSet(frame)
  paintChecking(frame)

  const { titles } = say.w
  const scope = scopeTitle(frame)
  sheet.finish(record.language, (page, of) => paintHeadAndFoot(sheet, {
    name: record.organisation.name,
    head: fill(titles.head, { scope, site: record.site.name }),
    foot: fill(titles.foot, { scope, job: record.job.number, at: say.at(record.sealedAt) }),
    check: fill(titles.check, { address: shortAddress(record.checkAddress), code: record.code, digest: shortDigest(digest) }),
    page: fill(titles.page, { n: page, of }),
  }))
  const title = fill(titles.document, { scope, job: record.job.number, site: record.site.name })
  await addArchiveParts(doc, { source: { name: 'record.json', text, description: title }, title, author: record.organisation.name, language: record.language, at: record.sealedAt, digest })
  leaveSealPlace(doc, { at: record.sealedAt, name: record.organisation.name, reason: title })
  return doc.save({ addDefaultPage: false, updateFieldAppearances: false, objectsPerTick: Infinity })
}

/** The check address without its scheme and the record's own part: short enough to type. */
export function shortAddress(address: string): string {
  return address.replace(/^https?:\/\//, '').replace(/\/[^/]*$/, '')
}

async function embedPhotos(doc: PDFDocument, digests: string[], photoBytes: PhotoSource['photoBytes']): Promise<Images> {
  const images: Images = new Map()
  for (const digest of digests) {
    const bytes = await photoBytes(digest).catch((cause: unknown) => {
      throw Object.assign(new DocumentError('photoMissing', `The photo ${digest} cannot be read from the store; restore it before sealing.`), { cause })
    })
    if (bytes === null) continue
    if (createHash('sha256').update(bytes).digest('hex') !== digest) throw new DocumentError('photoChanged', `The photo stored as ${digest} has other bytes; restore it before sealing.`)
    // A photo of four colours or none of ours would print wrongly in years: photos are made plain before their entry.
    const jpeg = readJpeg(bytes)
    if (!jpeg) throw new DocumentError('photoNotPlain', `The photo ${digest} is no grey or RGB JPEG; take it in again through the photo intake.`)
    images.set(digest, doc.context.register(photoStream(doc.context, bytes, jpeg)))
  }
  return images
}
