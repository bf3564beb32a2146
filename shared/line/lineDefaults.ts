import { FOOT, MILLIMETRE, type Length, type System } from '../measure/length'
import type { FaceState, LineElement } from './line'

/** What stands for every element of a line that does not say otherwise. */
export interface LineDefaults {
  /** Null until somebody says it: a height is never guessed. */
  height: Length | null
  mesh?: Length
  /** Greatest distance between line posts, from which bays are counted. */
  spacing: Length
  topRail: boolean
  bottom: LineElement['bottom']
  work: LineElement['work']
  faces: LineElement['faces']
}

/** The greatest number of elements that a typed or imported line may have. */
export const MOST_ELEMENTS = 400

/**
 * What a line starts from before anything is said: line posts 10 ft apart (ASTM F567-07 4.1, fact F01: no more than 10 ft; 3 m in metric is a round figure under it),
 * top rail, bottom wire, new work, no settings, ground finished and soft (the stricter of the two for gaps below).
 */
export function lineDefaults(system: System): LineDefaults {
  const face = (): FaceState => ({ settings: [], ground: { finished: true, surface: 'soft' } })
  return { height: null, spacing: system === 'imperial' ? 10 * FOOT : 3000 * MILLIMETRE, topRail: true, bottom: 'tensionWire', work: 'new', faces: { outer: face(), inner: face() } }
}

/** How many bays a run gets when nobody counted them; 1 to 500. */
export function usualBays(length: Length, spacing: Length): number {
  return Math.min(500, Math.max(1, Math.ceil(length / spacing)))
}

/** Two leaves that make an opening, of one width to the last unit; or one. */
export function usualLeaves(opening: Length, form: NonNullable<LineElement['gate']>['form']): Length[] {
  return form === 'doubleSwing' ? [Math.ceil(opening / 2), Math.floor(opening / 2)] : [opening]
}

const LETTER: Record<LineElement['kind'], string> = { run: 'R', gate: 'G', terminalPost: 'P', tieIn: 'T', crossing: 'X' }

/** The next free tag of a kind: its letter (R, G, P, T, X) and the number after the greatest that is taken with it; the first gap once 999 is reached. Undefined when all 999 are taken. */
export function freeTag(kind: LineElement['kind'], taken: ReadonlySet<string>): string | undefined {
  const letter = LETTER[kind]
  let greatest = 0
  for (const tag of taken) {
    const found = new RegExp(`^${letter}(\\d{1,3})$`).exec(tag)
    if (found) greatest = Math.max(greatest, Number(found[1]))
  }
  if (greatest < 999) return `${letter}${greatest + 1}`
  for (let number = 1; number <= 999; number++) if (!taken.has(`${letter}${number}`)) return `${letter}${number}`
  return undefined
}
