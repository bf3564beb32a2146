import { FOOT, INCH, MILLIMETRE, type Length, type System } from '../measure/length'
import { elementsOf, FACES, SETTINGS, type Face, type FaceState, type Line, type LineElement } from './line'
import { lineDefaults, usualBays, usualLeaves, type LineDefaults } from './lineDefaults'
import { quickWordFor, type QuickLanguage, type QuickMeaning } from './quickWords'

/**
 * A length in letters that parseLength reads back to the very same: feet, inches and fractions to 1/64, or metres and millimetres; in the other system's
 * units where its own cannot say it. What neither can say (no tape and no code can) is rounded to 1/10,000 mm.
 */
export function writtenLength(amount: Length, system: System): string {
  const size = Math.abs(amount)
  const sign = amount < 0 ? '-' : ''
  const metric = size % (MILLIMETRE / 10_000) === 0
  if (system === 'imperial' || !metric) {
    if (size % (INCH / 64) === 0) return sign + writtenInches(size)
    if (size % (INCH / 1000) === 0) return `${sign}${decimals(size, INCH, 3)} in`
    if (size % (FOOT / 1000) === 0) return `${sign}${decimals(size, FOOT, 3)} ft`
  }
  return size >= 1000 * MILLIMETRE && size % (10 * MILLIMETRE) === 0 ? `${sign}${decimals(size, 1000 * MILLIMETRE, 2)} m` : `${sign}${decimals(size, MILLIMETRE, 4)} mm`
}

function writtenInches(size: Length): string {
  const feet = Math.floor(size / FOOT)
  const inches = Math.floor(size % FOOT / INCH)
  let [over, under] = [size % INCH / (INCH / 64), 64]
  while (over && over % 2 === 0) [over, under] = [over / 2, under / 2]
  const rest = [inches || '', over ? `${over}/${under}` : ''].filter(Boolean).join(' ')
  return [feet ? `${feet} ft` : '', rest ? `${rest} in` : ''].filter(Boolean).join(' ') || '0 in'
}

function decimals(size: Length, unit: Length, places: number): string {
  const scaled = Math.round(size / (unit / 10 ** places))
  const text = String(scaled).padStart(places + 1, '0')
  return `${text.slice(0, -places)}.${text.slice(-places)}`.replace(/\.?0+$/, '')
}

/** Words of a person's own, in brackets; brackets that would not close become square ones. */
export function own(said: string): string {
  const words = said.replace(/\s+/g, ' ').trim()
  let depth = 0
  const balanced = [...words].every(letter => (depth += letter === '(' ? 1 : letter === ')' ? -1 : 0) >= 0) && depth === 0
  return `(${balanced ? words : words.replace(/\(/g, '[').replace(/\)/g, ']')})`
}

/** What most elements share; ties go to the one that comes first. */
function commonest<T>(values: readonly T[]): T {
  const counts = new Map<string, { value: T, count: number }>()
  for (const value of values) {
    const key = JSON.stringify(value) ?? ''
    const entry = counts.get(key) ?? { value, count: 0 }
    entry.count++
    counts.set(key, entry)
  }
  return [...counts.values()].reduce((best, entry) => entry.count > best.count ? entry : best).value
}

const same = (a: unknown, b: unknown) => JSON.stringify(a) === JSON.stringify(b)
const settingsOf = (face: FaceState) => SETTINGS.filter(setting => face.settings.includes(setting))
const groundOf = ({ ground }: FaceState) => [ground.finished, ground.surface, ...(ground.finished ? [] : [ground.coming, ground.comingThickness])]

/** What an element is, in the words of quick typing. */
export function kindWords(element: LineElement, language: QuickLanguage): string {
  const word = (meaning: QuickMeaning) => quickWordFor(meaning, language)
  const form = element.gate?.form
  switch (element.kind) {
    case 'gate': return word({ say: 'kind', kind: 'gate', ...(form && form !== 'singleSwing' && { form }) })
    case 'terminalPost': return word({ say: 'kind', kind: 'terminalPost', ...(element.post && { post: element.post }) })
    case 'crossing': return word({ say: 'kind', kind: 'crossing', ...(element.crossing && { crossing: element.crossing }) })
    case 'tieIn': return [word({ say: 'kind', kind: 'tieIn' }), ...(element.tieIn ? [language === 'en' ? 'to' : 'a', word({ say: 'tieIn', to: element.tieIn })] : [])].join(' ')
    default: return word({ say: 'kind', kind: 'run' })
  }
}

