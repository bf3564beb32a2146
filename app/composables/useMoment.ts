/** Abbreviations as English and Spanish write them in running text; a table of our own, so that server and browser never differ. */
const MONTHS = {
  en: ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec'],
  es: ['ene', 'feb', 'mar', 'abr', 'may', 'jun', 'jul', 'ago', 'sep', 'oct', 'nov', 'dic'],
} as const
const WEEKDAYS = {
  en: ['Sun', 'Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat'],
  es: ['dom', 'lun', 'mar', 'mié', 'jue', 'vie', 'sáb'],
} as const
export type Language = keyof typeof MONTHS

const two = (n: number) => String(n).padStart(2, '0')
const isDay = (year: number, month: number, day: number) => {
  const date = new Date(Date.UTC(year, month - 1, day))
  return year >= 1900 && year <= 2200 && date.getUTCMonth() === month - 1 && date.getUTCDate() === day
}

/** A day such as `2027-03-05` as `5 Mar 2027`, or with its weekday and without the year as `Fri 5 Mar`. Anything else comes back as it is. */
export function writeDay(day: string, language: Language, style: 'full' | 'weekday' = 'full'): string {
  const found = /^(\d{4})-(\d\d)-(\d\d)/.exec(day)
  if (!found) return day
  const [year, month, date] = found.slice(1).map(Number) as [number, number, number]
  if (!isDay(year, month, date)) return day
  const plain = `${date} ${MONTHS[language][month - 1]}`
  return style === 'full' ? `${plain} ${year}` : `${WEEKDAYS[language][new Date(Date.UTC(year, month - 1, date)).getUTCDay()]} ${plain}`
}

/** What a day that somebody typed means. `twoWays`: 3/5/2027 may be in March or in May, and we never guess. */
export type TypedDay = { ok: true, day: string } | { ok: false, why: 'unreadable' | 'twoWays' | 'noSuchDay' }

/** Reads `5 Mar 2027`, `March 5, 2027`, `5 de marzo de 2027`, `2027-03-05` and strokes such as `13/5/2027` that can only be one day. */
export function readDay(typed: string): TypedDay {
  const words = typed.trim().toLowerCase().replace(/[.,]/g, ' ').replace(/\bde\b/g, ' ').replace(/\s+/g, ' ')
  const answer = (year: number, month: number, day: number): TypedDay =>
    isDay(year, month, day) ? { ok: true, day: `${year}-${two(month)}-${two(day)}` } : { ok: false, why: 'noSuchDay' }
  const monthOf = (word: string) => {
    const start = word.slice(0, 3)
    if (word.length < 3) return 0
    return (MONTHS.en.findIndex(name => name.toLowerCase() === start) + 1) || (MONTHS.es.findIndex(name => name === start) + 1)
  }
  let found = /^(\d{4})-(\d{1,2})-(\d{1,2})$/.exec(words)
  if (found) return answer(Number(found[1]), Number(found[2]), Number(found[3]))
  found = /^(\d{1,2}) (\p{L}+) (\d{4})$/u.exec(words)
  if (found && monthOf(found[2]!)) return answer(Number(found[3]), monthOf(found[2]!), Number(found[1]))
  found = /^(\p{L}+) (\d{1,2}) (\d{4})$/u.exec(words)
  if (found && monthOf(found[1]!)) return answer(Number(found[3]), monthOf(found[1]!), Number(found[2]))
  found = /^(\d{1,2})[/-](\d{1,2})[/-](\d{4})$/.exec(words)
  if (found) {
    const [a, b, year] = found.slice(1).map(Number) as [number, number, number]
    if (a <= 12 && b <= 12 && a !== b) return { ok: false, why: 'twoWays' }
    return a > 12 ? answer(year, b, a) : answer(year, a, b)
  }
  return { ok: false, why: 'unreadable' }
}

/** An instant in a zone: its day, and its time with the zone's short name (`15:12 EST`). Null where it is no instant or the zone is unknown. */
export function splitMoment(instant: string, zone: string): { day: string, time: string } | null {
  const at = new Date(instant)
  if (Number.isNaN(at.getTime())) return null
  try {
    const format = new Intl.DateTimeFormat('en-US', { timeZone: zone, year: 'numeric', month: '2-digit', day: '2-digit', hour: '2-digit', minute: '2-digit', hourCycle: 'h23', timeZoneName: 'short' })
    const part = Object.fromEntries(format.formatToParts(at).map(piece => [piece.type, piece.value]))
    return { day: `${part.year}-${part.month}-${part.day}`, time: `${part.hour}:${part.minute} ${part.timeZoneName}` }
  }
  catch (error) {
    if (error instanceof RangeError) return null
    throw error
  }
}

/**
 * Days and times as Smoothside writes them, in the language of the screen. Times stand in the reader's zone, which the browser leaves in a
 * cookie for the server (until then UTC, and it says so); pass a zone for a place that has one of its own.
 */
export function useMoment() {
  const { locale } = useI18n()
  const zoneCookie = useCookie<string>('smoothside-zone', { maxAge: 60 * 60 * 24 * 365, sameSite: 'lax', path: '/', default: () => 'UTC' })
  const language = computed<Language>(() => locale.value === 'es' ? 'es' : 'en')

  const day = (iso: string | null | undefined, style?: 'full' | 'weekday') => iso ? writeDay(iso, language.value, style) : ''
  const time = (instant: string | null | undefined, zone = zoneCookie.value) => (instant && splitMoment(instant, zone)?.time) || ''
  const moment = (instant: string | null | undefined, zone = zoneCookie.value) => {
    const parts = instant ? splitMoment(instant, zone) : null
    return parts ? `${writeDay(parts.day, language.value)}, ${parts.time}` : ''
  }
  return { day, time, moment, zone: zoneCookie }
}
