import type { PDFDocument } from 'pdf-lib'
import { AFRelationship, PDFHexString, PDFName, PDFRawStream, PDFString } from 'pdf-lib'
import sharp from 'sharp'
import { pdfDate } from './sealPlace'

let profile: Promise<Uint8Array> | undefined
/** The sRGB profile that our image library writes into pictures. */
async function colourProfile(): Promise<Uint8Array> {
  profile ??= sharp({ create: { width: 1, height: 1, channels: 3, background: '#fff' } }).withIccProfile('srgb').png().toBuffer()
    .then(async picture => new Uint8Array((await sharp(picture).metadata()).icc!))
  return profile
}

export interface ArchiveParts {
  /** The canonical JSON that the document was made from, and the name that it is attached under. */
  source: { name: string, text: string, description: string }
  title: string
  author: string
  language: string
  /** When the document was sealed: all its dates. */
  at: string
  /** SHA-256 of the source in hex: the file's identifier. */
  digest: string
}

/** What makes a file stand alone in an archive: its source attached, its colours defined, metadata and identifiers that depend on the source alone. */
export async function addArchiveParts(doc: PDFDocument, { source, title, author, language, at, digest }: ArchiveParts): Promise<void> {
  const { context, catalog } = doc
  const date = new Date(at)
  await doc.attach(new TextEncoder().encode(source.text), source.name, { mimeType: 'application/json', description: source.description, afRelationship: AFRelationship.Data, creationDate: date, modificationDate: date })

  const bytes = await colourProfile()
  const icc = context.register(PDFRawStream.of(context.obj({ N: 3, Length: bytes.length }), bytes))
  catalog.set(PDFName.of('OutputIntents'), context.obj([{ Type: 'OutputIntent', S: 'GTS_PDFA1', OutputConditionIdentifier: PDFString.of('sRGB IEC61966-2.1'), DestOutputProfile: icc }]))

  const instant = date.toISOString().replace('.000', '')
  const xmp = new TextEncoder().encode(`<?xpacket begin="\uFEFF" id="W5M0MpCehiHzreSzNTczkc9d"?>
<x:xmpmeta xmlns:x="adobe:ns:meta/"><rdf:RDF xmlns:rdf="http://www.w3.org/1999/02/22-rdf-syntax-ns#"><rdf:Description rdf:about="" xmlns:dc="http://purl.org/dc/elements/1.1/" xmlns:xmp="http://ns.adobe.com/xap/1.0/" xmlns:pdf="http://ns.adobe.com/pdf/1.3/" xmlns:xmpMM="http://ns.adobe.com/xap/1.0/mm/">
<dc:format>application/pdf</dc:format><dc:title><rdf:Alt><rdf:li xml:lang="x-default">${escaped(title)}</rdf:li></rdf:Alt></dc:title><dc:creator><rdf:Seq><rdf:li>${escaped(author)}</rdf:li></rdf:Seq></dc:creator><dc:language><rdf:Bag><rdf:li>${language}</rdf:li></rdf:Bag></dc:language>
<xmp:CreateDate>${instant}</xmp:CreateDate><xmp:ModifyDate>${instant}</xmp:ModifyDate><xmp:MetadataDate>${instant}</xmp:MetadataDate><xmp:CreatorTool>Smoothside</xmp:CreatorTool><pdf:Producer>Smoothside</pdf:Producer><xmpMM:DocumentID>urn:sha256:${digest}</xmpMM:DocumentID>
</rdf:Description></rdf:RDF></x:xmpmeta>
<?xpacket end="r"?>`)
  // Metadata stays plain: a search program must be able to read it without inflating streams.
  catalog.set(PDFName.of('Metadata'), context.register(PDFRawStream.of(context.obj({ Type: 'Metadata', Subtype: 'XML', Length: xmp.length }), xmp)))
  context.trailerInfo.Info = context.register(context.obj({
    Title: PDFHexString.fromText(title), Author: PDFHexString.fromText(author), Creator: PDFHexString.fromText('Smoothside'), Producer: PDFHexString.fromText('Smoothside'),
    CreationDate: PDFString.of(pdfDate(instant)), ModDate: PDFString.of(pdfDate(instant)),
  }))
  const id = PDFHexString.of(digest.slice(0, 32).toUpperCase())
  context.trailerInfo.ID = context.obj([id, id])
}

function escaped(text: string): string {
  return text.replace(/&/g, '&amp;').replace(/</g, '&lt;').replace(/>/g, '&gt;')
}
