import type { JobPage, JobPageOf } from '#shared/api/job'
import type { KeptTrial } from '#shared/api/trial'
import type { Limit } from '#shared/limit/limit'
import { elementsOf, type LineElement } from '#shared/line/line'
import type { System } from '#shared/measure/length'
import type { Trial } from '#shared/trial/trial'
import { uuidv7 } from 'uuidv7'

/** What every form of the workbench takes. */
export interface TryInput {
  system: System
  element: LineElement | null
  /** A trial that is opened again. */
  begin: Trial | null
  /** Limits in force at the element on a measurand. */
  limitsOf: (measurand: string) => Limit[]
}

/** The job and element that something is tried for: named in the address, so that a link leads there. Without them it is tried alone. */
export async function useTryPlace() {
  const route = useRoute()
  const router = useRouter()
  const named = (key: string) => computed(() => typeof route.query[key] === 'string' ? route.query[key] : '')
  const [jobId, elementId, trialId] = [named('job'), named('element'), named('trial')]
  const [{ data: jobs }, { data: page }, { data: kept, refresh }] = await Promise.all([
    useFetch<JobPage>('/api/jobs', { query: { most: 200 }, key: 'try-jobs' }),
    useAsyncData('try-job', async () => jobId.value ? useRequestFetch()<JobPageOf>(`/api/jobs/${jobId.value}`).catch(() => null) : null, { watch: [jobId] }),
    useAsyncData('try-kept', async () => jobId.value ? useRequestFetch()<KeptTrial[]>(`/api/jobs/${jobId.value}/trials`).catch(() => []) : [], { watch: [jobId] }),
  ])
  const elements = computed(() => page.value?.line ? elementsOf(page.value.line) : [])
  const element = computed(() => elements.value.find(one => one.id === elementId.value) ?? null)
  const begin = computed(() => kept.value?.find(one => one.id === trialId.value)?.trial ?? null)
  const limitsOf = (measurand: string): Limit[] => {
    const basis = page.value?.basis
    if (!basis || !element.value) return []
    const checks = new Set(basis.checks.filter(check => check.measurand === measurand).map(check => check.id))
    const keys = new Set(basis.tasks.filter(task => task.element === element.value!.id && checks.has(task.check)).flatMap(task => task.limits))
    return [...keys].flatMap(key => basis.limits[key] ?? [])
  }
  const go = (query: Record<string, string | undefined>) => router.replace({ query: { ...route.query, ...query } })
  const keep = async (trial: Trial) => {
    await $fetch(`/api/jobs/${jobId.value}/trials`, { method: 'PUT', body: { id: uuidv7(), element: elementId.value, trial } })
    await refresh()
  }
  const system = computed<System>(() => begin.value?.system ?? page.value?.job.system ?? 'imperial')
  return { jobs, page, elements, element, elementId, jobId, begin, trialId, kept, limitsOf, system, go, keep }
}
