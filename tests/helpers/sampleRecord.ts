import { createHash } from 'node:crypto'
import sharp from 'sharp'
import { recordTexts } from '#shared/record/wording'
import type { Check } from '#shared/checklist/check'
import type { AnyEntry, EntryKind, PayloadOf, PhotoRef, Place, ReadingValue } from '#shared/entry/entry'
import { makeEntry } from '#shared/entry/makeEntry'
import type { Limit } from '#shared/limit/limit'
import type { Face, Line, LineElement } from '#shared/line/line'
import { elementsOf } from '#shared/line/line'
import { FOOT, INCH, type System } from '#shared/measure/length'
import { buildRecord, type RecordSources } from '#shared/record/buildRecord'
import { digestOf } from '#shared/record/canonicalJson'
import type { RecordDocument, RecordLanguage } from '#shared/record/record'
import type { RoundBasis } from '#shared/round/basis'
import type { CheckOutcome, DeficiencyOutcome, ElementOutcome, Head, RoundOutcome, Verdict } from '#shared/round/outcome'

/**
 * A made-up round at a made-up school, with everything that a record can show: sources for buildRecord, written by hand, so that documents can be tested
 * without the fold, the server or a device. All names are invented; addresses end in .example.
 */
export interface SampleOptions { language?: RecordLanguage, system?: System, photos?: number, photoSize?: [number, number], final?: boolean, looks?: number }

let serial = 0
const uuid = (n: number, group = 1) => `01940000-0000-7000-8${String(group).padStart(3, '0')}-${n.toString(16).padStart(12, '0')}`
const both = (en: string, es: string) => ({ en, es })
const in64 = (n: number) => n * INCH / 64

function element(n: number, tag: string, kind: 'run' | 'gate', feet: number, more: Partial<LineElement> = {}): LineElement {
  const face = { settings: ['school' as const, ...(more.name === 'pool' ? ['pool' as const] : [])], ground: { finished: true, surface: 'soft' as const } }
  const { name: _, ...rest } = more
  return {
    id: uuid(n, 2), kind, tag, work: 'new', length: feet * FOOT, height: 6 * FOOT, rise: 0, bays: kind === 'run' ? Math.max(1, Math.round(feet / 10)) : 1,
    ...(kind === 'run' ? { mesh: 2 * INCH } : {}), topRail: true, bottom: 'tensionWire', faces: { outer: face, inner: face }, ...rest,
  }
}
const gate = (form: 'singleSwing' | 'doubleSwing' | 'slide', leaves: number[], exit = false): Partial<LineElement> => ({
  gate: { form, leaves: leaves.map(feet => feet * FOOT), hinge: 'start', opens: 'outer', exit, selfClosing: form === 'singleSwing', automatic: false },
})

function sampleLine(system: System): Line {
  const mulch = { settings: ['playground' as const], ground: { finished: false, surface: 'soft' as const, coming: 'mulch', comingThickness: 3 * INCH } }
  return {
    version: 3, system,
    sides: [
      { key: 'A', name: 'Mill Road', elements: [element(1, 'R1', 'run', 84, { rise: 6 * INCH }), element(2, 'G1', 'gate', 4, gate('singleSwing', [4])), element(3, 'R2', 'run', 96, { rise: 10 * INCH }), element(4, 'G2', 'gate', 8, gate('doubleSwing', [4, 4], true)), element(5, 'R3', 'run', 92, { rise: -8 * INCH })] },
      { key: 'B', name: 'north', elements: [element(6, 'R4', 'run', 110, { rise: -8 * INCH }), element(7, 'R5', 'run', 60), element(8, 'G3', 'gate', 4, { ...gate('singleSwing', [4]), name: 'pool' }), element(9, 'R6', 'run', 108, { rise: -12 * INCH, name: 'pool' })] },
      { key: 'C', name: 'court', elements: [element(10, 'R7', 'run', 64), element(11, 'R8', 'run', 96, { height: 10 * FOOT }), element(12, 'G4', 'gate', 12, gate('doubleSwing', [6, 6])), element(13, 'R9', 'run', 72, { rise: 6 * INCH }), element(14, 'R10', 'run', 42, { faces: { outer: mulch, inner: mulch } })] },
      { key: 'D', name: 'playground', elements: [element(15, 'R11', 'run', 90), element(16, 'R12', 'run', 70, { rise: -6 * INCH }), element(17, 'G5', 'gate', 16, gate('slide', [16])), element(18, 'R13', 'run', 62), element(19, 'R14', 'run', 50)] },
    ],
  }
}

