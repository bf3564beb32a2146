import { CROSSING_OF, ELEMENT_KINDS, FACES, GATE_FORMS, POST_FORMS, SETTINGS, TIE_IN_TO, WORKS } from '../line/line'
import type { Face, LineElement } from '../line/line'
import { INCH, MILLIMETRE, SYSTEMS } from '../measure/length'
import type { System } from '../measure/length'

/** What a condition may ask about; `values` are the only words that a text fact takes, so that a misspelt value is told like a misspelt fact. */
export interface Fact {
  type: 'string' | 'bool' | 'int' | 'double' | 'list<string>'
  values?: readonly string[]
}

const none = 'none'
const surfaces = ['soft', 'solid'] as const
const bottoms = ['rail', 'tensionWire', none] as const

/**
 * The facts of job, element and face that a condition may name, by path. Heights, meshes and widths are doubles in inches and in millimetres, so that
 * a condition is written in the unit of its source; division by an exact inch is monotone, so a comparison with a whole or decimal figure never tips.
 * What an element does not have reads as `none`, false or 0.
 */
export const FACTS = {
  'element.kind': { type: 'string', values: ELEMENT_KINDS },
  'element.work': { type: 'string', values: WORKS },
  'element.heightInches': { type: 'double' },
  'element.heightMillimetres': { type: 'double' },
  'element.bays': { type: 'int' },
  'element.meshInches': { type: 'double' },
  'element.meshMillimetres': { type: 'double' },
  'element.topRail': { type: 'bool' },
  'element.bottom': { type: 'string', values: bottoms },
  'element.post': { type: 'string', values: [...POST_FORMS, none] },
  'element.tieIn': { type: 'string', values: [...TIE_IN_TO, none] },
  'element.crossing': { type: 'string', values: [...CROSSING_OF, none] },
  'element.settings': { type: 'list<string>', values: SETTINGS },
  'gate.form': { type: 'string', values: [...GATE_FORMS, none] },
  'gate.exit': { type: 'bool' },
  'gate.selfClosing': { type: 'bool' },
  'gate.automatic': { type: 'bool' },
  'gate.opens': { type: 'string', values: [...FACES, none] },
  'gate.leaves': { type: 'int' },
  'gate.leafInches': { type: 'double' },
  'gate.leafMillimetres': { type: 'double' },
  'face.name': { type: 'string', values: FACES },
  'face.settings': { type: 'list<string>', values: SETTINGS },
  'face.ground.surface': { type: 'string', values: surfaces },
  'face.ground.finished': { type: 'bool' },
  'job.system': { type: 'string', values: SYSTEMS },
} as const satisfies Record<string, Fact>
export type FactPath = keyof typeof FACTS

/** Classes, because the evaluator checks a value's class against the declared type without converting it each time. */
export class GroundFacts { constructor(readonly surface: string, readonly finished: boolean) {} }
export class FaceFacts { constructor(readonly name: string, readonly settings: readonly string[], readonly ground: GroundFacts) {} }
export class JobFacts { constructor(readonly system: string) {} }
export class GateFacts {
  readonly form: string
  readonly exit: boolean
  readonly selfClosing: boolean
  readonly automatic: boolean
  readonly opens: string
  readonly leaves: bigint
  readonly leafInches: number
  readonly leafMillimetres: number
  constructor(gate: LineElement['gate']) {
    const widest = Math.max(0, ...gate?.leaves ?? [])
    this.form = gate?.form ?? none
    this.exit = gate?.exit ?? false
    this.selfClosing = gate?.selfClosing ?? false
    this.automatic = gate?.automatic ?? false
    this.opens = gate?.opens ?? none
    this.leaves = BigInt(gate?.leaves.length ?? 0)
    this.leafInches = widest / INCH
    this.leafMillimetres = widest / MILLIMETRE
  }
}
export class ElementFacts {
  readonly kind: string
  readonly work: string
  readonly heightInches: number
  readonly heightMillimetres: number
  readonly bays: bigint
  readonly meshInches: number
  readonly meshMillimetres: number
  readonly topRail: boolean
  readonly bottom: string
  readonly post: string
  readonly tieIn: string
  readonly crossing: string
  readonly settings: readonly string[]
  constructor(element: LineElement) {
    this.kind = element.kind
    this.work = element.work
    this.heightInches = element.height / INCH
    this.heightMillimetres = element.height / MILLIMETRE
    this.bays = BigInt(element.bays)
    this.meshInches = (element.mesh ?? 0) / INCH
    this.meshMillimetres = (element.mesh ?? 0) / MILLIMETRE
    this.topRail = element.topRail
    this.bottom = element.bottom
    this.post = element.post ?? none
    this.tieIn = element.tieIn ?? none
    this.crossing = element.crossing ?? none
    this.settings = [...new Set([...element.faces.outer.settings, ...element.faces.inner.settings])]
  }
}

/** The facts as one face of one element has them. */
export interface Facts { element: ElementFacts, gate: GateFacts, face: FaceFacts, job: JobFacts }

/** The facts of an element, once for each face, in the order of {@link FACES}. */
export function factsOf(element: LineElement, system: System): Record<Face, Facts> {
  const of = new ElementFacts(element)
  const gate = new GateFacts(element.gate)
  const job = new JobFacts(system)
  const at = (face: Face): Facts => {
    const { settings, ground } = element.faces[face]
    return { element: of, gate, job, face: new FaceFacts(face, settings, new GroundFacts(ground.surface, ground.finished)) }
  }
  return { outer: at('outer'), inner: at('inner') }
}
