import type { DeficiencyClass } from '#shared/checklist/check'
import type { PhotoRef, Place, ReadingValue } from '#shared/entry/entry'
import type { LineElement } from '#shared/line/line'
import { findingClass, judgeReading, type ReadingJudgement } from '#shared/round/judgeReading'
import type { DeficiencyOutcome } from '#shared/round/outcome'
import { continuedFinding, readingLinks, type AsideOf } from '#shared/round/readingLinks'
import type { WalkCheck } from '#shared/round/walkPlan'
import type { FieldJob } from '~/composables/useFieldJob'

export interface ReadingToWrite {
  one: WalkCheck
  element: LineElement
  place: Place
  value: ReadingValue
  asideOf: AsideOf
  /** The deficiency that is looked at again. */
  again?: DeficiencyOutcome | null
  /** It takes the place of what stands there, for this reason where that did not conform. */
  replacing?: boolean
  reason?: string
  /** A finding of its own, beside those at the same place. */
  another?: boolean
  class?: DeficiencyClass
  note?: string
  photos?: PhotoRef[]
  groundUnfinished?: boolean
}
/** What was written: the entry, and for a finding its tag (`old`: it had one already) and class. */
export interface ReadingWritten { id: string, verdict: ReadingJudgement['verdict'], finding: { tag: string, old: boolean, class: DeficiencyClass } | null }

/** Judges and writes readings by the rules of naming; one place for every screen of the walk. */
export function useWalkReading(job: FieldJob) {
  const judge = (one: WalkCheck, value: ReadingValue, groundUnfinished = false): ReadingJudgement =>
    judgeReading({ value, groundUnfinished }, one.check, one.limits, job.basis.value?.limits ?? {})

  async function write(reading: ReadingToWrite): Promise<ReadingWritten> {
    const { one, element, place, value, groundUnfinished = false } = reading
    await job.startWalk()
    const { verdict } = judge(one, value, groundUnfinished)
    const links = readingLinks(one, place, element, reading)
    const bad = verdict === 'doesNotConform'
    const known = bad ? continuedFinding(one, links) : null
    const tag = bad ? known?.tag || job.nextTag() : undefined
    const weight = bad ? findingClass(one.check, reading.class) : undefined
    const id = await job.write({
      kind: 'reading', element: element.id, check: one.check.id, place, ...links,
      payload: {
        value, tag, photos: reading.photos ?? [],
        ...(bad && weight !== one.check.class && { class: weight }),
        ...(reading.note?.trim() && { note: reading.note.trim() }),
        ...(groundUnfinished && { groundUnfinished }),
        ...(reading.replacing && reading.reason?.trim() && { reason: reading.reason.trim() }),
      },
    })
    return { id, verdict, finding: tag && weight ? { tag, old: known !== null, class: weight } : null }
  }
  return { judge, write }
}
