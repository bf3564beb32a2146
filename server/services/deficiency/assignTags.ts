import type { AssignTags, AssignTagsAnswer } from '../../../shared/api/deficiency'
import { isEnded } from '../../../shared/round/outcome'
import { wordAnswers } from '../../../shared/round/wordAnswers'
import * as tags from '../../database/queries/deficiency'
import type { Session } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { writeDeskEntry } from '../entry/writeDeskEntry'
import { Failure } from '../failure'

/**
 * Gives several tags to somebody from the desk, one entry for each. A tag that cannot be given holds up none of the others; the same ids again write nothing
 * twice.
 */
export async function assignTags(who: Session & { accountId: string, organisationId: string }, { tags: wanted, to, due, words }: AssignTags): Promise<AssignTagsAnswer> {
  const { found, written } = await withSession(who, async tx => ({
    found: new Map((await tags.tagsToAnswer(tx, wanted.map(one => one.deficiencyId))).map(one => [one.id, one])),
    written: new Set((await tags.entryTexts(tx, wanted.map(one => one.entryId))).map(one => one.id)),
  }))
  const answer: AssignTagsAnswer = { written: [], refused: [] }
  for (const { deficiencyId, entryId } of wanted) {
    const tag = found.get(deficiencyId)
    const refuse = (code: AssignTagsAnswer['refused'][number]['code']) => answer.refused.push({ deficiencyId, code })
    if (!tag) refuse('notFound')
    else if (written.has(entryId)) answer.written.push(deficiencyId)
    else if (isEnded(tag.outcome)) refuse('ended')
    else if (tag.roundState === 'sealed') refuse('sealed')
    else {
      try {
        await writeDeskEntry(who, who.accountId, {
          id: entryId, kind: 'assignment', job: tag.jobId, round: tag.roundId, element: tag.outcome.element, check: tag.outcome.check, place: tag.outcome.place, basis: tag.basis,
          answers: wordAnswers('assignment', tag.outcome, id => tag.kinds[id])[0], payload: { to, due, words },
        })
        answer.written.push(deficiencyId)
      }
      catch (error) {
        if (!(error instanceof Failure)) throw error
        if (error.code === 'invalid') throw error
        refuse('stale')
      }
    }
  }
  return answer
}
