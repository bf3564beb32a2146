import type { FieldBundle } from '#shared/sync/sync'
import { PUSH_MOST } from '#shared/sync/sync'
import { answered, nextBatch, outboxOrder } from './outbox'
import type { FieldDatabase } from './fieldDatabase'
import { emptyAfter, headOf, holdBack, keepBundle, keepPulled, keepResults, newEpoch, offerRows, waitingRows } from './fieldStore'
import type { FieldWire, Reply } from './fieldWire'

/** Whose device this is. */
export interface FieldDevice { accountId: string, organisationId: string, device: string, name: string }

/**
 * How a run ended. `again`: no signal, or the server is busy; try later. `pause`: nothing can be sent until a person does something.
 */
export type RunEnd =
  | { state: 'done' }
  | { state: 'again', retryAfterSeconds: number }
  | { state: 'pause', why: 'signIn' | 'notAllowed' | 'otherPerson' }

export interface Run {
  db: FieldDatabase
  wire: FieldWire
  who: FieldDevice
  now: () => number
  /** Something of that job changed in the database. */
  changed: (jobId: string) => void
}

/** Ends a run from wherever it is. */
class Ended extends Error {
  constructor(readonly end: RunEnd) { super(end.state) }
}

/** What came through; a run goes no further where nothing can. Null: the server refuses this. */
function through<T>(reply: Reply<T>): T | null {
  switch (answered(reply.status)) {
    case 'through': return reply.body
    case 'again': throw new Ended({ state: 'again', retryAfterSeconds: reply.retryAfterSeconds })
    case 'pause': throw new Ended({ state: 'pause', why: reply.status === 401 ? 'signIn' : 'notAllowed' })
    case 'no': return null
  }
}

/**
 * One run: asks who is signed in, offers what waits (photos before the entries that name them, danger first), pulls what others wrote, and tells
 * whether the device is empty. It may be killed at any point: everything kept is kept by whole transactions, and offering twice is harmless.
 */
export async function syncOnce(run: Run): Promise<RunEnd> {
  try {
    const me = through(await run.wire.me())
    if (!me || me.account.id !== run.who.accountId || me.organisation?.id !== run.who.organisationId) return { state: 'pause', why: 'otherPerson' }
    await offerAll(run)
    const pulled = await pullAll(run)
    // What was held for want of what others wrote may be let in now.
    if (pulled) await offerAll(run)
    await tellEmpty(run)
    return { state: 'done' }
  }
  catch (error) {
    if (error instanceof Ended) return error.end
    throw error
  }
}

async function offerAll(run: Run): Promise<void> {
  const { db, wire, who } = run
  const tried = new Set<number>()
  let most = PUSH_MOST
  for (;;) {
    const waiting = (await waitingRows(db)).filter(one => !tried.has(one.seq))
    if (waiting.length === 0) return
    const batch = nextBatch(outboxOrder(waiting), most)
    for (const digest of new Set(batch.flatMap(one => one.photos))) await offerPhoto(run, digest)
    const rows = await offerRows(db, batch.map(one => one.seq))
    if (rows.length === 0) continue
    const roundId = rows[0]!.round
    const empty = await emptyAfter(db, roundId, new Set(rows.map(row => row.seq)))
    const reply = await wire.push(roundId, { device: who.device, entries: rows.map(({ envelope, payload }) => ({ envelope, payload })), empty })
    const answer = through(reply)
    if (!answer) {
      // One of them is what the server cannot take: halve until it is found; the others go on.
      const refusal = reply.problem ?? { code: 'invalid', message: '' }
      const whole = reply.status === 404
      if (whole || rows.length === 1) {
        await holdBack(db, rows.map(row => row.seq), refusal)
        run.changed(rows[0]!.jobId)
      }
      else most = Math.floor(rows.length / 2)
      continue
    }
    if (await epochTurned(run, roundId, answer.storeEpoch)) {
      tried.clear()
      continue
    }
    most = Math.min(PUSH_MOST, most * 2)
    const { otherPerson } = await keepResults(db, roundId, rows, answer.results, { empty, now: run.now() })
    run.changed(rows[0]!.jobId)
    if (otherPerson) throw new Ended({ state: 'pause', why: 'otherPerson' })
    for (const row of rows) tried.add(row.seq)
  }
}

