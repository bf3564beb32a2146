import type { System } from '#shared/measure/length'
import { isEnded } from '#shared/round/outcome'
import { splitMoment } from '~/composables/useMoment'
import { hourWords, type TagPart, type TagRow } from '~/composables/useTags'

/** One line under a tag's title, and how it looks. */
export interface TagLine { text: string, look: 'soft' | 'wait' | 'wait strong' | 'rust' }

/** A tag in words: what, where, how it stands, what to do. What to do by kind of finding is COMMON PRACTICE, no source; a limit is named with whose it is. */
export function useTagWords(system: MaybeRefOrGetter<System>) {
  const { t, te, locale } = useI18n()
  const speech = useSpeech(system)
  const { day, zone } = useMoment()
  const language = computed(() => locale.value === 'es' ? 'es' as const : 'en' as const)

  /** Before when, as one says it: today the hour alone. */
  function before(instant: string): string {
    const at = splitMoment(instant, zone.value)
    if (!at) return ''
    const hour = hourWords(at.time, language.value)
    return at.day === splitMoment(new Date().toISOString(), zone.value)?.day ? t('deficiency.before.today', { hour }) : t('deficiency.before.day', { day: day(at.day, 'weekday'), hour })
  }
  const at = (instant: string) => {
    const parts = splitMoment(instant, zone.value)
    return parts ? `${day(parts.day, 'weekday')}, ${hourWords(parts.time, language.value)}` : ''
  }
  const margin = ({ head, check, limits }: TagRow) => head && check
    ? speech.value.margin(head as never, { unit: check.unit ?? null }, Object.fromEntries(limits.map(limit => [limit.id, limit]))) ?? ''
    : ''
  const plainly = ({ check, finding }: TagRow) => check?.method === 'look' && te(`deficiency.found.${finding}`)
  const limitWords = ({ limits }: TagRow) => limits.map(limit => `${speech.value.limit(limit)} (${limit.basis.name})`).join('; ')

  return {
    before,
    /** What is wrong, where the kind of finding says it plainly; else which check does not conform, and by how much. */
    title: (row: TagRow, single = true) => plainly(row) ? t(`deficiency.found.${row.finding}`) : [row.check?.title[language.value] ?? row.of.check, single ? margin(row) : ''].filter(Boolean).join(', '),
    where(rows: readonly TagRow[]) {
      const element = rows[0]!.element
      const places = [...new Set(rows.map(row => [speech.value.place(row.of.place), rows.length > 1 ? margin(row) : ''].filter(Boolean).join(', ')))].filter(Boolean).join('; ')
      return [element ? [element.tag, element.name].filter(Boolean).join(' ') : '', places].filter(Boolean).join(', ')
    },
    standing(row: TagRow, part: TagPart, known = false): TagLine[] {
      const { of, assignment, cannot, correction, offered } = row
      const lines: TagLine[] = []
      const say = (look: TagLine['look'], text: string) => text && lines.push({ look, text })
      if (!isEnded(of)) {
        if (of.class === 'outOfUse') say('rust', t('deficiency.outOfUse', { how: of.held ? speech.value.w.helds[of.held] : t('deficiency.notHeld') }))
        if (of.state === 'disputed') say('wait', t('base.tape.disputed'))
      }
      if (of.state === 'cannot') {
        say('wait strong', t('deficiency.waitsFor', { what: of.waitsFor ?? '' }))
        if (cannot) say('wait', [cannot.payload.words, t('deficiency.since', { day: day(cannot.entry.envelope.madeAt, 'weekday') })].filter(Boolean).join(' · '))
      }
      if (of.state === 'offered') say('wait', [t('base.tape.offered'), offered?.payload.words].filter(Boolean).join(': '))
      if (of.state === 'corrected') say('soft', correction ? t('deficiency.correctedBy', { name: correction.payload.by.name, at: at(correction.entry.envelope.madeAt) }) : t('base.tape.corrected'))
      if (part === 'settled') say('soft', [t(`base.tape.${of.state}`), of.until ? t('deficiency.until', { day: day(of.until) }) : ''].filter(Boolean).join(', '))
      else if (!known && assignment && of.state !== 'corrected') say('soft', of.due ? t('deficiency.givenBefore', { name: assignment.payload.to.name, before: before(of.due) }) : t('deficiency.given', { name: assignment.payload.to.name }))
      return lines
    },
    toDo(rows: readonly TagRow[]): string[] {
      const first = rows[0]!
      const measured = first.check?.method === 'measure' || first.check?.method === 'count'
      const kind = `deficiency.do.${first.finding}`
      return [
        ...rows.flatMap(row => row.reading?.payload.note ? [rows.length > 1 ? `${row.of.tag}: ${row.reading.payload.note}` : row.reading.payload.note] : []),
        first.assignment?.payload.words ?? '',
        [
          rows.length > 1 ? t('deficiency.oneCorrection', { count: rows.length }) : '',
          measured && first.limits.length > 0 ? t('deficiency.bringTo', { limit: speech.value.limit(first.limits[0]!) }) : '',
          te(kind) ? t(kind) : '',
        ].filter(Boolean).join(' '),
      ].filter(Boolean)
    },
    needed: (row: TagRow) => row.limits.length > 0 ? t('deficiency.needed', { limit: limitWords(row) }) : plainly(row) ? t('deficiency.needed', { limit: row.check!.title[language.value] }) : row.check?.noLimit?.[language.value] ?? '',
    /** How it is read again, and what else is. */
    afterwards: (row: TagRow, titleOf: (check: string) => string = check => check) => [
      row.check ? t('deficiency.readBy', { task: row.check.task[language.value] }) : '',
      row.check?.disturbs.length ? t('deficiency.readAfter', { checks: row.check.disturbs.map(titleOf).join('; ') }) : '',
    ].filter(Boolean),
    caution: (row: TagRow) => row.check?.caution?.[language.value] ?? '',
  }
}
