import Dexie, { type EntityTable } from 'dexie'
import type { FieldBundle, PullAnswer } from '#shared/sync/sync'
import { uuidv7 } from 'uuidv7'

/** A job that was taken along. */
export interface JobRow {
  jobId: string
  bundle: FieldBundle
  /** Device clock, ms. */
  takenAt: number
  /** Greatest number given to a tag on this device. */
  tags: number
  /** The walk in hand. */
  walk: { id: string, round: string } | null
}

/** A round of which entries are kept here. */
export interface RoundRow {
  roundId: string
  jobId: string
  state: PullAnswer['round']['state']
  /** Number up to which everything was pulled. */
  cursor: number
  storeEpoch: string
  /** Whether the server was told that nothing waits here. */
  toldEmpty: boolean
  /** When nothing waited any more, ms; null while something does. */
  sentAt: number | null
  /** When this device saw that the round was sealed, ms. */
  sealedAt: number | null
}

/**
 * An entry as its two texts, which nobody ever writes again. `waiting`: to be offered. `held`: the server waits for what it names; offered again.
 * `heldBack`: refused; not offered by itself, shown. `sent`: the server has it, also everything that others wrote.
 */
export interface EntryRow {
  seq: number
  id: string
  jobId: string
  round: string
  kind: string
  envelope: string
  payload: string
  names: string[]
  photos: string[]
  state: 'waiting' | 'held' | 'heldBack' | 'sent'
  /** Whether it was ever on its way to the server: then it cannot be taken back. */
  offered: 0 | 1
  /** Written on this device. */
  own: 0 | 1
  number: number | null
  /** Device clock, ms. */
  writtenAt: number
  refusal?: { code: string, message: string }
  /** Our own texts where the server holds others under the same id. */
  aside?: { envelope: string, payload: string }
}

/** A photo's final bytes. `unnamed`: no entry names it yet, it is not sent. */
export interface PhotoRow {
  digest: string
  jobId: string
  bytes: Uint8Array
  state: 'unnamed' | 'waiting' | 'heldBack' | 'sent'
  writtenAt: number
  refusal?: { code: string, message: string }
}

/** Everything that one person keeps on this device for one organisation. Its name holds both ids: nobody else's pages ever open it. */
export class FieldDatabase extends Dexie {
  kept!: EntityTable<{ key: string, value: string }, 'key'>
  jobs!: EntityTable<JobRow, 'jobId'>
  rounds!: EntityTable<RoundRow, 'roundId'>
  entries!: EntityTable<EntryRow, 'seq'>
  photos!: EntityTable<PhotoRow, 'digest'>

  constructor(accountId: string, organisationId: string) {
    // Strict: an act counts as written when it is on the disk, not when the browser has it in mind.
    super(`smoothside ${accountId} ${organisationId}`, { chromeTransactionDurability: 'strict' })
    this.version(1).stores({
      kept: 'key',
      jobs: 'jobId',
      rounds: 'roundId, jobId',
      entries: '++seq, &id, [jobId+round], [round+state], [jobId+state], state',
      photos: 'digest, [jobId+state], jobId, state',
    })
  }

  /** This device's id for this person and organisation, so that two people who share a phone have a letter each for their tags. */
  async deviceId(): Promise<string> {
    return this.transaction('rw', this.kept, async () => {
      const before = await this.kept.get('device')
      if (before) return before.value
      const value = uuidv7()
      await this.kept.add({ key: 'device', value })
      return value
    })
  }
}
