import { readdirSync, readFileSync } from 'node:fs'
import path from 'node:path'

type Words = { [key: string]: string | Words }
const read = new Map<string, Words>()

/** What the screens say, read from their own message files, so that a test holds to roles and meaning while wording may change. */
export function wordsOf(language: 'en' | 'es'): (key: string, parameters?: Record<string, string | number>, count?: number) => string {
  if (!read.has(language)) {
    const folder = path.resolve(import.meta.dirname, '../../i18n/locales', language)
    read.set(language, Object.assign({}, ...readdirSync(folder).map(file => JSON.parse(readFileSync(path.join(folder, file), 'utf8')))))
  }
  return (key, parameters = {}, count) => {
    const found = key.split('.').reduce<string | Words | undefined>((at, part) => typeof at === 'object' ? at[part] : undefined, read.get(language))
    if (typeof found !== 'string') throw new Error(`the screens have no words "${key}" in ${language}`)
    const forms = found.split('|').map(one => one.trim())
    // as vue-i18n chooses: two forms are one and many, three are none, one and many
    const form = count === undefined || forms.length === 1 ? forms[0]! : forms[forms.length === 2 ? (count === 1 ? 0 : 1) : Math.min(count, forms.length - 1)]!
    return form.replace(/\{'([^']*)'\}/g, '$1').replace(/\{(\w+)\}/g, (_, name: string) => String(parameters[name] ?? (name === 'n' || name === 'count' ? count : undefined) ?? `{${name}}`))
  }
}
