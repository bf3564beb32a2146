import { mkdirSync } from 'node:fs'
import { PDFDocument, rgb } from 'pdf-lib'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { makeOrganisationCertificate, unwrapKey, wrapKey, type OrganisationCertificate } from '#server/documents/certificate'
import { checkPdf } from '#server/documents/checkPdf'
import { buildRecordPdf } from '#server/documents/recordPdf'
import { signPdf, type SignedPdf } from '#server/documents/signPdf'
import { digestOf } from '#shared/record/canonicalJson'
import { pem, run, testFolder, tryRun } from '../helpers/outsideTools'
import { sampleRecord, type Sample } from '../helpers/sampleRecord'

const folder = testFolder()
let sample: Sample
let ours: OrganisationCertificate
let sealed: SignedPdf
let roots: Uint8Array[]
const from = new Date('2026-01-01T00:00:00Z')

/** The signed bytes and the seal, cut out by the byte range as any reader would. */
function parts(file: Uint8Array): { content: Buffer, cms: Buffer, gap: number, resume: number } {
  const bytes = Buffer.from(file)
  const [gap, resume, rest] = /\/ByteRange \[0 (\d+) (\d+) (\d+)\]/.exec(bytes.toString('latin1'))!.slice(1).map(Number) as [number, number, number]
  const padded = Buffer.from(bytes.subarray(gap + 1, resume - 1).toString('latin1'), 'hex')
  const length = 4 + padded.readUInt16BE(2)
  return { content: Buffer.concat([bytes.subarray(0, gap), bytes.subarray(resume, resume + rest)]), cms: padded.subarray(0, length), gap, resume }
}

beforeAll(async () => {
  sample = await sampleRecord()
  ours = await makeOrganisationCertificate({ organisation: 'Tarnbeck Fence & Gate', from })
  const other = await makeOrganisationCertificate({ organisation: 'Somebody, Else + "Quoted" Ltd', from })
  roots = [other.root.certificate, ours.root.certificate]
  sealed = signPdf(await buildRecordPdf(sample.record, sample), ours.seal.key, [ours.seal.certificate, ours.root.certificate])
  folder.put('sealed.pdf', sealed.file)
})
afterAll(() => folder.remove())

describe('a sealed record', () => {
  it('is genuine to our own check, which gives back the very document', async () => {
    const check = await checkPdf(sealed.file, roots)
    expect(check).toMatchObject({ verdict: 'genuine', findings: [], root: 1, rangeDigest: sealed.rangeDigest, timeStamped: false })
    expect(check.attachment).toMatchObject({ name: 'record.json', digest: digestOf(sample.record) })
    expect(check.document).toEqual({ kind: 'record', record: sample.record })
  })
  it('is a valid, trusted signature of the total document to pdfsig with an NSS database that trusts the root', () => {
    const database = folder.path('nss')
    mkdirSync(database)
    run('certutil', '-N', '-d', `sql:${database}`, '--empty-password')
    folder.put('root.pem', pem(ours.root.certificate))
    run('certutil', '-A', '-d', `sql:${database}`, '-n', 'root', '-t', 'CT,C,C', '-i', folder.path('root.pem'))
    const told = run('pdfsig', '-nssdir', `sql:${database}`, folder.path('sealed.pdf'))
    expect(told).toContain('Signature is Valid')
    expect(told).toContain('Certificate is Trusted')
    expect(told).toContain('Total document signed')
    expect(told).toContain('ETSI.CAdES.detached')
    expect(told).toContain('Tarnbeck Fence & Gate seal')
  })
  it('verifies as CAdES with openssl, over the bytes that the range names', () => {
    const { content, cms } = parts(sealed.file)
    folder.put('content.bin', content)
    folder.put('seal.der', cms)
    folder.put('root.pem', pem(ours.root.certificate))
    const args = ['cms', '-verify', '-cades', '-binary', '-inform', 'DER', '-in', folder.path('seal.der'), '-content', folder.path('content.bin'), '-CAfile', folder.path('root.pem'), '-purpose', 'any', '-out', folder.path('verified.bin')]
    expect(tryRun('openssl', ...args)).toMatchObject({ code: 0 })
    folder.put('content.bin', Buffer.concat([content, Buffer.of(0)]))
    expect(tryRun('openssl', ...args).code).not.toBe(0)
  })
  it('carries no signing time, one signer, and a certificate whose names stand apart', () => {
    const printed = run('openssl', 'asn1parse', '-inform', 'DER', '-in', folder.put('seal2.der', parts(sealed.file).cms))
    expect(printed).not.toContain('signingTime')
    expect(printed).toContain('id-smime-aa-signingCertificateV2')
    const text = run('openssl', 'x509', '-inform', 'DER', '-in', folder.put('seal-certificate.der', ours.seal.certificate), '-noout', '-subject', '-issuer', '-ext', 'keyUsage,basicConstraints', '-nameopt', 'RFC2253')
    expect(text).toContain('subject=CN=Tarnbeck Fence & Gate seal,O=Tarnbeck Fence & Gate')
    expect(text).toContain('issuer=CN=Tarnbeck Fence & Gate root,O=Tarnbeck Fence & Gate')
    expect(text).toContain('Digital Signature, Non Repudiation')
    expect(text).toContain('CA:FALSE')
  })
  it('is whole to qpdf', () => {
    expect(run('qpdf', '--check', folder.path('sealed.pdf'))).toContain('No syntax or stream encoding errors found')
  })
})

