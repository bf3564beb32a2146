import type { TagListQuery } from '../../../shared/api/deficiency'
import type { Session } from '../../database/withSession'
import { listTags } from './listTags'

// A cell that begins like a formula is kept from being one in a table program.
const cell = (value: unknown) => {
  const text = String(value ?? '')
  const plain = /^[=+\-@\t\r]/.test(text) ? `'${text}` : text
  return /[",\n\r]/.test(plain) ? `"${plain.replace(/"/g, '""')}"` : plain
}

/** All tags of a filter as CSV (RFC 4180), in its order. */
export async function exportTags(who: Session, query: TagListQuery): Promise<string> {
  const rows: unknown[][] = [['tag', 'check', 'job', 'title', 'site', 'element', 'bay', 'class', 'state', 'with', 'due', 'waits for', 'held', 'until']]
  let after: string | undefined
  do {
    const page = await listTags(who, { ...query, after, most: 200 })
    for (const tag of page.rows) rows.push([tag.tag, tag.title?.en ?? tag.checkId, tag.jobCode, tag.jobTitle, tag.siteName, tag.elementTag, tag.place?.bay, tag.class, tag.state, tag.givenTo, tag.due && new Date(tag.due).toISOString(), tag.waitsFor, tag.held, tag.until])
    after = page.next ?? undefined
  } while (after)
  return rows.map(row => row.map(cell).join(',')).join('\r\n')
}
