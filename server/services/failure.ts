/** Why a service refuses, each with its status on the wire. Codes are stable: clients branch on them, screens word them (i18n base.problem.*). */
export const FAILURES = {
  invalid: 422, notFound: 404, notAllowed: 403, signInNeeded: 401, wrongSignIn: 401, stale: 409, conflict: 409, sealed: 409, frozen: 409, differs: 409,
  taken: 409, notReady: 409, tooLarge: 413, wrongType: 415, tooOften: 429, linkSpent: 410, erased: 410, unreadable: 400, foreignOrigin: 403, mailDown: 503, unavailable: 503,
} as const
export type FailureCode = keyof typeof FAILURES

/** A refusal that a person can act on. `detail` says what to do; `errors` point into the input. */
export class Failure extends Error {
  constructor(readonly code: FailureCode, detail: string, readonly errors: { pointer: string, code: string, detail: string }[] = [], readonly retryAfterSeconds?: number) {
    super(detail)
    this.name = 'Failure'
  }
}

/** Not there and not yours look alike. */
export const notFound = (what: string) => new Failure('notFound', `This ${what} is not here, or it is not yours to see. Check the address, or act for the organisation that it belongs to.`)
