import { ref } from 'vue'
import type { FieldDatabase } from './fieldDatabase'
import { FieldFault, storageFault, type FieldFaultCode } from './fieldFault'
import { countKept } from './fieldProfile'
import { waitingCount } from './fieldStore'
import type { FieldWire } from './fieldWire'
import { graceLeft, pauseAfter } from './outbox'
import { syncOnce, takeAlong, type FieldDevice, type RunEnd } from './syncField'

/** Others' words are fetched this often while somebody looks. */
const LOOK_EVERY = 120_000
/** The longest pause while something that speaks of danger waits. */
const DANGER_EVERY = 15_000

export type Trouble = Extract<RunEnd, { state: 'pause' }>['why'] | FieldFaultCode

/**
 * When a run happens, in which tab. One tab sends at a time (Web Locks); all tabs hear what changed (BroadcastChannel). It never throws: what went
 * wrong stands in `trouble`, and everything written stays where it is.
 */
export class FieldSender {
  /** False where the device has no signal, or the server gives no answer. */
  readonly online = ref(navigator.onLine)
  readonly sending = ref(false)
  readonly trouble = ref<Trouble | null>(null)
  private readonly channel: BroadcastChannel | null
  private readonly listeners = new Set<(jobId: string) => void>()
  private timer: ReturnType<typeof setTimeout> | undefined
  private running: Promise<void> | null = null
  private again = false
  private failures = 0
  private readonly unsent = { oldest: 0, newest: 0 }

  constructor(readonly db: FieldDatabase, readonly wire: FieldWire, readonly who: FieldDevice) {
    this.channel = typeof BroadcastChannel === 'undefined' ? null : new BroadcastChannel(db.name)
    this.channel?.addEventListener('message', event => this.tell(String(event.data)))
    addEventListener('online', () => {
      this.online.value = true
      void this.sendNow()
    })
    addEventListener('offline', () => { this.online.value = false })
    // Whoever puts the phone away may not take it out again for hours.
    document.addEventListener('visibilitychange', () => void this.sendNow())
  }

  /** Calls back for every job of which something changed, in this tab or another. Returns how to stop. */
  onChange(listener: (jobId: string) => void): () => void {
    this.listeners.add(listener)
    return () => this.listeners.delete(listener)
  }

  /** Something was written down here. */
  wrote(jobId: string, urgent: boolean): void {
    this.channel?.postMessage(jobId)
    void this.count()
    const now = Date.now()
    if (this.unsent.newest === 0) this.unsent.oldest = now
    this.unsent.newest = now
    if (urgent) void this.sendNow()
    else if (this.failures === 0) this.plan(graceLeft(now, this.unsent.oldest, now))
  }

  /** Sends and fetches now; answers when that run has ended, however it ended. */
  sendNow(): Promise<void> {
    this.again = true
    return this.running ??= this.runs().finally(() => { this.running = null })
  }

  /** Takes a job along. What others wrote on it is fetched at once, whether or not a run that knows nothing of this job is under way. */
  async take(jobId: string) {
    const reply = await takeAlong(this.run, jobId)
    const { id, accepted } = reply.body?.round ?? { id: '', accepted: 0 }
    if (accepted > ((await this.db.rounds.get(id))?.cursor ?? 0)) void this.sendNow()
    return reply
  }

  private get run() {
    return { db: this.db, wire: this.wire, who: this.who, now: () => Date.now(), changed: (jobId: string) => {
      this.channel?.postMessage(jobId)
      this.tell(jobId)
    } }
  }

  private tell(jobId: string) {
    for (const listener of this.listeners) listener(jobId)
  }

  /** Whether something that speaks of danger waits. */
  private async hurry(): Promise<boolean> {
    return await this.db.entries.where('state').anyOf('waiting', 'held').filter(row => row.kind === 'dangerNow').count().catch(() => 0) > 0
  }

  private async count() {
    countKept(await waitingCount(this.db).catch(() => 0))
  }

  private plan(milliseconds: number) {
    clearTimeout(this.timer)
    this.timer = setTimeout(() => void this.sendNow(), milliseconds)
  }

  private async runs() {
    clearTimeout(this.timer)
    this.sending.value = true
    let end: RunEnd = { state: 'done' }
    let trouble: Trouble | null = null
    try {
      while (this.again && end.state === 'done') {
        this.again = false
        this.unsent.newest = 0
        end = await inTurn(this.db.name, () => syncOnce(this.run))
      }
      if (end.state === 'pause') trouble = end.why
    }
    catch (error) {
      const fault = storageFault(error)
      // Something that we did not think of: told where a developer looks, tried again later; what was written is kept.
      if (!(fault instanceof FieldFault)) console.error(error)
      trouble = fault instanceof FieldFault ? fault.code : null
      end = { state: 'again', retryAfterSeconds: 0 }
    }
    this.sending.value = false
    this.trouble.value = trouble
    this.failures = end.state === 'again' ? this.failures + 1 : 0
    this.online.value = navigator.onLine && end.state !== 'again'
    void this.count()
    if (end.state === 'again') {
      const pause = pauseAfter(this.failures, Math.random(), end.retryAfterSeconds)
      this.plan(await this.hurry() ? Math.min(pause, DANGER_EVERY) : pause)
    }
    // A page that nobody looks at fetches nothing by itself; it does when it is looked at again.
    else if (!document.hidden) this.plan(LOOK_EVERY)
  }
}

/** One at a time over all tabs; where the browser has no locks (no secure connection), in this tab alone, which is harmless: offering twice is. */
function inTurn<T>(name: string, work: () => Promise<T>): Promise<T> {
  return navigator.locks ? navigator.locks.request(name, work) as Promise<T> : work()
}
