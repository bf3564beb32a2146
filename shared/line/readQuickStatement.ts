import type { Length, System } from '../measure/length'
import { LengthRefused } from '../measure/lengthRefused'
import { parseLength } from '../measure/parseLength'
import { SETTINGS, type Face, type LineElement } from './line'
import type { LineDefaults } from './lineDefaults'
import { QuickProblem, type QuickItem } from './quickItems'
import { quickMeasures, type QuickMeasure } from './quickMeasures'
import type { QuickMeaning } from './quickWords'

type Gate = NonNullable<LineElement['gate']>
/** What one statement says of its element, beside what it shares with the others. */
export interface QuickStatement {
  tag?: string
  kind?: LineElement['kind']
  form?: Gate['form']
  post?: LineElement['post']
  tieIn?: LineElement['tieIn']
  crossing?: LineElement['crossing']
  length?: Length
  rise: Length
  bays?: number
  leaves?: Length[]
  name?: string
  gate: Pick<Gate, 'hinge' | 'opens' | 'exit' | 'selfClosing' | 'automatic'>
  /** The defaults, with what the statement says otherwise. */
  shared: LineDefaults
  /** The word or tag that names the kind, for errors that are found later. */
  head?: QuickItem
}

const GATE_WORDS: readonly QuickMeaning['say'][] = ['opens', 'hung', 'exit', 'selfClosing', 'automatic', 'leaves', 'form']
/** What may stand in the statement for all. */
export const SHARED_WORDS: readonly QuickMeaning['say'][] = ['all', 'high', 'mesh', 'noMesh', 'spacing', 'topRail', 'bottom', 'work', 'face', 'setting', 'noSetting', 'ground', 'surface', 'finished', 'unfinished']

/** Reads one part of a measure as a length. Throws {@link QuickProblem}, with the reason of parseLength or `zero`. */
function lengthOf(part: QuickMeasure['parts'][number], options: { unit?: 'ft' | 'm', least?: Length }): Length {
  try {
    const { amount } = parseLength(part.text, options)
    if (amount < (options.least ?? 0)) throw new QuickProblem('measureRefused', part.at, part.length, { why: 'zero' })
    return amount
  }
  catch (error) {
    if (error instanceof LengthRefused) throw new QuickProblem('measureRefused', part.at, part.length, { ...error.parameters, why: error.code })
    throw error
  }
}

/** The only part of a measure. Throws for a sum where none is asked. */
function single(measure: QuickMeasure): QuickMeasure['parts'][number] {
  const [part, second] = measure.parts
  if (second) throw new QuickProblem('measureUnasked', second.at, second.length, { measure: second.text })
  return part!
}

function countOf(part: QuickMeasure['parts'][number]): number {
  const count = /^\d{1,3}$/.test(part.text) ? Number(part.text) : 0
  if (count < 1 || count > 500) throw new QuickProblem('countRefused', part.at, part.length, { most: 500 })
  return count
}

/** Reads the faces of a statement: which face is spoken of, its settings and its ground. */
function faceReader(shared: LineDefaults, measures: ReadonlyMap<QuickItem, QuickMeasure>) {
  let faces: Face[] = ['outer', 'inner']
  // The first setting that is said of a face replaces those that stand for all.
  const own = new Set<Face>()
  const told = new Set<Face>()
  let onGround = false
  return {
    comma() { onGround = false },
    /** Words in brackets after the ground say what is to come there. True when they did. */
    coming(words: string): boolean {
      if (!onGround) return false
      for (const face of faces) {
        told.add(face)
        Object.assign(shared.faces[face].ground, { finished: false, coming: words })
      }
      return true
    },
    word(item: QuickItem & { is: 'word' }): boolean {
      const { meaning } = item
      switch (meaning.say) {
        case 'face':
          faces = meaning.face === 'both' ? ['outer', 'inner'] : [meaning.face]
          return true
        case 'noSetting':
          for (const face of faces) shared.faces[face].settings = []
          return true
        case 'setting':
          for (const face of faces) {
            const before = own.has(face) ? shared.faces[face].settings : []
            own.add(face)
            shared.faces[face].settings = SETTINGS.filter(setting => setting === meaning.setting || before.includes(setting))
          }
          return true
        case 'ground':
          onGround = true
          return true
        case 'surface':
          onGround = true
          for (const face of faces) shared.faces[face].ground.surface = meaning.surface
          return true
        case 'finished':
        case 'unfinished': {
          onGround = true
          const measure = measures.get(item)
          const comingThickness = measure && lengthOf(single(measure), { least: 1 })
          for (const face of faces) {
            const { surface, coming } = shared.faces[face].ground
            const finished = meaning.say === 'finished'
            shared.faces[face].ground = { finished, surface, ...(!finished && told.has(face) && { coming }), ...(comingThickness && { comingThickness }) }
          }
          return true
        }
        default:
          return false
      }
    },
  }
}

/**
 * Reads one statement of quick typing (at least one item) over what stands for all.
 * Throws {@link QuickProblem} for what contradicts itself, lacks its measure, or does not belong to its kind.
 */