/**
 * Writes a line in quick typing, in one language, so that reading it again gives the same line (ids by tag; the order of settings is that of SETTINGS).
 * What most elements share stands once at the top.
 */
export function writeQuickLine(line: Line, language: QuickLanguage = 'en'): string {
  const word = (meaning: QuickMeaning) => quickWordFor(meaning, language)
  const length = (amount: Length) => writtenLength(amount, line.system)
  const elements = elementsOf(line)
  const usual = lineDefaults(line.system)
  const common: LineDefaults = {
    ...usual,
    height: commonest(elements.map(element => element.height)),
    mesh: commonest(elements.map(element => element.mesh)),
    faces: { outer: commonest(elements.map(element => element.faces.outer)), inner: commonest(elements.map(element => element.faces.inner)) },
  }

  const faceWords = (name: Face, face: FaceState, over: FaceState): string[] => {
    const said: string[] = []
    const settings = settingsOf(face)
    if (!same(settings, settingsOf(over))) said.push(`${word({ say: 'face', face: name })} ${settings.map(setting => word({ say: 'setting', setting })).join(' + ') || word({ say: 'noSetting' })}`)
    if (!same(groundOf(face), groundOf(over))) {
      const { finished, surface, coming, comingThickness } = face.ground
      said.push([
        word({ say: 'face', face: name }), word({ say: 'ground' }), word({ say: 'surface', surface }), word({ say: finished ? 'finished' : 'unfinished' }),
        ...(finished || !comingThickness ? [] : [length(comingThickness)]), ...(finished || !coming ? [] : [own(coming)]),
      ].join(' '))
    }
    return said
  }
  const shared = (of: Pick<LineElement, 'mesh' | 'topRail' | 'bottom' | 'work' | 'faces'> & { height: Length | null }, over: LineDefaults): string[] => [
    ...(of.height !== null && of.height !== over.height ? [`${length(of.height)} ${word({ say: 'high' })}`] : []),
    ...(of.mesh === over.mesh ? [] : [of.mesh ? `${word({ say: 'mesh' })} ${length(of.mesh)}` : word({ say: 'noMesh' })]),
    ...(of.topRail === over.topRail ? [] : [word({ say: 'topRail', has: of.topRail })]),
    ...(of.bottom === over.bottom ? [] : [word({ say: 'bottom', bottom: of.bottom })]),
    ...(of.work === over.work ? [] : [word({ say: 'work', work: of.work })]),
    ...FACES.flatMap(face => faceWords(face, of.faces[face], over.faces[face])),
  ]
  const elementWords = (element: LineElement): string => {
    const { gate } = element
    return [
      [element.tag, kindWords(element, language), ...(element.length ? [length(element.length)] : []), ...(element.name ? [own(element.name)] : [])].join(' '),
      ...(element.rise ? [`${word({ say: element.rise > 0 ? 'up' : 'down' })} ${length(Math.abs(element.rise))}`] : []),
      ...(element.kind === 'run' && element.bays !== usualBays(element.length, usual.spacing) ? [`${element.bays} ${word({ say: 'bays' })}`] : []),
      ...(gate && !same(gate.leaves, usualLeaves(element.length, gate.form)) ? [`${word({ say: 'leaves' })} ${gate.leaves.map(length).join(' + ')}`] : []),
      ...(gate?.opens === 'inner' ? [word({ say: 'opens', to: 'inner' })] : []),
      ...(gate?.hinge === 'end' ? [word({ say: 'hung', at: 'end' })] : []),
      ...(['exit', 'selfClosing', 'automatic'] as const).flatMap(say => gate?.[say] ? [word({ say })] : []),
      ...shared(element, common),
    ].join(', ')
  }
  return [
    [word({ say: 'all' }), shared(common, usual).join(', ')].join(' '),
    ...line.sides.flatMap(side => [
      '',
      `${side.key} ${/^[(.]|[:\n\r]/.test(side.name) ? own(side.name) : side.name}`.trimEnd(),
      ...side.elements.map(elementWords),
    ]),
    '',
  ].join('\n')
}
