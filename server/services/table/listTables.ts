import type { z } from 'zod'
import type { JobListQuery } from '../../../shared/api/job'
import type { TagListQuery } from '../../../shared/api/deficiency'
import type { numbersOfSchema } from '../../../shared/api/numbers'
import { Speech } from '../../../shared/record/speech'
import { WORDING } from '../../../shared/record/wording'
import { listPeople } from '../../database/queries/people'
import type { Session } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { listTags } from '../deficiency/listTags'
import { listJobs } from '../job/listJobs'
import { listProvisions } from '../provision/keepProvisions'
import { listRecords } from '../record/readRecord'
import { listClients, listSites } from '../site/keepSites'
import type { ListTable } from './writeTable'

const instant = (at: string | Date | null) => at === null ? null : new Date(at).toISOString()

/** All rows of a list that comes a page at a time. */
async function pages<Row, Query extends { after?: string }>(list: (query: Query) => Promise<{ rows: Row[], next: string | null }>, query: Query): Promise<Row[]> {
  const rows: Row[] = []
  for (let after: string | undefined; ;) {
    const page = await list({ ...query, after, most: 200 })
    rows.push(...page.rows)
    if (!page.next) return rows
    after = page.next
  }
}

/** All jobs of a filter, in its order. */
export async function jobTable(who: Session, query: JobListQuery): Promise<ListTable> {
  const jobs = await pages((page: JobListQuery) => listJobs(who, page), query)
  return { name: 'jobs', rows: [
    ['job', 'title', 'site', 'client', 'needed by', 'state', 'move by', 'move', 'since', 'open tags', 'held out of use', 'length mm'],
    ...jobs.map(job => [job.code, job.title, job.siteName, job.clientName, job.neededBy, job.state, job.moveBy, job.move, instant(job.moveSince), job.openTags, job.heldOut, Math.round(job.length / 320_000)]),
  ] }
}

/** All tags of a filter, in its order. */
export async function tagTable(who: Session, query: TagListQuery): Promise<ListTable> {
  const tags = await pages((page: TagListQuery) => listTags(who, page), query)
  return { name: 'tags', rows: [
    ['tag', 'check', 'job', 'title', 'site', 'element', 'bay', 'class', 'state', 'with', 'due', 'waits for', 'held', 'until'],
    ...tags.map(tag => [tag.tag, tag.title?.en ?? tag.checkId, tag.jobCode, tag.jobTitle, tag.siteName, tag.elementTag, tag.place?.bay, tag.class, tag.state, tag.givenTo, instant(tag.due), tag.waitsFor, tag.held, tag.until]),
  ] }
}

/** Sites with their clients; for staff each client's contacts stand after them. */
export async function siteTable(who: Session): Promise<ListTable> {
  const [sites, clients] = [await listSites(who), who.standing === 'staff' ? await listClients(who) : []]
  const contacts = (clientId: string) => clients.find(client => client.id === clientId)?.contacts.map(one => [one.name, one.email, one.phone].filter(Boolean).join(' ')).join('; ')
  return { name: 'sites', rows: [
    ['site', 'address', 'client', 'authority', 'time zone', 'jobs', 'contacts of the client'],
    ...sites.map(site => [site.name, site.address, site.clientName, site.authorityName, site.timeZone, site.jobs, contacts(site.clientId)]),
  ] }
}

/** Records that the person may see. */
export async function recordTable(who: Session, query: { find: string }): Promise<ListTable> {
  const records = await listRecords(who, { ...query, most: 10_000 })
  return { name: 'records', rows: [
    ['record', 'scope', 'number', 'job', 'site', 'contractor', 'sealing', 'standing', 'sealed at', 'pages', 'bytes', 'digest of the document', 'sent to', 'replaced for'],
    ...records.map(one => [one.code, one.scope, one.number, one.jobTitle, one.siteName, one.organisationName, one.sealing, one.standing, instant(one.sealedAt), one.pages, one.bytes, one.documentDigest,
      one.recipients.map(each => `${each.name} (${each.newest ?? 'queued'})`).join('; '), one.replacedFor.map(each => `${each.tag} by ${each.by}`).join('; ')]),
  ] }
}

export async function peopleTable(who: Session): Promise<ListTable> {
  const people = await withSession(who, listPeople)
  return { name: 'people', rows: [['name', 'e-mail', 'role', 'language', 'ended'], ...people.map(one => [one.name, one.email, one.role, one.language, instant(one.endedAt)])] }
}

/** The numbers in force of one source, each limit in the words of the record. */
export async function numberTable(who: Session, of: z.infer<typeof numbersOfSchema>): Promise<ListTable> {
  const say = new Speech({ wording: WORDING.en, system: 'imperial', zones: {} })
  const numbers = await listProvisions(who, of)
  return { name: 'numbers', rows: [
    ['whose', 'setting', 'on', 'effect', 'limit', 'note', 'citation', 'edition', 'confirmed by', 'confirmed on', 'review on', 'only when'],
    ...numbers.map(one => [one.name, one.setting, one.measurand, one.effect, one.limit ? say.limit({ id: one.id, measurand: one.measurand, ...one.limit, basis: { kind: one.kind, name: one.name } }) : null, one.note,
      one.citation, one.edition, one.confirmedBy, one.confirmedOn, one.reviewOn, one.when]),
  ] }
}
