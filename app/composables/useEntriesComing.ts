import type { FieldJob } from '~/composables/useFieldJob'

/** Whether the round has entries that this device has not fetched yet: then nothing may be told of it. Fetches them where there is a signal. */
export function useEntriesComing(job: FieldJob) {
  const coming = computed(() => job.state.value === 'ready' && job.entries.value.length === 0 && (job.bundle.value?.round.accepted ?? 0) > 0)
  watch([coming, job.online], ([now, online]) => { if (now && online) void job.sendNow() }, { immediate: true })
  return coming
}
