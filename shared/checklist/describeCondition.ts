import type { ConditionTree } from './condition'
import type { FactPath } from './facts'

export type Language = 'en' | 'es'
type Words = Record<Language, string>

const both = (en: string, es: string): Words => ({ en, es })

/** How a sentence names a fact; a yes-or-no fact is a whole clause with its opposite. */
const FACT_WORDS: Record<FactPath, Words | { yes: Words, no: Words }> = {
  'element.kind': both('the element', 'el elemento'),
  'element.work': both('the work', 'la obra'),
  'element.heightInches': both('the height in inches', 'la altura en pulgadas'),
  'element.heightMillimetres': both('the height in millimetres', 'la altura en milímetros'),
  'element.bays': both('the number of bays', 'el número de claros'),
  'element.meshInches': both('the mesh in inches', 'la malla en pulgadas'),
  'element.meshMillimetres': both('the mesh in millimetres', 'la malla en milímetros'),
  'element.topRail': { yes: both('there is a top rail', 'hay travesaño superior'), no: both('there is no top rail', 'no hay travesaño superior') },
  'element.bottom': both('the bottom', 'la parte de abajo'),
  'element.post': both('the post', 'el poste'),
  'element.tieIn': both('what it ties in to', 'a lo que se une'),
  'element.crossing': both('what it crosses', 'lo que cruza'),
  'element.settings': both('the settings of either face', 'los entornos de cualquiera de las caras'),
  'gate.form': both('the gate', 'la puerta'),
  'gate.exit': { yes: both('the gate is a way out', 'la puerta es salida'), no: both('the gate is no way out', 'la puerta no es salida') },
  'gate.selfClosing': { yes: both('the gate closes by itself', 'la puerta cierra sola'), no: both('the gate does not close by itself', 'la puerta no cierra sola') },
  'gate.automatic': { yes: both('the gate is automatic', 'la puerta es automática'), no: both('the gate is not automatic', 'la puerta no es automática') },
  'gate.opens': both('the face that the gate opens to', 'la cara hacia donde abre la puerta'),
  'gate.leaves': both('the number of leaves', 'el número de hojas'),
  'gate.leafInches': both('the widest leaf in inches', 'la hoja más ancha en pulgadas'),
  'gate.leafMillimetres': both('the widest leaf in millimetres', 'la hoja más ancha en milímetros'),
  'face.name': both('the face', 'la cara'),
  'face.settings': both('the settings of this face', 'los entornos de esta cara'),
  'face.ground.surface': both('the ground there', 'el suelo de ahí'),
  'face.ground.finished': { yes: both('the ground there is finished', 'el suelo de ahí está terminado'), no: both('the ground there is not finished', 'el suelo de ahí no está terminado') },
  'job.system': both('the job', 'el trabajo'),
}

/** How a sentence names a value; one table, since a word means one thing wherever it stands. `none` is said by the fact that it answers. */
const VALUE_WORDS: Record<string, Words> = {
  run: both('a run', 'un tramo'),
  gate: both('a gate', 'una puerta'),
  terminalPost: both('a terminal post', 'un poste terminal'),
  tieIn: both('a tie-in', 'una unión'),
  crossing: both('a crossing', 'un cruce'),
  new: both('new', 'nueva'),
  altered: both('altered', 'modificada'),
  existing: both('existing', 'existente'),
  byOthers: both('by others', 'de otros'),
  singleSwing: both('a single swing gate', 'de una hoja abatible'),
  doubleSwing: both('a double swing gate', 'de dos hojas abatibles'),
  slide: both('a slide gate', 'corrediza'),
  cantilever: both('a cantilever gate', 'corrediza en voladizo'),
  end: both('an end post', 'de extremo'),
  corner: both('a corner post', 'de esquina'),
  pull: both('a pull post', 'de jalón'),
  building: both('a building', 'un edificio'),
  wall: both('a wall', 'un muro'),
  fence: both('a fence', 'una cerca'),
  drain: both('a drain', 'un desagüe'),
  swale: both('a swale', 'una cuneta'),
  curb: both('a curb', 'un bordillo'),
  rail: both('a rail', 'un travesaño'),
  tensionWire: both('a tension wire', 'un alambre tensor'),
  none: both('none', 'ninguno'),
  soft: both('soft', 'blando'),
  solid: both('solid', 'firme'),
  outer: both('the outer one', 'la exterior'),
  inner: both('the inner one', 'la interior'),
  imperial: both('in feet and inches', 'en pies y pulgadas'),
  metric: both('metric', 'métrico'),
  school: both('school', 'escuela'),
  playground: both('playground', 'área de juego'),
  pool: both('pool', 'alberca'),
  athletic: both('athletic field or court', 'cancha o campo deportivo'),
  walkway: both('walkway', 'andador'),
  accessibleRoute: both('accessible route', 'ruta accesible'),
  egress: both('egress route', 'ruta de salida'),
  driveway: both('driveway', 'entrada de vehículos'),
}

