import { sha256 } from '@noble/hashes/sha2.js'
import { bytesToHex, utf8ToBytes } from '@noble/hashes/utils.js'
import canonicalize from 'canonicalize'

/** Why a text or a value is no canonical JSON of ours. */
export const CANONICAL_JSON_FAULTS = ['notJson', 'duplicateKey', 'numberTooLarge', 'notFinite', 'loneSurrogate', 'notPlain', 'tooDeep', 'notCanonical'] as const
export type CanonicalJsonFault = (typeof CANONICAL_JSON_FAULTS)[number]

const SENTENCES: Record<CanonicalJsonFault, string> = {
  notJson: 'This is not JSON (RFC 8259); send the text as it was written.',
  duplicateKey: 'A key stands twice in one object; keep one of them.',
  numberTooLarge: 'A whole number is past 2^53 and would change when it is read; write it as text.',
  notFinite: 'NaN and Infinity have no JSON form; leave the value out or write null.',
  loneSurrogate: 'A text holds half of a surrogate pair; type that character again.',
  notPlain: 'Only null, booleans, numbers, texts, lists and plain objects can be written; undefined, functions, dates and class instances cannot.',
  tooDeep: 'Lists and objects are nested more than 100 deep; flatten them.',
  notCanonical: 'The text is JSON but not in its RFC 8785 form; it was changed after it was made.',
}

/** A refusal with its stable code; `where` is a JSON pointer (values) or the character offset (texts). */
export class CanonicalJsonError extends Error {
  override readonly name = 'CanonicalJsonError'
  constructor(readonly code: CanonicalJsonFault, readonly where: string) {
    super(`${SENTENCES[code]} (at ${where || 'the top'})`)
  }
}

const DEEPEST = 100
const LONE_SURROGATE = /\p{Surrogate}/u

/**
 * The canonical JSON of a value (RFC 8785): keys in UTF-16 order, no white space, numbers as ECMAScript writes them.
 * Throws {@link CanonicalJsonError} for what has no such form or would not survive a reading: NaN, whole numbers past 2^53, lone surrogates,
 * undefined, anything but plain objects. A key whose value is undefined is refused too, never left out silently.
 */
export function canonicalJson(value: unknown): string {
  refuse(value, '', 0)
  return canonicalize(value)!
}

function refuse(value: unknown, where: string, depth: number): void {
  if (depth > DEEPEST) throw new CanonicalJsonError('tooDeep', where)
  if (value === null || typeof value === 'boolean') return
  if (typeof value === 'number') return refuseNumber(value, where)
  if (typeof value === 'string') {
    if (LONE_SURROGATE.test(value)) throw new CanonicalJsonError('loneSurrogate', where)
    return
  }
  if (Array.isArray(value)) {
    // A hole in a list reads as undefined here and is refused with it.
    for (let at = 0; at < value.length; at++) refuse(value[at], `${where}/${at}`, depth + 1)
    return
  }
  const prototype = typeof value === 'object' ? Object.getPrototypeOf(value) : undefined
  if (prototype !== Object.prototype && prototype !== null) throw new CanonicalJsonError('notPlain', where)
  for (const [key, inner] of Object.entries(value as object)) {
    if (LONE_SURROGATE.test(key)) throw new CanonicalJsonError('loneSurrogate', `${where}/${key}`)
    // The package would call it: a plain object must mean itself.
    if (key === 'toJSON' && typeof inner === 'function') throw new CanonicalJsonError('notPlain', `${where}/${key}`)
    refuse(inner, `${where}/${key}`, depth + 1)
  }
}

function refuseNumber(value: number, where: string): void {
  if (!Number.isFinite(value)) throw new CanonicalJsonError('notFinite', where)
  if (Number.isInteger(value) && !Number.isSafeInteger(value)) throw new CanonicalJsonError('numberTooLarge', where)
}

/**
 * Reads JSON strictly (RFC 8259, and what RFC 8785 asks of its input): duplicate keys, whole numbers past 2^53, numbers that overflow and lone
 * surrogates are refused with a {@link CanonicalJsonError}, where JSON.parse would take them silently.
 */
export function parseStrictJson(text: string): unknown {
  let at = 0
  const fail = (code: CanonicalJsonFault): never => {
    throw new CanonicalJsonError(code, String(at))
  }
  const match = (pattern: RegExp): string | null => {
    pattern.lastIndex = at
    const found = pattern.exec(text)
    if (!found) return null
    at += found[0].length
    return found[0]
  }
  const skip = () => match(/[ \t\n\r]*/y)
  const take = (mark: string) => {
    if (text[at] !== mark) return false
    at++
    return true
  }
  const readText = (): string => {
    // eslint-disable-next-line no-control-regex -- RFC 8259 forbids the bare control characters
    const raw = match(/"(?:[^"\\\u0000-\u001f]|\\(?:["\\/bfnrt]|u[0-9a-fA-F]{4}))*"/y) ?? fail('notJson')
    const value = JSON.parse(raw) as string
    return LONE_SURROGATE.test(value) ? fail('loneSurrogate') : value
  }
  const readNumber = (): number => {
    const value = Number(match(/-?(?:0|[1-9]\d*)(?:\.\d+)?(?:[eE][+-]?\d+)?/y) ?? fail('notJson'))
    refuseNumber(value, String(at))
    return value
  }
  const readValue = (depth: number): unknown => {
    if (depth > DEEPEST) fail('tooDeep')
    skip()
    let value: unknown
    if (take('{')) value = readObject(depth)
    else if (take('[')) value = readList(depth)
    else if (text[at] === '"') value = readText()
    else {
      const word = match(/(?:true|false|null)\b/y)
      value = word ? JSON.parse(word) : readNumber()
    }
    skip()
    return value
  }
  const readList = (depth: number): unknown[] => {
    const list: unknown[] = []
    skip()
    if (take(']')) return list
    do list.push(readValue(depth + 1))
    while (take(','))
    return take(']') ? list : fail('notJson')
  }
  const readObject = (depth: number): object => {
    const pairs = new Map<string, unknown>()
    skip()
    if (take('}')) return {}
    do {
      skip()
      const key = readText()
      if (pairs.has(key)) fail('duplicateKey')
      skip()
      if (!take(':')) fail('notJson')
      pairs.set(key, readValue(depth + 1))
    } while (take(','))
    // fromEntries defines own properties, so that a key "__proto__" stays a key.
    return take('}') ? Object.fromEntries(pairs) : fail('notJson')
  }
  const value = readValue(0)
  return at === text.length ? value : fail('notJson')
}

/** Reads a text that must already be in its RFC 8785 form; throws {@link CanonicalJsonError} (`notCanonical` when it is other JSON). */
export function parseCanonicalJson(text: string): unknown {
  const value = parseStrictJson(text)
  if (canonicalJson(value) !== text) throw new CanonicalJsonError('notCanonical', '0')
  return value
}

/** The SHA-256 (FIPS 180-4) of bytes, or of a text's UTF-8, in lower-case hex. Pure JavaScript: the same in browser and server. */
export function sha256Hex(content: string | Uint8Array): string {
  return bytesToHex(sha256(typeof content === 'string' ? utf8ToBytes(content) : content))
}

/** The digest of a value: SHA-256 in lower-case hex over the UTF-8 of its canonical JSON. Throws as {@link canonicalJson}. */
export function digestOf(value: unknown): string {
  return sha256Hex(canonicalJson(value))
}
