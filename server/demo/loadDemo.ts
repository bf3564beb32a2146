import { randomUUID } from 'node:crypto'
import { writeFileSync } from 'node:fs'
import type { PhotoRef, WireEntry } from '../../shared/entry/entry'
import type { Line } from '../../shared/line/line'
import { elementsOf } from '../../shared/line/line'
import { readQuickLine } from '../../shared/line/readQuickLine'
import { INCH } from '../../shared/measure/length'
import { PUSH_MOST } from '../../shared/sync/sync'
import { entrance } from '../database/entrance'
import { basesOf, newestRound } from '../database/queries/round'
import type { Session } from '../database/withSession'
import { withSession } from '../database/withSession'
import { hashPassword } from '../services/account/password'
import { acceptEntries } from '../services/entry/acceptEntries'
import { createJob } from '../services/job/saveJob'
import { saveLine } from '../services/job/saveLine'
import { storePhoto } from '../services/photo/storePhoto'
import { requestSealing } from '../services/record/requestSealing'
import { sealRecord } from '../services/record/sealRecord'
import { putProvision } from '../services/provision/keepProvisions'
import { readBasis, roundFold } from '../services/round/foldRound'
import { listAuthorities, listSites, putAuthority, putClient, putContact, putSite } from '../services/site/keepSites'
import { sendRecord } from '../services/transmittal/sendRecord'
import { useSettings } from '../settings'
import { consentOf } from '../../shared/round/consent'
import { fold } from '../../shared/round/fold'
import { makeSignSheet } from '../../shared/round/signSheet'
import { askAboutLatch } from './demoQuestions'
import { DemoWalker, type DemoFinding } from './demoWalker'
import { CONTACTS, DEMO_PASSWORD, ORGANISATIONS } from './people'
import { type DemoPicture, drawPicture } from './pictures'
import { CLIENTS, type DemoJob } from './scenes'

interface Person { id: string, name: string, session: Session & { accountId: string, organisationId: string, organisationName: string } }

/** Loads the demo through the services that people use, as if they had done it; nothing is written beside them. */
export async function loadDemo(): Promise<void> {
  const people = await makePeople()
  for (const client of CLIENTS) {
    const staff = people.get(client.organisation)!
    const manager = staff.get('manager')!
    const clientId = randomUUID()
    await putClient(manager.session, { id: clientId, name: client.name, address: '' })
    const contacts = new Map(client.contacts.map(key => [key, randomUUID()]))
    for (const [key, id] of contacts) await putContact(manager.session, clientId, { id, ...CONTACTS[key] })
    for (const site of client.sites) {
      const siteId = randomUUID()
      await putSite(manager.session, { id: siteId, clientId, name: site.name, address: site.address, timeZone: 'America/New_York', authorityId: await authority(manager.session, site.authority) })
      for (const job of site.jobs) await playJob(job, siteId, staff, [...contacts.entries()])
    }
  }
  await takeContacts()
  const signIns = [...ORGANISATIONS.flatMap(organisation => organisation.people.map(({ name, email, role }) => ({ name, email, role, organisation: organisation.name, password: DEMO_PASSWORD }))),
    { name: CONTACTS.ruth.name, email: CONTACTS.ruth.email, role: 'client', organisation: 'Wrenfold School District', password: DEMO_PASSWORD }]
  writeFileSync(`${useSettings().dataFolder}/demo-sign-ins.json`, JSON.stringify(signIns, null, 2))
}

async function makePeople(): Promise<Map<string, Map<string, Person>>> {
  const passwordHash = await hashPassword(DEMO_PASSWORD)
  const all = new Map<string, Map<string, Person>>()
  for (const { key, people, ...organisation } of ORGANISATIONS) {
    const organisationId = randomUUID()
    await entrance.makeOrganisation({ id: organisationId, ...organisation, system: 'imperial', language: 'en' })
    const staff = new Map<string, Person>()
    for (const { email, name, language, role } of people) {
      const id = await entrance.makeAccount(randomUUID(), email, name, language)
      await entrance.changeAccount(id, { passwordHash })
      await entrance.takeMembership(organisationId, id, role)
      staff.set(role, { id, name, session: { accountId: id, standing: role === 'crew' ? 'crew' : 'staff', organisationId, organisationName: organisation.name, role } })
    }
    all.set(key, staff)
  }
  return all
}

