import type { DiamondState } from '../drawing/displayList'
import type { LineElement } from '../line/line'
import { elementsOf } from '../line/line'
import type { LineMarks } from '../line/lineMark'
import { placeAlong, tapeOf } from '../line/lineMark'
import type { Verdict } from '../round/outcome'
import { notLoosenedAmong } from '../provision/limitsTogether'
import { elementsSeen } from './recordSentence'
import { settledQuestions } from './record'
import type { RecordCheck, RecordDeficiency, RecordDocument, RecordPhoto, RecordReading, RecordStep } from './record'
import { Speech } from './speech'
import { fill, listed, sentence, WORDING } from './wording'

/** What every part of a record needs to tell what the document holds. */
export interface Telling {
  record: RecordDocument
  say: Speech
  elements: Map<string, LineElement>
  /** Number of each photo, by digest, as the pages count them. */
  photoNumbers: Map<string, number>
}

/** Makes ready to tell a record, in its own language or in that of the reader. */
export function tellingOf(record: RecordDocument, language: 'en' | 'es' = record.language): Telling {
  return {
    record,
    say: new Speech({ wording: WORDING[language], system: record.system, zones: record.zones }),
    elements: new Map([...record.struck, ...elementsOf(record.line)].map(element => [element.id, element])),
    photoNumbers: new Map(record.photos.map((photo, at) => [photo.digest, at + 1])),
  }
}

/** The short name of an element, also of one that was struck. */
export function tagOf({ elements }: Pick<Telling, 'elements'>, element: string | null): string {
  return element === null ? '' : elements.get(element)?.tag ?? element.slice(0, 8)
}

/** The verdict as its diamond has it. */
export function diamondStateOf(of: Pick<RecordCheck, 'verdict' | 'settled'>): DiamondState {
  return of.settled && of.verdict === 'conforms' ? 'settled' : of.verdict
}

/** What the record says of the line, as marks for its drawing. */
export function marksOf(record: Pick<RecordDocument, 'line' | 'elements' | 'deficiencies'>): LineMarks {
  return Object.fromEntries(elementsOf(record.line).map((element) => {
    const of = record.elements.find(one => one.element === element.id)
    const tags = record.deficiencies.flatMap((deficiency) => {
      const state = deficiency.element === element.id ? tapeOf(deficiency.state) : null
      return state ? [{ words: deficiency.tag, state, along: placeAlong(element, deficiency.place) }] : []
    })
    return [element.id, { verdict: of?.verdict ?? 'notRead' as const, settled: of?.settled ?? false, outOfUse: of?.outOfUse ?? false, tags }]
  }))
}

/** Ends a sentence that somebody left open. */
export function closed(words: string): string {
  return /[.!?]$/.test(words) ? words : `${words}.`
}

/** On which days and by whom it was walked. */
export function walkedWords({ record, say }: Telling): string {
  const read = [...record.walks.map(({ at, by }) => ({ at, by })), ...record.checks.flatMap(check => check.readings.map(({ madeAt, by }) => ({ at: madeAt, by })))]
  return read.length === 0 ? say.w.phrases.notWalked : fill(say.w.phrases.walked, { days: say.days(read.map(one => one.at)), names: listed([...new Set(read.map(one => one.by))], say.w.and) })
}

/** Who and where: pairs of a label and its words. */
export function particularsOf({ record, say }: Telling): [label: string, words: string][] {
  const { labels, phrases } = say.w
  const { job, site, client, organisation, inspectors } = record
  const named = (person: { name: string, title?: string, phone?: string }) => [person.name, person.title, person.phone?.replace(/ /g, '\u00a0')].filter(part => part).join(', ')
  return [
    [labels.site, [site.name, site.address].filter(part => part).join(', ')],
    [labels.client, [client.name, ...(client.contact ? [named(client.contact)] : [])].join(', ')],
    [labels.job, [job.number, job.title].filter(part => part).join(', ')],
    ...(['contract', 'permit', 'buildingCode', 'gateTag'] as const).flatMap((key): [string, string][] => job.keys[key] ? [[labels[key], job.keys[key]]] : []),
    [labels.contractor, [organisation.name, ...organisation.address].join(', ')],
    ...inspectors.map(({ employer, builtTheFence, ...person }): [string, string] => [labels.inspector, fill(builtTheFence ? phrases.employedBuilt : phrases.employed, { name: named(person), employer })]),
    ...(site.onSite ? [[labels.onSite, named(site.onSite)] as [string, string]] : []),
    ...(site.emergency ? [[labels.emergency, named(site.emergency)] as [string, string]] : []),
  ]
}