const NOTE = both('Local code and the authority come first.', 'El código local y la autoridad tienen prioridad.')
function check(id: string, en: string, es: string, more: Partial<Check>): Check {
  return {
    id, section: 'sample', title: both(en, es), task: both(`${en}: as the list says.`, `${es}: como dice la lista.`), method: 'look', answeredFor: 'once', elements: ['run', 'gate'], settings: [], limits: [],
    class: 'correctFirst', concern: 'injury', finding: 'other', group: false, photo: 'none', disturbs: [], placeTolerance: 6 * INCH, drawing: { none: 'a look' }, note: NOTE, ...more,
  }
}
const LOOKS: [string, string, string][] = [
  ['tie-ends', 'Tie ends turned in, hand-run', 'Puntas de amarre hacia dentro, a mano'], ['knuckles', 'Cut ends knuckled again', 'Puntas cortadas nudilladas'], ['post-loose', 'Posts firm when pushed and pulled', 'Postes firmes al empujar y tirar'],
  ['caps', 'Caps and eye tops tight', 'Tapas y capuchones firmes'], ['footings', 'Footings crowned, no collar', 'Cimientos abombados, sin reborde'], ['bolt-heads', 'Bolt heads on the touched face', 'Cabezas de perno en la cara que se toca'],
  ['rail-joints', 'Rail joints closed', 'Juntas de travesaño cerradas'], ['fabric-whole', 'Fabric whole, no hole or bend', 'Malla entera, sin hoyo ni doblez'], ['clippings', 'Clippings picked up', 'Recortes recogidos'],
]
const CHECKS: Check[] = [
  ...LOOKS.map(([id, en, es]) => check(id, en, es, { group: true, finding: 'tieEnd' })),
  check('latch-release-height', 'Latch release height', 'Altura del cerrojo', { method: 'measure', measurand: 'latch-release-height', datum: 'bottom-of-leaf', unit: 'length', drawing: 'latchHeight', class: 'outOfUse', concern: 'drowning', elements: ['gate'] }),
  check('ground-clearance', 'Ground clearance through the swing', 'Espacio al suelo en el giro', { method: 'measure', measurand: 'ground-clearance', datum: 'ground', unit: 'length', drawing: 'swingClearance', class: 'outOfUse', elements: ['gate'] }),
  check('gap-below', 'Gap below, worst place', 'Espacio abajo, peor lugar', { method: 'measure', answeredFor: 'worst', measurand: 'gap-below', datum: 'ground', unit: 'length', drawing: 'gapBelow', finding: 'gapBelow', elements: ['run'] }),
  check('top-rail-ties', 'Ties on the top rail', 'Amarres del travesaño superior', { method: 'measure', answeredFor: 'worst', measurand: 'tie-spacing', datum: 'centre-to-centre', unit: 'length', drawing: 'spacing', elements: ['run'] }),
  check('mesh-width', 'Mesh, horizontal width', 'Malla, ancho horizontal', { method: 'measure', measurand: 'mesh-width', datum: 'between-wires', unit: 'length', drawing: 'opening', elements: ['run'], noLimit: both('No limit is set for this face until the authority answers.', 'No hay límite para esta cara hasta que conteste la autoridad.'), dimensions: ['side', 'diagonal', 'width'] }),
  check('closing', 'Closes and latches by itself', 'Se cierra y engancha sola', { method: 'trial', drawing: 'closing', elements: ['gate'], tries: [{ from: 'open', label: both('fully open', 'abierta del todo'), times: 3 }, { from: 'half', label: both('half open', 'a la mitad'), times: 3 }, { from: 'six', label: both('6 in open', 'a 6 in'), times: 3 }] }),
  check('sphere', '4 in sphere at the latch side', 'Esfera de 4 in del lado del cerrojo', { method: 'template', conformsWhen: 'stops', drawing: 'opening', elements: ['gate'] }),
]

