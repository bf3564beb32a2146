import { jobCode } from '../../../shared/api/job'
import { buildRecord } from '../../../shared/record/buildRecord'
import type { RecordDocument, RecordParticulars } from '../../../shared/record/record'
import type { AnyEntry } from '../../../shared/entry/entry'
import { isKnown } from '../../../shared/entry/entry'
import type { RoundOutcome } from '../../../shared/round/outcome'
import { roundsBefore } from '../../database/queries/entry'
import { readJobRow } from '../../database/queries/job'
import { questionsUntil } from '../../database/queries/question'
import { contactsOf, devicesOf, peopleOf, roundOf } from '../../database/queries/round'
import type { SealingRow } from '../../database/queries/sealing'
import { namesOf, sealedOf } from '../../database/queries/sealing'
import type { Session, Tx } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { recordTexts } from '../../../shared/record/wording'
import { useSettings } from '../../settings'
import { notFound } from '../failure'
import { entriesOf, roundFold } from '../round/foldRound'
import { signedSet } from './signedSet'
import { instantAt, zoneNames } from './zoneNames'

const WHY_REPLACED = { en: 'The work went on, and this record speaks of all of it.', es: 'El trabajo siguió, y esta acta habla de todo él.' }

/** What the outcome still names of the rounds before: their readings and findings go on. */
async function carriedEntries(tx: Tx, jobId: string, roundNumber: number, outcome: RoundOutcome): Promise<AnyEntry[]> {
  const named = new Set([
    ...outcome.checks.flatMap(check => [...check.heads.map(head => head.entry), ...check.earlier, ...check.disturbedBy, ...(check.setAside ? [check.setAside.entry] : [])]),
    ...outcome.deficiencies.flatMap(one => [one.id, ...one.history, ...one.standing.map(each => each.entry)]),
  ])
  const carried: AnyEntry[] = []
  for (const before of await roundsBefore(tx, jobId, roundNumber)) carried.push(...(await entriesOf(tx, before)).filter(isKnown).filter(entry => named.has(entry.envelope.id)))
  return carried
}

/** Gathers all that a record is made of and builds its canonical document: from the entries up to the border alone, so that a resume builds the same. */
export async function gatherRecord(session: Session, row: SealingRow): Promise<RecordDocument> {
  return withSession(session, async (tx) => {
    const job = await readJobRow(tx, row.jobId)
    const round = await roundOf(tx, row.roundId)
    if (!job || !round) throw notFound('job')
    const { entries: all, bases, options } = await roundFold(tx, round)
    const { entries: signed, outcome, late } = signedSet(all.filter(entry => entry.number! <= row.border), bases, options)!
    const known = [...await carriedEntries(tx, row.jobId, round.number, outcome), ...signed]
    const [people, contacts, devices, names, [earlier]] = [await peopleOf(tx), await contactsOf(tx, job.clientId), await devicesOf(tx, round.id), await namesOf(tx), await sealedOf(tx, row.jobId)]
    const sealedAt = instantAt(row.requestedAt, job.timeZone)
    const inspectors = [...new Set(known.filter(entry => ['reading', 'setAside', 'walkOpened'].includes(entry.envelope.kind)).map(entry => entry.envelope.author))]
    const named = (name: string, phone: string) => name ? { name, ...(phone ? { phone } : {}) } : null
    const owner = contacts.find(contact => contact.accepts)
    const asked = await questionsUntil(tx, row.jobId, row.requestedAt)
    const dayAt = (instant: Date) => instantAt(instant, job.timeZone).slice(0, 10)
    const particulars: RecordParticulars = {
      id: row.id, number: row.number, code: row.code, scope: row.scope, language: job.language, system: job.system, sealedAt,
      zones: zoneNames([sealedAt, ...known.map(entry => entry.envelope.madeAt)], job.timeZone),
      checkAddress: `${useSettings().origin}/check/${row.code}`,
      organisation: { id: session.organisationId!, name: job.organisationName, address: [] },
      inspectors: inspectors.map(account => ({ name: names[account] ?? people.find(one => one.accountId === account)?.name ?? '', employer: job.organisationName, builtTheFence: true })),
      client: { id: job.clientId, name: job.clientName, contact: owner ? { name: owner.name, ...(owner.title ? { title: owner.title } : {}) } : null },
      site: { id: job.siteId, name: job.siteName, address: job.siteAddress, onSite: named(job.onsiteName, job.onsitePhone), emergency: named(job.emergencyName, job.emergencyPhone) },
      job: {
        id: job.id, number: jobCode(job.organisationCode, job.number), title: job.title, neededBy: job.neededBy,
        keys: Object.fromEntries((['contract', 'permit', 'buildingCode', 'gateTag'] as const).flatMap(key => job[key] ? [[key, job[key]]] : [])),
      },
      round: { id: round.id, number: round.number },
      amends: earlier ? { id: earlier.id, code: earlier.code, digest: earlier.documentDigest!, how: 'replacesAll', elements: [], why: WHY_REPLACED[job.language] } : null,
      questions: asked.flatMap(one => one.askedOf && one.askedAt && !one.answer ? [{ words: one.words, askedOf: one.askedOf, on: dayAt(one.askedAt) }] : []),
      devicesOut: row.overDevices
        ? devices.filter(device => !device.emptyAt).map(device => ({ device: device.name, holder: names[device.accountId] ?? '', takenAt: instantAt(new Date(device.takenAt), job.timeZone), reason: row.overDevices! }))
        : [],
      late: late.map(({ digest, number, envelope }) => ({ id: envelope.id, digest, number: number!, kind: envelope.kind, by: names[envelope.author] ?? '', madeAt: envelope.madeAt, element: envelope.element, check: envelope.check })),
    }
    return buildRecord({ particulars, basis: bases.get(outcome.basis)!, basisDigest: outcome.basis, entries: known, outcome, names, texts: recordTexts(job.language),
      answers: asked.flatMap(({ words, askedOf, askedAt, answer }) => answer ? [{ words, askedOf, askedOn: askedAt && dayAt(askedAt), answer }] : []),
      notPut: asked.flatMap(one => one.askedOf || one.answer ? [] : [one.words]),
    })
  })
}