const JOIN = { and: both('and', 'y'), or: both('or', 'o') }
const COMPARE: Record<'==' | '!=' | '<' | '<=' | '>' | '>=', Words> = {
  '==': both('is', 'es'),
  '!=': both('is not', 'no es'),
  '<': both('is under', 'es menor que'),
  '<=': both('is at most', 'es a lo más'),
  '>': both('is over', 'es mayor que'),
  '>=': both('is at least', 'es al menos'),
}

function list(words: string[], language: Language): string {
  const last = words.at(-1) ?? ''
  return words.length < 2 ? last : `${words.slice(0, -1).join(', ')} ${JOIN.or[language]} ${last}`
}

/** The sentence of a part; `no` turns it round, so that "not" is said where a person would say it. */
function clause(tree: ConditionTree, language: Language, no: boolean): string {
  const value = (one: string | number | boolean) => VALUE_WORDS[String(one)]?.[language] ?? String(one)
  switch (tree.op) {
    case 'not': return clause(tree.of, language, !no)
    case 'and': case 'or': {
      // De Morgan: "not (a and b)" is said as "not a or not b"
      const joined = no ? (tree.op === 'and' ? 'or' : 'and') : tree.op
      return tree.of.map((part) => {
        const said = clause(part, language, no)
        const inner = part.op === 'not' ? part.of : part
        return (inner.op === 'and' || inner.op === 'or') && inner.op !== tree.op ? `(${said})` : said
      }).join(joined === 'and' && language === 'en' ? ', and ' : ` ${JOIN[joined][language]} `)
    }
    default: {
      const words = FACT_WORDS[tree.fact]
      if ('yes' in words) {
        const yes = tree.op === 'is' || (tree.op === '==' && tree.to === true) || (tree.op === '!=' && tree.to === false)
        return words[yes === no ? 'no' : 'yes'][language]
      }
      const name = words[language]
      if (tree.op === 'oneOf') return `${name} ${COMPARE[no ? '!=' : '=='][language]} ${list(tree.of.map(value), language)}`
      if (tree.op === 'contains') {
        if (language === 'es') return `${name} ${no ? 'no incluyen' : 'incluyen'} ${value(tree.value)}`
        return `${name} ${no ? 'do not include' : 'include'} ${value(tree.value)}`
      }
      if (tree.op === 'is') return name
      const turned = { '==': '!=', '!=': '==', '<': '>=', '<=': '>', '>': '<=', '>=': '<' } as const
      return `${name} ${COMPARE[no ? turned[tree.op] : tree.op][language]} ${value(tree.to)}`
    }
  }
}

/**
 * A condition as a clause that follows "where", drawn from its tree and nothing else, e.g. "the gate is not automatic and the settings of this face
 * include pool". Every fact and value has words in both languages.
 */
export function describeCondition(tree: ConditionTree, language: Language): string {
  return clause(tree, language, false)
}