describe('what our check refuses', () => {
  const changed = async (change: (bytes: Buffer) => Buffer) => checkPdf(new Uint8Array(change(Buffer.from(sealed.file))), roots)
  const flip = (at: number, bit = 1) => (bytes: Buffer) => {
    bytes[at]! ^= bit
    return bytes
  }

  it('a byte flipped anywhere in the pages, photos, data or structure', async () => {
    const { gap, resume } = parts(sealed.file)
    const length = sealed.file.length
    const places = [9, ...Array.from({ length: 24 }, (_, i) => Math.floor((i + 0.5) * gap / 24)), ...Array.from({ length: 6 }, (_, i) => resume + Math.floor((i + 0.5) * (length - resume) / 6)), length - 2]
    for (const place of places) {
      const { verdict, document } = await changed(flip(place))
      expect(verdict, `byte ${place}`).not.toBe('genuine')
      expect(document).toBeNull()
    }
  })
  it('a byte flipped anywhere in the seal, also where its own signature does not look', async () => {
    const { gap, cms } = parts(sealed.file)
    for (let at = 0; at < cms.length; at += 7) {
      // Another hexadecimal figure in the place of one: 0 for 1, 1 for all others.
      const { verdict } = await changed((bytes) => {
        bytes[gap + 1 + 2 * at] = bytes[gap + 1 + 2 * at] === 0x31 ? 0x30 : 0x31
        return bytes
      })
      const same = Buffer.from(sealed.file)[gap + 1 + 2 * at]
      expect(verdict, `seal byte ${at}, was ${same}`).not.toBe('genuine')
    }
  })
  it('padding that is not zero, which ordinary readers pass over', async () => {
    const { resume } = parts(sealed.file)
    expect(await changed((bytes) => {
      bytes[resume - 2] = 0x31
      return bytes
    })).toMatchObject({ verdict: 'altered', findings: ['sealDamaged'] })
  })
  it('anything behind the end', async () => {
    expect(await changed(bytes => Buffer.concat([bytes, Buffer.from('\n')]))).toMatchObject({ verdict: 'altered', findings: ['addedAfter'] })
  })
  it('an end that is missing', async () => {
    expect(await changed(bytes => bytes.subarray(0, bytes.length - 1))).toMatchObject({ verdict: 'altered', findings: ['cutShort'] })
  })
  it('a page painted over in an appended revision', async () => {
    // Made by hand: a new content stream for page 1 and a new page object, with a cross-reference table that points back.
    const bytes = Buffer.from(sealed.file)
    const doc = await PDFDocument.load(sealed.file, { updateMetadata: false })
    const { ref } = doc.getPage(0)
    const start = Number(/startxref\s+(\d+)\s+%%EOF\s*$/.exec(bytes.subarray(-200).toString('latin1'))![1])
    const page = doc.getPage(0).node.toString().replace(/\/Contents \d+ \d+ R/, `/Contents [${/\/Contents (\d+ \d+ R)/.exec(doc.getPage(0).node.toString())![1]} 90001 0 R]`)
    const object = `\n${ref.objectNumber} 0 obj\n${page}\nendobj\n`
    const stream = '90001 0 obj\n<</Length 30>>\nstream\n1 1 1 rg 50 500 500 200 re f  \nendstream\nendobj\n'
    const at = bytes.length
    const line = (offset: number) => `${String(offset).padStart(10, '0')} 00000 n \n`
    const table = `xref\n${ref.objectNumber} 1\n${line(at + 1)}90001 1\n${line(at + object.length)}trailer\n<</Size 90002 /Root ${doc.context.trailerInfo.Root!.toString()} /Prev ${start}>>\nstartxref\n${at + object.length + stream.length}\n%%EOF\n`
    const revised = Buffer.concat([bytes, Buffer.from(object + stream + table, 'latin1')])
    expect(await checkPdf(new Uint8Array(revised), roots)).toMatchObject({ verdict: 'altered', findings: ['addedAfter'] })
  })
  it('a page painted over and saved as a new file', async () => {
    const doc = await PDFDocument.load(sealed.file)
    doc.getPage(0).drawRectangle({ x: 50, y: 500, width: 400, height: 100, color: rgb(1, 1, 1) })
    expect((await checkPdf(await doc.save(), roots)).verdict).not.toBe('genuine')
  })
  it('a record that somebody else sealed', async () => {
    expect(await checkPdf(sealed.file, [roots[0]!])).toMatchObject({ verdict: 'notFromHere', findings: ['unknownIssuer'], document: null, root: null })
    expect(await checkPdf(sealed.file, [])).toMatchObject({ verdict: 'notFromHere', findings: ['unknownIssuer'] })
  })
  it('the seal of one record moved onto another', async () => {
    const other = await sampleRecord({ final: true })
    const open = Buffer.from(signPdf(await buildRecordPdf(other.record, other), ours.seal.key, [ours.seal.certificate, ours.root.certificate]).file)
    const { gap, resume } = parts(open)
    const theirs = parts(sealed.file)
    Buffer.from(sealed.file).copy(open, gap, theirs.gap, theirs.resume)
    expect(resume - gap).toBe(theirs.resume - theirs.gap)
    expect(await checkPdf(new Uint8Array(open), roots)).toMatchObject({ verdict: 'altered', findings: ['contentChanged'] })
  })
  it('a certificate of ours that is no seal: the root as signer', async () => {
    const open = await buildRecordPdf(sample.record, sample)
    const signed = signPdf(open, ours.root.key, [ours.root.certificate, ours.root.certificate])
    expect(await checkPdf(signed.file, roots)).toMatchObject({ verdict: 'notFromHere', findings: ['unknownIssuer'] })
  })
  it('what is no PDF, no record, or not sealed', async () => {
    expect(await checkPdf(new Uint8Array(), roots)).toMatchObject({ verdict: 'notPdf', findings: ['notPdf'] })
    expect(await checkPdf(new TextEncoder().encode('<html>'), roots)).toMatchObject({ verdict: 'notPdf' })
    const plain = await PDFDocument.create()
    plain.addPage()
    expect(await checkPdf(await plain.save(), roots)).toMatchObject({ verdict: 'notFromHere', findings: ['noSeal'] })
    expect((await checkPdf(await buildRecordPdf(sample.record, sample), roots)).verdict).not.toBe('genuine')
    expect(await checkPdf(new TextEncoder().encode('%PDF-1.7\n/ByteRange [0 10 20 30]\n%%EOF'), roots)).toMatchObject({ verdict: 'notFromHere', findings: ['sealOfOthers'] })
    expect(await checkPdf(new TextEncoder().encode('%PDF-1.7\n/ByteRange [0 0000000066 0000000070 0000000000]\n/Contents <00>'), roots)).toMatchObject({ verdict: expect.not.stringMatching('genuine') })
  })
})

describe('a signing key in the store', () => {
  it('opens under its own secret and owner and under no other', () => {
    const wrapped = wrapKey(ours.seal.key, { secret: 'one secret of the installation', owner: 'a' })
    expect(unwrapKey(wrapped, { secret: 'one secret of the installation', owner: 'a' })).toEqual(ours.seal.key)
    expect(wrapped).not.toContain(Buffer.from(ours.seal.key).toString('base64url').slice(0, 20))
    for (const wrong of [{ secret: 'another secret', owner: 'a' }, { secret: 'one secret of the installation', owner: 'b' }]) {
      expect(() => unwrapKey(wrapped, wrong)).toThrow(expect.objectContaining({ code: 'wrongSecret' }))
    }
    expect(() => unwrapKey('nothing', { secret: 'x', owner: 'a' })).toThrow(expect.objectContaining({ code: 'notAKey' }))
    expect(wrapKey(ours.seal.key, { secret: 's', owner: 'a' })).not.toBe(wrapKey(ours.seal.key, { secret: 's', owner: 'a' }))
  })
})