/** What is held out of use, and how; a way out is attended and never locked. */
export function heldOf(telling: Telling): { element: string, tag: string, words: string }[] {
  const { record, say, elements } = telling
  const { phrases, helds } = say.w
  return record.elements.filter(element => element.outOfUse).map(({ element }) => {
    const words = record.deficiencies.filter(one => one.element === element && one.class === 'outOfUse' && !one.state.startsWith('ended')).map((one) => {
      const step = [...one.steps].reverse().find(each => each.kind === 'dangerNow')
      const how = one.held ? helds[one.held] : phrases.heldUnknown
      const since = step ? fill(phrases.heldSince, { how, at: `${say.time(step.at)}, ${say.day(step.at.slice(0, 10))}` }) : how
      const check = record.checks.find(each => each.element === element && each.check === one.check)
      const margin = check?.readings[0] ? say.margin(check.readings[0], check, record.limits) : null
      return `${since}; ${[check?.title.toLowerCase() ?? '', margin].filter(part => part).join(', ')} (${one.tag})`
    }).join('\n')
    return { element, tag: tagOf(telling, element), words: elements.get(element)?.gate?.exit ? fill(phrases.heldWayOut, { how: words }) : words }
  })
}

/** What was asked and has no answer yet, what was not put to anybody, and what was answered, by whom, when and where it stands. */
export function askedOf({ record, say }: Telling): string[] {
  const { phrases } = say.w
  const { answers, notPut } = settledQuestions(record)
  return [
    ...(record.questions.length + notPut.length === 0 ? [phrases.nothingAsked] : []),
    ...record.questions.map(({ words, askedOf: to, on }) => fill(phrases.putTo, { words: closed(words), to, on: say.day(on) })),
    ...notPut.map(words => fill(phrases.notPut, { words: closed(words) })),
    ...answers.map(({ words, askedOf: to, askedOn: on, answer }) => [
      to && on ? fill(phrases.putTo, { words: closed(words), to, on: say.day(on) }) : closed(words),
      fill(phrases.answered, { name: answer.name, role: answer.role, on: say.day(answer.on), document: answer.document, words: closed(answer.words) }),
    ].join(' ')),
  ]
}

/** What nobody saw: set aside with a reason, not read in full, ground that is still to come, and what no walk ever sees. */
export function notSeenOf(telling: Telling): string[] {
  const { record, say, elements } = telling
  const { phrases, whys } = say.w
  const seen = elementsSeen(record.checks)
  const groups = new Map<string, { whole: boolean, why: string, tags: Set<string>, checks: number }>()
  for (const check of record.checks) {
    if (check.verdict !== 'notInspected') continue
    const whole = !seen.has(check.element)
    const why = check.setAside ? check.setAside.words ?? whys[check.setAside.why as keyof typeof whys] ?? check.setAside.why : ''
    const key = `${whole ? 'whole' : check.element}\u0000${why}`
    const group = groups.get(key) ?? { whole, why, tags: new Set<string>(), checks: 0 }
    group.tags.add(tagOf(telling, check.element))
    group.checks++
    groups.set(key, group)
  }
  const lines = [...groups.values()].map(({ whole, why, tags, checks }) => fill(whole ? phrases.setAsideWhole : phrases.setAside, {
    tags: listed([...tags], say.w.and), checks: checks === 1 ? phrases.checksOne : fill(phrases.checksMany, { n: checks }), why: why || say.w.verdicts.notInspected,
  }))
  const unread = record.elements.filter(one => one.verdict === 'notRead' || record.checks.some(check => check.element === one.element && check.verdict === 'notRead')).map(one => tagOf(telling, one.element))
  if (unread.length > 0) lines.push(fill(phrases.unread, { tags: listed(unread, say.w.and) }))
  const ground = new Map<string, string[]>()
  for (const { element, verdict } of record.elements) {
    const faces = elements.get(element)?.faces
    if (!faces || verdict === 'notInspected' || (faces.outer.ground.finished && faces.inner.ground.finished)) continue
    const open = faces.outer.ground.finished ? faces.inner.ground : faces.outer.ground
    const what = open.coming && open.comingThickness ? fill(phrases.thickOf, { x: say.length(open.comingThickness), what: open.coming }) : open.coming ?? ''
    ground.set(what, [...ground.get(what) ?? [], tagOf(telling, element)])
  }
  for (const [what, tags] of ground) lines.push(fill(what ? phrases.groundComing : phrases.groundOpen, { tags: listed(tags, say.w.and), what }))
  return [...(lines.length === 0 ? [phrases.nothingUnseen] : lines.map(closed)), phrases.nothingBelow]
}

