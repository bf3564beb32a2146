import type { TagPage } from '../../../shared/api/deficiency'
import { readEntry } from '../../../shared/entry/readEntry'
import * as tags from '../../database/queries/deficiency'
import type { Session } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { notFound } from '../failure'
import { toTagRow } from './listTags'

/** One tag and everything that was written on it, in the order in which the entries answer one another. */
export async function readTag(who: Session, deficiencyId: string): Promise<TagPage> {
  return withSession(who, async (tx) => {
    const found = await tags.readTag(tx, deficiencyId)
    if (!found) throw notFound('tag')
    const { history, ...row } = found
    const texts = new Map((await tags.entryTexts(tx, history)).map(one => [one.id, one]))
    const entries = history.flatMap((id) => {
      const one = texts.get(id)
      const read = one && readEntry({ envelope: one.envelope, payload: one.payload }, { number: one.number, mayBeErased: true })
      return read && read.state !== 'refused' ? [read.entry] : []
    })
    return { row: toTagRow(row), entries, people: await tags.namesOf(tx, entries.map(entry => entry.envelope.author)) }
  })
}