/** Contacts who sign in by password have an account already; the others take theirs by the link in their mail. */
async function takeContacts(): Promise<void> {
  const ruth = await entrance.makeAccount(randomUUID(), CONTACTS.ruth.email, CONTACTS.ruth.name, 'en')
  await entrance.changeAccount(ruth, { passwordHash: await hashPassword(DEMO_PASSWORD) })
  await entrance.takeContactsByEmail(CONTACTS.ruth.email, ruth)
}

/** Local numbers of an authority that does not exist. */
async function setNumbers(session: Session & { accountId: string }, authorityId: string, name: string): Promise<void> {
  const numbers = [
    { measurand: 'tie-spacing-post', datum: 'centre-to-centre', high: 15 * INCH, setting: 'school' as const, citation: 'number 9' },
    { measurand: 'band-spacing', datum: 'centre-to-centre', high: 12 * INCH, setting: 'school' as const, citation: 'number 10' },
    { measurand: 'gap-below', datum: 'ground', high: 4 * INCH, setting: 'school' as const, citation: 'number 12' },
  ]
  for (const { measurand, datum, high, setting, citation } of numbers) {
    await putProvision(session, { authorityId, clientId: null, provision: {
      id: randomUUID(), kind: 'authority', measurand, setting, effect: 'replace', limit: { datum, unit: 'length', low: null, high: { imperial: high, inclusive: true }, avoid: null },
      name, citation, edition: '2024', readAt: 'letter of the building division', confirmedBy: 'R. Tamm', confirmedOn: daysFromNow(-200).toISOString().slice(0, 10), reviewOn: daysFromNow(measurand === 'gap-below' ? 40 : 165).toISOString().slice(0, 10),
    } })
  }
}

async function authority(session: Session & { accountId: string }, name: string): Promise<string> {
  const known = (await listAuthorities(session)).find(one => one.name === name)
  if (known) return known.id
  const id = randomUUID()
  await putAuthority(session, { id, name })
  await setNumbers(session, id, name)
  return id
}

const daysFromNow = (days: number) => new Date(Date.now() + days * 86_400_000)

/** Plays a job as far as its stage says. */
async function playJob(job: DemoJob, siteId: string, staff: Map<string, Person>, contacts: [string, string][]): Promise<void> {
  const [manager, inspector, crew] = [staff.get('manager')!, staff.get('inspector')!, staff.get('crew')!]
  const jobId = randomUUID()
  const site = (await listSites(manager.session)).find(one => one.id === siteId)!
  await createJob(manager.session, {
    id: jobId, siteId, title: job.title, neededBy: daysFromNow(job.neededIn).toISOString().slice(0, 10), onsiteName: CONTACTS.joss.name, onsitePhone: CONTACTS.joss.phone,
    emergencyName: 'Site office', emergencyPhone: '(555) 010-0199', contract: '', permit: job.permit ?? '', buildingCode: '', gateTag: '', system: 'imperial', language: 'en',
    checklists: job.checklists, given: [{ accountId: inspector.id, as: 'inspector' }, { accountId: crew.id, as: 'crew' }],
  })
  const read = readQuickLine(job.line, { system: 'imperial', newId: () => randomUUID() })
  if ('errors' in read) throw new Error(`the line of the demo's job "${job.title}" is not understood: ${JSON.stringify(read.errors)}`)
  await saveLine(manager.session, jobId, 0, read.line, 'First line of the job')
  if (job.stage === 'line') return

  const round = await withSession(manager.session, async tx => ({ round: (await newestRound(tx, jobId))!, bases: await basesOf(tx, jobId) }))
  const { basis: digest, id: roundId } = round.round
  const where = { organisation: manager.session.organisationId, job: jobId, round: roundId, basis: digest }
  const pinned = readBasis(digest, round.bases.find(one => one.digest === digest)!.text)
  if (job.stage === 'waitsForPart') await askAboutLatch({ ...manager.session, name: manager.name, email: '' }, jobId, pinned, site.authorityName ?? '')
  const walker = new DemoWalker(where, pinned, inspector, daysFromNow(-3))
  walker.openWalk(`${inspector.name}'s phone`)
  const found = await findings(job, read.line, walker, (ref, bytes) => storePhoto(inspector.session, jobId, ref.digest, bytes))
  const ids = walker.answer(found, job.stage === 'begun' ? 0.55 : 1)
  await send(inspector, roundId, walker.wires)
  if (job.stage === 'begun' || job.stage === 'walked') return
  await play(job, { jobId, roundId, where, pinned, walker, found, ids, manager, inspector, crew, contacts, siteName: site.name })
}

