import type { Length } from '../measure/length'
import { closedLine } from './closedGaps'
import { angleOf, checkLength, checkOpening, checkPositive, radians, ratioOf, type Angle, type ArcHeight, type LineHeight, type PlaneGround, type Slope } from './leaf'
import { heightsTo } from './swingOverArc'
import { steepestMet, stretchesOver } from './swingOverPlane'

/** What is asked of a leaf that is still to be hung. */
export interface ClearanceDemand {
  width: Length
  rake?: Slope
  /** Gap asked under the leaf all the way to `to`. */
  margin: Length
  /** Largest gap allowed under the closed leaf. */
  closedAtMost: Length
  to: Angle
}

/** Ground as a plane, or as measured: under the latch end along its arc, and along the closed leaf (straight to the latch end when not given). */
export type Ground = { plane: PlaneGround } | { arc: readonly ArcHeight[], line?: readonly LineHeight[] }

/** Gaps at the hinge that work, ends included. */
export interface ClearanceWindow { low: Length, high: Length }

/** A way out when no gap at the hinge works. Amounts are the least that help; screens word them, and say which rules bear on them. */
export type WayOut =
  /** Hang it at the other end; the window is at that hinge. */
  | { code: 'hingeOtherEnd', window: ClearanceWindow }
  /** Let it open to the other side. */
  | { code: 'openOtherSide', window: ClearanceWindow }
  /** A stepped or ramped threshold under the closed leaf, so high at the widest place. */
  | { code: 'threshold', height: Length }
  /** Rake the bottom edge, so much over the leaf's width (negative: falling to the latch end). */
  | { code: 'rakeBottom', rise: Length, window: ClearanceWindow }
  /** Two leaves of half the width, each with its own window at its own hinge. */
  | { code: 'twoLeaves', start: ClearanceWindow, end: ClearanceWindow }
  /** Take so much off the ground where the latch end passes highest. */
  | { code: 'regrade', cut: Length }
  /** Open no further than this. */
  | { code: 'stopAt', angle: Angle }

export interface ClearanceRange {
  /** Null when swing and closed gap cannot both be met with this leaf. */
  window: ClearanceWindow | null
  /** Smallest gap at the hinge that the swing asks for. */
  low: Length
  /** Largest gap at the hinge that the closed gap allows; may be under 0. */
  high: Length
  /** By how much low is over high; 0 when there is a window. */
  shortBy: Length
  /** How far it would open with the gap at its largest; the wanted angle when there is a window, null when it cannot even be shut. */
  opensTo: Angle | null
  waysOut: WayOut[]
}

/** Numbers within this of a whole length are that length: rounding outward must not spoil what is exact. A thousandth of 1/320,000 mm. */
const SPECK = 1e-3

/**
 * The range of bottom clearance at the hinge that leaves a margin through the whole swing and keeps the closed gap under its limit:
 * [c + W max(0, M - s), limit - W max(0, s - a)]. When it is empty: by how much, how far the leaf would open, and the ways out.
 *
 * @throws {GateRefusal} notALength, notPositive, noRun, tooSteep, angleOutOfRange; over measured ground tooFewReadings, notAscending, notCovered
 *
 * Method: arithmetic.md 5. Ends are rounded inward. Measured ground tells nothing of the other end or side, so those ways out are for planes only.
 */
export function bottomClearanceRange(demand: ClearanceDemand, ground: Ground): ClearanceRange {
  checkPositive(demand.width, 'leaf width')
  checkLength(demand.margin, 'margin')
  checkLength(demand.closedAtMost, 'closed gap')
  checkOpening(demand.to)
  const { width, margin, closedAtMost } = demand
  const rake = ratioOf(demand.rake, 'bottom edge')
  const rises = 'plane' in ground ? planeRises(demand, ground.plane) : measuredRises(demand, ground)
  const { low, high, lift } = bounds(rises, width, rake, margin, closedAtMost)
  const shortBy = Math.max(0, low - high)
  if (shortBy === 0) return { window: { low, high }, low, high, shortBy, opensTo: demand.to, waysOut: [] }

  const opensTo = high < margin ? null : rises.reaches((high - margin) / width + rake)
  const waysOut: WayOut[] = []
  if ('plane' in ground) waysOut.push(...turned(demand, ground.plane))
  // Below the margin itself no threshold helps: the leaf would have to clear it by more than it may stand over it.
  if (closedAtMost >= margin) waysOut.push({ code: 'threshold', height: shortBy })
  const raked = bestRake(rises, width, rake, margin, closedAtMost)
  if (raked) waysOut.push(raked)
  if (lift >= shortBy) waysOut.push({ code: 'regrade', cut: shortBy })
  if (opensTo !== null && opensTo > 0) waysOut.push({ code: 'stopAt', angle: opensTo })
  return { window: null, low, high, shortBy, opensTo, waysOut }
}

