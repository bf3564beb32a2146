import { INCH, MILLIMETRE, type Length, type System } from '../../measure/length'
import { bareFigure } from './placedLimit'

/** A stretch of tape that a drawing shows: lengths against units of the drawing, from its start. */
export interface TapeAxis {
  span: number
  from: Length
  /** Where a length lies, kept on the axis. */
  at: (value: number) => number
  /** True for what lies off the axis. */
  beyond: (value: number) => boolean
  /** Where the tape is broken off, because the reading lies far outside: 1 after, -1 before; 0 whole. */
  broken: -1 | 0 | 1
  /** Stretch of the axis that is true to scale. */
  true: { start: number, end: number }
  ticks: { place: number, rank: number, label: string }[]
}

interface TapeOptions {
  reading: Length | null
  ends: readonly Length[]
  span: number
  system: System
  /** Nothing lies under this. */
  floor?: Length
  /** Show it from the floor up where a hair's breadth does not ask for more. */
  fromFloor?: boolean
  /** What to show where there is neither reading nor limit. */
  nominal: Length
  /** Least room of a label along the axis. */
  labelRoom: number
}

/** Scales that a tape is drawn at, in units of the drawing an inch or a millimetre, largest first. */
const SCALES = { imperial: [800, 400, 200, 100, 50, 25, 12, 6, 3], metric: [32, 16, 8, 4, 2, 1, 0.5, 0.25, 0.12] } as const
const USUAL = 4
/** Marks of a tape, finest first: 1/64 in to 10 ft; 0.1 mm to 5 m. */
const MARKS = {
  imperial: [1, 2, 4, 8, 16, 32, 64, 192, 384, 768, 2304, 7680].map(n => n * INCH / 64),
  metric: [0.1, 0.5, 1, 5, 10, 50, 100, 500, 1000, 5000].map(n => n * MILLIMETRE),
} as const
/** Room between reading and limit that shows a hair's breadth. */
const APART = 10
const BREAK_ROOM = 34
const FLOOR_ROOM = 12
/** Room that a limit wants for its words between its edge and the end of the stretch. */
const EDGE_ROOM = 42

/** Chooses the stretch and the scale so that the reading and the limit nearest to it are both seen and apart; a reading far outside stands beyond a break. */
export function tapeAxis({ reading, ends, span, system, floor, fromFloor, nominal, labelRoom }: TapeOptions): TapeAxis {
  const unit = system === 'imperial' ? INCH : MILLIMETRE
  const near = ends.length === 0 ? (reading ?? nominal) : ends.reduce((best, end) => reading !== null && Math.abs(end - reading) < Math.abs(best - reading) ? end : best)
  const away = reading === null ? 0 : Math.abs(reading - near)
  const scales = SCALES[system]
  let step = USUAL
  const scale = () => scales[step]! / unit
  while (away * scale() > 0.5 * span && step < scales.length - 1) step++
  const reach = fromFloor && floor !== undefined ? Math.max(near, reading ?? near) - floor : 0
  while (reach * scale() > span - 36 && step < scales.length - 1) step++
  while (away > 0 && away * scale() < APART && step > 0) step--
  const per = scale()
  const broken = reading !== null && away * per > 0.72 * span ? (reading > near ? 1 : -1) : 0
  const middle = reading === null || broken ? near : (reading + near) / 2
  // Beyond a break the limit keeps the middle of what is left.
  const lead = broken === 1 ? (span - BREAK_ROOM) / 2 : broken === -1 ? (span + BREAK_ROOM) / 2 : span / 2
  const start = middle - lead / per
  const settled = broken ? start : start + shiftFor([...ends, ...(reading === null ? [] : [reading])].map(value => (value - start) * per), span) / per
  const lowest = floor === undefined || broken === -1 ? -Infinity : floor - FLOOR_ROOM / per
  const from = reach > 0 && broken === 0 && reach * per <= span - FLOOR_ROOM - 6 ? lowest : Math.max(lowest, settled)
  const shown = { start: broken === -1 ? BREAK_ROOM : 0, end: broken === 1 ? span - BREAK_ROOM : span }
  const place = (value: number) => (value - from) * per
  return {
    span, from, broken, true: shown,
    beyond: value => place(value) < shown.start || place(value) > shown.end,
    at: value => broken !== 0 && value === reading ? (broken === 1 ? span - 10 : 10) : Math.max(shown.start, Math.min(shown.end, place(value))),
    ticks: ticksOf(per, shown, from, system, labelRoom, floor),
  }
}

/** The smallest move of the stretch that gives the words of each limit in it their room at the edges. */
function shiftFor(places: readonly number[], span: number): number {
  const shown = places.filter(place => place > 0 && place < span)
  const want = (shift: number) => shown.reduce((sum, place) => sum + Math.max(0, EDGE_ROOM - (place - shift)) + Math.max(0, EDGE_ROOM - (span - place + shift)), 0)
  let best = 0
  for (let move = 1; move <= EDGE_ROOM && want(best) > 0; move++) {
    for (const shift of [move, -move]) if (want(shift) < want(best) - 1e-9) best = shift
  }
  return best
}

function ticksOf(per: number, shown: { start: number, end: number }, from: number, system: System, room: number, floor = -Infinity) {
  const marks = MARKS[system]
  const labelled = marks.find(mark => mark * per >= room) ?? marks.at(-1)!
  const used = marks.filter(mark => mark <= labelled && mark * per >= 3 && labelled % mark === 0)
  const finest = used[0] ?? labelled
  const longestFirst = [...used].reverse()
  const ticks: TapeAxis['ticks'] = []
  const [low, high] = [Math.max(floor, from + shown.start / per), from + shown.end / per]
  for (let n = Math.ceil(low / finest); n * finest <= high; n++) {
    const value = n * finest
    // Rank 0 is the longest mark, the labelled one.
    const rank = Math.max(0, longestFirst.findIndex(mark => value % mark === 0))
    ticks.push({ place: (value - from) * per, rank, label: rank === 0 ? tapeLabel(value, system) : '' })
  }
  return ticks
}

/** As a tape is marked: between whole inches only the fraction, between millimetres only what follows the point. */
function tapeLabel(value: Length, system: System): string {
  const shown = bareFigure(value, system)
  if (system === 'imperial') return value % INCH === 0 ? shown : shown.replace(/^.* /, '')
  return value % MILLIMETRE === 0 ? shown : shown.replace(/^[^.]*/, '')
}
