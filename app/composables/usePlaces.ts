/** A place that one can stand at: what the rail is made of. */
export interface Place {
  key: string
  label: string
  to: string
  /** Also stands for every page below it. */
  here: boolean
}

const PLACES = {
  staff: { jobs: '/jobs', sites: '/sites', tags: '/tags', records: '/records', numbers: '/numbers', people: '/people' },
  client: { site: '/site', records: '/records' },
} as const

/** Places of a job on the device. The walk itself is the job's first page. */
const fieldPlaces = (job: string) => ({ walk: `/w/${job}`, line: `/w/${job}/line`, tags: `/w/${job}/tags`, sign: `/w/${job}/sign` })
/** The crew corrects and does not sign. */
const crewPlaces = (job: string) => ({ tags: `/w/${job}/tags`, line: `/w/${job}/line` })

/**
 * The places of this screen, with the one where the reader is. `field` needs the job that was taken along; without one there is
 * nowhere to go and the list is empty.
 */
export function usePlaces(kind: MaybeRefOrGetter<'staff' | 'client' | 'field'>) {
  const { t } = useI18n()
  const route = useRoute()
  const { standing } = useSession()

  return computed<Place[]>(() => {
    const which = toValue(kind)
    const job = /^\/w\/([^/]+)/.exec(route.path)?.[1]
    const paths: Record<string, string> = which !== 'field' ? PLACES[which] : !job ? {} : standing.value === 'crew' ? crewPlaces(job) : fieldPlaces(job)
    // The longest path that leads here wins, or the first place of a job would always be the one.
    const here = Object.values(paths).filter(path => route.path === path || route.path.startsWith(`${path}/`)).sort((a, b) => b.length - a.length)[0]
    return Object.entries(paths).map(([key, to]) => ({ key, to, label: t(`base.place.${key}`), here: to === here }))
  })
}
