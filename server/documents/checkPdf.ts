import { createHash, verify, X509Certificate } from 'node:crypto'
import { decodePDFRawStream, PDFArray, PDFDict, PDFDocument, PDFHexString, PDFName, PDFRawStream, PDFString } from 'pdf-lib'
import { acceptanceSchema, type AcceptanceDocument } from '../../shared/record/acceptance'
import { parseCanonicalJson } from '../../shared/record/canonicalJson'
import { anyRecordSchema, type RecordDocument } from '../../shared/record/record'
import { bytesToSign, derLength, readCms, type SealParts } from './cms'

/** What a check may find, each with a sentence for the person who holds the paper (the check page has its own words by these codes). */
export const CHECK_FINDINGS = {
  notPdf: 'This file is no PDF.',
  noSeal: 'This PDF carries no seal of a record.',
  sealOfOthers: 'This PDF is signed, but not in the form of a record from here.',
  cutShort: 'The file ends before what was sealed ends: a part is missing.',
  addedAfter: 'Something was added to the file after it was sealed.',
  sealDamaged: 'The seal itself is damaged or has something else in its place.',
  contentChanged: 'What stands in the file is not what was sealed.',
  signatureWrong: 'The signature does not belong to this seal.',
  unknownIssuer: 'The seal was made with a certificate that is not from here.',
  noAttachment: 'The sealed file does not carry its record as data.',
  attachmentUnreadable: 'The data in the file is no record that this version can read.',
} as const
export type CheckFinding = keyof typeof CHECK_FINDINGS

export type CheckVerdict = 'genuine' | 'altered' | 'notFromHere' | 'notPdf'

export type CheckedDocument = { kind: 'record', record: RecordDocument } | { kind: 'acceptance', acceptance: AcceptanceDocument }

export interface PdfCheck {
  verdict: CheckVerdict
  findings: CheckFinding[]
  /** SHA-256 of the signed byte range as the file has it now, in hex. */
  rangeDigest: string | null
  /** The attached data: its exact text and SHA-256; only from a genuine file. */
  attachment: { name: string, text: string, digest: string } | null
  document: CheckedDocument | null
  /** Which of the trusted roots issued the seal, as a place in the list. */
  root: number | null
  /** Whether a time stamp stands in the seal; it is not checked here. */
  timeStamped: boolean
}

/**
 * Whether a PDF is one that was sealed here and still has every byte of it. `trustedRoots` are root certificates in DER. Beyond what ordinary readers
 * check: the sealed range ends the file, its gap holds one seal of ours in DER and zeros and nothing else. Never throws for what the file holds.
 * Whether the record is still current is not in the file: that is for the log and the store.
 */
export async function checkPdf(bytes: Uint8Array, trustedRoots: Uint8Array[]): Promise<PdfCheck> {
  const file = Buffer.from(bytes.buffer, bytes.byteOffset, bytes.length)
  const nothing: PdfCheck = { verdict: 'notPdf', findings: [], rangeDigest: null, attachment: null, document: null, root: null, timeStamped: false }
  if (file.subarray(0, 5).toString('latin1') !== '%PDF-') return { ...nothing, findings: ['notPdf'] }
  const place = sealPlaceOf(file)
  if (!place) return { ...nothing, verdict: 'notFromHere', findings: [file.includes('/ByteRange') ? 'sealOfOthers' : 'noSeal'] }

  const findings: CheckFinding[] = []
  if (place.end > file.length) return { ...nothing, verdict: 'altered', findings: ['cutShort'] }
  if (place.end < file.length) findings.push('addedAfter')
  const digest = createHash('sha256').update(file.subarray(0, place.gap)).update(file.subarray(place.resume, place.end)).digest()
  const seal = sealIn(file.subarray(place.gap, place.resume))
  const root = seal ? rootOf(seal, trustedRoots) : null
  if (!seal) findings.push('sealDamaged')
  else {
    if (Buffer.compare(seal.digest, digest) !== 0) findings.push('contentChanged')
    if (!isSignedBy(seal)) findings.push('signatureWrong')
    if (root === null) findings.push('unknownIssuer')
  }
  const result = { ...nothing, findings, root, rangeDigest: digest.toString('hex'), timeStamped: seal?.token != null }
  // A whole seal of somebody else's is not a forgery of ours; everything else that differs is a change.
  if (findings.length > 0) return { ...result, verdict: findings.every(finding => finding === 'unknownIssuer') ? 'notFromHere' : 'altered' }

  const attachment = await attachmentOf(bytes)
  if (!attachment) return { ...result, verdict: 'altered', findings: ['noAttachment'] }
  const document = documentIn(attachment.text)
  return document ? { ...result, verdict: 'genuine', attachment, document } : { ...result, verdict: 'genuine', attachment, findings: ['attachmentUnreadable'] }
}

