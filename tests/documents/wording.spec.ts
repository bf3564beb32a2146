import { readdirSync, readFileSync } from 'node:fs'
import { parse } from 'yaml'
import { describe, expect, it } from 'vitest'
import en from '../../templates/record/en.json'
import es from '../../templates/record/es.json'

/** Every text of a catalogue by its path. */
function texts(value: unknown, path = ''): [string, string][] {
  return typeof value === 'string' ? [[path, value]] : Object.entries(value as object).flatMap(([key, inner]) => texts(inner, `${path}/${key}`))
}
const places = (text: string) => [...text.matchAll(/\{\w+\}/g)].map(([place]) => place).sort()

describe('the wording of the PDF', () => {
  const spanish = new Map(texts(es))
  it('stands whole in both languages, with the same places to fill', () => {
    expect([...spanish.keys()].sort()).toEqual(texts(en).map(([path]) => path).sort())
    for (const [path, text] of texts(en)) expect(places(spanish.get(path)!), path).toEqual(places(text))
  })
  it('uses none of the words that are not ours to use', () => {
    for (const [path, text] of texts(en)) expect(text, path).not.toMatch(/\b(audit|issue[ds]?|flagged|compliant|safe|guaranteed|concession|dispatch|certified)\b/i)
  })
  it('has a phrase for every datum that the built-in checks measure from', () => {
    const folder = new URL('../../templates/checklists/sections/', import.meta.url)
    const datums = readdirSync(folder).flatMap(file => (parse(readFileSync(new URL(file, folder), 'utf8')).checks as { datum?: string }[]).flatMap(check => check.datum ?? []))
    expect(datums.length).toBeGreaterThan(10)
    for (const datum of datums) {
      expect(en.datums, datum).toHaveProperty([datum])
      expect(es.datums, datum).toHaveProperty([datum])
    }
  })
})
