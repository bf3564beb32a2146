import { EntryRefused } from '#shared/entry/entryRefused'
import { useFieldFault } from '~/composables/useFieldPhoto'

/** Writes entries by a button: `busy` while it lasts, `fault` in words when the device could not keep them. Never throws; answers whether it went through. */
export function useWalkWrite() {
  const say = useFieldFault()
  const busy = ref(false)
  const fault = ref('')
  async function write(work: () => Promise<unknown>): Promise<boolean> {
    if (busy.value) return false
    busy.value = true
    fault.value = ''
    try {
      await work()
      return true
    }
    catch (error) {
      fault.value = error instanceof EntryRefused ? error.message : say(error)
      return false
    }
    finally { busy.value = false }
  }
  return { busy, fault, write }
}
