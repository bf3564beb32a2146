import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { compileCondition, ConditionError } from '#shared/checklist/condition'
import type { ConditionTree } from '#shared/checklist/condition'
import { describeCondition } from '#shared/checklist/describeCondition'
import { factsOf, FACTS } from '#shared/checklist/facts'
import type { Fact, FactPath, Facts } from '#shared/checklist/facts'
import type { LineElement } from '#shared/line/line'
import { aGate, aRun } from '../../../fixtures/subjects/elements'

const codeOf = (text: string): string => {
  try {
    compileCondition(text)
    return 'accepted'
  }
  catch (error) {
    if (error instanceof ConditionError) return error.code
    throw error
  }
}
const holds = (text: string, element: LineElement, face: 'outer' | 'inner' = 'outer') => compileCondition(text).holds(factsOf(element, 'imperial')[face])

describe('compileCondition', () => {
  it.each([
    ['element.kind == "gate"', 'accepted'],
    ['elment.kind == "gate"', 'unknown-fact'],
    ['element.knd == "gate"', 'unknown-fact'],
    ['face.ground.finshed', 'unknown-fact'],
    ['element.kind == "gat"', 'unknown-value'],
    ['"pol" in face.settings', 'unknown-value'],
    ['element.work in ["new", "old"]', 'unknown-value'],
    ['element.kind == 3', 'type'],
    ['"gate" in element.kind', 'type'],
    ['element.kind', 'not-allowed'],
    ['true', 'not-allowed'],
    ['element.kind + "x" == "gatex"', 'not-allowed'],
    ['element.kind.startsWith("g")', 'not-allowed'],
    ['size(face.settings) == 1', 'not-allowed'],
    ['gate.exit ? gate.automatic : gate.selfClosing', 'not-allowed'],
    ['element.kind == gate.form', 'not-allowed'],
    ['face.settings == ["pool"]', 'not-allowed'],
    ['face.settings[0] == "pool"', 'not-allowed'],
    ['element.kind ==', 'syntax'],
    ['', 'syntax'],
    [Array.from({ length: 40 }, () => 'gate.exit').join(' && '), 'too-large'],
    [`element.work in [${Array.from({ length: 13 }, () => '"new"').join(', ')}]`, 'too-large'],
  ])('%s is %s', (text, code) => {
    expect(codeOf(text)).toBe(code)
  })
  it('compares lengths in the unit that the condition names, exact at the figure', () => {
    // 72 in = 585,216,000 units; 1830 mm = 585,600,000 units
    const tall = (height: number) => ({ ...aRun(), height })
    expect(holds('element.heightInches < 72', tall(585_216_000))).toBe(false)
    expect(holds('element.heightInches < 72', tall(585_215_999))).toBe(true)
    expect(holds('element.heightMillimetres <= 1830', tall(585_600_000))).toBe(true)
    expect(holds('element.heightMillimetres <= 1830', tall(585_600_001))).toBe(false)
  })
  it('reads what an element does not have as none, false or 0', () => {
    expect(holds('gate.form == "none" && !gate.exit && gate.leaves == 0 && element.post == "none"', aRun())).toBe(true)
  })
  it('tells the faces apart and the element as a whole', () => {
    const run = aRun({ outer: ['walkway'], inner: ['pool'] })
    expect(holds('"pool" in face.settings', run, 'outer')).toBe(false)
    expect(holds('"pool" in face.settings', run, 'inner')).toBe(true)
    expect(holds('"pool" in element.settings', run, 'outer')).toBe(true)
  })
})

/** Random trees, written out as CEL, against a small interpreter of our own (OWN check: another way to the same answer). */
const paths = Object.keys(FACTS) as FactPath[]
const ofType = (type: Fact['type']) => paths.filter(path => FACTS[path].type === type)
const leaf: fc.Arbitrary<ConditionTree> = fc.oneof(
  fc.constantFrom(...ofType('bool')).map((fact): ConditionTree => ({ op: 'is', fact })),
  fc.constantFrom(...ofType('string')).chain(fact => fc.record({ op: fc.constantFrom('==' as const, '!=' as const), fact: fc.constant(fact), to: fc.constantFrom(...(FACTS[fact] as Fact).values!) })),
  fc.constantFrom(...ofType('string')).chain(fact => fc.record({ op: fc.constant('oneOf' as const), fact: fc.constant(fact), of: fc.uniqueArray(fc.constantFrom(...(FACTS[fact] as Fact).values!), { minLength: 1, maxLength: 3 }) })),
  fc.record({ op: fc.constant('contains' as const), fact: fc.constantFrom(...ofType('list<string>')), value: fc.constantFrom('pool', 'school', 'walkway') }),
  fc.record({ op: fc.constantFrom('<' as const, '<=' as const, '>' as const, '>=' as const), fact: fc.constantFrom(...ofType('double'), ...ofType('int')), to: fc.integer({ min: 0, max: 90 }) }),
)
const tree = fc.letrec<{ node: ConditionTree }>(tie => ({
  node: fc.oneof({ maxDepth: 2, depthIdentifier: 'tree' }, leaf,
    fc.record({ op: fc.constantFrom('and' as const, 'or' as const), of: fc.tuple(tie('node'), tie('node')) }),
    fc.record({ op: fc.constant('not' as const), of: tie('node') })),
})).node

