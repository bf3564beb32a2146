import type { Me } from '#shared/api/account'
import type { FieldBundle, PullAnswer, PushAnswer } from '#shared/sync/sync'
import type { WireEntry } from '#shared/entry/entry'

/** An answer, or none (status 0): nothing here ever throws. */
export interface Reply<T> {
  status: number
  body: T | null
  /** What a problem document said. */
  problem: { code: string, message: string } | null
  retryAfterSeconds: number
}

/** The way to the server, version 1 of the field's wire (shared/sync). */
export interface FieldWire {
  me(): Promise<Reply<Me>>
  take(jobId: string, device: { device: string, name: string }): Promise<Reply<FieldBundle>>
  push(roundId: string, push: { device: string, entries: WireEntry[], empty: boolean }): Promise<Reply<PushAnswer>>
  pull(roundId: string, after: number): Promise<Reply<PullAnswer>>
  photo(jobId: string, digest: string, bytes: Uint8Array): Promise<Reply<{ digest: string }>>
}

/** A minute without an answer is no signal; a photo may take longer. */
const MOST_MS = 60_000
const PHOTO_MOST_MS = 180_000

async function ask<T>(path: string, { method = 'GET', body, json, most = MOST_MS }: { method?: string, body?: BodyInit, json?: unknown, most?: number } = {}): Promise<Reply<T>> {
  const none: Reply<T> = { status: 0, body: null, problem: null, retryAfterSeconds: 0 }
  try {
    const response = await fetch(path, {
      method, credentials: 'same-origin', cache: 'no-store', signal: AbortSignal.timeout(most),
      // A hotel's or school's sign-in page answers in the server's place: that is no signal, not an answer.
      redirect: 'error',
      headers: { accept: 'application/json', ...(json !== undefined ? { 'content-type': 'application/json' } : body ? { 'content-type': 'image/jpeg' } : {}) },
      body: json !== undefined ? JSON.stringify(json) : body,
    })
    const kind = response.headers.get('content-type') ?? ''
    const content = /\bjson\b/.test(kind) ? await response.json() as unknown : null
    if (response.ok) return content === null ? none : { ...none, status: response.status, body: content as T }
    const { type, detail } = (content ?? {}) as { type?: string, detail?: string }
    const retryAfterSeconds = Number(response.headers.get('retry-after')) || 0
    return { status: response.status, body: null, problem: content === null ? null : { code: type?.replace('/problems/', '') ?? '', message: detail ?? '' }, retryAfterSeconds }
  }
  catch {
    return none
  }
}

/** The server that this page came from. */
export const serverWire: FieldWire = {
  me: () => ask('/api/account/me', { most: 15_000 }),
  take: (jobId, device) => ask(`/api/field/v1/jobs/${jobId}/take`, { method: 'POST', json: device }),
  push: (roundId, push) => ask(`/api/field/v1/rounds/${roundId}/entries`, { method: 'POST', json: push }),
  pull: (roundId, after) => ask(`/api/field/v1/rounds/${roundId}/entries?after=${after}`),
  photo: (jobId, digest, bytes) => ask(`/api/field/v1/jobs/${jobId}/photos/${digest}`, { method: 'PUT', body: bytes as BodyInit, most: PHOTO_MOST_MS }),
}
