import { Failure } from './failure'

/**
 * The answer of a list's query that goes on from a place (`after`) which a page before gave. A place that nobody gave makes the database refuse its data
 * (SQLSTATE class 22): all else in the query was checked, so that is told with a pointer instead of as a fault of ours.
 */
export function fromPlace<T>(after: string | undefined, answer: Promise<T>): Promise<T> {
  return answer.catch((error: { code?: string }) => {
    if (after !== undefined && error.code?.startsWith('22')) throw new Failure('invalid', 'This place in the list is not known. Begin at its top.', [{ pointer: '/query/after', code: 'unknown', detail: 'Begin at the top of the list.' }])
    throw error
  })
}