/** A photo that the server refuses does not hold up the words: the entry goes, the photo is shown as held back. */
async function offerPhoto({ db, wire }: Run, digest: string): Promise<void> {
  const photo = await db.photos.get(digest)
  if (!photo || photo.state === 'sent' || photo.state === 'heldBack') return
  const reply = await wire.photo(photo.jobId, digest, photo.bytes)
  if (through(reply)) await db.photos.update(digest, { state: 'sent', refusal: undefined })
  else await db.photos.update(digest, { state: 'heldBack', refusal: reply.problem ?? { code: 'invalid', message: '' } })
}

/** After a restore the server knows less than it did: everything is offered again. Returns whether that happened. */
async function epochTurned({ db, changed }: Run, roundId: string, storeEpoch: string): Promise<boolean> {
  const round = await db.rounds.get(roundId)
  if (!round || round.storeEpoch === storeEpoch) return false
  await newEpoch(db, storeEpoch)
  for (const job of await db.jobs.toArray()) changed(job.jobId)
  return true
}

async function pullAll(run: Run): Promise<boolean> {
  const { db, wire } = run
  let any = false
  for (const job of await db.jobs.toArray()) {
    const { bundle } = job
    let takeAgain = false
    for (const { roundId } of await db.rounds.where('jobId').equals(job.jobId).toArray()) {
      for (let more = true; more;) {
        const round = (await db.rounds.get(roundId))!
        const answer = through(await wire.pull(roundId, round.cursor))
        if (!answer) break
        if (await epochTurned(run, roundId, answer.storeEpoch)) {
          any = true
          continue
        }
        const news = await keepPulled(db, job.jobId, answer, run.now())
        if (news > 0 || answer.round.state !== round.state) run.changed(job.jobId)
        any ||= news > 0
        const unknownBasis = (digest: string | null) => digest !== null && !bundle.bases.some(one => one.digest === digest)
        takeAgain ||= bundle.storeEpoch !== answer.storeEpoch || (bundle.round.id === roundId && bundle.round.state !== answer.round.state)
          || unknownBasis(answer.round.basis) || answer.entries.some(one => unknownBasis(headOf(one.envelope).basis))
        more = answer.more
      }
    }
    if (takeAgain) await takeAlong(run, job.jobId)
  }
  return any
}

/** Takes a job along, or again: its newest round, bases, people. Answers with the bundle, or what the server says against it. */
export async function takeAlong({ db, wire, who, now, changed }: Run, jobId: string): Promise<Reply<FieldBundle>> {
  const reply = await wire.take(jobId, { device: who.device, name: who.name })
  if (answered(reply.status) === 'through' && reply.body) {
    await keepBundle(db, reply.body, now())
    changed(jobId)
  }
  return reply
}

/** A device that has the round along counts as out until it says that nothing waits on it. */
async function tellEmpty({ db, wire, who, now, changed }: Run): Promise<void> {
  for (const { roundId, jobId } of await db.rounds.filter(round => !round.toldEmpty && round.state !== 'sealed').toArray()) {
    if (!await emptyAfter(db, roundId)) continue
    if (!through(await wire.push(roundId, { device: who.device, entries: [], empty: true }))) continue
    // What was written while this was on its way waits: only a round that is still empty was told so.
    await db.transaction('rw', db.rounds, db.entries, db.photos, async () => {
      if (await emptyAfter(db, roundId)) await db.rounds.update(roundId, { toldEmpty: true, sentAt: now() })
    })
    changed(jobId)
  }
}
