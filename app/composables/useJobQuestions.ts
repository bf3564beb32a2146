import type { JobLimitsOf } from '#shared/api/question'

/** The questions of a job and what changed or falls due among its numbers; nothing for those who may not read them. */
export function useJobQuestions(jobId: MaybeRefOrGetter<string>) {
  const { may } = useSession()
  const key = `limits-${toValue(jobId)}`
  const { data, refresh } = may('question.read') ? useFetch<JobLimitsOf>(`/api/jobs/${toValue(jobId)}/limits`, { key }) : { data: ref(undefined), refresh: async () => undefined }
  /** After the walk list was pinned anew, the page has another basis too. */
  const renewed = () => refreshNuxtData([key, `job-${toValue(jobId)}`])
  return { held: computed(() => data.value ?? null), refresh, renewed }
}
