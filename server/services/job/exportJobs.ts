import type { JobListQuery } from '../../../shared/api/job'
import type { Session } from '../../database/withSession'
import { listJobs } from './listJobs'

// A cell that begins like a formula is kept from being one in a table program.
const cell = (value: unknown) => {
  const text = String(value ?? '')
  const plain = /^[=+\-@\t\r]/.test(text) ? `'${text}` : text
  return /[",\n\r]/.test(plain) ? `"${plain.replace(/"/g, '""')}"` : plain
}

/** All jobs of a filter as CSV (RFC 4180). */
export async function exportJobs(who: Session, query: JobListQuery): Promise<string> {
  const rows: string[][] = [['job', 'title', 'site', 'client', 'needed by', 'state', 'move by', 'move', 'since', 'open tags', 'held out of use', 'length mm']]
  let after: string | undefined
  do {
    const page = await listJobs(who, { ...query, after, most: 200 })
    for (const job of page.rows) rows.push([job.code, job.title, job.siteName, job.clientName, job.neededBy, job.state, job.moveBy, job.move, new Date(job.moveSince).toISOString(), job.openTags, job.heldOut, Math.round(job.length / 320_000)].map(value => String(value ?? '')))
    after = page.next ?? undefined
  } while (after)
  return rows.map(row => row.map(cell).join(',')).join('\r\n')
}
