import { Environment } from '@marcbachmann/cel-js'
import type { ASTNode } from '@marcbachmann/cel-js'
import { ElementFacts, FaceFacts, FACTS, GateFacts, GroundFacts, JobFacts } from './facts'
import type { Fact, FactPath, Facts } from './facts'

/** A condition that cannot be used, with a sentence that says what to change. */
export class ConditionError extends Error {
  constructor(readonly code: 'syntax' | 'unknown-fact' | 'type' | 'not-allowed' | 'unknown-value' | 'too-large', message: string) {
    super(message)
    this.name = 'ConditionError'
  }
}

/** A condition as a tree of what we allow; everything that reads a condition (the sentence, the check of values) reads this. */
export type ConditionTree =
  | { op: 'and' | 'or', of: [ConditionTree, ConditionTree] }
  | { op: 'not', of: ConditionTree }
  | { op: 'is', fact: FactPath }
  | { op: '==' | '!=' | '<' | '<=' | '>' | '>=', fact: FactPath, to: string | number | boolean }
  | { op: 'oneOf', fact: FactPath, of: (string | number)[] }
  | { op: 'contains', fact: FactPath, value: string }

/** A condition that was checked: its tree, and whether it holds for given facts. */
export interface Condition {
  readonly text: string
  readonly tree: ConditionTree
  holds(facts: Facts): boolean
}

/** The facts that a condition looks at. */
export function factsNamed(tree: ConditionTree): FactPath[] {
  if ('fact' in tree) return [tree.fact]
  return tree.op === 'not' ? factsNamed(tree.of) : tree.of.flatMap(factsNamed)
}

const LARGEST = { nodes: 60, depth: 12, list: 12 }

/** The facts directly under a variable, with their CEL types; `face.ground.surface` is under `face.ground`. */
const fieldsOf = (prefix: string) => Object.fromEntries(Object.entries(FACTS)
  .filter(([path]) => path.startsWith(`${prefix}.`) && !path.slice(prefix.length + 1).includes('.'))
  .map(([path, fact]) => [path.slice(prefix.length + 1), fact.type]))

const environment = new Environment({
  unlistedVariablesAreDyn: false,
  limits: { maxAstNodes: LARGEST.nodes, maxDepth: LARGEST.depth, maxListElements: LARGEST.list, maxMapEntries: 0, maxCallArguments: 0 },
})
  .registerType('GroundFacts', { ctor: GroundFacts, fields: fieldsOf('face.ground') })
  .registerType('FaceFacts', { ctor: FaceFacts, fields: { ...fieldsOf('face'), ground: 'GroundFacts' } })
  .registerType('ElementFacts', { ctor: ElementFacts, fields: fieldsOf('element') })
  .registerType('GateFacts', { ctor: GateFacts, fields: fieldsOf('gate') })
  .registerType('JobFacts', { ctor: JobFacts, fields: fieldsOf('job') })
  .registerVariable('element', 'ElementFacts')
  .registerVariable('gate', 'GateFacts')
  .registerVariable('face', 'FaceFacts')
  .registerVariable('job', 'JobFacts')

function notAllowed(): never {
  throw new ConditionError('not-allowed', 'A condition compares a fact with a value (== != < <= > >=), looks in a list (in), and joins with && || and !. Nothing else.')
}

/** The path that a chain of dots names, or null when the node is something else. */
function pathOf(node: ASTNode): FactPath | null {
  const name = (part: ASTNode): string | null => {
    if (part.op === 'id') return part.args
    if (part.op !== '.') return null
    const before = name(part.args[0])
    return before === null ? null : `${before}.${part.args[1]}`
  }
  const path = name(node)
  if (path === null) return null
  if (!(path in FACTS)) throw new ConditionError('unknown-fact', `There is no fact "${path}" that stands alone. Facts: ${Object.keys(FACTS).join(', ')}.`)
  return path as FactPath
}

/** The plain value of a literal; a whole number beyond what a double holds is refused by the size cap long before. */
function literalOf(node: ASTNode): string | number | boolean {
  if (node.op !== 'value') return notAllowed()
  const value: unknown = node.args
  if (typeof value === 'bigint') return Number(value)
  return typeof value === 'string' || typeof value === 'number' || typeof value === 'boolean' ? value : notAllowed()
}

