import type { FieldBundle, PullAnswer, PushResult } from '#shared/sync/sync'
import type { Waiting } from './outbox'
import type { EntryRow, FieldDatabase, PhotoRow } from './fieldDatabase'
import { storageFault } from './fieldFault'

/** Each act on the device's database is one transaction: after a crash it is there whole or not at all. */

const FORTNIGHT = 14 * 24 * 3600_000
const TWO_DAYS = 2 * 24 * 3600_000

/** Keeps what was taken along. A round that was here stays; a new one begins with nothing pulled. */
export async function keepBundle(db: FieldDatabase, bundle: FieldBundle, now: number): Promise<void> {
  await db.transaction('rw', db.jobs, db.rounds, async () => {
    const jobId = bundle.job.id
    const before = await db.jobs.get(jobId)
    await db.jobs.put({ jobId, bundle, takenAt: now, tags: before?.tags ?? 0, walk: before?.walk ?? null })
    const { id: roundId, state } = bundle.round
    const round = await db.rounds.get(roundId)
    await db.rounds.put(round
      ? { ...round, state, sealedAt: state === 'sealed' ? round.sealedAt ?? now : null }
      : { roundId, jobId, state, cursor: 0, storeEpoch: bundle.storeEpoch, toldEmpty: false, sentAt: null, sealedAt: state === 'sealed' ? now : null })
  }).catch((error) => { throw storageFault(error) })
}

/** Writes an entry down with all that goes with it: the running number of its tag, the walk that it opens, and that its photos are to be sent. */
export async function writeEntry(db: FieldDatabase, row: Omit<EntryRow, 'seq'>, { tags, walk }: { tags: number, walk?: { id: string, round: string } }): Promise<number> {
  return db.transaction('rw', db.entries, db.jobs, db.rounds, db.photos, async () => {
    const seq = await db.entries.add(row)
    await db.jobs.where('jobId').equals(row.jobId).modify((job) => {
      job.tags = Math.max(job.tags, tags)
      if (walk) job.walk = walk
    })
    await db.rounds.update(row.round, { toldEmpty: false, sentAt: null })
    if (row.photos.length > 0) await db.photos.where('digest').anyOf(row.photos).filter(photo => photo.state === 'unnamed').modify({ state: 'waiting' })
    return seq
  }).catch((error) => { throw storageFault(error) })
}

/** A number of a tag is spent when it is given out, whether or not an entry follows. */
export async function spendTag(db: FieldDatabase, jobId: string, number: number): Promise<void> {
  await db.jobs.where('jobId').equals(jobId).modify((job) => { job.tags = Math.max(job.tags, number) })
}

/** Takes entries back that were never on their way to the server and that nothing else here names; all of them or none. */
export async function takeBackEntries(db: FieldDatabase, jobId: string, ids: readonly string[]): Promise<boolean> {
  return db.transaction('rw', db.entries, db.photos, async () => {
    const rows = await db.entries.where('id').anyOf(ids).toArray()
    if (rows.length !== new Set(ids).size || !rows.every(row => row.own && row.jobId === jobId && row.state === 'waiting' && !row.offered)) return false
    const others = await db.entries.where('[jobId+round]').equals([jobId, rows[0]!.round]).filter(row => !ids.includes(row.id)).toArray()
    if (others.some(row => row.names.some(name => ids.includes(name)))) return false
    await db.entries.bulkDelete(rows.map(row => row.seq))
    const named = new Set(others.flatMap(row => row.photos))
    await db.photos.where('digest').anyOf(rows.flatMap(row => row.photos)).filter(photo => photo.state === 'waiting' && !named.has(photo.digest)).modify({ state: 'unnamed' })
    return true
  })
}

/** Keeps a photo's final bytes; the same picture again is the same photo. */
export async function keepPhoto(db: FieldDatabase, photo: Omit<PhotoRow, 'state'>): Promise<void> {
  await db.transaction('rw', db.photos, async () => {
    if (!await db.photos.get(photo.digest)) await db.photos.add({ ...photo, state: 'unnamed' })
  }).catch((error) => { throw storageFault(error) })
}

/** Everything that is still to be offered. */
export async function waitingRows(db: FieldDatabase): Promise<Waiting[]> {
  const rows = await db.entries.where('state').anyOf('waiting', 'held').toArray()
  return rows.map(({ seq, id, round, kind, names, photos, envelope, payload }) => ({ seq, id, round, kind, names, photos, size: envelope.length + payload.length }))
}

/** How many are only here, over all jobs. */
export function waitingCount(db: FieldDatabase): Promise<number> {
  return db.entries.where('state').anyOf('waiting', 'held', 'heldBack').count()
}

