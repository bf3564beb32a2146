import { createHash } from 'node:crypto'
import { readdirSync, readFileSync } from 'node:fs'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { INKS } from '#server/documents/paper'
import { buildRecordPdf } from '#server/documents/recordPdf'
import { guardGlyphs } from '#server/documents/typeface'
import { canonicalJson } from '#shared/record/canonicalJson'
import { run, testFolder } from '../helpers/outsideTools'
import { sampleRecord, type Sample } from '../helpers/sampleRecord'

const folder = testFolder()
const samples = new Map<string, Sample>()
const read = (name: string, ...more: string[]) => run('pdftotext', ...more, folder.path(name), '-').replace(/\s+/g, ' ')

beforeAll(async () => {
  for (const [name, sample] of [['en', await sampleRecord()], ['es', await sampleRecord({ language: 'es', system: 'metric' })], ['final', await sampleRecord({ final: true })]] as const) {
    samples.set(name, sample)
    folder.put(`${name}.pdf`, await buildRecordPdf(sample.record, sample))
  }
})
afterAll(() => folder.remove())

describe('the record on paper', () => {
  it('says the outcome, who employs the inspector, what was not seen and what it is not, all on page 1', () => {
    const first = read('en.pdf', '-f', '1', '-l', '1')
    for (const words of [
      '12 of 19 elements are released. The way out G2 is attended, G3 and G4 are held out of use, 4 tags stay open and G5 was not inspected.',
      'Dana Okafor, employed by Tarnbeck Fence & Gate, which built the fence', 'HC-27-0093, Velmor County', 'way out, never locked: attended since 10:42 EST, 3 Mar 2027', 'tape and sign since 11:05 EST',
      'G5: no key on 3 March.', 'R10: ground not finished, 3 in of mulch to come', 'It is no engineer’s seal, permit approval, certificate of occupancy or warranty.', 'Local code and the authority having jurisdiction come first.',
    ]) expect(first).toContain(words)
    // Fractions come out of a PDF as their runs: figure, fraction slash (U+2044), figure.
    expect(first).toMatch(/clash by 1 ?1\u20442 in/)
    expect(first).toMatch(/latch release height, 3\u20448 in short \(B12\)/)
  })
  it('shows each reading with limit, whose it is, margin and verdict, and what does not conform first', () => {
    const text = read('en.pdf')
    expect(text).toMatch(/at least 54 in over the bottom of the leaf Velmor County, number 12, 2024; confirmed by R\. Tamm, 12 Feb 2027/)
    expect(text).toMatch(/53 ?5\u20448 in/)
    expect(text).toContain('noted: leaf drags at 63 degrees')
    expect(text.indexOf('does not conform', text.indexOf('what does not conform first') + 30)).toBeLessThan(text.indexOf('10 in inside'))
    for (const words of ['recorded, no limit set', 'as read, ground not finished', 'within measuring error, measure again', 'conforms now, settled', '9 of 9']) expect(text).toContain(words)
  })
  it('tells a deficiency from finding to end, and limits that were replaced', () => {
    const text = read('en.pdf')
    for (const words of ['Corrected and read again', 'Corrected by Luis Barrientos: tie turned in and pressed flat', 'Before, B07', 'After, B07', 'Open, waits for longer latch from the maker', 'replaced by the limit above', 'Pool gates are looked at again by the county before the season opens.']) expect(text).toContain(words)
  })
  it('prints the meaning of each signature in full, refusals in own words, late entries and devices not waited for', () => {
    const text = read('en.pdf')
    for (const words of ['I was present on the day named. My signature says nothing about the work.', 'I received a copy of this record. My signature accepts nothing in it.', 'Refused to sign', 'In own words: I wait until G3 is done.', 'in that person’s presence', 'Came after the signatures', 'tablet 2, with Luis Barrientos since 2 Mar 2027, 08:00 EST']) expect(text).toContain(words)
  })
  it('speaks Spanish throughout where the record does, and meters where it is metric', () => {
    const text = read('es.pdf')
    for (const words of ['12 de 19 elementos están liberados. La salida G2 está vigilada', 'al servicio de Tarnbeck Fence & Gate, que construyó la cerca', 'No es un sello de ingeniero', 'no cumple', 'Límites vigentes y de quién son', 'Estuve presente el día nombrado.', 'Cómo comprobar esta acta', '25.60 m', 'página 1 de', 'sobre la parte baja de la hoja']) expect(text).toContain(words)
    for (const english of ['does not conform', 'released', 'Signed', 'page 1', 'at least', 'face']) expect(text).not.toContain(` ${english} `)
  })
  it('says that nothing is open in a final record', () => {
    expect(read('final.pdf', '-f', '1', '-l', '1')).toContain('All 19 elements are released. Nothing stays open.')
  })
})

