import type { LiveName, LiveParameters } from '#shared/drawing/live/drawLive'
import type { LiveInput, LiveLimit } from '#shared/drawing/live/live'
import type { ReadingValue } from '#shared/entry/entry'
import { DEGREE } from '#shared/gate/leaf'
import type { Limit } from '#shared/limit/limit'
import type { LineElement } from '#shared/line/line'
import { INCH, type Length, type System } from '#shared/measure/length'
import type { WalkCheck } from '#shared/round/walkPlan'

/** A live drawing with all that it takes but its words. */
export type WalkDrawing = { [Name in LiveName]: { name: Name, parameters: Omit<LiveParameters[Name], 'say'> } }[LiveName]

export interface DrawnReading {
  one: WalkCheck
  element: LineElement
  limits: Readonly<Record<string, Limit>>
  /** What is being read; null before anything is. */
  value: ReadingValue | null
  /** The system of the tape. */
  system: System
  /** Limits on the same thing from another datum, whose height over ours is known. */
  beside?: readonly LiveLimit[]
  /** Gap under the leaf as it was read; null where nobody did. */
  gapBelow?: Length | null
  language: 'en' | 'es'
}

/** The live drawing of a check while it is read; null where it has none. A limit that the drawing cannot place stays out of it, and stands in words. */
export function drawingOf(reading: DrawnReading): WalkDrawing | null {
  const { one: { check, limits: keys }, element, limits, value, system, beside = [], gapBelow = null, language } = reading
  const size = 'field' as const
  if (check.drawing === 'tieEnd') return { name: 'tieEnd', parameters: { size, ends: endsOf(value) } }
  if (check.method === 'trial') {
    const tries = value?.method === 'trial' ? value.tries : []
    return check.drawing === 'closing' && check.tries
      ? { name: 'closing', parameters: { size, trials: check.tries.map(each => ({ label: each.label[language], angle: openingOf(each.from), good: tries.find(one => one.from === each.from)?.good ?? null, of: tries.find(one => one.from === each.from)?.of ?? each.times })) } }
      : null
  }
  if (check.unit !== 'length' || check.method !== 'measure') return null
  const input: Omit<LiveInput, 'say'> = {
    size, system, reading: value?.method === 'measure' ? value.amount : null,
    limits: [...keys.flatMap(key => limits[key] && limits[key].datum === check.datum ? [{ limit: limits[key] }] : []), ...beside],
  }
  switch (check.drawing) {
    case 'latchHeight': return { name: 'latchHeight', parameters: { ...input, from: check.datum === 'bottom-of-leaf' ? 'leaf' : check.datum === 'top-of-leaf' ? 'top' : 'ground', leafHeight: element.height, gapBelow: gapBelow ?? 2 * INCH } }
    case 'swingClearance': return { name: 'gapBelow', parameters: { ...input, edge: 'leaf' } }
    case 'gapBelow': return { name: 'gapBelow', parameters: { ...input, edge: element.gate ? 'leaf' : element.bottom === 'tensionWire' ? 'wire' : element.bottom, ...slopeOf(element), ...comingOf(element) } }
    case 'opening': return { name: 'opening', parameters: { ...input, shape: check.datum === 'between-wires' ? 'mesh' : 'bars', ...(value?.method === 'measure' && value.dimension && { dimension: value.dimension }) } }
    case 'height': return { name: 'height', parameters: { ...input, of: check.measurand?.includes('barbed') ? 'barbedWire' : 'fence' } }
    case 'clearWidth': return { name: 'clearWidth', parameters: input }
    case 'spacing': {
      const between = spacingOf(check.measurand ?? '', check.datum ?? '')
      return between ? { name: 'spacing', parameters: { ...input, between } } : null
    }
    default: return null
  }
}

function endsOf(value: ReadingValue | null): 'in' | 'out' | null {
  if (value?.method === 'look') return value.found === 'clear' ? 'in' : 'out'
  if (value?.method === 'trial') return value.tries.some(each => each.good < each.of) ? 'out' : 'in'
  return null
}

/** How far open a leaf is let go, as the checklists name it; one that is nearly closed is drawn at 8 degrees. */
function openingOf(from: string): number {
  return (/half/.test(from) ? 45 : /open|full|90/i.test(from) ? 90 : 8) * DEGREE
}

function slopeOf({ rise, length }: LineElement) {
  return rise !== 0 && length > 0 ? { slope: { rise, over: length } } : {}
}

function comingOf({ faces }: LineElement) {
  const open = [faces.outer.ground, faces.inner.ground].find(ground => !ground.finished && ground.coming)
  return open ? { coming: { words: open.coming!, thickness: open.comingThickness ?? null } } : {}
}

function spacingOf(measurand: string, datum: string): LiveParameters['spacing']['between'] | null {
  if (datum === 'top-to-top') return 'horizontals'
  if (datum === 'bar-end') return 'bandEnd'
  if (datum === 'fence-face' || datum === 'equipment-edge') return 'object'
  if (/band/.test(measurand)) return 'bands'
  if (!/tie/.test(measurand)) return null
  return /post/.test(measurand) ? 'tiesOnPost' : /wire/.test(measurand) ? 'tiesOnWire' : 'tiesOnRail'
}

/** Limits that other checks of the element set on the same measurand from another datum, brought to ours by the gap under the leaf; none while that is not known. */
export function limitsBeside(one: WalkCheck, checks: readonly WalkCheck[], limits: Readonly<Record<string, Limit>>, gapBelow: Length | null): LiveLimit[] {
  const { check } = one
  if (check.method !== 'measure' || gapBelow === null) return []
  return checks.flatMap((other) => {
    const shift = other.check.datum === 'ground' && check.datum === 'bottom-of-leaf' ? -gapBelow : other.check.datum === 'bottom-of-leaf' && check.datum === 'ground' ? gapBelow : null
    return shift === null || other.check.measurand !== check.measurand ? [] : other.limits.flatMap(key => limits[key] ? [{ limit: limits[key], shift }] : [])
  })
}
