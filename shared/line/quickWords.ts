import type { LineElement, Setting } from './line'

/** What a word of quick typing says. */
export type QuickMeaning =
  | { say: 'kind', kind: LineElement['kind'], form?: 'doubleSwing' | 'slide' | 'cantilever', post?: LineElement['post'], crossing?: LineElement['crossing'] }
  | { say: 'form', form: 'doubleSwing' | 'slide' | 'cantilever' }
  | { say: 'tieIn', to: NonNullable<LineElement['tieIn']> }
  /** Words that want a measure beside them. */
  | { say: 'high' | 'up' | 'down' | 'mesh' | 'bays' | 'spacing' | 'leaves' }
  | { say: 'level' | 'noMesh' | 'exit' | 'selfClosing' | 'automatic' }
  | { say: 'topRail', has: boolean }
  | { say: 'bottom', bottom: LineElement['bottom'] }
  | { say: 'work', work: LineElement['work'] }
  | { say: 'opens', to: 'outer' | 'inner' }
  | { say: 'hung', at: 'start' | 'end' }
  | { say: 'face', face: 'outer' | 'inner' | 'both' }
  | { say: 'setting', setting: Setting }
  | { say: 'noSetting' | 'ground' | 'finished' | 'unfinished' }
  | { say: 'surface', surface: 'soft' | 'solid' }
  | { say: 'all' | 'filler' }

/** A language that quick typing is written in; both are read at any time. */
export type QuickLanguage = 'en' | 'es'

/**
 * The words of quick typing, in English and in Spanish. The first of each is what {@link writeQuickLine} writes.
 * They are trade words; the arrangement is our own.
 */
