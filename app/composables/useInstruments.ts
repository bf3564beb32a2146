import { useLocalStorage } from '@vueuse/core'
import type { Instrument } from '#shared/api/instrument'
import type { Check } from '#shared/checklist/check'
import type { Unit } from '#shared/limit/limit'
import { LengthRefused } from '#shared/measure/lengthRefused'
import { parseLength } from '#shared/measure/parseLength'
import type { FieldJob } from '~/composables/useFieldJob'

/** What an instrument can read, and the mark that its uncertainty carries; a length says its own. */
export const INSTRUMENT_UNITS = { length: '', angle: '°', time: ' s', force: ' lbf' } as const satisfies Partial<Record<Unit, string>>
export type InstrumentUnit = keyof typeof INSTRUMENT_UNITS

/** An uncertainty as somebody writes it, in the integer unit of what is read; a code of base.length or `notANumber` where it cannot be one. */
export function readUncertainty(written: string, unit: InstrumentUnit): { uncertainty: number, text: string } | { refused: string, parameters: object } {
  const text = written.trim().replace(/^±\s*/, '')
  if (unit === 'length') {
    try {
      const { amount } = parseLength(text)
      return amount > 0 ? { uncertainty: amount, text } : { refused: 'notANumber', parameters: {} }
    }
    catch (error) {
      if (error instanceof LengthRefused) return { refused: error.code, parameters: { ...error.parameters } }
      throw error
    }
  }
  const found = /^(\d{1,6})(?:\.(\d{1,3}))?$/.exec(text)
  const uncertainty = found ? Number(found[1]) * 1000 + Number((found[2] ?? '').padEnd(3, '0')) : 0
  return uncertainty > 0 ? { uncertainty, text: text + INSTRUMENT_UNITS[unit] } : { refused: 'notANumber', parameters: {} }
}

/** What is measured with at the fence: those of the organisation that read the unit of a check, and the one in hand, which this device remembers. */
export function useInstruments(job: FieldJob, check: MaybeRefOrGetter<Check>) {
  const unit = computed(() => toValue(check).method === 'measure' ? toValue(check).unit ?? null : null)
  const kept = useLocalStorage<Record<string, string>>('smoothside instruments', {})
  const all = computed<Instrument[]>(() => (job.bundle.value?.instruments ?? []).filter(one => one.unit === unit.value))
  const inHand = computed(() => all.value.find(one => one.id === kept.value[unit.value ?? '']) ?? null)
  function take(id: string | null) {
    kept.value = { ...kept.value, [unit.value ?? '']: id ?? '' }
  }
  /** What a reading carries of it: its name, and its uncertainty where the check is judged with a guard band. */
  const said = computed(() => inHand.value ? { instrument: inHand.value.name, ...(toValue(check).acceptance === 'guarded' && { uncertainty: inHand.value.uncertainty }) } : {})
  return { all, inHand, take, said }
}