interface Rises {
  /** Highest rise of ground under the latch end through the swing. */
  swing: number
  /** Ground under the closed leaf. */
  closed: LineHeight[]
  /** How far the latch end gets while the rise (over the width) stays at or under a level; null when it is over it closed. */
  reaches: (level: number) => Angle | null
}

function planeRises({ width, to }: ClearanceDemand, plane: PlaneGround): Rises {
  const [a, b, end] = [ratioOf(plane.along, 'ground along the leaf'), ratioOf(plane.across, 'ground across'), radians(to)]
  return {
    swing: width * steepestMet(a, b, end).slope,
    closed: [{ distance: 0, height: 0 }, { distance: width, height: width * a }],
    reaches: level => a > level ? null : Math.floor(angleOf(stretchesOver(a, b, level, end)[0]?.from ?? end)),
  }
}

function measuredRises({ width, to }: ClearanceDemand, ground: Exclude<Ground, { plane: PlaneGround }>): Rises {
  const knots = heightsTo(ground.arc, to)
  return {
    swing: Math.max(...knots.map(({ height }) => height)),
    closed: closedLine(ground.line ?? [{ distance: width, height: knots[0]!.height }], width),
    reaches: (level) => {
      const over = knots.findIndex(({ height }) => height > level * width)
      if (over < 0) return to
      if (over === 0) return null
      const [before, after] = [knots[over - 1]!, knots[over]!]
      return Math.floor(before.angle + (after.angle - before.angle) * (level * width - before.height) / (after.height - before.height))
    },
  }
}

function bounds(rises: Rises, width: number, rake: number, margin: Length, closedAtMost: Length) {
  const lift = Math.max(0, rises.swing - width * rake)
  const hollow = Math.max(...rises.closed.map(({ distance, height }) => rake * distance - height))
  // + 0: a negative zero would be no length that equals 0.
  return { low: Math.ceil(margin + lift - SPECK) + 0, high: Math.floor(closedAtMost - hollow + SPECK) + 0, lift }
}

/** The least change of rake that opens a window; none when no rake does. The width of the window is concave in the rake, so its kinks are enough to search. */
function bestRake(rises: Rises, width: number, rake: number, margin: Length, closedAtMost: Length): WayOut | null {
  const kinks = [rises.swing / width, ...rises.closed.filter(({ distance }) => distance > 0).map(({ distance, height }) => height / distance)]
  const spread = (s: number) => {
    const { low, high } = bounds(rises, width, s, margin, closedAtMost)
    return high - low
  }
  const best = kinks.reduce((most, next) => spread(next) > spread(most) ? next : most)
  if (spread(best) < 0) return null
  // From the rake in hand towards the best one, the spread only grows: halve until a whole length of rise is found.
  let [no, yes] = [Math.round(rake * width), Math.round(best * width)]
  if (spread(yes / width) < 0) return null
  while (Math.abs(yes - no) > 1) {
    const middle = Math.trunc((yes + no) / 2)
    if (spread(middle / width) >= 0) yes = middle
    else no = middle
  }
  const { low, high } = bounds(rises, width, yes / width, margin, closedAtMost)
  return { code: 'rakeBottom', rise: yes, window: { low, high } }
}

/** The same ground met from the other end, to the other side, or by two leaves. */
function turned(demand: ClearanceDemand, { along, across }: PlaneGround): WayOut[] {
  const back = (slope: Slope): Slope => ({ ...slope, rise: 0 - slope.rise })
  const windowOf = (width: Length, plane: PlaneGround, rake: Slope | undefined): ClearanceWindow | null => {
    const { low, high } = bounds(planeRises({ ...demand, width }, plane), width, ratioOf(rake, 'bottom edge'), demand.margin, demand.closedAtMost)
    return low <= high ? { low, high } : null
  }
  const rakeBack = demand.rake && back(demand.rake)
  const found: WayOut[] = []
  const otherEnd = windowOf(demand.width, { along: back(along), across }, rakeBack)
  if (otherEnd) found.push({ code: 'hingeOtherEnd', window: otherEnd })
  const otherSide = windowOf(demand.width, { along, across: back(across) }, demand.rake)
  if (otherSide) found.push({ code: 'openOtherSide', window: otherSide })
  const half = Math.ceil(demand.width / 2)
  const [start, end] = [windowOf(half, { along, across }, demand.rake), windowOf(half, { along: back(along), across }, rakeBack)]
  if (start && end) found.push({ code: 'twoLeaves', start, end })
  return found
}