export const QUICK_WORDS: readonly (readonly [meaning: QuickMeaning, en: readonly string[], es: readonly string[]])[] = [
  [{ say: 'all' }, ['all'], ['todo', 'toda']],
  [{ say: 'kind', kind: 'run' }, ['run', 'fence'], ['tramo', 'cerca']],
  [{ say: 'kind', kind: 'gate' }, ['gate'], ['puerta', 'portón']],
  [{ say: 'kind', kind: 'gate', form: 'doubleSwing' }, ['double gate', 'pair of gates'], ['puerta doble', 'portón doble', 'puerta de dos hojas', 'portón de dos hojas']],
  [{ say: 'kind', kind: 'gate', form: 'slide' }, ['slide gate', 'sliding gate'], ['puerta corrediza', 'portón corredizo']],
  [{ say: 'kind', kind: 'gate', form: 'cantilever' }, ['cantilever gate'], ['portón en voladizo', 'puerta en voladizo', 'portón voladizo']],
  [{ say: 'form', form: 'doubleSwing' }, ['double'], ['doble']],
  [{ say: 'form', form: 'slide' }, ['slide', 'sliding'], ['corrediza', 'corredizo']],
  [{ say: 'form', form: 'cantilever' }, ['cantilever'], ['en voladizo', 'voladizo']],
  [{ say: 'kind', kind: 'terminalPost' }, ['post', 'terminal post'], ['poste', 'poste terminal']],
  [{ say: 'kind', kind: 'terminalPost', post: 'end' }, ['end post'], ['poste de extremo', 'poste final']],
  [{ say: 'kind', kind: 'terminalPost', post: 'corner' }, ['corner post'], ['poste de esquina', 'poste esquinero']],
  [{ say: 'kind', kind: 'terminalPost', post: 'pull' }, ['pull post'], ['poste de tensión', 'poste de tiro']],
  [{ say: 'kind', kind: 'terminalPost', post: 'gate' }, ['gate post'], ['poste de puerta', 'poste de portón']],
  [{ say: 'kind', kind: 'tieIn' }, ['tie-in', 'tie in', 'ties into', 'tied to'], ['unión', 'unida', 'unido']],
  [{ say: 'tieIn', to: 'building' }, ['building', 'house'], ['edificio', 'casa']],
  [{ say: 'tieIn', to: 'wall' }, ['wall'], ['muro', 'pared']],
  [{ say: 'tieIn', to: 'fence' }, ['existing fence', 'old fence'], ['cerca existente', 'cerca vieja']],
  [{ say: 'kind', kind: 'crossing' }, ['crossing'], ['cruce']],
  [{ say: 'kind', kind: 'crossing', crossing: 'drain' }, ['drain'], ['drenaje', 'desagüe']],
  [{ say: 'kind', kind: 'crossing', crossing: 'swale' }, ['swale', 'ditch'], ['cuneta', 'zanja']],
  [{ say: 'kind', kind: 'crossing', crossing: 'curb' }, ['curb', 'kerb'], ['bordillo', 'guarnición']],
  [{ say: 'high' }, ['high', 'height', 'tall'], ['alto', 'alta', 'altura']],
  [{ say: 'up' }, ['up', 'rises', 'rise', 'climbs'], ['sube']],
  [{ say: 'down' }, ['down', 'falls', 'drops'], ['baja']],
  [{ say: 'level' }, ['level', 'flat'], ['a nivel', 'plano']],
  [{ say: 'mesh' }, ['mesh'], ['malla']],
  [{ say: 'noMesh' }, ['no mesh'], ['sin malla']],
  [{ say: 'bays' }, ['bays', 'bay'], ['vanos', 'vano', 'paños', 'paño']],
  [{ say: 'spacing' }, ['posts', 'posts every'], ['postes', 'postes cada']],
  [{ say: 'leaves' }, ['leaves', 'leaf'], ['hojas', 'hoja']],
  [{ say: 'topRail', has: true }, ['top rail'], ['riel superior', 'tubo superior']],
  [{ say: 'topRail', has: false }, ['no top rail'], ['sin riel superior', 'sin tubo superior']],
  [{ say: 'bottom', bottom: 'rail' }, ['bottom rail'], ['riel inferior', 'tubo inferior']],
  [{ say: 'bottom', bottom: 'tensionWire' }, ['bottom wire', 'tension wire'], ['alambre inferior', 'alambre de tensión']],
  [{ say: 'bottom', bottom: 'none' }, ['open bottom', 'nothing below', 'no bottom rail'], ['abierto abajo', 'abierta abajo', 'sin riel inferior']],
  [{ say: 'work', work: 'new' }, ['new'], ['nuevo', 'nueva']],
  [{ say: 'work', work: 'altered' }, ['altered'], ['modificado', 'modificada']],
  [{ say: 'work', work: 'existing' }, ['existing'], ['existente']],
  [{ say: 'work', work: 'byOthers' }, ['by others'], ['de otros', 'por otros']],
  [{ say: 'opens', to: 'outer' }, ['opens out', 'opens outward'], ['abre hacia afuera', 'abre afuera']],
  [{ say: 'opens', to: 'inner' }, ['opens in', 'opens inward'], ['abre hacia adentro', 'abre adentro']],
  [{ say: 'hung', at: 'start' }, ['hung at start', 'hung at the start', 'hinge at start'], ['colgada al inicio', 'bisagra al inicio']],
  [{ say: 'hung', at: 'end' }, ['hung at end', 'hung at the end', 'hinge at end'], ['colgada al final', 'bisagra al final']],
  [{ say: 'exit' }, ['exit', 'way out'], ['salida']],
  [{ say: 'selfClosing' }, ['self-closing', 'self closing', 'closes itself'], ['se cierra sola', 'cierre automático']],
  [{ say: 'automatic' }, ['automatic', 'motor'], ['automática', 'automático']],
  [{ say: 'face', face: 'outer' }, ['outer', 'outside'], ['exterior', 'afuera']],
  [{ say: 'face', face: 'inner' }, ['inner', 'inside'], ['interior', 'adentro']],
  [{ say: 'face', face: 'both' }, ['both'], ['ambas', 'ambos', 'los dos lados']],
  [{ say: 'setting', setting: 'school' }, ['school'], ['escuela']],
  [{ say: 'setting', setting: 'playground' }, ['playground', 'play yard'], ['juegos', 'patio de juegos']],
  [{ say: 'setting', setting: 'pool' }, ['pool'], ['alberca', 'piscina']],
  [{ say: 'setting', setting: 'athletic' }, ['athletic', 'field', 'court', 'ball court'], ['deportes', 'cancha']],
  [{ say: 'setting', setting: 'walkway' }, ['walkway', 'sidewalk', 'walk'], ['andador', 'acera', 'banqueta']],
  [{ say: 'setting', setting: 'accessibleRoute' }, ['accessible route', 'accessible'], ['ruta accesible', 'accesible']],
  [{ say: 'setting', setting: 'egress' }, ['egress', 'exit route', 'egress route'], ['ruta de salida']],
  [{ say: 'setting', setting: 'driveway' }, ['driveway', 'drive'], ['entrada de autos']],
  [{ say: 'noSetting' }, ['no setting', 'none'], ['ninguno', 'nada']],
  [{ say: 'ground' }, ['ground'], ['suelo', 'terreno']],
  [{ say: 'surface', surface: 'soft' }, ['soft'], ['blando', 'suelto']],
  [{ say: 'surface', surface: 'solid' }, ['solid', 'hard'], ['firme', 'sólido', 'duro']],
  [{ say: 'finished' }, ['finished'], ['terminado']],
  [{ say: 'unfinished' }, ['unfinished', 'not finished', 'to come'], ['sin terminar', 'por venir']],
  [{ say: 'filler' }, ['and', 'with', 'of', 'to', 'the', 'an', 'a', 'at', 'is', 'long', 'wide', 'apart', 'every'], ['y', 'con', 'de', 'del', 'al', 'el', 'la', 'los', 'las', 'un', 'una', 'largo', 'larga', 'ancho', 'ancha', 'cada']],
]

