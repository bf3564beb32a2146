import type { H3Event } from 'h3'
import { getRequestHeader, readRawBody } from 'h3'
import type { z } from 'zod'
import { Failure } from '../services/failure'

/** Checks `value`; throws 422 with a JSON pointer a fault. A path that is no id is simply not found. */
export function checked<S extends z.ZodTypeAny>(schema: S, value: unknown, root = '', as: 'invalid' | 'notFound' = 'invalid'): z.infer<S> {
  const result = schema.safeParse(value)
  if (result.success) return result.data
  if (as === 'notFound') throw new Failure('notFound', 'There is nothing at this address.')
  throw new Failure('invalid', 'Some of what was sent is not accepted; see the places named.', result.error.issues.flatMap(issue =>
    issue.code === 'unrecognized_keys'
      ? issue.keys.map(key => ({ pointer: pointer(root, [...issue.path, key]), code: 'unknown', detail: 'This field is not known here. Leave it out.' }))
      : [{ pointer: pointer(root, issue.path), code: issue.code, detail: issue.message }]).slice(0, 50))
}

const pointer = (root: string, path: (string | number)[]) => `${root}/${path.map(step => String(step).replace(/~/g, '~0').replace(/\//g, '~1')).join('/')}`

/** Reads a JSON body of at most `maxBytes` and checks it. */
export async function readChecked<S extends z.ZodTypeAny>(event: H3Event, schema: S, maxBytes = 1_000_000): Promise<z.infer<S>> {
  const type = getRequestHeader(event, 'content-type') ?? ''
  if (!/^application\/([\w.+-]+\+)?json\b/i.test(type)) throw new Failure('wrongType', 'Send JSON, with the header content-type: application/json.')
  if (Number(getRequestHeader(event, 'content-length') ?? 0) > maxBytes) throw new Failure('tooLarge', `This is larger than ${Math.round(maxBytes / 1000)} kB. Send less at once.`)
  const text = await readRawBody(event, 'utf8') ?? ''
  if (Buffer.byteLength(text) > maxBytes) throw new Failure('tooLarge', `This is larger than ${Math.round(maxBytes / 1000)} kB. Send less at once.`)
  let value: unknown
  try { value = JSON.parse(text) }
  catch (cause) { throw new Failure('unreadable', `The body is no JSON: ${(cause as Error).message}. Check it and send it again.`) }
  return checked(schema, value)
}