async function send(person: Person, roundId: string, wires: WireEntry[]): Promise<void> {
  for (const batch = wires.splice(0, PUSH_MOST); batch.length > 0; batch.splice(0, batch.length, ...wires.splice(0, PUSH_MOST))) {
    const { results } = await acceptEntries(person.session, roundId, batch)
    const bad = results.find(one => one.state !== 'accepted')
    if (bad) throw new Error(`an entry of the demo was not accepted: ${JSON.stringify(bad)}`)
  }
}

/** What is wrong on a demo fence; clean where the record is to be final. */
async function findings(job: DemoJob, line: Line, walker: DemoWalker, keep: (ref: PhotoRef, bytes: Buffer) => Promise<unknown>): Promise<DemoFinding[]> {
  if (['finalSealed', 'finalSent', 'signed'].includes(job.stage)) return []
  const elements = elementsOf(line)
  const run = elements.filter(element => element.kind === 'run').at(-1)!
  const gate = elements.find(element => element.kind === 'gate' && element.faces.outer.settings.includes('pool')) ?? elements.find(element => element.kind === 'gate')!
  const photo = async (picture: DemoPicture, seed: number) => {
    const { bytes, ref } = await drawPicture(picture, seed, walker.now())
    await keep(ref, bytes)
    return [ref]
  }
  const face = (bay: number, height: number) => ({ face: 'outer' as const, bay, from: null, height: height * INCH })
  const all: DemoFinding[] = [
    { element: run.id, check: 'tie-ends-in', tag: 'A1', value: { method: 'look', found: 'finding', finding: 'tieEnd' }, place: face(3, 50), note: 'Two ends on the top rail.', photos: await photo('tieOut', line.sides.length * 7 + 3) },
    { element: run.id, check: 'gap-below', tag: 'A2', value: { method: 'measure', amount: 4.625 * INCH, text: '4 5/8', system: 'imperial' }, place: face(4, 0), photos: await photo('gapWide', 11) },
    { element: gate.id, check: 'latch-holds', tag: 'A3', value: { method: 'trial', tries: [{ from: 'shaken', good: 1, of: 3 }] }, place: { face: null, bay: null, from: null, height: null }, note: 'Opens when the leaf is lifted.', photos: await photo('latchLow', 5) },
    { element: elements[0]!.id, check: 'post-spacing', tag: 'A4', value: { method: 'measure', amount: 122 * INCH, text: '10 ft 2 in', system: 'imperial' }, place: face(2, 0), photos: [] },
  ]
  return all.filter(one => walker.calls(one.element, one.check))
}

interface Play { jobId: string, roundId: string, where: { organisation: string, job: string, round: string, basis: string }, pinned: ReturnType<typeof readBasis>, walker: DemoWalker, found: DemoFinding[], ids: Map<string, string>, manager: Person, inspector: Person, crew: Person, contacts: [string, string][], siteName: string }