const GUIDE = { kind: 'builtIn' as const, name: 'Demo barrier guideline', citation: 'section 3', edition: '2024', read: 'read in a summary' }
const LIMITS: Record<string, Limit> = {
  'latch': { id: 'latch', measurand: 'latch-release-height', datum: 'bottom-of-leaf', unit: 'length', low: { imperial: 54 * INCH, metric: 1372 * 320_000, inclusive: true }, high: null, avoid: null, basis: { kind: 'authority', name: 'Velmor County', citation: 'number 12', edition: '2024', confirmedBy: 'R. Tamm', confirmedOn: '2027-02-12' } },
  'clearance': { id: 'clearance', measurand: 'ground-clearance', datum: 'ground', unit: 'length', low: { imperial: INCH / 2, inclusive: true }, high: { imperial: 4 * INCH, inclusive: true }, avoid: null, basis: { kind: 'organisation', name: 'Tarnbeck house rule', edition: 'version 4' } },
  'gap': { id: 'gap', measurand: 'gap-below', datum: 'ground', unit: 'length', low: null, high: { imperial: 2 * INCH, metric: 51 * 320_000, inclusive: true }, avoid: null, basis: GUIDE },
  'ties': { id: 'ties', measurand: 'tie-spacing', datum: 'centre-to-centre', unit: 'length', low: null, high: { imperial: 24 * INCH, inclusive: true }, avoid: null, basis: { kind: 'specification', name: 'Job specification 32 31 13', citation: '3.4' } },
}
const LIMITS_OF: Record<string, string[]> = { 'latch-release-height': ['latch'], 'ground-clearance': ['clearance'], 'gap-below': ['gap'], 'top-rail-ties': ['ties'] }

const PEOPLE = { inspector: uuid(1, 9), crew: uuid(2, 9), manager: uuid(3, 9) }
const NAMES = { [PEOPLE.inspector]: 'Dana Okafor', [PEOPLE.crew]: 'Luis Barrientos', [PEOPLE.manager]: 'Priya Lindqvist' }
const [ORGANISATION, JOB, ROUND, WALK, DEVICE] = [uuid(1, 10), uuid(2, 10), uuid(3, 10), uuid(4, 10), uuid(5, 10)]
/** The basis that the entries were made under; the record's own is another, later one. */
const PINNED = '0'.repeat(64)

/** Photos by digest, made from gradients and seeded noise: JPEG, sRGB, upright, no metadata, as the program keeps them. */
export async function samplePhotos(count: number, [width, height]: [number, number]): Promise<Map<string, Uint8Array>> {
  const photos = new Map<string, Uint8Array>()
  for (let n = 0; n < count; n++) {
    const noise = await sharp({ create: { width, height, channels: 3, background: '#777', noise: { type: 'gaussian', mean: 128, sigma: 9 } } }).png({ compressionLevel: 1 }).toBuffer()
    const picture = Buffer.from(`<svg width="${width}" height="${height}"><defs><linearGradient id="g" x2="0" y2="1"><stop offset="0" stop-color="hsl(${200 + n * 7},32%,76%)"/><stop offset=".6" stop-color="hsl(${120 + n * 5},18%,58%)"/><stop offset="1" stop-color="hsl(${40 + n * 11},25%,38%)"/></linearGradient></defs><rect width="100%" height="100%" fill="url(#g)"/><g stroke="#2b3330" stroke-width="${width / 160}" fill="none">${Array.from({ length: 30 }, (_, i) => `<path d="M${(i - 15) * width / 14} 0L${i * width / 14} ${height}M${i * width / 14} 0L${(i - 15) * width / 14} ${height}"/>`).join('')}</g></svg>`)
    const bytes = await sharp(picture).composite([{ input: noise, blend: 'soft-light' }]).removeAlpha().jpeg({ quality: 82, mozjpeg: false }).toBuffer()
    photos.set(createHash('sha256').update(bytes).digest('hex'), new Uint8Array(bytes))
  }
  return photos
}

export interface Sample { sources: RecordSources, record: RecordDocument, photos: Map<string, Uint8Array>, photoBytes: (digest: string) => Promise<Uint8Array> }

