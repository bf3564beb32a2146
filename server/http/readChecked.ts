import type { H3Event } from 'h3'
import { getRequestHeader, readRawBody } from 'h3'
import type { z } from 'zod'
import { Failure } from '../services/failure'

/** Checks `value`; throws 422 with a JSON pointer a fault. A path that is no id is simply not found. */
export function checked<S extends z.ZodTypeAny>(schema: S, value: unknown, root = '', as: 'invalid' | 'notFound' = 'invalid', anyText = false): z.infer<S> {
  const unkept = anyText ? null : unkeptText(value, root)
  if (unkept !== null && as === 'invalid') throw new Failure('invalid', 'A text holds a character that cannot be kept; type it again.', [{ pointer: unkept, code: 'character', detail: 'This holds U+0000 or half of a character. Type it again.' }])
  const result = schema.safeParse(value)
  if (result.success) return result.data
  if (as === 'notFound') throw new Failure('notFound', 'There is nothing at this address.')
  throw new Failure('invalid', 'Some of what was sent is not accepted; see the places named.', result.error.issues.flatMap(issue =>
    issue.code === 'unrecognized_keys'
      ? issue.keys.map(key => ({ pointer: pointer(root, [...issue.path, key]), code: 'unknown', detail: 'This field is not known here. Leave it out.' }))
      : [{ pointer: pointer(root, issue.path), code: issue.code, detail: issue.message }]).slice(0, 50))
}

/** PostgreSQL keeps no U+0000, and half of a surrogate pair would be stored as another character: where such a text is, or null. */
function unkeptText(value: unknown, at: string): string | null {
  // eslint-disable-next-line no-control-regex -- this is the character in question
  if (typeof value === 'string') return /[\u0000\p{Surrogate}]/u.test(value) ? at : null
  if (typeof value !== 'object' || value === null) return null
  for (const [key, inner] of Object.entries(value)) {
    const found = unkeptText(key, pointer(at, [key])) ?? unkeptText(inner, pointer(at, [key]))
    if (found !== null) return found
  }
  return null
}

const pointer = (root: string, path: (string | number)[]) => `${root}/${path.map(step => String(step).replace(/~/g, '~0').replace(/\//g, '~1')).join('/')}`

/** Reads at most `most` bytes of a body; undefined where there is none. One that does not say its length is stopped at the limit, not read whole. */
export async function readBytes(event: H3Event, most: number, tooLarge: string): Promise<Buffer | undefined> {
  const refusal = () => new Failure('tooLarge', tooLarge)
  if (Number(getRequestHeader(event, 'content-length') ?? 0) > most) throw refusal()
  if (!getRequestHeader(event, 'transfer-encoding')) return await readRawBody(event, false)
  const parts: Buffer[] = []
  let length = 0
  // The stream stays whole, or the refusal could not be answered.
  for await (const part of event.node.req.iterator({ destroyOnReturn: false }) as AsyncIterable<Buffer>) {
    if ((length += part.length) > most) throw refusal()
    parts.push(part)
  }
  return Buffer.concat(parts)
}

/** Reads a JSON body of at most `maxBytes` and checks it. `anyText`: the service looks at each text itself, so that a bad one holds up no good one. */
export async function readChecked<S extends z.ZodTypeAny>(event: H3Event, schema: S, maxBytes = 1_000_000, anyText = false): Promise<z.infer<S>> {
  const type = getRequestHeader(event, 'content-type') ?? ''
  if (!/^application\/([\w.+-]+\+)?json\b/i.test(type)) throw new Failure('wrongType', 'Send JSON, with the header content-type: application/json.')
  const text = (await readBytes(event, maxBytes, `This is larger than ${Math.round(maxBytes / 1000)} kB. Send less at once.`))?.toString('utf8') ?? ''
  let value: unknown
  try { value = JSON.parse(text) }
  catch (cause) { throw new Failure('unreadable', `The body is no JSON: ${(cause as Error).message}. Check it and send it again.`) }
  return checked(schema, value, '', 'invalid', anyText)
}
