import type { ErasableEntry, ErasablePage, ErasablePicture } from '../../../shared/api/erasure'
import { jobCode } from '../../../shared/api/job'
import type { AnyEntry, PhotoRef } from '../../../shared/entry/entry'
import { isKnown } from '../../../shared/entry/entry'
import * as erasures from '../../database/queries/erasure'
import { readJobRow } from '../../database/queries/job'
import { recordsOfJob } from '../../database/queries/record'
import { namesOf } from '../../database/queries/sealing'
import type { Session } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { notFound } from '../failure'
import { documentOf } from '../record/readRecord'
import { entriesOf } from '../round/foldRound'

const PEOPLE = ['to', 'by', 'told', 'signer', 'presence'] as const
const WORDS = ['words', 'note', 'reason', 'waitsFor', 'condition', 'for', 'document'] as const

/** Whom an entry names and what it says in words, whatever its kind. */
function particularsOf(entry: AnyEntry): Pick<ErasableEntry, 'names' | 'words'> {
  const payload = (entry.payload ?? {}) as Record<string, unknown>
  const names = PEOPLE.flatMap(key => (payload[key] as { name?: string } | null | undefined)?.name ?? [])
  const words = WORDS.flatMap(key => typeof payload[key] === 'string' && payload[key] ? [payload[key]] : [])
  return { names: [...new Set(names)], words: words.join(' \u00b7 ') || null }
}

/** What of a job can be erased: its pictures, and the entries that name somebody or say something; what was asked and done; and whether a hold stands. */
export async function readErasable(who: Session & { organisationId: string }, jobId: string): Promise<ErasablePage> {
  const { records, ...page } = await withSession(who, async (tx) => {
    const job = await readJobRow(tx, jobId)
    if (!job) throw notFound('job')
    const [names, tags, gone] = [await namesOf(tx), await erasures.elementTags(tx, jobId), new Set(await erasures.erasedPictures(tx, jobId))]
    const entries: ErasableEntry[] = []
    const pictures = new Map<string, ErasablePicture>()
    for (const round of await erasures.roundsOfJob(tx, jobId)) {
      for (const entry of (await entriesOf(tx, round)).filter(isKnown)) {
        const { id, kind, author, madeAt, element } = entry.envelope
        const about = { kind, by: names[author] ?? '', at: madeAt, element: element === null ? '' : tags[element] ?? '' }
        const particulars = particularsOf(entry)
        if (entry.payload === null || particulars.words !== null || particulars.names.length > 0) entries.push({ id, ...about, ...particulars, erased: entry.payload === null })
        const photos = entry.payload && 'photos' in entry.payload ? entry.payload.photos as PhotoRef[] : []
        for (const { digest } of photos) if (!pictures.has(digest)) pictures.set(digest, { digest, ...about, erased: gone.has(digest) })
      }
    }
    return {
      job: { id: job.id, code: jobCode(job.organisationCode, job.number), siteName: job.siteName }, hold: await erasures.holdOf(tx, jobId),
      pictures: [...pictures.values()], entries, asked: (await erasures.erasuresOf(tx, jobId)).map(({ id, entryId, photo, reason, askedBy, askedAt, doneBy, doneAt }) => ({ id, entryId, photo, reason, askedBy, askedAt, doneBy, doneAt })), records: await recordsOfJob(tx, jobId),
    }
  })
  const shownIn: ErasablePage['shownIn'] = {}
  for (const record of records) for (const { digest } of (await documentOf(who.organisationId, record.documentDigest))?.photos ?? []) (shownIn[digest] ??= []).push(record.code)
  return { ...page, shownIn }
}
