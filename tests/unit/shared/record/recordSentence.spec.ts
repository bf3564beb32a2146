import { describe, expect, it } from 'vitest'
import en from '../../../../templates/record/en.json'
import es from '../../../../templates/record/es.json'
import { recordSentence, recordTextsSchema } from '#shared/record/recordSentence'
import type { Line } from '#shared/line/line'
import type { CheckOutcome, DeficiencyOutcome, ElementOutcome } from '#shared/round/outcome'

const id = (n: number) => `01940000-0000-7000-8000-00000000000${n}`
const line = { sides: [{ elements: [{ id: id(1), tag: 'R1' }, { id: id(2), tag: 'G2', gate: { exit: true } }, { id: id(3), tag: 'G3', gate: { exit: false } }, { id: id(4), tag: 'G4' }] }] } as unknown as Line
const element = (n: number, more: Partial<ElementOutcome> = {}): ElementOutcome => ({ element: id(n), verdict: 'conforms', settled: false, released: true, outOfUse: false, tasks: 1, answered: 1, ...more })
const tags = (...states: DeficiencyOutcome['state'][]) => states.map(state => ({ state }) as DeficiencyOutcome)
const out = { released: false, outOfUse: true }
const said = (texts: typeof en.texts.sentence, elements: ElementOutcome[], deficiencies: DeficiencyOutcome[] = [], checks: CheckOutcome[] = []) => {
  const { lead, rest } = recordSentence(line, { elements, deficiencies, checks }, texts)
  return `${lead} ${rest}`
}

// Expected sentences are written by hand.
describe('the outcome in one sentence', () => {
  it.each([
    ['all released', [element(1), element(2)], tags('endedCorrected'), 'All 2 elements are released. Nothing stays open.', 'Los 2 elementos están liberados. Nada queda abierto.'],
    ['none', [element(1, { released: false, verdict: 'doesNotConform' })], tags('open'), 'The one element is not released yet. 1 tag stays open.', 'El único elemento no está liberado todavía. 1 etiqueta sigue abierta.'],
    ['a way out is attended, never held', [element(1), element(2, out)], tags('assigned', 'disputed'), '1 of 2 elements is released. The way out G2 is attended and 2 tags stay open.', '1 de 2 elementos está liberado. La salida G2 está vigilada y 2 etiquetas siguen abiertas.'],
    ['several', [element(1, { released: false, verdict: 'notInspected' }), element(2), element(3, out), element(4, out)], tags('open'), '1 of 4 elements is released. G3 and G4 are held out of use, 1 tag stays open and R1 was not inspected.', '1 de 4 elementos está liberado. G3 y G4 están fuera de uso, 1 etiqueta sigue abierta y R1 no se inspeccionó.'],
  ] as const)('%s', (_name, elements, deficiencies, english, spanish) => {
    expect(said(en.texts.sentence, [...elements], [...deficiencies])).toBe(english)
    expect(said(es.texts.sentence, [...elements], [...deficiencies])).toBe(spanish)
  })
  it('tells an element that nobody saw from one that was seen in part', () => {
    const elements = [element(1, { verdict: 'notInspected' }), element(2, { verdict: 'notInspected' })]
    const checks = ([[1, 'conforms'], [1, 'notInspected'], [2, 'notInspected'], [2, 'notApplicable']] as const).map(([n, verdict]) => ({ element: id(n), verdict }) as CheckOutcome)
    expect(said(en.texts.sentence, elements, [], checks)).toBe('All 2 elements are released. G2 was not inspected and R1 was not inspected in full.')
    expect(said(es.texts.sentence, elements, [], checks)).toBe('Los 2 elementos están liberados. G2 no se inspeccionó y R1 no se inspeccionó por completo.')
  })
  it('has its texts whole in both languages', () => {
    expect(recordTextsSchema.parse(en.texts)).toBeTruthy()
    expect(recordTextsSchema.parse(es.texts)).toBeTruthy()
  })
})
