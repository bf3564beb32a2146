import { z } from 'zod'
import type { EntryRefusal } from '../entry/entryRefused'
import type { Instrument } from '../api/instrument'
import type { Role } from '../permission/permission'
import type { RoundOutcome } from '../round/outcome'

/** Named in every path of the field's wire (/api/field/v1): a device with an older one is told to load the newer program, and keeps what it holds. */
export const SYNC_VERSION = 1
/** Most entries in one push and one pull. */
export const PUSH_MOST = 500
export const PULL_MOST = 1000

const uuid = z.string().uuid()
export const roundParamsSchema = z.object({ roundId: uuid }).strict()
export const jobParamsSchema = z.object({ jobId: uuid }).strict()
export const takeSchema = z.object({ device: uuid, name: z.string().trim().min(1).max(120) }).strict()
export const pushSchema = z.object({
  device: uuid,
  /** Texts of any length: each entry is refused or taken by itself (shared/entry/entry.ts, wireEntrySchema). */
  entries: z.array(z.object({ envelope: z.string(), payload: z.string() }).strict()).max(PUSH_MOST),
  /** True when nothing of this round waits on the device any more once these are accepted. */
  empty: z.boolean(),
}).strict()
export const pullSchema = z.object({ after: z.coerce.number().int().min(0).max(2_147_483_647).default(0) }).strict()

/** What became of one entry. Only `accepted` and `resent` let the device stop offering it; `refused` and `quarantined` are shown to the inspector, never dropped. */
export interface PushResult {
  /** Null where the text could not even be read for its id. */
  id: string | null
  state: 'accepted' | 'resent' | 'held' | 'refused' | 'quarantined'
  number: number | null
  refusal: EntryRefusal | null
}
export interface PushAnswer { storeEpoch: string, accepted: number, results: PushResult[] }

export interface PullAnswer {
  storeEpoch: string
  round: { id: string, number: number, state: 'open' | 'frozen' | 'sealed', accepted: number, basis: string }
  entries: { number: number, envelope: string, payload: string }[]
  more: boolean
}

/** All that a device takes along to work on a job with no signal. */
export interface FieldBundle {
  syncVersion: number
  storeEpoch: string
  me: { accountId: string, name: string, role: Role }
  organisation: { id: string, name: string, phone: string | null, timeZone: string }
  job: {
    id: string, number: number, code: string, title: string, neededBy: string | null, system: 'imperial' | 'metric', language: 'en' | 'es'
    permit: string, contract: string, buildingCode: string, gateTag: string
    onsiteName: string, onsitePhone: string, emergencyName: string, emergencyPhone: string
  }
  site: { id: string, name: string, address: string, timeZone: string }
  client: { id: string, name: string }
  round: PullAnswer['round']
  /** What the sealed round before this one came to, from which the fold goes on; null in a job's first round. */
  startsFrom: RoundOutcome | null
  /** Letter that this device's tags begin with. */
  letter: string
  /** Bases of the round by digest, canonical text each; the device checks the digest. */
  bases: { digest: string, text: string }[]
  /** What can be measured with; missing from a bundle that an older server gave. */
  instruments?: Instrument[]
  people: { accountId: string, name: string, role: Role }[]
  contacts: { id: string, accountId: string | null, name: string, title: string, phone: string, accepts: boolean }[]
  /** Devices that have the round along, this one too. */
  devices: { device: string, name: string, accountId: string, letter: string, takenAt: string, emptyAt: string | null }[]
}
