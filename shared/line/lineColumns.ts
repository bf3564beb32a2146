import { plainText, type QuickLanguage } from './quickWords'
import { LENGTH_UNITS, type LengthUnit } from '../measure/length'

/** The columns of a line as a table, in the order in which they are written. */
export const LINE_COLUMNS = [
  'side', 'sideName', 'tag', 'what', 'length', 'height', 'rise', 'bays', 'mesh', 'topRail', 'bottom', 'leaves', 'opens', 'hung',
  'exit', 'selfClosing', 'automatic', 'work', 'outer', 'inner', 'outerGround', 'innerGround', 'name',
] as const
export type LineColumn = (typeof LINE_COLUMNS)[number]

/** Their headers; the first of each language is written, all are read. */
export const LINE_HEADERS: Readonly<Record<LineColumn, Readonly<Record<QuickLanguage, readonly string[]>>>> = {
  side: { en: ['side'], es: ['lado'] },
  sideName: { en: ['side name'], es: ['nombre del lado'] },
  tag: { en: ['tag'], es: ['clave', 'etiqueta'] },
  what: { en: ['what', 'kind', 'element'], es: ['qué', 'tipo', 'elemento'] },
  length: { en: ['length', 'width'], es: ['largo', 'longitud', 'ancho'] },
  height: { en: ['height'], es: ['alto', 'altura'] },
  rise: { en: ['rise'], es: ['desnivel', 'subida'] },
  bays: { en: ['bays'], es: ['vanos', 'paños'] },
  mesh: { en: ['mesh'], es: ['malla'] },
  topRail: { en: ['top rail'], es: ['riel superior', 'tubo superior'] },
  bottom: { en: ['bottom'], es: ['abajo'] },
  leaves: { en: ['leaves'], es: ['hojas'] },
  opens: { en: ['opens'], es: ['abre'] },
  hung: { en: ['hung', 'hinge'], es: ['colgada', 'bisagra'] },
  exit: { en: ['exit'], es: ['salida'] },
  selfClosing: { en: ['self-closing', 'self closing'], es: ['se cierra sola'] },
  automatic: { en: ['automatic'], es: ['automática', 'automático'] },
  work: { en: ['work'], es: ['obra', 'trabajo'] },
  outer: { en: ['outer face', 'outer'], es: ['cara exterior', 'exterior'] },
  inner: { en: ['inner face', 'inner'], es: ['cara interior', 'interior'] },
  outerGround: { en: ['outer ground'], es: ['suelo exterior'] },
  innerGround: { en: ['inner ground'], es: ['suelo interior'] },
  name: { en: ['name'], es: ['nombre'] },
}

const COLUMN_OF = new Map(LINE_COLUMNS.flatMap(column => [...LINE_HEADERS[column].en, ...LINE_HEADERS[column].es, column].map(header => [bare(header), column] as const)))
function bare(header: string): string {
  return plainText(header).replace(/[\s_-]+/g, ' ').trim()
}

/** What a header of a table means, with the unit that it names ("length (ft)", "rise_in"); null for a column that a line has no use for. */
export function lineColumn(header: string): { column: LineColumn, unit: LengthUnit | null } | null {
  const plain = bare(header)
  const whole = COLUMN_OF.get(plain)
  if (whole) return { column: whole, unit: null }
  const named = /^(.*?)\s*[([]?\s*([a-z]{1,2})\s*[)\]]?$/.exec(plain)
  const unit = LENGTH_UNITS.find(known => known === named?.[2])
  const column = named && unit ? COLUMN_OF.get(named[1]!.trim()) : undefined
  return column && unit ? { column, unit } : null
}

/** Short words of single cells, beside the words of quick typing: what they say, as quick typing says it in English. */
export const CELL_WORDS: Partial<Record<LineColumn, Readonly<Record<string, string>>>> = {
  bottom: { 'rail': 'bottom rail', 'riel': 'bottom rail', 'wire': 'bottom wire', 'alambre': 'bottom wire', 'none': 'open bottom', 'no': 'open bottom', 'open': 'open bottom', 'nada': 'open bottom', 'abierto': 'open bottom' },
  opens: { out: 'opens out', outer: 'opens out', afuera: 'opens out', exterior: 'opens out', in: 'opens in', inner: 'opens in', adentro: 'opens in', interior: 'opens in' },
  hung: { start: 'hung at start', inicio: 'hung at start', end: 'hung at end', final: 'hung at end' },
}

/** Yes and no as tables have them. */
export const YES = new Set(['yes', 'y', 'x', 'true', '1', 'si', 's', 'verdadero'])
export const NO = new Set(['no', 'n', 'false', '0', '-', 'falso'])
