import type { Check } from '#shared/checklist/check'
import type { LineElement } from '#shared/line/line'
import { canonicalJson } from '#shared/record/canonicalJson'
import { makeBasis } from '#shared/round/makeBasis'
import { readBuiltIn } from '#server/services/checklist/readBuiltIn'
import { compare } from './measure'
import type { Figure } from './measure'

/** 200 elements of every kind and setting; `stretch` of them stand in the same settings, work and bottom (1: as unlike as a line can be). */
function elements(stretch: number): LineElement[] {
  const settings = [['school'], ['playground', 'accessibleRoute'], ['pool'], ['athletic'], ['walkway'], ['driveway']] as LineElement['faces']['outer']['settings'][]
  return Array.from({ length: 200 }, (_, at): LineElement => {
    const side = Math.floor(at / stretch)
    const kind = (['run', 'terminalPost', 'run', 'gate', 'run', 'tieIn', 'crossing'] as const)[at % 7]!
    const face = (shift: number) => ({ settings: settings[(side + shift) % settings.length]!, ground: { finished: side % 5 > 0, surface: (['soft', 'solid'] as const)[(side >> shift) % 2]! } })
    return {
      id: `00000000-0000-4000-8000-${String(at).padStart(12, '0')}`,
      kind,
      tag: `R${at}`,
      work: (['new', 'altered', 'existing', 'byOthers'] as const)[side % 11 % 4]!,
      length: 1_000_000 + at,
      height: 390_144_000 + at * 127_000,
      rise: at,
      bays: 1 + at % 9,
      mesh: 16_256_000,
      topRail: side % 3 > 0,
      bottom: (['rail', 'tensionWire', 'none'] as const)[side % 3]!,
      ...(kind === 'gate' ? { gate: { form: (['singleSwing', 'doubleSwing', 'slide'] as const)[at % 3]!, leaves: at % 3 === 1 ? [400_000_000, 400_000_000] : [400_000_000], hinge: 'start' as const, opens: 'outer' as const, exit: at % 2 === 0, selfClosing: at % 4 > 0, automatic: at % 9 === 0 } } : {}),
      faces: { outer: face(0), inner: face(1) },
    }
  })
}

/** Building the basis of 200 elements under 120 checks and three local numbers, beside JSON.parse of what comes out: at most 3 times. */
export default async function bench(): Promise<Figure[]> {
  const lists = readBuiltIn()
  const known = new Set(lists.flatMap(list => list.checks.map(check => check.id)))
  const spare = lists[0]!.checks.slice(0, Math.max(0, 120 - known.size)).map((check): Check => ({ ...check, id: `${check.id}-again`, disturbs: [] }))
  const checklists = [...lists, { ...lists[0]!, id: 'own', checks: spare }]
  const provision = { kind: 'authority' as const, effect: 'add' as const, name: 'City of Example', citation: '1', confirmedBy: 'A. Clerk', confirmedOn: '2026-11-02' }
  const provisions = (['school', 'pool', null] as const).map((setting, at) => ({
    ...provision, id: `p${at}`, measurand: 'fence-height', setting,
    limit: { datum: 'ground-outside', unit: 'length' as const, low: { imperial: 487_680_000, inclusive: true }, high: null, avoid: null },
  }))
  const figures: Figure[] = []
  for (const [which, stretch] of [['an ordinary line', 20], ['a line with no two alike', 1]] as const) {
    const line = { version: 1, system: 'imperial' as const, sides: [{ key: 'A', name: 'A', elements: elements(stretch) }] }
    const text = canonicalJson(makeBasis(line, checklists, provisions))
    figures.push(await compare(`walk list of ${which}, 200 elements x ${known.size + spare.length} checks, beside JSON.parse of its ${(text.length / 1e6).toFixed(1)} MB`, 3,
      { ours: () => makeBasis(line, checklists, provisions), base: () => JSON.parse(text) as unknown }, { rounds: 25, warmUps: 15 }))
  }
  return figures
}
