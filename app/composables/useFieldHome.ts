import type { ComputedRef, Ref } from 'vue'
import type { JobPage, JobRow } from '#shared/api/job'
import type { Line, LineElement } from '#shared/line/line'
import type { LineMarks } from '#shared/line/lineMark'
import { lineMarksOf } from '#shared/line/lineMark'
import type { FieldBundle } from '#shared/sync/sync'
import type { FieldDesk, ShutWhy } from '~/offline/fieldDesk'
import { enterField } from '~/offline/fieldDesk'
import type { Trouble } from '~/offline/fieldSender'
import type { JobTally } from '~/offline/fieldStore'
import { letGo as letJobGo, tallyOf } from '~/offline/fieldStore'
import { basesHere, foldHere } from '~/offline/foldHere'
import { RowReader } from '~/offline/readRow'

/** A job as the first field page shows it. */
export interface FieldHomeRow {
  jobId: string
  code: string
  title: string
  siteName: string
  neededBy: string | null
  line: Line | null
  marks: LineMarks
  /** Null while it is not on this device. */
  tally: JobTally | null
  sealed: boolean
}

export interface FieldHome {
  state: Ref<'loading' | 'ready' | 'refused'>
  why: Ref<ShutWhy | null>
  /** On this device. */
  here: Ref<FieldHomeRow[]>
  /** To take along; null while there is no answer from the server. */
  toTake: ComputedRef<FieldHomeRow[] | null>
  waiting: ComputedRef<number>
  /** Takes a job along; answers with the code of what stood against it, null when it is here. */
  take(jobId: string): Promise<string | null>
  /** Takes a job off this device; false while something of it is only here. */
  letGo(jobId: string): Promise<boolean>
  sendNow(): Promise<void>
  online: ComputedRef<boolean>
  sending: ComputedRef<boolean>
  trouble: ComputedRef<Trouble | null>
}

const ofBundle = (bundle: FieldBundle) => ({ jobId: bundle.job.id, code: bundle.job.code, title: bundle.job.title, siteName: bundle.site.name, neededBy: bundle.job.neededBy })

/** The list carries of each element only what a strip draws. */
const stripLine = ({ strip, system }: JobRow): Line | null => strip && { version: 1, system, sides: [{ key: 'A', name: '', elements: strip.elements as LineElement[] }] }

/** What a person has on this device, and what could be taken along. */
export function useFieldHome(): FieldHome {
  const { me } = useSession()
  const state = ref<'loading' | 'ready' | 'refused'>('loading')
  const why = ref<ShutWhy | null>(null)
  const desk = shallowRef<FieldDesk | null>(null)
  const here = shallowRef<FieldHomeRow[]>([])
  const listed = shallowRef<JobRow[] | null>(null)
  const reader = new RowReader()

  async function readHere() {
    const { db } = desk.value!
    const jobs = await db.jobs.toArray()
    here.value = (await Promise.all(jobs.map(async ({ jobId, bundle }): Promise<FieldHomeRow> => {
      const rows = await db.entries.where('[jobId+round]').equals([jobId, bundle.round.id]).toArray()
      const { outcome } = foldHere(bundle, basesHere(bundle), rows.map(row => reader.read(row)).filter(entry => entry !== null))
      return { ...ofBundle(bundle), line: outcome?.line ?? null, marks: outcome ? lineMarksOf(outcome.line, outcome) : {}, tally: await tallyOf(db, jobId), sealed: bundle.round.state === 'sealed' }
    }))).sort((a, b) => (a.neededBy ?? '9999') < (b.neededBy ?? '9999') ? -1 : 1)
  }
  async function readList() {
    const page = await $fetch<JobPage>('/api/jobs', { query: { most: 200, sort: 'neededBy' } }).catch(() => null)
    if (page) listed.value = page.rows
  }

  let stop = () => {}
  async function begin() {
    const entered = await enterField(me)
    if (entered.state === 'shut') {
      why.value = entered.why
      state.value = 'refused'
      return
    }
    desk.value = entered.desk
    const soon = useDebounceFn(readHere, 200)
    stop = entered.desk.sender.onChange(() => void soon())
    await readHere()
    state.value = 'ready'
    await readList()
  }
  onScopeDispose(() => stop())
  if (import.meta.client) {
    begin().catch((error) => {
      console.error(error)
      why.value = 'storageShut'
      state.value = 'refused'
    })
  }

  const online = computed(() => desk.value?.sender.online.value ?? false)
  watch(online, now => now && listed.value === null && void readList())

  return {
    state, why, here,
    toTake: computed(() => listed.value?.filter(job => job.strip !== null && job.state !== 'sealed' && job.state !== 'closed' && !here.value.some(one => one.jobId === job.id))
      .map(job => ({ jobId: job.id, code: job.code, title: job.title, siteName: job.siteName, neededBy: job.neededBy, line: stripLine(job), marks: job.strip!.marks, tally: null, sealed: job.state === 'sealed' })) ?? null),
    waiting: computed(() => here.value.reduce((sum, job) => sum + (job.tally?.waiting ?? 0) + (job.tally?.heldBack ?? 0), 0)),
    async take(jobId) {
      const reply = await desk.value!.sender.take(jobId)
      // Whoever puts the phone away now may have no signal at the fence: it is along when what others wrote is along.
      if (reply.body) await desk.value!.sender.sendNow()
      if (reply.body) await readHere()
      return reply.body ? null : reply.problem?.code || 'noSignal'
    },
    async letGo(jobId) {
      const gone = await letJobGo(desk.value!.db, jobId)
      if (gone) closeFieldJob(jobId)
      await readHere()
      return gone
    },
    sendNow: async () => desk.value?.sender.sendNow(),
    online,
    sending: computed(() => desk.value?.sender.sending.value ?? false),
    trouble: computed(() => desk.value?.sender.trouble.value ?? null),
  }
}
