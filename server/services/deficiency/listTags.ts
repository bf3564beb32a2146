import { jobCode } from '../../../shared/api/job'
import type { TagListPage, TagListQuery, TagListRow } from '../../../shared/api/deficiency'
import type { Check } from '../../../shared/checklist/check'
import * as tags from '../../database/queries/deficiency'
import type { Session } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { readBuiltIn } from '../checklist/readBuiltIn'
import { fromPlace } from '../fromPlace'

let checks: Map<string, Check> | undefined
/** A check by its id; ids are stable over versions. */
function checkOf(checkId: string): Check | undefined {
  checks ??= new Map(readBuiltIn().flatMap(list => list.checks.map(check => [check.id, check])))
  return checks.get(checkId)
}

export function toTagRow({ organisationCode, number, key: _, ...row }: tags.TagRowOfStore): TagListRow {
  const check = checkOf(row.checkId)
  return { ...row, jobCode: jobCode(organisationCode, number), title: check?.title ?? null, unit: check?.unit ?? null }
}

/** One page of the tags of all jobs that the person may see, and how many each filter holds. */
export async function listTags(who: Session, query: TagListQuery): Promise<TagListPage> {
  return withSession(who, async (tx) => {
    const rows = await fromPlace(query.after, tags.listTags(tx, query))
    const page = rows.slice(0, query.most)
    const last = page.at(-1)
    return { rows: page.map(toTagRow), next: rows.length > query.most && last ? `${last.id}.${last.key}` : null, counts: await tags.countTags(tx) }
  })
}
