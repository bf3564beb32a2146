import type { JobMove, JobRow } from '#shared/api/job'

/** Words for whose move a job is and since when. */
export function useJobMove() {
  const { t } = useI18n()
  const { day, moment } = useMoment()
  /** Stands still for one page, so that server and browser count from the same day. */
  const today = useState('today', () => new Date().toISOString().slice(0, 10))
  return {
    today,
    words: (job: Pick<JobRow, 'move' | 'moveCount'>) => t(`job.move.${job.move satisfies JobMove}`, { n: job.moveCount }, Math.max(job.moveCount, 1)),
    since(instant: string) {
      const days = Math.round((Date.parse(today.value) - Date.parse(moment(instant, 'UTC') ? instant.slice(0, 10) : today.value)) / 86_400_000)
      return days <= 0 ? t('job.since.today') : days === 1 ? t('job.since.yesterday') : days < 14 ? t('job.since.days', { n: days }, days) : t('job.since.day', { day: day(instant.slice(0, 10)) })
    },
  }
}
