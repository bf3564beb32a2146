import { describe, expect, it } from 'vitest'
import en from '~~/i18n/locales/en/line.json'
import es from '~~/i18n/locales/es/line.json'
import { DIAMONDS } from '#shared/drawing/displayList'
import { LINE_ERROR_CODES, LINE_HINT_CODES } from '#shared/line/checkLine'
import { CROSSING_OF, ELEMENT_KINDS, FACES, GATE_FORMS, POST_FORMS, SETTINGS, TIE_IN_TO, WORKS } from '#shared/line/line'
import { QUICK_ERROR_CODES } from '#shared/line/quickItems'
import { readQuickLine } from '#shared/line/readQuickLine'
import { CSV_ERROR_CODES } from '#shared/line/readLineCsv'

type Words = { [key: string]: string | Words }
const flat = (words: Words, under = ''): [string, string][] => Object.entries(words).flatMap(([key, value]) => typeof value === 'string' ? [[`${under}${key}`, value] as [string, string]] : flat(value, `${under}${key}.`))
const names = (text: string) => [...new Set([...text.matchAll(/\{(\w+)\}/g)].map(found => found[1]))].sort()
const english = new Map(flat(en))
const spanish = new Map(flat(es))

describe('the words of the line', () => {
  it('stand whole in both languages, with the same names in every sentence', () => {
    expect([...spanish.keys()].sort()).toEqual([...english.keys()].sort())
    for (const [key, text] of english) expect(names(spanish.get(key)!), key).toEqual(names(text))
  })

  it('has a sentence for every code and a word for every choice', () => {
    const wanted = [
      ...QUICK_ERROR_CODES.map(code => `line.quick.error.${code}`), ...CSV_ERROR_CODES.map(code => `line.table.error.${code}`),
      ...[...LINE_ERROR_CODES, ...LINE_HINT_CODES].map(code => `line.remark.${code}`), ...DIAMONDS.map(state => `line.legend.${state}`),
      ...ELEMENT_KINDS.map(kind => `line.kind.${kind}`), ...WORKS.map(work => `line.work.${work}`), ...GATE_FORMS.map(form => `line.form.${form}`), ...POST_FORMS.map(post => `line.post.${post}`),
      ...TIE_IN_TO.map(to => `line.tieIn.${to}`), ...CROSSING_OF.map(of => `line.crossing.${of}`), ...FACES.flatMap(face => [`line.face.${face}`, `line.opens.${face}`]), ...SETTINGS.map(setting => `line.setting.${setting}`),
    ]
    expect(wanted.filter(key => !english.has(key))).toEqual([])
  })

  it('shows examples that are read as they stand', () => {
    for (const words of [english, spanish]) {
      for (const [key, system] of [['example', 'imperial'], ['exampleMetric', 'metric']] as const) {
        const result = readQuickLine(words.get(`line.quick.${key}`)!, { system, newId: () => '0193e000-0000-7000-8000-000000000001' })
        expect(result).toMatchObject({ line: { sides: [{ key: 'A' }, { key: 'B' }] } })
        if ('line' in result) expect(result.line.sides.map(side => side.elements.length)).toEqual([4, 3])
      }
    }
  })
})