function known(path: FactPath, value: string | number | boolean): void {
  const values = (FACTS[path] as Fact).values
  if (values && !values.includes(String(value)))
    throw new ConditionError('unknown-value', `"${path}" is never "${String(value)}". It can be: ${values.join(', ')}.`)
}

const FLIPPED = { '==': '==', '!=': '!=', '<': '>', '<=': '>=', '>': '<', '>=': '<=' } as const

function treeOf(node: ASTNode): ConditionTree {
  switch (node.op) {
    case '&&': return { op: 'and', of: [treeOf(node.args[0]), treeOf(node.args[1])] }
    case '||': return { op: 'or', of: [treeOf(node.args[0]), treeOf(node.args[1])] }
    case '!_': return { op: 'not', of: treeOf(node.args) }
    case '==': case '!=': case '<': case '<=': case '>': case '>=': {
      const [left, right] = node.args
      const turned = left.op === 'value'
      const fact = pathOf(turned ? right : left)
      if (fact === null) return notAllowed()
      const to = literalOf(turned ? left : right)
      known(fact, to)
      return { op: turned ? FLIPPED[node.op] : node.op, fact, to }
    }
    case 'in': {
      const [left, right] = node.args
      if (right.op === 'list') {
        const fact = pathOf(left)
        if (fact === null) return notAllowed()
        const values = right.args.map(literalOf)
        values.forEach(value => known(fact, value))
        return { op: 'oneOf', fact, of: values.map(value => typeof value === 'boolean' ? notAllowed() : value) }
      }
      const fact = pathOf(right)
      const value = literalOf(left)
      if (fact === null || typeof value !== 'string') return notAllowed()
      known(fact, value)
      return { op: 'contains', fact, value }
    }
    case 'id': case '.': {
      const fact = pathOf(node)
      return fact !== null && FACTS[fact].type === 'bool' ? { op: 'is', fact } : notAllowed()
    }
    default: return notAllowed()
  }
}

const answers = new WeakMap<object, Map<string, boolean>>()
const compiled = new Map<string, Condition>()

/**
 * Checks a condition and makes it ready: syntax, facts, types, allowed syntax, known values, size (contracts.md 3). The same text is compiled once.
 *
 * @throws {ConditionError} with a code and a sentence that says what to change
 * @example compileCondition('element.kind == "gate" && "pool" in face.settings')
 */
export function compileCondition(text: string): Condition {
  const earlier = compiled.get(text)
  if (earlier) return earlier
  const said = (error: unknown) => (error instanceof Error ? error.message : String(error)).split('\n')[0] ?? ''
  let parsed: ReturnType<typeof environment.parse>
  try {
    parsed = environment.parse(text)
  }
  catch (error) {
    if (!/^Exceeded/.test(said(error))) throw new ConditionError('syntax', `The condition cannot be read: ${said(error)}.`)
    if (/maxCallArguments|maxMapEntries/.test(said(error))) return notAllowed()
    throw new ConditionError('too-large', `The condition is too large (${LARGEST.nodes} parts, ${LARGEST.depth} deep, ${LARGEST.list} in a list): split the check in two.`)
  }
  const checked = parsed.check()
  if (!checked.valid) {
    const why = said(checked.error)
    throw new ConditionError(/Unknown variable|No such key/i.test(why) ? 'unknown-fact' : 'type', `${why}. Facts: ${Object.keys(FACTS).join(', ')}.`)
  }
  const tree = treeOf(parsed.ast)
  const ofFace = factsNamed(tree).some(path => path.startsWith('face.'))
  const condition: Condition = {
    text,
    tree,
    holds(facts) {
      // Many checks share a condition: it is worked out once for each set of facts, and once for both faces where it asks about neither.
      const of = ofFace ? facts : facts.element
      const known = answers.get(of) ?? new Map<string, boolean>()
      answers.set(of, known)
      const earlier = known.get(text)
      if (earlier !== undefined) return earlier
      const answer = parsed(facts as unknown as Record<string, unknown>) === true
      known.set(text, answer)
      return answer
    },
  }
  compiled.set(text, condition)
  return condition
}