function textOf(node: ConditionTree): string {
  switch (node.op) {
    case 'and': return `(${textOf(node.of[0])} && ${textOf(node.of[1])})`
    case 'or': return `(${textOf(node.of[0])} || ${textOf(node.of[1])})`
    case 'not': return `!(${textOf(node.of)})`
    case 'is': return node.fact
    case 'oneOf': return `${node.fact} in [${node.of.map(value => JSON.stringify(value)).join(', ')}]`
    case 'contains': return `"${node.value}" in ${node.fact}`
    default: return `${node.fact} ${node.op} ${JSON.stringify(node.to)}`
  }
}

function judge(node: ConditionTree, facts: Facts): boolean {
  if (!('fact' in node)) {
    if (node.op === 'not') return !judge(node.of, facts)
    return node.op === 'and' ? judge(node.of[0], facts) && judge(node.of[1], facts) : judge(node.of[0], facts) || judge(node.of[1], facts)
  }
  const value = node.fact.split('.').reduce<unknown>((at, key) => (at as Record<string, unknown>)[key], facts)
  const plain = typeof value === 'bigint' ? Number(value) : value
  switch (node.op) {
    case 'is': return plain === true
    case 'oneOf': return node.of.includes(plain as string)
    case 'contains': return (plain as string[]).includes(node.value)
    case '==': return plain === node.to
    case '!=': return plain !== node.to
    case '<': return (plain as number) < (node.to as number)
    case '<=': return (plain as number) <= (node.to as number)
    case '>': return (plain as number) > (node.to as number)
    case '>=': return (plain as number) >= (node.to as number)
  }
}

describe('any allowed condition', () => {
  const elements = [aRun(), aRun({ outer: ['pool'], inner: ['school'] }), aGate(), aGate({ exit: true, form: 'doubleSwing' }), aGate({ automatic: true, form: 'slide' })]

  it('answers as a plain reading of its tree does', () => {
    fc.assert(fc.property(tree, fc.constantFrom(...elements), fc.constantFrom('outer' as const, 'inner' as const), (node, element, face) => {
      const facts = factsOf(element, 'imperial')[face]
      expect(compileCondition(textOf(node)).holds(facts)).toBe(judge(node, facts))
    }), { numRuns: 400 })
  }, 30_000)
  it('has a sentence in both languages, and turned round another one', () => {
    fc.assert(fc.property(tree, (node) => {
      for (const language of ['en', 'es'] as const) {
        const said = describeCondition(compileCondition(textOf(node)).tree, language)
        expect(said).toMatch(/^\S.+\S$/)
        expect(said).not.toMatch(/undefined|==|&&|\|\||[a-z][A-Z]|"/)
        expect(describeCondition({ op: 'not', of: node }, language)).not.toBe(said)
      }
    }), { numRuns: 400 })
  }, 30_000)
})

describe('describeCondition', () => {
  it.each([
    ['gate.exit', 'the gate is a way out', 'la puerta es salida'],
    ['!gate.automatic && "pool" in face.settings', 'the gate is not automatic, and the settings of this face include pool', 'la puerta no es automática y los entornos de esta cara incluyen alberca'],
    ['element.heightInches < 72', 'the height in inches is under 72', 'la altura en pulgadas es menor que 72'],
    ['72 > element.heightInches', 'the height in inches is under 72', 'la altura en pulgadas es menor que 72'],
    ['!(element.heightInches < 72)', 'the height in inches is at least 72', 'la altura en pulgadas es al menos 72'],
    ['element.work in ["new", "altered"]', 'the work is new or altered', 'la obra es nueva o modificada'],
    // De Morgan, worked by hand: not (way out and automatic) = no way out or not automatic
    ['!(gate.exit && gate.automatic)', 'the gate is no way out or the gate is not automatic', 'la puerta no es salida o la puerta no es automática'],
    ['gate.exit && (gate.automatic || gate.selfClosing)', 'the gate is a way out, and (the gate is automatic or the gate closes by itself)', 'la puerta es salida y (la puerta es automática o la puerta cierra sola)'],
  ])('says %s', (text, en, es) => {
    const { tree: node } = compileCondition(text)
    expect([describeCondition(node, 'en'), describeCondition(node, 'es')]).toEqual([en, es])
  })
})