/** Marks entries as on their way and gives their texts; those that were taken back meanwhile are not among them. */
export async function offerRows(db: FieldDatabase, seqs: readonly number[]): Promise<EntryRow[]> {
  return db.transaction('rw', db.entries, async () => {
    const rows = (await db.entries.bulkGet([...seqs])).filter(row => row !== undefined && (row.state === 'waiting' || row.state === 'held')) as EntryRow[]
    await db.entries.where('seq').anyOf(rows.map(row => row.seq)).modify({ offered: 1 })
    return rows
  })
}

/** Whether nothing of a round waits here any more once these have gone. */
export async function emptyAfter(db: FieldDatabase, roundId: string, going: ReadonlySet<number> = new Set()): Promise<boolean> {
  const left = await db.entries.where('[round+state]').anyOf(['waiting', 'held', 'heldBack'].map(state => [roundId, state])).toArray()
  const jobId = (await db.rounds.get(roundId))?.jobId ?? ''
  return left.every(row => going.has(row.seq)) && await db.photos.where('[jobId+state]').equals([jobId, 'heldBack']).count() === 0
}

/** Refusals that say only that somebody else is signed in: the entry itself is not at fault. */
const notTheirs = ({ refusal }: PushResult) => refusal?.code === 'notYours' && /^\/envelope\/(author|organisation)$/.test(refusal.pointer)

/** Keeps what became of a push. Tells whether somebody else turns out to be signed in. */
export async function keepResults(db: FieldDatabase, roundId: string, rows: readonly EntryRow[], results: readonly PushResult[], told: { empty: boolean, now: number }): Promise<{ otherPerson: boolean }> {
  return db.transaction('rw', db.entries, db.rounds, db.photos, async () => {
    const byId = new Map(results.filter(one => one.id !== null).map(one => [one.id!, one]))
    let otherPerson = false
    for (const row of rows) {
      const result = byId.get(row.id)
      if (!result) continue
      if (result.state === 'accepted' || result.state === 'resent') await db.entries.update(row.seq, { state: 'sent', number: result.number, refusal: undefined })
      else if (result.state === 'held') await db.entries.update(row.seq, { state: 'held' })
      else if (notTheirs(result)) otherPerson = true
      else await db.entries.update(row.seq, { state: 'heldBack', refusal: { code: result.refusal?.code ?? result.state, message: result.refusal?.message ?? '' } })
    }
    // Something may have been written while this was on its way.
    const toldEmpty = told.empty && await emptyAfter(db, roundId)
    await db.rounds.update(roundId, { toldEmpty, ...(toldEmpty ? { sentAt: told.now } : {}) })
    return { otherPerson }
  })
}

/** Stops offering entries that are refused as they stand; they stay, with the reason. */
export async function holdBack(db: FieldDatabase, seqs: readonly number[], refusal: { code: string, message: string }): Promise<void> {
  await db.entries.where('seq').anyOf([...seqs]).modify({ state: 'heldBack', refusal })
}

/** A person asks for it: what was held back is offered once more. */
export async function offerAgain(db: FieldDatabase, jobId: string): Promise<void> {
  await db.transaction('rw', db.entries, db.photos, async () => {
    await db.entries.where('[jobId+state]').equals([jobId, 'heldBack']).filter(row => row.own === 1 && !row.aside).modify({ state: 'waiting' })
    await db.photos.where('[jobId+state]').equals([jobId, 'heldBack']).modify({ state: 'waiting' })
  })
}

/** Keeps what was pulled, and how far, in one go. What this person wrote is matched by id and keeps its own texts; an erased payload empties ours too. */
export async function keepPulled(db: FieldDatabase, jobId: string, answer: PullAnswer, now: number): Promise<number> {
  return db.transaction('rw', db.entries, db.rounds, async () => {
    const pulled = answer.entries.map(one => ({ ...one, head: headOf(one.envelope) }))
    const here = new Map((await db.entries.where('id').anyOf(pulled.map(one => one.head.id)).toArray()).map(row => [row.id, row]))
    let news = 0
    for (const { number, envelope, payload, head } of pulled) {
      const row = here.get(head.id)
      if (!row) {
        await db.entries.add({ id: head.id, jobId, round: answer.round.id, kind: head.kind, envelope, payload, names: head.names, photos: [], state: 'sent', offered: 1, own: 0, number, writtenAt: now })
        news++
      }
      else if (row.envelope !== envelope) {
        await db.entries.update(row.seq, { envelope, payload, number, state: 'heldBack', aside: row.aside ?? { envelope: row.envelope, payload: row.payload }, refusal: { code: 'quarantined', message: '' } })
        news++
      }
      else {
        const erased = payload === '' && row.payload !== ''
        if (row.number === number && row.state === 'sent' && !erased) continue
        await db.entries.update(row.seq, { number, ...(row.aside ? {} : { state: 'sent' }), ...(erased ? { payload: '' } : {}) })
        news++
      }
    }
    const round = await db.rounds.get(answer.round.id)
    const cursor = Math.max(round?.cursor ?? 0, ...answer.entries.map(one => one.number))
    const { state } = answer.round
    await db.rounds.put({ roundId: answer.round.id, jobId, toldEmpty: false, sentAt: null, ...round, state, cursor, storeEpoch: answer.storeEpoch, sealedAt: state === 'sealed' ? round?.sealedAt ?? now : null })
    return news
  }).catch((error) => { throw storageFault(error) })
}