/** What an element is: kind, name, how it closes, whose work, bays. */
export function elementWords({ say }: Telling, element: LineElement): string {
  const { phrases, works } = say.w
  const { gate } = element
  return sentence([
    say.kind(element),
    ...(element.name ? [element.name] : []),
    ...(gate?.exit ? [phrases.exit] : []), ...(gate?.selfClosing ? [phrases.selfClosing] : []), ...(gate?.automatic ? [phrases.automatic] : []),
    works[element.work],
    ...(element.kind === 'run' ? [element.bays === 1 ? phrases.bayOne : fill(phrases.bays, { n: element.bays })] : []),
  ].join(', '))
}

/** Whether people may use an element, in the words of the record. */
export function useWords({ record, say, elements }: Telling, element: string): string {
  const { phrases } = say.w
  const of = record.elements.find(one => one.element === element)
  return !of ? '' : of.outOfUse ? (elements.get(element)?.gate?.exit ? phrases.attended : phrases.outOfUse) : of.released ? phrases.released : phrases.notReleased
}

/** Gravest first: the order in which readings are shown. */
export const READING_ORDER: readonly Verdict[] = ['doesNotConform', 'withinError', 'groundNotFinished', 'noLimit', 'notRead', 'conforms', 'notInspected', 'notApplicable']

/** A look that was clear from the start says nothing more than that; all others get a row of their own. */
export function isPlainLook(check: RecordCheck): boolean {
  return check.verdict === 'conforms' && !check.settled && !check.readAgain && check.earlier.length === 0
    && check.readings.every(({ value, note, photos, disagreesWith }) => value.method === 'look' && note === null && photos.length === 0 && disagreesWith.length === 0)
}

/** What the answer was held against, where that is no limit with a figure. */
export function conditionsOf(check: RecordCheck, telling: Telling): string[] {
  return [...howItConforms(check, telling), ...whyTheseLimits(check, telling)]
}

/** Which of several limits governs, what was set aside and for which, and what could not take the place of another. */
function whyTheseLimits(check: RecordCheck, { record, say }: Telling): string[] {
  const { phrases, setAsideWhys } = say.w
  const limits = check.limits.flatMap(key => record.limits[key] ?? [])
  const governs = limits.length > 1 && check.readings[0]?.limit ? record.limits[check.readings[0].limit] : undefined
  const nameOf = (id: string) => limits.find(limit => limit.id === id)!.basis.name
  return [
    ...(governs ? [fill(phrases.governs, { limit: say.limit(governs), whose: governs.basis.name })] : []),
    ...record.limitsSetAside.filter(one => check.limits.includes(one.by) && one.limit.measurand === check.measurand)
      .map(({ limit, why }) => fill(phrases.limitSetAside, { limit: say.limit(limit), basis: say.basis(limit.basis), why: setAsideWhys[why] })),
    ...notLoosenedAmong(limits, record.provisions).map(({ provision, limit }) => fill(phrases.notLoosened, { whose: nameOf(provision), other: nameOf(limit) })),
  ]
}

function howItConforms(check: RecordCheck, { say }: Telling): string[] {
  const { phrases } = say.w
  if (check.method === 'trial') return [listed(check.tries.map(each => fill(phrases.triesFrom, { times: each.times, label: each.label })), say.w.and)]
  if (check.method === 'template' && check.conformsWhen) return [check.conformsWhen === 'passes' ? phrases.passesConforms : phrases.stopsConforms]
  if (check.method !== 'look' && check.limits.length === 0) return [check.noLimit ?? phrases.noLimit]
  return []
}

