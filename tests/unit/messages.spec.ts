import { readdirSync, readFileSync } from 'node:fs'
import { join, resolve } from 'node:path'
import { describe, expect, it } from 'vitest'

const root = resolve(import.meta.dirname, '../..')
type Tree = { [key: string]: string | Tree }
const flat = (tree: Tree, at = ''): [string, string][] => Object.entries(tree).flatMap(([key, value]) => typeof value === 'string' ? [[`${at}${key}`, value] as [string, string]] : flat(value, `${at}${key}.`))
const read = (file: string) => flat(JSON.parse(readFileSync(join(root, file), 'utf8')) as Tree)
const places = (text: string) => [...new Set([...text.matchAll(/\{(\w+)\}/g)].map(match => match[1]!))].sort()
const rooms = readdirSync(join(root, 'i18n/locales/en'))

describe.each(rooms)('messages of %s', (room) => {
  const [en, es] = [new Map(read(`i18n/locales/en/${room}`)), new Map(read(`i18n/locales/es/${room}`))]

  it('stand in both languages, none empty', () => {
    expect([...es.keys()].sort()).toEqual([...en.keys()].sort())
    expect([...en, ...es].filter(([, text]) => text.trim() === '')).toEqual([])
  })

  it('name the same places in both languages', () => {
    expect([...en].filter(([key, text]) => JSON.stringify(places(text)) !== JSON.stringify(places(es.get(key) ?? ''))).map(([key]) => key)).toEqual([])
  })

  it('begin with the word of their room', () => {
    expect([...en.keys()].filter(key => !key.startsWith(`${room.replace('.json', '')}.`))).toEqual([])
  })
})

describe('words that we do not use', () => {
  // product.md: a record tells what was seen; it certifies nothing.
  const UNUSED = /\b(audit|compliant|compliance|certified|guaranteed|flagged|concession|dispatch)\b/i
  it.each(rooms)('are not in %s', (room) => {
    expect(read(`i18n/locales/en/${room}`).filter(([, text]) => UNUSED.test(text)).map(([key]) => key)).toEqual([])
  })
})

describe('screens', () => {
  const known = new Set(rooms.flatMap(room => read(`i18n/locales/en/${room}`).map(([key]) => key)))
  const files = readdirSync(join(root, 'app'), { recursive: true, withFileTypes: true }).filter(entry => entry.isFile() && /\.(vue|ts)$/.test(entry.name)).map(entry => join(entry.parentPath, entry.name))

  it('name only messages that there are', () => {
    const missing = files.flatMap((file) => {
      const text = readFileSync(file, 'utf8')
      const whole = [...text.matchAll(/\bt\(\s*'([a-zA-Z]+(?:\.[\w-]+)+)'/g)].map(match => match[1]!).filter(key => !known.has(key))
      const begun = [...text.matchAll(/\bt\(\s*`([a-zA-Z]+(?:\.[\w-]+)*)\.\$\{/g)].map(match => match[1]!).filter(start => ![...known].some(key => key.startsWith(`${start}.`)))
      return [...whole, ...begun].map(key => `${key} in ${file.slice(root.length + 1)}`)
    })
    expect([...new Set(missing)]).toEqual([])
  })
})
