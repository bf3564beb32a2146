import type { H3Error, H3Event } from 'h3'
import { getRequestURL, send, setResponseHeader, setResponseHeaders, setResponseStatus } from 'h3'
import { logger } from '../logger'
import { Failure, FAILURES } from '../services/failure'

const TITLES: Record<number, string> = { 400: 'Not readable', 401: 'Sign in', 403: 'Not allowed', 404: 'Not found', 405: 'Not this way', 409: 'Changed meanwhile', 410: 'No longer open', 413: 'Too large', 415: 'Wrong type', 422: 'Not accepted', 429: 'Too often', 503: 'Not now' }

/** RFC 9457 problem documents for /api, /health and files; pages keep the error screen of Nuxt, whose handler comes after this one. */
export default async function problemHandler(error: H3Error, event: H3Event): Promise<void> {
  const path = getRequestURL(event).pathname
  if (!/^\/(api|health)\//.test(path) && !/\.pdf$|\.jpg$/.test(path)) return
  const cause = error.cause instanceof Failure ? error.cause : error as unknown as Error
  const failure = cause instanceof Failure ? cause : null
  const status = failure ? FAILURES[failure.code] : databaseStatus(cause) ?? (error.statusCode >= 400 && error.statusCode < 500 ? error.statusCode : 500)
  if (status >= 500) logger.error({ path: event.method, code: codeOf(cause), stack: cause.stack?.replace(/:.*\n/, '\n') }, 'a request failed')
  setResponseHeaders(event, { 'content-type': 'application/problem+json', 'cache-control': 'no-store' })
  if (failure?.retryAfterSeconds) setResponseHeader(event, 'retry-after', failure.retryAfterSeconds)
  setResponseStatus(event, status)
  const code = failure?.code ?? (status === 404 ? 'notFound' : status === 413 ? 'tooLarge' : status === 405 ? 'notThisWay' : status === 503 ? 'unavailable' : status < 500 ? 'unreadable' : 'ours')
  await send(event, JSON.stringify({
    type: `/problems/${code}`,
    title: TITLES[status] ?? 'Our fault',
    status,
    detail: failure?.message ?? (status === 503 ? 'The database does not answer. Nothing that you sent was lost; try again in a minute.' : status >= 500 ? 'Something broke on our side. Nothing was half done; try again, and tell the administrator if it stays.' : status === 404 ? 'There is nothing at this address.' : 'This request could not be read.'),
    ...(failure?.errors.length ? { errors: failure.errors } : {}),
  }))
}

/** The code of an error, or of the one that it wraps. */
const codeOf = (error: Error) => (error as { code?: string }).code ?? ((error.cause ?? {}) as { code?: string }).code

/** A database that is down, restarting or out of connections is "not now", which a device may try again. */
function databaseStatus(error: Error): number | null {
  const code = codeOf(error) ?? ''
  return /^(ECONNREFUSED|ECONNRESET|EPIPE|57P0[123]|08\w{3}|53\w{3}|57014|55P03|40P01)$/.test(code) || /connection timeout|Connection terminated|connection error|timeout exceeded/i.test(error.message) ? 503 : null
}