/** A text without accents and in small letters, as long as it was, so that places in it stay. */
export function plainText(text: string): string {
  return Array.from(text, character => character.length > 1 ? '\uFFFD'.repeat(character.length) : (character.normalize('NFD').charAt(0).toLowerCase() || character)).join('')
}

const PHRASES = QUICK_WORDS.flatMap(([meaning, en, es]) => [...en, ...es].map(words => ({ meaning, words, phrase: plainText(words) })))
const MEANING_OF = new Map(PHRASES.map(({ meaning, phrase }) => [phrase, meaning]))
const ANY_PHRASE = new RegExp(`(?:${PHRASES.map(({ phrase }) => phrase).sort((a, b) => b.length - a.length).map(phrase => phrase.replace(/ /g, '\\s+')).join('|')})(?![\\p{L}\\p{N}])`, 'uy')

/** The longest word of quick typing at a place of a {@link plainText}; undefined when none starts there. */
export function quickWordAt(plain: string, at: number): { meaning: QuickMeaning, length: number } | undefined {
  ANY_PHRASE.lastIndex = at
  const found = ANY_PHRASE.exec(plain)?.[0]
  return found === undefined ? undefined : { meaning: MEANING_OF.get(found.replace(/\s+/g, ' '))!, length: found.length }
}

/** How many letters must be put in, left out, changed or swapped with their neighbour to make one word the other. */
function distance(a: string, b: string): number {
  const rows = [Array.from({ length: b.length + 1 }, (_, j) => j)]
  for (let i = 1; i <= a.length; i++) {
    const row = [i]
    for (let j = 1; j <= b.length; j++) {
      const best = Math.min(rows[i - 1]![j]! + 1, row[j - 1]! + 1, rows[i - 1]![j - 1]! + (a[i - 1] === b[j - 1] ? 0 : 1))
      const swapped = i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1]
      row.push(swapped ? Math.min(best, rows[i - 2]![j - 2]! + 1) : best)
    }
    rows.push(row)
  }
  return rows[a.length]![b.length]!
}

/** The word that was most likely meant by one that is not known, at most two letters away; undefined when none is near. */
export function nearestQuickWord(word: string): string | undefined {
  const plain = plainText(word)
  const near = PHRASES.filter(({ meaning, phrase }) => meaning.say !== 'filler' && Math.abs(phrase.length - plain.length) <= 2)
    .map(({ words, phrase }) => ({ words, far: distance(plain, phrase) }))
    .sort((a, b) => a.far - b.far)[0]
  return near && near.far <= Math.min(2, Math.floor(plain.length / 3)) ? near.words : undefined
}

const ROW_OF = new Map(QUICK_WORDS.map(row => [JSON.stringify(row[0]), row]))

/** The word that is written for a meaning; the meaning is given as it stands in {@link QUICK_WORDS}. Throws RangeError for one that is not there. */
export function quickWordFor(meaning: QuickMeaning, language: QuickLanguage): string {
  const row = ROW_OF.get(JSON.stringify(meaning))
  if (!row) throw new RangeError(`quick typing has no word for ${JSON.stringify(meaning)}`)
  return row[language === 'en' ? 1 : 2][0]!
}
