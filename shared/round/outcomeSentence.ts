import { elementsOf } from '../line/line'
import type { RoundOutcome } from './outcome'
import { isEnded } from './outcome'

/** The parts of the sentence in which a round is told, without a language: tags of elements in walking order, tags of deficiencies as they hang on the fence. */
export interface OutcomeSentence {
  /** "12 of 19 elements are released." */
  released: number
  elements: number
  /** Ways out with something that keeps them out of use: attended, never locked. */
  attended: string[]
  /** Held out of use. */
  outOfUse: string[]
  /** Open deficiencies; `openTags` are those that carry a tag. */
  open: number
  openTags: string[]
  /** Elements with a check that nobody has read. */
  notInspected: string[]
}

/** What a round comes to, as the parts that screens and papers put into words. */
export function outcomeSentence(outcome: Pick<RoundOutcome, 'elements' | 'deficiencies' | 'line'>): OutcomeSentence {
  const standing = new Map(elementsOf(outcome.line).map(element => [element.id, element]))
  const tags = (wanted: (one: RoundOutcome['elements'][number], exit: boolean) => boolean) =>
    outcome.elements.flatMap((one) => {
      const element = standing.get(one.element)
      return element && wanted(one, element.gate?.exit === true) ? [element.tag] : []
    })
  const open = outcome.deficiencies.filter(one => !isEnded(one))
  return {
    released: outcome.elements.filter(one => one.released).length,
    elements: outcome.elements.length,
    attended: tags((one, exit) => one.outOfUse && exit),
    outOfUse: tags((one, exit) => one.outOfUse && !exit),
    open: open.length,
    openTags: open.flatMap(one => one.tag === '' ? [] : [one.tag]),
    notInspected: tags(one => one.verdict === 'notInspected' || one.verdict === 'notRead'),
  }
}
