import type { PDFDocument } from 'pdf-lib'
import { PDFArray, PDFHexString, PDFInvalidObject, PDFName, PDFNumber, PDFString } from 'pdf-lib'

/** Bytes kept for the CMS: the signature and two certificates take about 2 KB, a later RFC 3161 token with its chain up to 8 KB. */
export const SEAL_BYTES = 16_384
/** Ten places a number: a file of up to 9.9 GB. */
const HOLE = '0000000000'
/** How the byte range stands in a document that is still to be signed; the first number never changes. */
export const OPEN_RANGE = `/ByteRange [0 ${HOLE} ${HOLE} ${HOLE}]`

/**
 * Leaves the place for the one seal of a document: a field without a picture, and the signature dictionary with its byte range and contents open.
 * DocMDP P=2: after the seal only further signatures may be added (ISO 32000-2, 12.8.2.2). The dictionary is written as plain bytes so that it
 * never goes into an object stream and its places can be found and filled.
 */
export function leaveSealPlace(doc: PDFDocument, { at, name, reason }: { at: string, name: string, reason: string }): void {
  const { context, catalog } = doc
  const dictionary = [
    '<<', '/Type /Sig', '/Filter /Adobe.PPKLite', '/SubFilter /ETSI.CAdES.detached', OPEN_RANGE,
    `/Contents <${'0'.repeat(SEAL_BYTES * 2)}>`, `/M ${PDFString.of(pdfDate(at)).toString()}`,
    `/Name ${PDFHexString.fromText(name).toString()}`, `/Reason ${PDFHexString.fromText(reason).toString()}`,
    '/Reference [<</Type /SigRef /TransformMethod /DocMDP /TransformParams <</Type /TransformParams /P 2 /V /1.2>>>>]', '>>',
  ].join('\n')
  const signature = context.register(PDFInvalidObject.of(new TextEncoder().encode(dictionary)))
  const page = doc.getPage(0)
  const field = context.register(context.obj({
    Type: 'Annot', Subtype: 'Widget', FT: 'Sig', T: PDFString.of('seal'), V: signature, P: page.ref,
    // Hidden nowhere and printed nowhere: a box of no size (ISO 32000-2, 12.7.5.5), its words for those who listen.
    Rect: [0, 0, 0, 0].map(n => PDFNumber.of(n)), F: 132, TU: PDFHexString.fromText(reason),
  }))
  const annotations = page.node.Annots() ?? PDFArray.withContext(context)
  annotations.push(field)
  page.node.set(PDFName.of('Annots'), annotations)
  catalog.set(PDFName.of('AcroForm'), context.obj({ Fields: [field], SigFlags: 3 }))
  catalog.set(PDFName.of('Perms'), context.obj({ DocMDP: signature }))
}

/** A PDF date (ISO 32000-2, 7.9.4) of an instant, in the offset that the instant has. */
export function pdfDate(instant: string): string {
  const [, year, month, day, hour, minute, second, offset] = /^(\d{4})-(\d\d)-(\d\d)T(\d\d):(\d\d):?(\d\d)?(?:\.\d+)?(Z|[+-]\d\d:\d\d)$/.exec(instant)!
  return `D:${year}${month}${day}${hour}${minute}${second ?? '00'}${offset === 'Z' ? 'Z' : `${offset!.slice(0, 3)}'${offset!.slice(4)}'`}`
}