export function readQuickStatement(items: readonly QuickItem[], defaults: LineDefaults, system: System): QuickStatement {
  const words = items.filter((item): item is QuickItem & { is: 'word' } => item.is === 'word')
  const says = (say: QuickMeaning['say'], kind?: LineElement['kind']) => words.some(({ meaning }) => meaning.say === say && (!kind || (meaning.say === 'kind' && meaning.kind === kind)))
  const [tag, second] = items.filter((item): item is QuickItem & { is: 'tag' } => item.is === 'tag')
  if (second) throw new QuickProblem('saidTwice', second.at, second.length, { word: second.text })
  // "R1 84 ft" and "G1 4 ft" say by their letter what they are.
  const byTag = tag && !says('kind') && !says('form') && !says('tieIn') && /^[RG]\d/.test(tag.text) ? tag : undefined
  const [first, last] = [items[0]!, items.at(-1)!]
  if (!byTag && !says('kind') && !says('form') && !says('tieIn') && !says('all')) throw new QuickProblem('noKind', first.at, last.at + last.length - first.at)
  const measures = quickMeasures(items, byTag)
  const unit = system === 'imperial' ? 'ft' as const : 'm' as const
  const shared: LineDefaults = structuredCopy(defaults)
  const statement: QuickStatement = { rise: 0, gate: { hinge: 'start', opens: 'outer', exit: false, selfClosing: false, automatic: false }, shared, ...(tag && { tag: tag.text }) }

  const said = new Set<string>()
  const once = (what: string, item: { at: number, length: number, text: string }) => {
    if (said.has(what)) throw new QuickProblem('saidTwice', item.at, item.length, { word: item.text })
    said.add(what)
  }
  const isOf = (kind: LineElement['kind'], item: QuickItem & { text: string }) => {
    if (statement.kind && statement.kind !== kind) throw new QuickProblem('twoKinds', item.at, item.length, { word: item.text })
    statement.kind = kind
    statement.head ??= item
  }
  /** The measure beside the kind: how long it is, or how wide its leaves are ("4 ft + 4 ft"). */
  const longAs = (item: QuickItem & { text: string }) => {
    const measure = measures.get(item)
    if (!measure) return
    once('length', item)
    const parts = measure.parts.map(part => lengthOf(part, { unit }))
    statement.length = parts.reduce((sum, part) => sum + part, 0)
    if (parts.length > 1) {
      once('leaves', item)
      statement.leaves = parts
    }
  }
  const faces = faceReader(shared, measures)

  if (byTag) {
    isOf(byTag.text.startsWith('R') ? 'run' : 'gate', byTag)
    longAs(byTag)
  }
  for (const item of items) {
    if (item.is === 'comma') faces.comma()
    if (item.is === 'own') {
      if (item.text.length > 80) throw new QuickProblem('tooLong', item.at, item.length, { most: 80 })
      if (item.text && !faces.coming(item.text)) {
        once('name', item)
        statement.name = item.text
      }
    }
    if (item.is !== 'word' || faces.word(item)) continue
    const { meaning } = item
    const measure = measures.get(item)
    switch (meaning.say) {
      case 'kind':
        // In "tie-in to fence" the fence is what it ties in to.
        if (meaning.kind === 'run' && statement.kind === 'tieIn') {
          statement.tieIn = 'fence'
          break
        }
        once('kind', item)
        isOf(meaning.kind, item)
        Object.assign(statement, meaning.form && { form: meaning.form }, meaning.post && { post: meaning.post }, meaning.crossing && { crossing: meaning.crossing })
        longAs(item)
        break
      case 'form':
        isOf('gate', item)
        once('form', item)
        statement.form = meaning.form
        longAs(item)
        break
      case 'tieIn':
        // "Existing fence" is a run that stays where nothing ties in to it.
        if (meaning.to === 'fence' && !says('kind', 'tieIn')) {
          isOf('run', item)
          once('work', item)
          shared.work = 'existing'
        }
        else {
          isOf('tieIn', item)
          statement.tieIn = meaning.to
        }
        longAs(item)
        break
      case 'high': once('height', item); shared.height = lengthOf(single(measure!), { unit, least: 1 }); break
      case 'mesh': once('mesh', item); shared.mesh = lengthOf(single(measure!), { least: 1 }); break
      case 'noMesh': once('mesh', item); delete shared.mesh; break
      case 'spacing': once('spacing', item); shared.spacing = lengthOf(single(measure!), { unit, least: 1 }); break
      case 'bays': once('bays', item); statement.bays = countOf(single(measure!)); break
      case 'leaves': once('leaves', item); statement.leaves = measure!.parts.map(part => lengthOf(part, { unit, least: 1 })); break
      case 'level': once('rise', item); break
      case 'up': once('rise', item); statement.rise = lengthOf(single(measure!), {}); break
      case 'down': once('rise', item); statement.rise = -lengthOf(single(measure!), {}) || 0; break
      case 'topRail': once('topRail', item); shared.topRail = meaning.has; break
      case 'bottom': once('bottom', item); shared.bottom = meaning.bottom; break
      case 'work': once('work', item); shared.work = meaning.work; break
      case 'opens': once('opens', item); statement.gate.opens = meaning.to; break
      case 'hung': once('hung', item); statement.gate.hinge = meaning.at; break
      case 'exit': statement.gate.exit = true; break
      case 'selfClosing': statement.gate.selfClosing = true; break
      case 'automatic': statement.gate.automatic = true; break
    }
  }
  for (const item of words) {
    const { say } = item.meaning
    const stray = statement.kind ? (statement.kind !== 'gate' && GATE_WORDS.includes(say)) || (statement.kind !== 'run' && say === 'bays') || say === 'all' : !SHARED_WORDS.includes(say) && says('all')
    if (stray) throw new QuickProblem('notForThis', item.at, item.length, { word: item.text })
  }
  return statement
}

function structuredCopy(defaults: LineDefaults): LineDefaults {
  const copy = (face: Face) => ({ settings: [...defaults.faces[face].settings], ground: { ...defaults.faces[face].ground } })
  return { ...defaults, faces: { outer: copy('outer'), inner: copy('inner') } }
}