/** With what, where, by whom and when it was read, and what else was noted. */
export function circumstancesOf(reading: RecordReading, check: RecordCheck, { say, photoNumbers, record }: Telling): string {
  const { phrases, dimensions } = say.w
  const { value } = reading
  const numbers = reading.photos.flatMap(digest => photoNumbers.get(digest) ?? [])
  return [
    ...(value.method === 'measure' && value.instrument ? [value.instrument] : []),
    ...(value.method === 'measure' && value.dimension ? [dimensions[value.dimension]] : []),
    ...(value.method === 'measure' && value.uncertainty ? [fill(phrases.uncertainty, { x: say.amount(value.uncertainty, check.unit, { system: value.system, beside: [0] }) })] : []),
    ...(value.method === 'measure' && value.system !== record.system ? [fill(phrases.typed, { text: value.text })] : []),
    ...(reading.place ? [say.place(reading.place)] : check.face ? [say.w.faces[check.face]] : []),
    fill(phrases.writtenBy, { by: reading.by, at: say.at(reading.madeAt) }),
    ...(numbers.length > 0 ? [fill(numbers.length === 1 ? phrases.photo : phrases.photos, { n: listed(numbers.map(String), say.w.and) })] : []),
    ...(reading.tag ? [fill(phrases.tag, { tag: reading.tag })] : []),
    ...(reading.note ? [fill(phrases.note, { words: reading.note })] : []),
    ...(reading.otherSystemDiffers ? [phrases.otherSystem] : []),
    ...(reading.disagreesWith.length > 0 ? [fill(phrases.disagrees, { n: reading.disagreesWith.length + 1 })] : []),
    ...(reading.overruledBy ? [phrases.overruled] : []),
  ].filter(part => part).join(' \u00b7 ')
}

/** A reading whose place another took, and why. */
export function earlierWords(reading: RecordReading, check: RecordCheck, { say }: Telling): string {
  const { phrases } = say.w
  const values = { reading: say.reading(reading.value, check), by: reading.by, at: say.at(reading.madeAt) }
  return reading.replacedBy === null
    ? `${values.reading} (${fill(phrases.writtenBy, values)})`
    : fill(reading.reason ? phrases.replaced : phrases.replacedNoReason, { ...values, reason: reading.reason ?? '' }).trim()
}

/** Looks that were clear, in few words: elements on which the same was looked at by the same people on the same days share a row. */
export function clearRows(telling: Telling): { tags: string[], titles: string, who: string }[] {
  const { record, say } = telling
  const checks = record.checks.filter(isPlainLook)
  const rows = new Map<string, { tags: string[], titles: string, who: string }>()
  for (const element of new Set(checks.map(check => check.element))) {
    const own = checks.filter(check => check.element === element)
    const titles = own.map(check => check.face ? `${check.title} (${say.w.faces[check.face]})` : check.title).join(' \u00b7 ')
    const readings = own.flatMap(check => check.readings)
    const who = fill(say.w.phrases.writtenBy, { by: listed([...new Set(readings.map(reading => reading.by))], say.w.and), at: say.days(readings.map(reading => reading.madeAt)) })
    const row = rows.get(`${titles}\u0000${who}`) ?? { tags: [], titles, who }
    row.tags.push(tagOf(telling, element))
    rows.set(`${titles}\u0000${who}`, row)
  }
  return [...rows.values()]
}

/** What was set aside, in few words: checks for which the same person gave the same reason on the same day share a row, and so do elements to which it happened alike. */
export function asideRows(telling: Telling): { tags: string[], titles: string, words: string, verdict: 'notInspected' | 'notApplicable' }[] {
  const { record, say } = telling
  const { whys, phrases, verdicts } = say.w
  const ofElement = new Map<string, { element: string, titles: string[], words: string, verdict: 'notInspected' | 'notApplicable' }>()
  for (const { element, title, face, verdict, setAside } of record.checks) {
    if (verdict !== 'notInspected' && verdict !== 'notApplicable') continue
    const by = setAside && fill(phrases.writtenBy, { by: setAside.by, at: say.days([setAside.at]) })
    const words = [verdicts[verdict], [setAside && (whys[setAside.why as keyof typeof whys] ?? setAside.why), setAside?.words, by].filter(part => part).join(', ')].filter(part => part).join(': ')
    const row = ofElement.get(`${element}\u0000${words}`) ?? { element, titles: [], words, verdict }
    row.titles.push(face ? `${title} (${say.w.faces[face]})` : title)
    ofElement.set(`${element}\u0000${words}`, row)
  }
  const rows = new Map<string, ReturnType<typeof asideRows>[number]>()
  for (const { element, titles: own, ...rest } of ofElement.values()) {
    const titles = own.join(' \u00b7 ')
    const row = rows.get(`${titles}\u0000${rest.words}`) ?? { tags: [], titles, ...rest }
    row.tags.push(tagOf(telling, element))
    rows.set(`${titles}\u0000${rest.words}`, row)
  }
  return [...rows.values()]
}

