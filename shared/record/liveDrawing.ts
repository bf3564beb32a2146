import type { Drawing } from '../drawing/displayList'
import { drawLive } from '../drawing/live/drawLive'
import type { LiveInput, Say } from '../drawing/live/live'
import { DEGREE } from '../gate/leaf'
import type { Limit } from '../limit/limit'
import type { LineElement } from '../line/line'
import { INCH } from '../measure/length'
import type { RecordCheck, RecordReading } from './record'
import type { Speech } from './speech'
import { fill } from './wording'

/**
 * The live drawing of a reading as it stood at the seal; null where its check has none or the record does not hold what it would show.
 * It shows nothing that was not entered: where a picture needs more than the reading, a simpler one is drawn or none.
 */
export function liveDrawing(check: RecordCheck, reading: RecordReading, limits: Limit[], element: LineElement, say: Speech, size: 'paper' | 'field' = 'paper'): (Drawing & { summary: string }) | null {
  try {
    const drawing = draw(check, reading, limits, element, say, size)
    return drawing ? { list: drawing.list, width: drawing.width, height: drawing.height, summary: drawing.alt.params.summary ?? '' } : null
  }
  catch (error) {
    // A refusal of a limit or a measure is a picture that cannot be drawn; the row says all that is known.
    if (error instanceof Error && 'code' in error) return null
    throw error
  }
}

function draw(check: RecordCheck, { value }: RecordReading, limits: Limit[], element: LineElement, say: Speech, size: 'paper' | 'field') {
  const words: Say = (word, parameters = {}) => fill(say.w.drawing[word], parameters)
  const common = { say: words, size }
  if (check.drawing === 'tieEnd' && value.method === 'look') return drawLive('tieEnd', { ...common, ends: value.found === 'clear' ? 'in' : 'out' })
  if (check.drawing === 'closing' && value.method === 'trial') {
    return drawLive('closing', { ...common, trials: value.tries.map(({ from, good, of }) => ({ label: check.tries.find(each => each.from === from)?.label ?? from, angle: openingOf(from), good, of })) })
  }
  if (check.drawing === 'opening' && value.method === 'template') {
    return drawLive('opening', { ...common, reading: null, system: say.voice.system, limits: [], shape: check.datum === 'between-wires' ? 'mesh' : 'bars', gauge: value.went })
  }
  if (value.method !== 'measure' || check.unit !== 'length') return null
  // A limit on another datum would stand at a wrong height: the row names it, the picture leaves it out.
  const input: LiveInput = { ...common, reading: value.amount, system: value.system, limits: limits.filter(limit => check.datum === null || limit.datum === check.datum).map(limit => ({ limit })) }
  switch (check.drawing) {
    case 'latchHeight': return drawLive('latchHeight', { ...input, from: check.datum === 'bottom-of-leaf' ? 'leaf' : check.datum === 'top-of-leaf' ? 'top' : 'ground', leafHeight: element.height, gapBelow: 2 * INCH })
    case 'swingClearance': return drawLive('gapBelow', { ...input, edge: 'leaf' })
    case 'gapBelow': return drawLive('gapBelow', { ...input, edge: edgeOf(element), ...comingOf(element) })
    case 'opening': return drawLive('opening', { ...input, shape: check.datum === 'between-wires' ? 'mesh' : 'bars', ...(value.dimension && { dimension: value.dimension }) })
    case 'height': return drawLive('height', { ...input, of: check.measurand?.includes('barbed') ? 'barbedWire' : 'fence' })
    case 'clearWidth': return drawLive('clearWidth', input)
    case 'spacing': {
      const between = spacingOf(check)
      return between ? drawLive('spacing', { ...input, between }) : null
    }
    default: return null
  }
}

/** How far open a leaf was let go, as the checklists name it; a gate that is nearly closed is drawn at 8 degrees. */
function openingOf(from: string): number {
  return (/half/.test(from) ? 45 : /open|full|90/.test(from) ? 90 : 8) * DEGREE
}

function edgeOf(element: LineElement): 'leaf' | 'rail' | 'wire' | 'none' {
  if (element.gate) return 'leaf'
  return element.bottom === 'tensionWire' ? 'wire' : element.bottom
}

function comingOf({ faces }: LineElement) {
  const open = [faces.outer.ground, faces.inner.ground].find(ground => !ground.finished && ground.coming)
  return open ? { coming: { words: open.coming!, thickness: open.comingThickness ?? null } } : {}
}

function spacingOf({ check, measurand, datum }: RecordCheck) {
  if (datum === 'top-to-top') return 'horizontals'
  if (datum === 'bar-end') return 'bandEnd'
  if (datum === 'fence-face' || datum === 'equipment-edge') return 'object'
  const name = `${measurand} ${check}`
  if (/band/.test(name)) return 'bands'
  if (!/tie/.test(name)) return null
  return /post/.test(name) ? 'tiesOnPost' : /wire/.test(name) ? 'tiesOnWire' : 'tiesOnRail'
}