/** What is looked up by, of an envelope that a newer program may have written. */
export function headOf(envelope: string): { id: string, kind: string, basis: string | null, names: string[] } {
  const { id, kind, basis, answers, replaces } = JSON.parse(envelope) as { id: string, kind: string, basis?: string | null, answers?: string[], replaces?: string[] }
  return { id, kind, basis: basis ?? null, names: [...answers ?? [], ...replaces ?? []] }
}

/** The server's store was brought back from a backup: everything of this person is offered again, and pulled from the start. Numbers are the store's to give. */
export async function newEpoch(db: FieldDatabase, storeEpoch: string): Promise<void> {
  await db.transaction('rw', db.entries, db.rounds, db.photos, async () => {
    await db.entries.where('state').anyOf('sent', 'held', 'heldBack').modify((row) => {
      row.number = null
      if (row.own && !row.aside) row.state = 'waiting'
    })
    await db.photos.where('state').anyOf('sent', 'heldBack').modify({ state: 'waiting' })
    await db.rounds.toCollection().modify({ cursor: 0, storeEpoch, toldEmpty: false })
  })
}

/** How a job stands on this device. */
export interface JobTally { waiting: number, heldBack: number, sentAt: number | null }
export async function tallyOf(db: FieldDatabase, jobId: string): Promise<JobTally> {
  const count = (state: string) => db.entries.where('[jobId+state]').equals([jobId, state]).count()
  const [waiting, held, entries, photos, rounds] = await Promise.all([count('waiting'), count('held'), count('heldBack'), db.photos.where('[jobId+state]').equals([jobId, 'heldBack']).count(), db.rounds.where('jobId').equals(jobId).toArray()])
  const times = rounds.flatMap(round => round.sentAt ?? [])
  return { waiting: waiting + held, heldBack: entries + photos, sentAt: times.length > 0 ? Math.max(...times) : null }
}

/** Takes a job off this device. Refused (false) while anything of it is only here. */
export async function letGo(db: FieldDatabase, jobId: string): Promise<boolean> {
  return db.transaction('rw', db.jobs, db.rounds, db.entries, db.photos, async () => {
    const { waiting, heldBack } = await tallyOf(db, jobId)
    if (waiting + heldBack > 0 || await db.photos.where('[jobId+state]').equals([jobId, 'waiting']).count() > 0) return false
    await Promise.all([db.jobs.delete(jobId), db.rounds.where('jobId').equals(jobId).delete(), db.entries.where('jobId').equals(jobId).delete(), db.photos.where('jobId').equals(jobId).delete()])
    return true
  })
}

/** Forgets rounds that were seen sealed a fortnight ago and of which nothing waits, and pictures that no entry ever named. */
export async function forgetOld(db: FieldDatabase, now: number): Promise<void> {
  await db.transaction('rw', db.jobs, db.rounds, db.entries, db.photos, async () => {
    await db.photos.where('state').equals('unnamed').filter(photo => now - photo.writtenAt > TWO_DAYS).delete()
    for (const round of await db.rounds.filter(one => one.sealedAt !== null && now - one.sealedAt > FORTNIGHT).toArray()) {
      const job = await db.jobs.get(round.jobId)
      const current = job?.bundle.round.id === round.roundId
      if (!await emptyAfter(db, round.roundId) || (current && !await letGo(db, round.jobId))) continue
      if (current) continue
      const rows = db.entries.where('[jobId+round]').equals([round.jobId, round.roundId])
      await db.photos.where('digest').anyOf((await rows.toArray()).flatMap(row => row.photos)).filter(photo => photo.state === 'sent').delete()
      await rows.delete()
      await db.rounds.delete(round.roundId)
    }
  })
}
