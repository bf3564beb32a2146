import { FOOT, MILLIMETRE } from '../../shared/measure/length'
import { formatLength } from '../../shared/measure/formatLength'
import { elementsOf } from '../../shared/line/line'
import { MEASURE, PAPER } from './paper'
import type { Frame } from './recordFrame'
import { heading, tableRow } from './recordFrame'
import { diamondStateOf, elementWords, useWords } from '../../shared/record/recordWords'
import { fill, listed, sentence } from '../../shared/record/wording'

/** Every element along the line, what it is, how it stands, and whether people may use it. */
export function paintElements(frame: Frame): void {
  const { sheet, record, say } = frame
  const { labels, phrases, legend, titles } = say.w
  const columns = [0, 50, 222, 276, 324, 436].map((x, at, all) => ({ x: PAPER.left + x, width: (all[at + 1] ?? MEASURE + 6) - x - 6 }))
  sheet.structure.within('Sect', () => {
    heading(frame, titles.elements)
    sheet.structure.within('Table', () => {
      tableRow(frame, columns, [labels.element, labels.what, labels.length, labels.height, labels.verdict, labels.state], { head: true, before: 0 })
      for (const element of elementsOf(record.line)) {
        const of = record.elements.find(one => one.element === element.id)
        const state = of ? diamondStateOf(of) : 'notRead'
        tableRow(frame, columns, [element.tag, elementWords(frame, element), element.length === 0 ? '' : feetOrMetres(element.length), feetOrMetres(element.height), legend[state], useWords(frame, element.id)], { before: 3.2, after: 3.2, marks: [{ column: 4, state }] })
      }
      for (const element of record.struck) tableRow(frame, columns, [element.tag, elementWords(frame, element), feetOrMetres(element.length), feetOrMetres(element.height), phrases.struck, ''], { before: 3.2, after: 3.2 })
    })
  })

  /** Lengths of a line are drawn and said in feet and inches, or in metres. */
  function feetOrMetres(length: number): string {
    if (record.system === 'imperial') return length % FOOT === 0 ? `${length / FOOT} ft` : formatLength(length, { system: 'imperial', style: 'feet' }).text
    const centimetres = Math.round(length / MILLIMETRE / 10)
    return `${Math.floor(centimetres / 100)}.${String(centimetres % 100).padStart(2, '0')} m`
  }
}

/** The limits in force with whose they are, those that they replaced, and the authority's notes. */
export function paintProvisions(frame: Frame): void {
  const { sheet, record, say } = frame
  const { labels, phrases, bases, setAsideWhys, titles } = say.w
  const keys = Object.keys(record.limits)
  if (keys.length === 0 && record.provisions.length === 0) return
  const columns = [{ x: PAPER.left, width: 150 }, { x: PAPER.left + 160, width: 130 }, { x: PAPER.left + 300, width: 204 }]
  const order = ['authority', 'specification', 'organisation', 'builtIn']
  keys.sort((a, b) => order.indexOf(record.limits[a]!.basis.kind) - order.indexOf(record.limits[b]!.basis.kind) || (a < b ? -1 : 1))
  sheet.structure.within('Sect', () => {
    heading(frame, titles.provisions)
    sheet.paragraph(phrases.limitsIntro, { after: 8, role: 'soft' })
    sheet.structure.within('Table', () => {
      tableRow(frame, columns, [labels.checks, labels.limit, labels.whose], { head: true, before: 0 })
      for (const key of keys) {
        const limit = record.limits[key]!
        const titlesOf = [...new Set(record.checks.filter(check => check.limits.includes(key)).map(check => check.title))]
        const unused = record.limitsSetAside.filter(one => one.by === key)
        tableRow(frame, columns, [listed(titlesOf, say.w.and), say.limit(limit), [
          { text: `${sentence(bases[limit.basis.kind])}: `, weight: 500 as const }, { text: say.basis(limit.basis) },
          ...unused.map(one => ({ text: `\n${fill(phrases.limitSetAside, { limit: say.limit(one.limit), basis: say.basis(one.limit.basis), why: setAsideWhys[one.why] })}`, role: 'soft' as const })),
        ]])
      }
    })
    sheet.y += 6
    for (const provision of record.provisions) {
      if (provision.note) sheet.paragraph([{ text: `${sentence(bases[provision.kind])}, ${say.basis(provision)}: `, weight: 500 }, { text: provision.note }], { size: 8.8, after: 4 })
    }
  })
}
