import type { Length } from '../measure/length'
import { SETTINGS, type FaceState, type Line, type LineElement } from './line'
import { LINE_COLUMNS, LINE_HEADERS, type LineColumn } from './lineColumns'
import { quickWordFor, type QuickLanguage, type QuickMeaning } from './quickWords'
import { kindWords, own, writtenLength } from './writeQuickLine'

/** A cell as RFC 4180 has it. Words of a person's own that a spreadsheet would take for a formula stand in brackets, which the reader takes off. */
function cell(text: string): string {
  return /[",;\t\n\r]|^\s|\s$/.test(text) ? `"${text.replace(/"/g, '""')}"` : text
}
function ownCell(words: string): string {
  return /^[=+\-@(]/.test(words) ? own(words) : words
}

/** The whole line as a table in one language, which {@link readLineCsv} reads back to the same line. Lines end with CR LF (RFC 4180); say UTF-8 when it is saved. */
export function writeLineCsv(line: Line, language: QuickLanguage = 'en'): string {
  const word = (meaning: QuickMeaning) => quickWordFor(meaning, language)
  const length = (amount: Length) => writtenLength(amount, line.system)
  const yes = (is: boolean) => is ? (language === 'en' ? 'yes' : 'sí') : 'no'
  const settings = (face: FaceState) => SETTINGS.filter(setting => face.settings.includes(setting)).map(setting => word({ say: 'setting', setting })).join(' + ') || word({ say: 'noSetting' })
  const ground = ({ ground: { finished, surface, coming, comingThickness } }: FaceState) => [
    word({ say: 'surface', surface }), word({ say: finished ? 'finished' : 'unfinished' }),
    ...(finished ? [] : [...(comingThickness ? [length(comingThickness)] : []), ...(coming ? [own(coming)] : [])]),
  ].join(' ')
  const row = (key: string, sideName: string, element: LineElement): Record<LineColumn, string> => {
    const { gate, faces } = element
    return {
      side: key, sideName: ownCell(sideName), tag: element.tag, what: kindWords(element, language),
      length: element.length ? length(element.length) : '', height: length(element.height),
      rise: element.rise ? `${word({ say: element.rise > 0 ? 'up' : 'down' })} ${length(Math.abs(element.rise))}` : '',
      bays: element.kind === 'run' ? String(element.bays) : '', mesh: element.mesh ? length(element.mesh) : '',
      topRail: yes(element.topRail), bottom: word({ say: 'bottom', bottom: element.bottom }),
      leaves: gate ? gate.leaves.map(length).join(' + ') : '',
      opens: gate ? word({ say: 'opens', to: gate.opens }) : '', hung: gate ? word({ say: 'hung', at: gate.hinge }) : '',
      exit: gate ? yes(gate.exit) : '', selfClosing: gate ? yes(gate.selfClosing) : '', automatic: gate ? yes(gate.automatic) : '',
      work: word({ say: 'work', work: element.work }),
      outer: settings(faces.outer), inner: settings(faces.inner), outerGround: ground(faces.outer), innerGround: ground(faces.inner),
      name: ownCell(element.name ?? ''),
    }
  }
  const rows = line.sides.flatMap(side => side.elements.map(element => row(side.key, side.name, element)))
  return [LINE_COLUMNS.map(column => cell(LINE_HEADERS[column][language][0]!)), ...rows.map(of => LINE_COLUMNS.map(column => cell(of[column])))].map(cells => `${cells.join(',')}\r\n`).join('')
}