export async function sampleRecord({ language = 'en', system = 'imperial', photos: photoCount = 6, photoSize = [640, 480], final = false, looks = 5 }: SampleOptions = {}): Promise<Sample> {
  serial = 0
  const line = sampleLine(system)
  const elements = elementsOf(line)
  const byTag = (tag: string) => elements.find(one => one.tag === tag)!.id
  const photos = await samplePhotos(photoCount, photoSize)
  const spare = [...photos.keys()]
  const picture = (at: string): PhotoRef[] => {
    const digest = spare.shift()
    return digest ? [{ digest, width: photoSize[0], height: photoSize[1], taken: { digest: digestOf(digest), at, origin: 'camera' } }] : []
  }

  const entries: AnyEntry[] = []
  const write = <K extends EntryKind>(kind: K, madeAt: string, payload: Omit<PayloadOf<K>, 'salt'>, more: { author?: string, element?: string, check?: string, place?: Place, answers?: string[], replaces?: string[] } = {}): string => {
    const id = uuid(++serial, 20)
    const { entry } = makeEntry<K>({ kind, id, salt: serial.toString(16).padStart(32, '0'), madeAt, organisation: ORGANISATION, job: JOB, round: ROUND, walk: WALK, author: more.author ?? PEOPLE.inspector, device: DEVICE, basis: kind === 'signature' ? null : PINNED, ...more, payload })
    entries.push({ ...entry, number: serial } as unknown as AnyEntry)
    return id
  }
  write('walkOpened', '2027-03-02T09:12:00-05:00', { basis: PINNED, device: 'phone 3' })

  const outcomes: CheckOutcome[] = []
  const plain = { earlier: [], setAside: null, disturbedBy: [], baysMissing: 0 }
  const tasks: RoundBasis['tasks'] = []
  const head = (id: string, value: ReadingValue, verdict: Verdict, margin: number | null, limit: string | null, place: Place | null): Head =>
    ({ entry: id, place, value, verdict, margin, limit, otherSystemDiffers: false, author: PEOPLE.inspector, madeAt: entries.find(one => one.envelope.id === id)!.envelope.madeAt, disagreesWith: [], overruledBy: null })
  const place = (bay: number | null, face: Face | null, height: number | null = null): Place => ({ bay, face, from: null, height })
  const read = (element: string, checkId: string, value: ReadingValue, verdict: Verdict, { margin = null as number | null, at = '2027-03-03T10:20:00-05:00', where = null as Place | null, tag = undefined as string | undefined, note = undefined as string | undefined, settled = false, photo = false, answers = [] as string[], replaces = [] as string[] } = {}) => {
    const id = write('reading', at, { value, photos: photo ? picture(at) : [], ...(tag && { tag, class: 'correctFirst' as const }), ...(note && { note }) }, { element, check: checkId, ...(where && { place: where }), answers, replaces })
    const limits = LIMITS_OF[checkId] ?? []
    tasks.push({ element, check: checkId, face: null, limits })
    // The sample's tasks are of the element as a whole, so a place carries no face for the check itself.
    outcomes.push({ ...plain, element, check: checkId, face: null, verdict, settled, readAgain: false, heads: [head(id, value, verdict, margin, limits[0] ?? null, where)], governs: id })
    return id
  }
  const metres = (amount: number, text: string): ReadingValue => ({ method: 'measure', amount, text, system: 'imperial', instrument: 'tape 3' })
  const deficiencies: DeficiencyOutcome[] = []
  const deficient = (tag: string, element: string, checkId: string, state: DeficiencyOutcome['state'], history: string[], more: Partial<DeficiencyOutcome> = {}) =>
    deficiencies.push({ id: history[0]!, tag, element, check: checkId, place: null, class: 'correctFirst', state, history, standing: [], assignedTo: null, due: null, waitsFor: null, until: null, held: null, ...more })

  const unseen = new Set(final ? [] : [byTag('G5')])
  for (const one of elements.filter(each => !unseen.has(each.id))) {
    for (const [id] of LOOKS.slice(0, looks)) read(one.id, id, { method: 'look', found: 'clear' }, 'conforms', { at: '2027-03-02T11:40:00-05:00' })
    if (one.kind === 'run' && !(['R6', 'R10'].includes(one.tag) && !final)) read(one.id, 'gap-below', metres(in64(96 + 4 * (one.bays % 4)), '1 1/2'), 'conforms', { margin: in64(32 - 4 * (one.bays % 4)), where: place(2, 'outer') })
    if (one.kind === 'run') read(one.id, 'top-rail-ties', metres(14 * INCH, '14'), 'conforms', { margin: 10 * INCH })
    if (one.gate && one.gate.form !== 'slide' && one.tag !== 'G3') read(one.id, 'closing', { method: 'trial', tries: [{ from: 'open', good: 3, of: 3 }, { from: 'half', good: 3, of: 3 }, { from: 'six', good: 3, of: 3 }] }, 'conforms', { note: 'light wind' })
    if (one.gate && one.gate.form === 'singleSwing') read(one.id, 'sphere', { method: 'template', gauge: '4 in sphere', went: 'stopped' }, 'conforms')
  }
  if (!final) {
    const latch = read(byTag('G3'), 'latch-release-height', metres(in64(53 * 64 + 40), '53 5/8'), 'doesNotConform', { margin: -in64(24), at: '2027-03-03T10:58:00-05:00', tag: 'B12', photo: true, where: place(null, 'outer', 54 * INCH) })
    const danger = write('dangerNow', '2027-03-03T11:05:00-05:00', { done: 'taped', told: { account: null, name: 'J. Marchetti' }, toldAt: '2027-03-03T11:06:00-05:00', photos: [] }, { element: byTag('G3'), check: 'latch-release-height', answers: [latch] })
    const cannot = write('cannot', '2027-03-03T13:10:00-05:00', { waitsFor: 'longer latch from the maker' }, { author: PEOPLE.crew, element: byTag('G3'), check: 'latch-release-height', answers: [latch] })
    deficient('B12', byTag('G3'), 'latch-release-height', 'cannot', [latch, danger, cannot], { class: 'outOfUse', held: 'taped', waitsFor: 'longer latch from the maker', place: place(null, 'outer', 54 * INCH) })
    const swing = read(byTag('G4'), 'ground-clearance', metres(in64(12), '3/16'), 'doesNotConform', { margin: -in64(20), tag: 'B14', photo: true, note: 'leaf drags at 63 degrees' })
    const taped = write('dangerNow', '2027-03-03T11:05:00-05:00', { done: 'taped', told: { account: null, name: 'J. Marchetti' }, toldAt: '2027-03-03T11:06:00-05:00', photos: [] }, { element: byTag('G4'), check: 'ground-clearance', answers: [swing] })
    deficient('B14', byTag('G4'), 'ground-clearance', 'open', [swing, taped], { class: 'outOfUse', held: 'taped' })
    const exit = read(byTag('G2'), 'ground-clearance', metres(in64(20), '5/16'), 'doesNotConform', { margin: -in64(12), tag: 'B09', at: '2027-03-03T10:40:00-05:00' })
    const attended = write('dangerNow', '2027-03-03T10:42:00-05:00', { done: 'attended', told: { account: null, name: 'J. Marchetti', title: 'custodian' }, toldAt: '2027-03-03T10:44:00-05:00', photos: [] }, { element: byTag('G2'), check: 'ground-clearance', answers: [exit] })
    deficient('B09', byTag('G2'), 'ground-clearance', 'assigned', [exit, attended, write('assignment', '2027-03-03T11:30:00-05:00', { to: { account: PEOPLE.crew, name: 'Luis Barrientos' }, due: '2027-03-04T15:00:00-05:00' }, { author: PEOPLE.manager, element: byTag('G2'), check: 'ground-clearance', answers: [exit] })], { class: 'outOfUse', held: 'attended', assignedTo: PEOPLE.crew, due: '2027-03-04T15:00:00-05:00' })
    const gap = read(byTag('R6'), 'gap-below', metres(in64(2 * 64 + 40), '2 5/8'), 'doesNotConform', { margin: -in64(40), tag: 'B10', photo: true, where: place(8, 'outer') })
    deficient('B10', byTag('R6'), 'gap-below', 'open', [gap], { place: place(8, 'outer') })
    read(byTag('R10'), 'gap-below', metres(in64(4 * 64 + 48), '4 3/4'), 'groundNotFinished', { margin: -in64(176), where: place(2, 'inner'), note: 'read again when the mulch lies' })
    read(byTag('R5'), 'mesh-width', { ...metres(in64(2 * 64 + 8), '2 1/8'), dimension: 'width' } as ReadingValue, 'noLimit')
    read(byTag('R8'), 'mesh-width', { ...metres(in64(4 * 64), '4'), dimension: 'diagonal', uncertainty: in64(4) } as ReadingValue, 'withinError', { margin: in64(1) })
    LIMITS_OF['mesh-width'] = []
    const aside = write('setAside', '2027-03-03T12:00:00-05:00', { as: 'notInspected', why: 'noAccess', words: 'no key on 3 March', photos: [] }, { element: byTag('G5') })
    for (const id of ['tie-ends', 'sphere']) {
      tasks.push({ element: byTag('G5'), check: id, face: null, limits: [] })
      outcomes.push({ ...plain, setAside: { entry: aside, as: 'notInspected', why: 'noAccess' }, element: byTag('G5'), check: id, face: null, verdict: 'notInspected', settled: false, readAgain: false, heads: [], governs: null })
    }
  }
  // A finding that was corrected and read again, with photos before and after.
  const snag = write('reading', '2027-03-02T10:02:00-05:00', { value: { method: 'look', found: 'finding', finding: 'tieEnd' }, photos: picture('2027-03-02T10:02:00-05:00'), tag: 'B07', class: 'correctFirst', note: 'tie end stands out at hand height' }, { element: byTag('R3'), check: 'tie-ends', place: place(5, 'inner', 38 * INCH) })
  const given = write('assignment', '2027-03-02T15:00:00-05:00', { to: { account: PEOPLE.crew, name: 'Luis Barrientos' }, due: '2027-03-03T09:00:00-05:00' }, { author: PEOPLE.manager, element: byTag('R3'), check: 'tie-ends', answers: [snag] })
  const fixed = write('correction', '2027-03-03T08:20:00-05:00', { words: 'tie turned in and pressed flat', photos: picture('2027-03-03T08:20:00-05:00'), by: { account: PEOPLE.crew, name: 'Luis Barrientos' } }, { author: PEOPLE.crew, element: byTag('R3'), check: 'tie-ends', answers: [snag] })
  const again = outcomes.find(one => one.element === byTag('R3') && one.check === 'tie-ends')!
  const reread = write('reading', '2027-03-03T09:30:00-05:00', { value: { method: 'look', found: 'clear' }, photos: [] }, { element: byTag('R3'), check: 'tie-ends', answers: [snag, fixed] })
  Object.assign(again, { settled: true, heads: [head(reread, { method: 'look', found: 'clear' }, 'conforms', null, null, place(5, 'inner'))], governs: reread })
  deficient('B07', byTag('R3'), 'tie-ends', 'endedCorrected', [snag, given, fixed, reread], { place: place(5, 'inner', 38 * INCH), assignedTo: PEOPLE.crew })
  write('note', '2027-03-03T12:20:00-05:00', { words: 'Sprinkler heads stand 14 in from R9; they do not wet the latch.', photos: [] }, { element: byTag('R9') })
  for (const one of elements) {
    if (spare.length === 0) break
    while (spare.length > (elements.length - elements.indexOf(one) - 1) * Math.ceil(photoCount / elements.length)) write('note', '2027-03-03T12:40:00-05:00', { words: `As found at ${one.tag}.`, photos: picture('2027-03-03T12:39:00-05:00') }, { element: one.id })
  }

  const basis: RoundBasis = { rules: 1, line, checklists: [{ id: 'school-grounds', version: 2 }], checks: CHECKS, limits: LIMITS, tasks,
    provisions: [{ id: 'pool-season', kind: 'authority', measurand: 'latch-release-height', setting: 'pool', effect: 'add', limit: null, note: 'Pool gates are looked at again by the county before the season opens.', name: 'Velmor County', citation: 'letter', confirmedBy: 'R. Tamm', confirmedOn: '2027-02-12' }],
    setAside: [{ limit: { ...LIMITS.latch!, id: 'latch-built-in', low: { imperial: 48 * INCH, inclusive: true }, basis: GUIDE }, by: 'latch', why: 'replaced' }],
  }
  const order = (a: CheckOutcome, b: CheckOutcome) => elements.findIndex(one => one.id === a.element) - elements.findIndex(one => one.id === b.element)
  outcomes.sort(order)
  const RANK: Verdict[] = ['doesNotConform', 'withinError', 'groundNotFinished', 'noLimit', 'notRead', 'notInspected', 'notApplicable', 'conforms']
  const elementOutcomes = elements.map((one): ElementOutcome => {
    const own = outcomes.filter(each => each.element === one.id)
    const open = deficiencies.filter(each => each.element === one.id && !each.state.startsWith('ended'))
    const verdict = own.map(each => each.verdict).sort((a, b) => RANK.indexOf(a) - RANK.indexOf(b))[0] ?? 'notRead'
    const outOfUse = open.some(each => each.class === 'outOfUse')
    return { element: one.id, verdict, settled: own.some(each => each.settled), outOfUse, released: open.length === 0 && ['conforms', 'noLimit'].includes(verdict), tasks: own.length, answered: own.filter(each => each.heads.length > 0).length }
  })
  const basisDigest = digestOf(basis)
  const outcome: RoundOutcome = {
    rules: 1, basis: basisDigest, elements: elementOutcomes, checks: outcomes, deficiencies, waiting: [], unknown: [], ignored: [], refusedLinks: [], erased: [], conflicts: [], line,
    tally: { conforms: 0, doesNotConform: 0, withinError: 0, groundNotFinished: 0, noLimit: 0, notApplicable: 0, notInspected: 0, notRead: 0 },
  }
  const sheet = JSON.stringify({ meaning: 'present', round: ROUND })
  const stroke = (from: number) => Array.from({ length: 26 }, (_, i) => ({ x: from + i * 5 + (i % 3) * 3, y: 48 + ((i * 37) % 31) - (i % 2) * 24, t: i * 16 }))
  write('signature', '2027-03-03T14:40:00-05:00', { state: 'signed', meaning: 'present', signer: { account: PEOPLE.inspector, name: 'Dana Okafor' }, role: 'inspector', known: 'ownAccount', presence: null, sheet, sheetDigest: createHash('sha256').update(sheet).digest('hex'), strokes: [stroke(20), stroke(160)], typed: null })
  write('signature', '2027-03-03T14:52:00-05:00', { state: 'signed', meaning: 'receivedCopy', signer: { account: null, name: 'Ruth Adeyemi', title: 'facilities clerk' }, role: 'client contact', known: 'onDevice', presence: { account: PEOPLE.inspector, name: 'Dana Okafor' }, sheet, sheetDigest: createHash('sha256').update(sheet).digest('hex'), strokes: null, typed: 'Ruth Adeyemi' })
  write('signature', '2027-03-03T14:55:00-05:00', { state: 'refused', meaning: 'acceptsWork', signer: { account: null, name: 'Ruth Adeyemi' }, role: 'client contact', known: 'onDevice', presence: { account: PEOPLE.inspector, name: 'Dana Okafor' }, sheet: null, sheetDigest: null, strokes: null, typed: null, words: 'I wait until G3 is done.' })

  const sources: RecordSources = {
    basis, basisDigest, entries, outcome, names: NAMES, texts: recordTexts(language),
    particulars: {
      id: uuid(1, 30), number: 2, code: 'LS-0417-2', scope: final ? 'final' : 'interim', language, system, sealedAt: '2027-03-03T15:12:00-05:00', zones: { '-05:00': 'EST' }, checkAddress: 'https://smoothside.example/check/LS-0417-2',
      organisation: { id: ORGANISATION, name: 'Tarnbeck Fence & Gate', address: ['12 Yard Lane', 'Marl'] },
      inspectors: [{ name: 'Dana Okafor', employer: 'Tarnbeck Fence & Gate', builtTheFence: true }],
      client: { id: uuid(1, 31), name: 'Wrenfold School District', contact: { name: 'Ruth Adeyemi', title: 'facilities clerk' } },
      site: { id: uuid(1, 32), name: 'Wrenfold Elementary', address: '40 Mill Road, Marl', onSite: { name: 'J. Marchetti', title: 'custodian', phone: '(555) 010-0117' }, emergency: { name: 'District line', phone: '(555) 010-0199' } },
      job: { id: JOB, number: 'LS-0417', title: 'New line round the school grounds', neededBy: '2027-03-08', keys: { permit: 'HC-27-0093, Velmor County', contract: 'W-2291' } },
      round: { id: ROUND, number: 2 }, amends: null,
      questions: final ? [] : [{ words: 'G3: pool limit and reach limit clash by 1 1/2 in.', askedOf: 'Velmor County Building Division', on: '2027-03-03' }],
      devicesOut: final ? [] : [{ device: 'tablet 2', holder: 'Luis Barrientos', takenAt: '2027-03-02T08:00:00-05:00', reason: 'It was charged at the yard; the crew lead says that it holds nothing.' }],
      late: final ? [] : [{ id: uuid(900, 20), digest: digestOf('late'), number: 900, kind: 'note', by: 'Luis Barrientos', madeAt: '2027-03-03T14:58:00-05:00', element: byTag('R9'), check: null }],
    },
  }
  const record = buildRecord(sources)
  return { sources, record, photos, photoBytes: async digest => photos.get(digest) ?? Promise.reject(new Error(`no photo ${digest}`)) }
}
