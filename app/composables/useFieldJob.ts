import type { ComputedRef, EffectScope, Ref, ShallowRef } from 'vue'
import type { EntryKind, KeptEntry, PayloadOf, PhotoRef, Place } from '#shared/entry/entry'
import type { Line } from '#shared/line/line'
import type { RoundBasis } from '#shared/round/basis'
import type { RoundOutcome } from '#shared/round/outcome'
import type { FieldBundle } from '#shared/sync/sync'
import { openFieldJob } from '~/offline/fieldJob'
import type { Trouble } from '~/offline/fieldSender'

/** What a person writes down; ids, salt, instant, round, walk and basis are given by the device. */
export interface FieldDraft<K extends EntryKind> {
  kind: K
  element?: string | null
  check?: string | null
  place?: Place | null
  answers?: string[]
  replaces?: string[]
  /** Only where it is not the basis in force. */
  basis?: string
  payload: Omit<PayloadOf<K>, 'salt'>
}

/** A job as this device has it: everything works with no signal. */
export interface FieldJob {
  /** `missing`: not on this device, and it could not be taken along. `refused`: nobody is signed in, or it is not theirs; `why` tells which. */
  state: Ref<'loading' | 'ready' | 'missing' | 'refused'>
  why: Ref<string | null>
  bundle: ShallowRef<FieldBundle | null>
  /** The basis in force. */
  basis: ComputedRef<RoundBasis | null>
  /** What everything on this device comes to, by the same fold as the server's. */
  outcome: ComputedRef<RoundOutcome | null>
  /** As built. */
  line: ComputedRef<Line | null>
  /** Of the round in hand, own and pulled. */
  entries: ShallowRef<KeptEntry[]>
  walkId: Ref<string | null>
  /** Opens a walk on this device, once; `again` opens another (a re-walk). */
  startWalk(again?: boolean): Promise<void>
  /** Answers with the entry's id once it is on the disk; throws FieldFault or EntryRefused. */
  write<K extends EntryKind>(draft: FieldDraft<K>): Promise<string>
  /** Letter and running number; never given twice on this device. */
  nextTag(): string
  /** Takes back entries that were never offered to the server and that nothing names; all or none. */
  takeBack(ids: string[]): Promise<boolean>
  /** Makes and keeps a photo's final bytes; sent once an entry names it. Throws FieldFault. */
  addPhoto(file: Blob, origin: 'camera' | 'gallery'): Promise<PhotoRef>
  /** Where the picture can be shown from; null when it is not here and there is no signal. */
  photoUrl(digest: string): Promise<string | null>
  tally: ComputedRef<{ waiting: number, heldBack: number, sentAt: string | null }>
  sendNow(): Promise<void>
  /** What the server refused; pressed by a person, it is offered once more. */
  offerAgain(): Promise<void>
  heldBack: ComputedRef<{ id: string, code: string, message: string }[]>
  /** Why nothing may be signed here now: `newerProgram`, `unknownEntry`, `heldBack`, `basisMissing`; null when the device has nothing against it. */
  cannotSign: ComputedRef<'newerProgram' | 'unknownEntry' | 'heldBack' | 'basisMissing' | null>
  online: ComputedRef<boolean>
  sending: ComputedRef<boolean>
  trouble: ComputedRef<Trouble | null>
}

const open = new Map<string, { job: FieldJob, account: string, scope: EffectScope }>()

/** Lets go of a job that was taken off this device. */
export function closeFieldJob(jobId: string): void {
  open.get(jobId)?.scope.stop()
  open.delete(jobId)
}

/** The job of a field page. Every page and part of it shares one; it lives as long as the program is open. */
export function useFieldJob(jobId: string): FieldJob {
  const { me } = useSession()
  const account = `${me.value?.account.id} ${me.value?.organisation?.id}`
  const before = open.get(jobId)
  if (before && (before.account === account || me.value === null)) {
    // Somebody may have signed in again since.
    if (before.job.trouble.value !== null) void before.job.sendNow()
    return before.job
  }
  before?.scope.stop()
  const scope = effectScope(true)
  const job = scope.run(() => openFieldJob(jobId, me))!
  open.set(jobId, { job, account, scope })
  // Who it is may only be known now.
  watch(me, () => {
    const now = open.get(jobId)
    if (now) now.account = `${me.value?.account.id} ${me.value?.organisation?.id}`
  }, { once: true })
  return job
}
