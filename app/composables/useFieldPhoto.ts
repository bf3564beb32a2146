import type { PhotoRef } from '#shared/entry/entry'
import type { FieldJob } from '~/composables/useFieldJob'
import { FieldFault } from '~/offline/fieldFault'

/** What a device could not do, in the person's words; a sentence for what nobody thought of. */
export function useFieldFault() {
  const { t } = useI18n()
  return (error: unknown): string => {
    if (error instanceof FieldFault) return t(`walk.sync.fault.${error.code}`, { found: error.found ?? t('walk.sync.unknownFile') })
    console.error(error)
    return t('walk.sync.fault.other')
  }
}

/** Adds photos to something that is being entered: each is made final and kept on the device at once. Never throws; `fault` says what went wrong. */
export function useFieldPhoto(job: Pick<FieldJob, 'addPhoto'>) {
  const say = useFieldFault()
  const busy = ref(false)
  const fault = ref('')
  async function add(files: Iterable<Blob>, origin: 'camera' | 'gallery'): Promise<PhotoRef[]> {
    busy.value = true
    fault.value = ''
    const made: PhotoRef[] = []
    for (const file of files) {
      try {
        made.push(await job.addPhoto(file, origin))
      }
      catch (error) {
        fault.value = say(error)
      }
    }
    busy.value = false
    return made
  }
  return { busy, fault, add }
}