/** One step in the history of a deficiency, in a sentence. `at` is its place in the history. */
export function stepWords({ say }: Telling, step: RecordStep, at: number): string {
  const { phrases, helds, findings, decisions } = say.w
  if (step.erased) return phrases.erased
  const person = step.person ?? step.by
  // What somebody closed with a full stop goes on in this sentence.
  const open = (said: string) => said.replace(/\.$/, '')
  const terms = step.condition ?? step.until
  const words = step.words ? `: ${terms ? open(step.words) : step.words}` : ''
  const deviation = [...(step.condition ? [fill(phrases.condition, { words: step.until ? open(step.condition) : step.condition })] : []), ...(step.until ? [fill(phrases.until, { on: say.day(step.until) })] : [])].map(part => `, ${part}`).join('')
  switch (step.kind) {
    case 'reading': {
      const look = step.value?.method === 'look' ? (step.value.found === 'clear' ? phrases.clear : findings[step.value.finding ?? 'other']) : step.value ? say.reading(step.value, { unit: step.value.method === 'measure' ? 'length' : null }) : ''
      return `${at === 0 ? phrases.found : phrases.readAgainStep}: ${look}${step.words ? `, ${step.words}` : ''}`
    }
    case 'correction': return fill(phrases.corrected, { person }) + words
    case 'assignment': return fill(phrases.assigned, { person }) + (step.due ? `, ${fill(phrases.due, { at: say.at(step.due) })}` : '') + words
    case 'cannot': return fill(phrases.cannot, { for: step.waitsFor ?? '' }) + words
    case 'dangerNow': return fill(phrases.dangerNow, { done: sentence(step.done ? helds[step.done] : ''), person, at: step.toldAt ? say.time(step.toldAt) : '' }) + words
    case 'deviationOffered': return phrases.offered + words + deviation
    case 'deviationAccepted': return fill(step.accepted ? phrases.accepted : phrases.declined, { person, for: step.actsFor ?? '' }) + words + deviation
    case 'decided': return fill(phrases.decided, { person, decision: step.decision ? decisions[step.decision] : '', document: step.document ?? '', on: step.on ? say.day(step.on) : '' }) + words
    case 'referred': return fill(phrases.referred, { person, on: step.on ? say.day(step.on) : '' }) + words
    case 'enteredInError': return fill(phrases.enteredInError, { reason: step.reason ?? '' })
    case 'settled': return fill(phrases.settled, { reason: step.reason ?? '' })
    case 'disputed': return phrases.disputed + words
    default: return phrases.noted + words
  }
}

/** Photos of a deficiency in the order of its history, each told before or after the correction. */
export function photosOfDeficiency({ record, say }: Telling, one: RecordDeficiency): { photo: RecordPhoto, what: string }[] {
  const corrected = one.steps.findIndex(step => step.kind === 'correction')
  return one.steps.flatMap((step, at) => step.photos.flatMap((digest) => {
    const photo = record.photos.find(each => each.digest === digest)
    const what: string = corrected === -1 ? say.w.labels.found : at < corrected ? say.w.labels.before : say.w.labels.after
    return photo ? [{ photo, what: `${what}, ${one.tag}` }] : []
  }))
}

/** The line under a photo: its number, what it shows, who took it when and whence. */
export function captionOf({ photo, what }: { photo: RecordPhoto, what: string }, { say, photoNumbers }: Telling): string {
  const { phrases } = say.w
  const gallery = photo.taken.origin === 'gallery' ? `, ${photo.taken.at ? fill(phrases.fromGallery, { at: say.at(photo.taken.at) }) : phrases.fromGalleryUnknown}` : ''
  return fill(phrases.photoCaption, { n: photoNumbers.get(photo.digest)!, what, by: photo.by, at: say.at(photo.taken.at ?? photo.at) }) + gallery
}
