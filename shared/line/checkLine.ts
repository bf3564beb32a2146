import { FOOT, INCH, MILLIMETRE, type Length, type System } from '../measure/length'
import { elementsOf, type Line, type LineElement } from './line'
import { MOST_ELEMENTS } from './lineDefaults'

/** What keeps a line from being used, each to be put right first. */
export const LINE_ERROR_CODES = ['tooMany', 'sideTaken', 'tagTaken', 'idTaken', 'lengthMissing', 'gateMissing', 'gateStray', 'leavesCount', 'baysStray'] as const
/** What is likely a slip, or worth a second look; the line can be used as it is. */
export const LINE_HINT_CODES = ['baysWide', 'leavesSum', 'steep', 'heightOdd', 'settingMissing'] as const

/** Something about a line: of an element, or of the line as a whole (null). Lengths among `params` are {@link Length}. */
export type LineRemark =
  | { level: 'error', code: (typeof LINE_ERROR_CODES)[number], element: string | null, params: Record<string, string | number> }
  | { level: 'hint', code: (typeof LINE_HINT_CODES)[number], element: string | null, params: Record<string, string | number> }

/** Line posts no more than 10 ft (3050 mm) apart, centre to centre: ASTM F567-07 4.1, fact F01, each figure as it is printed. A hint: a specification may ask otherwise. */
export const GREATEST_POST_SPACING: Readonly<Record<System, Length>> = { imperial: 10 * FOOT, metric: 3050 * MILLIMETRE }
/** Leaves and their gaps make the opening; more than this off is likely a slip. COMMON PRACTICE, no source. */
const LEAVES_OFF = 6 * INCH
/** Fences beyond these are rare enough to be a slip of the unit. COMMON PRACTICE, no source. */
const [LOW, HIGH] = [2 * FOOT, 20 * FOOT]

function remarksOn(element: LineElement, system: System): LineRemark[] {
  const { kind, length, rise, bays, gate, height, faces } = element
  const found: LineRemark[] = []
  const error = (code: (typeof LINE_ERROR_CODES)[number], params = {}) => found.push({ level: 'error', code, element: element.id, params })
  const hint = (code: (typeof LINE_HINT_CODES)[number], params = {}) => found.push({ level: 'hint', code, element: element.id, params })
  if (length === 0 && kind !== 'terminalPost' && kind !== 'tieIn') error('lengthMissing')
  if (kind === 'gate' && !gate) error('gateMissing')
  if (kind !== 'gate' && gate) error('gateStray')
  if (kind !== 'run' && bays !== 1) error('baysStray')
  if (kind === 'gate' && gate) {
    const wanted = gate.form === 'doubleSwing' ? 2 : 1
    const leaves = gate.leaves.reduce((sum, leaf) => sum + leaf, 0)
    if (gate.leaves.length !== wanted) error('leavesCount', { wanted })
    else if (Math.abs(leaves - length) > LEAVES_OFF) hint('leavesSum', { leaves, opening: length })
  }
  const spacing = GREATEST_POST_SPACING[system]
  if (kind === 'run' && length > bays * spacing) hint('baysWide', { spacing: Math.round(length / bays), most: spacing, bays: Math.ceil(length / spacing) })
  if (2 * Math.abs(rise) > length && rise !== 0) hint('steep', { rise, length })
  if (height < LOW || height > HIGH) hint('heightOdd', { height })
  if (kind !== 'crossing' && faces.outer.settings.length + faces.inner.settings.length === 0) hint('settingMissing')
  return found
}

/** What is wrong with a line that its schema takes, and what looks like a slip; errors first, each in walking order. */
export function checkLine(line: Line): LineRemark[] {
  const elements = elementsOf(line)
  const found: LineRemark[] = []
  if (elements.length > MOST_ELEMENTS) found.push({ level: 'error', code: 'tooMany', element: null, params: { most: MOST_ELEMENTS } })
  const taken = { side: new Set<string>(), tag: new Set<string>(), id: new Set<string>() }
  const claim = (what: keyof typeof taken, value: string, element: string | null) => {
    if (taken[what].has(value)) found.push({ level: 'error', code: `${what}Taken`, element, params: { [what]: value } })
    taken[what].add(value)
  }
  for (const side of line.sides) claim('side', side.key, null)
  for (const element of elements) {
    claim('id', element.id, element.id)
    claim('tag', element.tag, element.id)
    found.push(...remarksOn(element, line.system))
  }
  return [...found.filter(remark => remark.level === 'error'), ...found.filter(remark => remark.level === 'hint')]
}