describe('the file', () => {
  it.each(['en', 'es', 'final'])('%s is whole to qpdf, and carries the very record.json', (name) => {
    expect(run('qpdf', '--check', folder.path(`${name}.pdf`))).toContain('No syntax or stream encoding errors found')
    run('pdfdetach', '-save', '1', '-o', folder.path('record.json'), folder.path(`${name}.pdf`))
    const attached = readFileSync(folder.path('record.json'))
    const text = canonicalJson(samples.get(name)!.record)
    expect(attached.toString('utf8')).toBe(text)
    const grouped = createHash('sha256').update(attached).digest('hex').replace(/(.{4})(?!$)/g, '$1 ')
    expect(read(`${name}.pdf`)).toContain(grouped)
  })
  it('embeds all its fonts as subsets with a way back to Unicode', () => {
    const rows = run('pdffonts', folder.path('en.pdf')).trim().split('\n').slice(2)
    expect(rows).toHaveLength(4)
    for (const row of rows) expect(row).toMatch(/^SMTHS[A-D]\+Lexend\S* .* yes yes yes /)
  })
  it('is tagged: headings, tables with row and column heads, lists, figures, and every page on a structure', () => {
    const structure = run('pdfinfo', '-struct-text', folder.path('en.pdf'))
    for (const type of ['Document', 'Sect', 'H1', 'H2', 'P', 'Table', 'TR', 'TH', 'TD', 'L', 'LI', 'Figure', 'Caption']) expect(structure).toMatch(new RegExp(`^\\s*${type}\\b`, 'm'))
    // The heading comes whole and first; running heads are no part of the structure.
    expect(structure.replace(/"\s+"/g, '')).toMatch(/H1[^"]*"12 of 19 elements are released/)
    expect(structure).not.toContain('page 1 of')
    const info = run('pdfinfo', folder.path('en.pdf'))
    expect(info).toMatch(/Tagged:\s+yes/)
    expect(info).toContain('Interim record 2 of job LS-0417, Wrenfold Elementary')
    const catalog = run('qpdf', '--json', '--json-key=qpdf', '--json-stream-data=none', folder.path('es.pdf'))
    expect(catalog).toContain('"/Lang": "u:es"')
    expect(catalog).toContain('"/DisplayDocTitle": true')
    expect(catalog).toContain('"/AFRelationship": "/Data"')
    expect(catalog).toContain('"/S": "/GTS_PDFA1"')
    // Each figure has words for those who cannot see it.
    const figures = catalog.match(/"\/S": "\/Figure"/g)!.length
    expect(catalog.match(/"\/Alt": "u:[^"]{5,}/g)).toHaveLength(figures)
  })
  it('has metadata that an archive can read without opening streams', () => {
    const bytes = readFileSync(folder.path('en.pdf')).toString('latin1')
    expect(bytes).toContain('<dc:language><rdf:Bag><rdf:li>en</rdf:li>')
    expect(bytes).toContain('2027-03-03T20:12:00Z')
    expect(bytes).not.toContain('pdfaid')
  })
  it('leads a camera to the check page', () => {
    const pages = Number(/Pages:\s+(\d+)/.exec(run('pdfinfo', folder.path('en.pdf')))![1])
    run('pdftoppm', '-r', '110', '-png', '-f', String(pages), '-l', String(pages), folder.path('en.pdf'), folder.path('last'))
    const picture = readdirSync(folder.path('.')).find(name => name.startsWith('last'))!
    expect(run('zbarimg', '-q', folder.path(picture))).toBe('QR-Code:https://smoothside.example/check/LS-0417-2\n')
  })
  it('has the same bytes for the same document, also in another time zone', async () => {
    const { record, photoBytes } = samples.get('en')!
    const digest = createHash('sha256').update(readFileSync(folder.path('en.pdf'))).digest('hex')
    const zone = process.env.TZ
    try {
      for (const other of ['Pacific/Kiritimati', 'America/St_Johns']) {
        process.env.TZ = other
        expect(new Date('2027-03-03T20:12:00Z').getTimezoneOffset()).not.toBe(0)
        expect(createHash('sha256').update(await buildRecordPdf(record, { photoBytes })).digest('hex')).toBe(digest)
      }
    }
    finally {
      if (zone === undefined) delete process.env.TZ
      else process.env.TZ = zone
    }
  })
})

