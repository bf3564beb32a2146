import { randomUUID } from 'node:crypto'
import { elementsOf } from '../../shared/line/line'
import { limitsTogether } from '../../shared/provision/limitsTogether'
import type { RoundBasis } from '../../shared/round/basis'
import { writeQuestion } from '../services/question/keepQuestions'
import { putQuestions } from '../services/question/putQuestions'
import type { Session } from '../database/withSession'

type Who = Session & { accountId: string, organisationId: string, name: string, email: string }

/** Asks the authority about the latch of a pool gate on an accessible route, as its manager would from the job: once on paper, and one more that waits to be put. */
export async function askAboutLatch(manager: Who, jobId: string, basis: RoundBasis, authority: string): Promise<void> {
  const { measurands } = limitsTogether(basis)
  const tags = new Map(elementsOf(basis.line).map(element => [element.id, element.tag]))
  const write = async (measurand: string, words: string) => {
    const one = measurands.find(each => each.measurand === measurand && (each.state === 'hangs' || each.state === 'unset'))
    const check = one && basis.checks.find(each => each.id === one.checks[0])
    if (!one || !check) return null
    const id = randomUUID()
    const gap = one.joined && { upper: one.joined.upper, lower: one.joined.lower, at: one.joined.at ?? 0 }
    await writeQuestion(manager, jobId, { id, words, about: {
      title: check.title, tags: one.places.map(place => tags.get(place.element)!), measurand, unit: one.unit, datum: check.datum!, setting: 'pool', limits: one.limits.map(key => basis.limits[key]!), gap,
    } })
    return id
  }
  const latch = await write('latch-release-height', 'The release is to stand at least 54 in over the bottom of the leaf for the pool, and at most 54 in over the ground for the accessible route. Which of them holds at this gate, and from where is it taken?')
  if (latch) await putQuestions(manager, jobId, { id: randomUUID(), questions: [latch], name: `${authority}, building division`, email: null, message: 'The gate is hung already; the release can still be moved.', language: 'en' })
  await write('gap-below-pushed', 'We found no text that names the gap when the fabric is pushed. What do you ask, and where does it stand?')
}