interface SealPlace { gap: number, resume: number, end: number }

/** The first seal in the form that signPdf writes; a later revision cannot come before it. */
function sealPlaceOf(file: Buffer): SealPlace | null {
  for (let at = file.indexOf('/ByteRange [0 '); at !== -1; at = file.indexOf('/ByteRange [0 ', at + 1)) {
    const found = /^\/ByteRange \[0 (\d{10}) (\d{10}) (\d{10})\]\n\/Contents $/.exec(file.subarray(at, at + 58).toString('latin1'))
    if (!found) continue
    const [gap, resume, rest] = found.slice(1).map(Number) as [number, number, number]
    // The gap is the very text of the contents, no more and no less.
    if (gap === at + 58 && resume > gap + 2) return { gap, resume, end: resume + rest }
  }
  return null
}

/** The seal in a gap: hexadecimal between angle brackets, one DER value, zeros to the end. */
function sealIn(gap: Buffer): SealParts | null {
  const hex = gap.subarray(1, -1).toString('latin1')
  if (gap[0] !== 0x3C || gap[gap.length - 1] !== 0x3E || !/^(?:[0-9a-f]{2})+$/.test(hex)) return null
  const bytes = Buffer.from(hex, 'hex')
  const length = derLength(bytes)
  if (length === null || length > bytes.length || bytes.subarray(length).some(byte => byte !== 0)) return null
  return readCms(bytes.subarray(0, length))
}

function isSignedBy({ chain, digest, signature }: SealParts): boolean {
  try {
    return verify('sha256', bytesToSign(digest, chain[0]!), { key: new X509Certificate(chain[0]!).publicKey, dsaEncoding: 'der' }, signature)
  }
  catch {
    return false
  }
}

/** The trusted root that issued the seal's certificate; the chain in the seal must be that certificate and that root and nothing else. */
function rootOf({ chain }: SealParts, trustedRoots: Uint8Array[]): number | null {
  const at = trustedRoots.findIndex(root => chain.length === 2 && Buffer.compare(root, chain[1]!) === 0)
  if (at === -1) return null
  try {
    const [seal, root] = [new X509Certificate(chain[0]!), new X509Certificate(trustedRoots[at]!)]
    return root.ca && !seal.ca && seal.checkIssued(root) && seal.verify(root.publicKey) ? at : null
  }
  catch {
    return null
  }
}

/** The one file that a sealed document carries. */
async function attachmentOf(bytes: Uint8Array): Promise<PdfCheck['attachment']> {
  const doc = await PDFDocument.load(bytes, { updateMetadata: false })
  const names = doc.catalog.lookupMaybe(PDFName.of('Names'), PDFDict)?.lookupMaybe(PDFName.of('EmbeddedFiles'), PDFDict)?.lookupMaybe(PDFName.of('Names'), PDFArray)
  if (!names || names.size() !== 2) return null
  const spec = names.lookup(1, PDFDict)
  const name = spec.lookup(PDFName.of('UF'))
  const stream = spec.lookup(PDFName.of('EF'), PDFDict).lookup(PDFName.of('F'))
  if (!(stream instanceof PDFRawStream)) return null
  const content = decodePDFRawStream(stream).decode()
  return {
    name: name instanceof PDFHexString || name instanceof PDFString ? name.decodeText() : '',
    text: new TextDecoder('utf-8', { ignoreBOM: true }).decode(content),
    digest: createHash('sha256').update(content).digest('hex'),
  }
}

function documentIn(text: string): CheckedDocument | null {
  try {
    const value = parseCanonicalJson(text)
    const record = anyRecordSchema.safeParse(value)
    if (record.success) return { kind: 'record', record: record.data }
    const acceptance = acceptanceSchema.safeParse(value)
    return acceptance.success ? { kind: 'acceptance', acceptance: acceptance.data } : null
  }
  catch {
    return null
  }
}