async function play(job: DemoJob, on: Play): Promise<void> {
  const { found, ids, inspector, crew, manager, where, pinned, roundId } = on
  const about = (tag: string) => ({ element: found.find(one => one.tag === tag)!.element, check: found.find(one => one.tag === tag)!.check })
  const desk = new DemoWalker(where, pinned, manager, daysFromNow(-2))
  const hands = new DemoWalker(where, pinned, crew, daysFromNow(-1.5))
  const again = new DemoWalker(where, pinned, inspector, daysFromNow(-1))
  const by = { account: crew.id, name: crew.name }
  const assignments = new Map<string, string>()
  for (const [tag, reading] of ids) assignments.set(tag, desk.write('assignment', { to: by, due: daysFromNow(1).toISOString().replace('Z', '+00:00') }, { ...about(tag), answers: [reading] }))
  await send(manager, roundId, desk.wires)
  if (job.stage === 'correcting') return

  const corrections = new Map<string, string>()
  for (const [tag, reading] of ids) {
    const waits = tag === 'A3' && job.stage === 'waitsForPart'
    if (tag === 'A4') continue
    if (waits) hands.write('cannot', { waitsFor: 'latch with a guard', words: 'The keeper is bent; a new latch is ordered.' }, { ...about(tag), answers: [reading, assignments.get(tag)!] })
    else corrections.set(tag, hands.write('correction', { by, photos: [], words: 'Done and tried.' }, { ...about(tag), answers: [reading, assignments.get(tag)!] }))
  }
  await send(crew, roundId, hands.wires)
  if (job.stage === 'corrected') return
  if (ids.has('A4')) {
    const reading = ids.get('A4')!
    desk.write('deviationOffered', { words: 'One bay is 10 ft 2 in; fabric and ties conform.', condition: 'No wind screen is hung on this bay.', until: daysFromNow(400).toISOString().slice(0, 10) }, { ...about('A4'), answers: [reading] })
    await send(manager, roundId, desk.wires)
  }
  if (job.stage === 'waitsForPart') return

  for (const [tag, correction] of corrections) again.reread(about(tag), ids.get(tag)!, correction)
  again.readAgainAll(await outcomeOf(on))
  await send(inspector, roundId, again.wires)
  again.readAgainAll(await outcomeOf(on))
  await send(inspector, roundId, again.wires)
  if (job.stage === 'offered') return

  await sign(on, job.stage === 'interimSent' ? 'interim' : 'final', again)
  if (job.stage === 'signed') return
  const recordId = randomUUID()
  await requestSealing(manager.session, on.jobId, { id: recordId, scope: job.stage === 'interimSent' ? 'interim' : 'final', overDevices: null })
  await sealRecord(where.organisation, recordId)
  if (job.stage === 'finalSealed') return
  await sendRecord(manager.session, recordId, { id: randomUUID(), contacts: on.contacts.map(([, id]) => id), message: 'Thank you for the quick way in.' })
}

const outcomeOf = (on: Play) => withSession(on.manager.session, async (tx) => {
  const round = (await newestRound(tx, on.jobId))!
  const { entries, bases, options } = await roundFold(tx, { ...round, jobId: on.jobId })
  return { entries, outcome: fold(entries, bases, options) }
})

async function sign(on: Play, scope: 'interim' | 'final', walker: DemoWalker): Promise<void> {
  const { entries, outcome } = await outcomeOf(on)
  const signer = { account: on.inspector.id, name: on.inspector.name }
  const sheet = makeSignSheet(entries, outcome, on.pinned, { scope, meaning: 'present', consent: consentOf('present', 'en'), signer, role: 'inspector', known: 'ownAccount', presence: null })
  walker.write('signature', { state: 'signed', meaning: 'present', signer, role: 'inspector', known: 'ownAccount', presence: null, sheet: sheet.text, sheetDigest: sheet.digest, strokes: null, typed: on.inspector.name })
  await send(on.inspector, on.roundId, walker.wires)
}