describe('what stops a record from being built', () => {
  it('a photo that is gone, has other bytes, or is no plain JPEG', async () => {
    const { record } = samples.get('en')!
    await expect(buildRecordPdf(record, { photoBytes: () => Promise.reject(new Error('gone')) })).rejects.toMatchObject({ code: 'photoMissing' })
    await expect(buildRecordPdf(record, { photoBytes: async () => new Uint8Array(10) })).rejects.toMatchObject({ code: 'photoChanged' })
    const bytes = new TextEncoder().encode('no picture')
    const digest = createHash('sha256').update(bytes).digest('hex')
    await expect(buildRecordPdf({ ...record, photos: [{ ...record.photos[0]!, digest }] }, { photoBytes: async () => bytes })).rejects.toMatchObject({ code: 'photoNotPlain' })
  })
})

describe('letters that Lexend lacks', () => {
  it('are printed by number, visibly; close spellings become plain ones', () => {
    expect(guardGlyphs('Zoë Łukasz ¿Qué? 54 1⁄2')).toBe('Zoë Łukasz ¿Qué? 54 1⁄2')
    expect(guardGlyphs('54\u2032 9\u2033')).toBe('54\' 9"')
    expect(guardGlyphs('中 Ж ✓ 🙂')).toBe('[U+4E2D] [U+0416] [U+2713] [U+1F642]')
    expect(guardGlyphs('a\u0000b\u200bc\u202ed\ufe0f')).toBe('a bcd')
    expect(guardGlyphs('e\u0301')).toBe('é')
  })
  it('never reach a page: a record full of them still has only glyphs that exist', async () => {
    const sample = samples.get('en')!
    const record = { ...sample.record, client: { ...sample.record.client, name: '王小明 ✓ Жанна' } }
    const path = folder.put('letters.pdf', await buildRecordPdf(record, sample))
    expect(run('pdftotext', '-f', '1', '-l', '1', path, '-').replace(/\s+/g, ' ')).toContain('[U+738B][U+5C0F][U+660E] [U+2713] [U+0416]')
    // Glyph 0 (.notdef) is what a missing letter would print as: no text may hold it.
    run('qpdf', '--qdf', '--object-streams=disable', path, folder.path('letters.qdf'))
    const shown = [...readFileSync(folder.path('letters.qdf')).toString('latin1').matchAll(/<([0-9A-Fa-f]+)> Tj/g)].flatMap(([, hex]) => hex!.match(/.{4}/g)!)
    expect(shown.length).toBeGreaterThan(1000)
    expect(shown).not.toContain('0000')
  })
})

describe('the colours of the paper', () => {
  it('are the daylight tokens of the screens', () => {
    const tokens = readFileSync(new URL('../../app/assets/css/tokens.css', import.meta.url), 'utf8')
    const daylight = tokens.slice(tokens.indexOf(':root'), tokens.indexOf('}', tokens.indexOf(':root')))
    for (const [role, hex] of Object.entries(INKS)) expect(daylight.toLowerCase(), role).toMatch(new RegExp(`--${role}:\\s*${hex.toLowerCase()}`))
  })
})
