import { PUSH_MOST } from '#shared/sync/sync'

/** Rules of what is offered when, without a database, a clock or a network: the engine (syncField.ts) asks them. */

/** What the outbox needs to know of an entry that is still to be offered. */
export interface Waiting {
  /** Order in which it was written on this device. */
  seq: number
  id: string
  round: string
  kind: string
  /** What it answers or replaces. */
  names: readonly string[]
  /** Digests of its photos. */
  photos: readonly string[]
  /** Size of its texts. */
  size: number
}

/** Texts of one push together, so that a weak signal still gets something through; one entry alone may be larger. */
const PUSH_SIZE = 1_000_000

/** Most photos that one push waits for. */
export const PUSH_PHOTOS = 10

/**
 * What goes first: what speaks of danger, with the entries that it names and that still wait themselves (without its reading it would only be held
 * at the server); the rest in the order in which it was written. Nothing else rides with what is urgent.
 */
export function outboxOrder(waiting: readonly Waiting[]): Waiting[] {
  const written = [...waiting].sort((a, b) => a.seq - b.seq)
  const here = new Map(written.map(one => [one.id, one]))
  const first = new Set<Waiting>()
  const pull = (one: Waiting) => {
    if (first.has(one)) return
    first.add(one)
    for (const id of one.names) if (here.has(id)) pull(here.get(id)!)
  }
  for (const one of written) if (one.kind === 'dangerNow') pull(one)
  return first.size > 0 ? written.filter(one => first.has(one)) : written
}

/** The next push: entries of one round from the head of the outbox, within the bounds of number, size and photos, always at least one. */
export function nextBatch(ordered: readonly Waiting[], most = PUSH_MOST, size = PUSH_SIZE): Waiting[] {
  const batch: Waiting[] = []
  let [sum, photos] = [0, 0]
  for (const one of ordered) {
    if (one.round !== ordered[0]!.round) continue
    sum += one.size
    photos += one.photos.length
    if (batch.length > 0 && (batch.length >= most || sum > size || photos > PUSH_PHOTOS)) break
    batch.push(one)
  }
  return batch
}

/** What an answer means for what was sent. `again`: try later. `pause`: nothing can be sent as who is signed in now. `no`: this is refused. */
export type Answered = 'through' | 'again' | 'pause' | 'no'

/** Reads a status; 0 is no answer at all. Only what may be otherwise the next time is tried again by itself. */
export function answered(status: number): Answered {
  if (status >= 200 && status < 300) return 'through'
  if (status === 401 || status === 403) return 'pause'
  if (status === 408 || status === 425 || status === 429 || status >= 500 || status < 400) return 'again'
  return 'no'
}

const PAUSES = [2, 5, 15, 30, 60, 120, 300]

/** Milliseconds to the next try, after that many failed ones in a row; the server's own word counts when it is longer. `chance` from 0 to 1 spreads devices that lost signal together. */
export function pauseAfter(failures: number, chance: number, retryAfterSeconds = 0): number {
  const seconds = PAUSES[Math.min(Math.max(failures, 1), PAUSES.length) - 1]!
  return Math.round(Math.max(seconds * (0.75 + chance / 2), Math.min(retryAfterSeconds, 3600)) * 1000)
}

/** How long after the last word the outbox waits, so that an answer can still be taken back; what speaks of danger waits for nothing. */
const GRACE = 10_000
const GRACE_MOST = 60_000

/** Milliseconds until what waits may be offered. `oldest` and `newest` are when the first and the last of it were written. */
export function graceLeft(now: number, oldest: number, newest: number): number {
  return Math.max(0, Math.min(newest + GRACE, oldest + GRACE_MOST) - now)
}

/** The running number of a tag of this letter; 0 for another's. */
export function tagNumber(tag: string, letter: string): number {
  return tag.startsWith(letter) && /^\d+$/.test(tag.slice(letter.length)) ? Number(tag.slice(letter.length)) : 0
}

/** The number after the greatest that is known of: those written, those given out in this tab or another, those of earlier rounds. */
export function nextTagNumber(letter: string, tags: Iterable<string>, ...given: number[]): number {
  let greatest = Math.max(0, ...given)
  for (const tag of tags) greatest = Math.max(greatest, tagNumber(tag, letter))
  return greatest + 1
}
