import type { Ref } from 'vue'

/** A problem document of ours (RFC 9457), as it came, or what stands for no answer at all. */
export interface Refusal { code: string, status: number, text: string, errors: { pointer: string, code: string, detail: string }[] }

interface FetchFailure { data?: { type?: string, status?: number, detail?: string, errors?: Refusal['errors'] }, status?: number }

/** Reads what a failed request said; words it in the person's language where we have words, else as the server put it. */
export function useRefusal() {
  const { t, te } = useI18n()
  return (error: unknown): Refusal => {
    const { data, status } = error as FetchFailure
    const code = data?.type?.replace('/problems/', '') ?? (status ? 'ours' : 'noSignal')
    const key = `base.problem.${code}`
    return { code, status: data?.status ?? status ?? 0, text: te(key) ? t(key) : data?.detail ?? t('base.problem.ours'), errors: data?.errors ?? [] }
  }
}

/** Runs a request by a button: busy while it lasts, `refusal` when it was refused. Never throws; tells whether it went through. */
export function useAttempt(): { busy: Ref<boolean>, refusal: Ref<Refusal | null>, attempt: (work: () => Promise<unknown>) => Promise<boolean> } {
  const busy = ref(false)
  const refusal = ref<Refusal | null>(null)
  const read = useRefusal()
  async function attempt(work: () => Promise<unknown>) {
    if (busy.value) return false
    busy.value = true
    refusal.value = null
    try {
      await work()
      return true
    }
    catch (error) {
      refusal.value = read(error)
      return false
    }
    finally { busy.value = false }
  }
  return { busy, refusal, attempt }
}
