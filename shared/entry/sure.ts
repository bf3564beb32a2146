import { z } from 'zod'

/**
 * Whether the text at a position is the canonical form (RFC 8785) of a value that is surely as a schema has it: the position after it, or -1, which says nothing: then
 * the schema itself decides and tells what is wrong. The text must hold no backslash and no half of a surrogate pair, so that a string stands in it as it is.
 */
export type Sure = (value: unknown, text: string, at: number) => number

/** What {@link Sure} cannot look at: escapes, and whatever may be half of a pair. */
export const UNSURE = /[\\\ud800-\udfff]/
const UUID = /^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/
const never = () => -1

/**
 * Makes of a schema a check that copies nothing and explains nothing, several times faster than parsing with it and writing the value again. It says yes only where
 * parsing would give the very same value back; of what it does not understand it is never sure. tests/unit/shared/entry/sure.spec.ts holds it against the schemas.
 */
export function sureOf(schema: z.ZodTypeAny): Sure {
  if (schema instanceof z.ZodObject) return sureObject(schema as z.AnyZodObject)
  if (schema instanceof z.ZodString) return sureText(all(schema._def.checks.map(textCheck)))
  if (schema instanceof z.ZodEnum) {
    const options = new Set<unknown>(schema.options)
    return sureText(text => options.has(text))
  }
  if (schema instanceof z.ZodLiteral) return typeof schema.value === 'string' ? sureText(text => text === schema.value) : never
  if (schema instanceof z.ZodNumber) {
    const holds = all(schema._def.checks.map(numberCheck))
    return (value, text, at) => typeof value === 'number' && holds(value) ? after(String(value), text, at) : -1
  }
  if (schema instanceof z.ZodBoolean) return (value, text, at) => typeof value === 'boolean' ? after(String(value), text, at) : -1
  if (schema instanceof z.ZodNullable) {
    const inner = sureOf(schema.unwrap())
    return (value, text, at) => value === null ? after('null', text, at) : inner(value, text, at)
  }
  if (schema instanceof z.ZodArray) return sureList(schema)
  if (schema instanceof z.ZodDiscriminatedUnion) {
    const { discriminator } = schema
    const options = new Map([...schema.optionsMap].map(([key, option]) => [key as unknown, sureOf(option)]))
    return (value, text, at) => typeof value === 'object' && value !== null ? (options.get((value as Record<string, unknown>)[discriminator]) ?? never)(value, text, at) : -1
  }
  return never
}

const after = (part: string, text: string, at: number) => text.startsWith(part, at) ? at + part.length : -1
const [QUOTE, COMMA] = [...'",'].map(mark => mark.charCodeAt(0))

/** Where every key and value stands in its place there is room for no other, nor for one twice. */
function sureObject(schema: z.AnyZodObject): Sure {
  if (schema._def.unknownKeys !== 'strict') return never
  const fields = Object.keys(schema.shape).sort().map((key) => {
    const field = schema.shape[key] as z.ZodTypeAny
    const optional = field instanceof z.ZodOptional
    return { key, label: `${JSON.stringify(key)}:`, optional, sure: sureOf(optional ? field.unwrap() : field) }
  })
  return (value, text, from) => {
    if (typeof value !== 'object' || value === null) return -1
    let at = after('{', text, from)
    let first = true
    for (const { key, label, optional, sure } of fields) {
      const inner = (value as Record<string, unknown>)[key]
      if (inner === undefined && optional) continue
      if (!first && text.charCodeAt(at++) !== COMMA) return -1
      first = false
      at = after(label, text, at)
      if (at < 0 || (at = sure(inner, text, at)) < 0) return -1
    }
    return after('}', text, at)
  }
}

function sureList(schema: z.ZodArray<z.ZodTypeAny>): Sure {
  const { type, minLength, maxLength, exactLength } = schema._def
  if (exactLength) return never
  const [inner, least, most] = [sureOf(type), minLength?.value ?? 0, maxLength?.value ?? Infinity]
  return (value, text, from) => {
    if (!Array.isArray(value) || value.length < least || value.length > most) return -1
    let at = after('[', text, from)
    for (let index = 0; index < value.length; index++) {
      if (index > 0 && text.charCodeAt(at++) !== COMMA) return -1
      if (at < 0 || (at = inner(value[index], text, at)) < 0) return -1
    }
    return after(']', text, at)
  }
}

function sureText(holds: (text: string) => boolean): Sure {
  return (value, text, at) => {
    if (typeof value !== 'string' || text.charCodeAt(at) !== QUOTE || !text.startsWith(value, at + 1)) return -1
    const end = at + 1 + value.length
    return text.charCodeAt(end) === QUOTE && holds(value) ? end + 1 : -1
  }
}

function all<T>(checks: ((value: T) => boolean)[]): (value: T) => boolean {
  return checks.length === 1 ? checks[0]! : value => checks.every(check => check(value))
}

function textCheck(check: z.ZodStringCheck): (text: string) => boolean {
  if (check.kind === 'min') return text => text.length >= check.value
  if (check.kind === 'max') return text => text.length <= check.value
  if (check.kind === 'uuid') return text => UUID.test(text)
  if (check.kind === 'regex' && !check.regex.global && !check.regex.sticky) return text => check.regex.test(text)
  if (check.kind === 'trim') return text => text === text.trim()
  return () => false
}

function numberCheck(check: z.ZodNumberCheck): (value: number) => boolean {
  if (check.kind === 'int') return Number.isInteger
  if (check.kind === 'min') return value => check.inclusive ? value >= check.value : value > check.value
  if (check.kind === 'max') return value => check.inclusive ? value <= check.value : value < check.value
  return () => false
}
