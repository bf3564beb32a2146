import type { OfferedDeviation, PortalJob, PortalSite, PortalSiteRow } from '../../../shared/api/portal'
import type { RecordDocument } from '../../../shared/record/record'
import * as portal from '../../database/queries/portal'
import * as records from '../../database/queries/record'
import type { Session } from '../../database/withSession'
import { forOrganisation, withSession } from '../../database/withSession'
import { notFound } from '../failure'
import { documentOf } from '../record/readRecord'
import { offeredDeviations } from './offeredDeviations'

export const listPortalSites = (who: Session): Promise<PortalSiteRow[]> => withSession(who, portal.portalSites)

/** What the page of a site shows of a record: the line and how it stands, not every reading. */
function cut(document: RecordDocument): RecordDocument {
  const open = document.deficiencies.filter(one => !one.state.startsWith('ended'))
  return { ...document, entries: [], signatures: [], photos: [], notes: [], ignored: [], refusedLinks: [], late: [], checks: document.checks.filter(check => open.some(one => one.element === check.element && one.check === check.check)) }
}

const worth = (row: { standing: string }) => ['current', 'underQuestion', 'superseded', 'withdrawn'].indexOf(row.standing)

/** A site of a client: for each job its records, what the newest one says, and what is offered for acceptance. */
export async function readPortalSite(who: Session & { accountId: string }, siteId: string): Promise<PortalSite> {
  const { head, jobs } = await withSession(who, async (tx) => {
    const head = await portal.portalSiteHead(tx, siteId, who.accountId)
    if (!head) throw notFound('site')
    const rows = (await records.listRecords(tx, '', 500)).filter(row => row.siteId === siteId && row.sealing === 'sealed')
    const jobs: { jobId: string, rows: typeof rows, seen: string[] }[] = []
    for (const jobId of new Set(rows.map(row => row.jobId))) {
      const own = rows.filter(row => row.jobId === jobId).sort((a, b) => worth(a) - worth(b) || b.number - a.number)
      jobs.push({ jobId, rows: own, seen: await portal.offeredOf(tx, head.organisationId, jobId) })
    }
    return { head, jobs }
  })
  const { organisationId, ...page } = head
  const found: PortalJob[] = []
  for (const { jobId, rows, seen } of jobs) {
    const holds = rows.filter(row => row.standing !== 'withdrawn').sort((a, b) => b.number - a.number)[0]
    const document = holds ? await documentOf(organisationId, holds.documentDigest) : null
    const offers: OfferedDeviation[] = seen.length === 0 ? [] : (await withSession(forOrganisation(organisationId), tx => offeredDeviations(tx, jobId)))?.offers.filter(one => seen.includes(one.deficiency)) ?? []
    found.push({ jobId, title: rows[0]!.jobTitle, system: document?.system ?? 'imperial', records: rows, newest: document ? cut(document) : null, offers })
  }
  return { ...page, jobs: found }
}
