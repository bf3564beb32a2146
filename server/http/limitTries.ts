import { RateLimiterPostgres } from 'rate-limiter-flexible'
import { usePool } from '../database/client'
import { Failure } from '../services/failure'

const limiters = new Map<string, RateLimiterPostgres>()

/** Counts a try under `key` and refuses with 429 past `points` in `seconds`. Counted in PostgreSQL, so that many processes count as one. */
export async function limitTries(name: string, key: string, points: number, seconds: number): Promise<RateLimiterPostgres> {
  let limiter = limiters.get(name)
  if (!limiter) limiters.set(name, limiter = new RateLimiterPostgres({ storeClient: usePool(), storeType: 'pool', tableName: 'limiter', keyPrefix: name, points, duration: seconds, tableCreated: true, clearExpiredByTimeout: false }))
  try { await limiter.consume(key) }
  catch (refusal) {
    if (refusal instanceof Error) throw refusal
    const wait = Math.ceil((refusal as { msBeforeNext: number }).msBeforeNext / 1000)
    throw new Failure('tooOften', `Too many tries. Wait ${wait < 90 ? `${wait} seconds` : `${Math.ceil(wait / 60)} minutes`}, then try again.`, [], wait)
  }
  return limiter
}
