import { bottomClearanceRange, type ClearanceRange, type Ground } from '../gate/bottomClearanceRange'
import { closedGaps, type ClosedGaps } from '../gate/closedGaps'
import { DEGREE, type Angle, type Leaf, type Slope } from '../gate/leaf'
import type { Swing } from '../gate/swing'
import { heightAt, latchGapOverArc, swingOverArc } from '../gate/swingOverArc'
import { latchGapOverPlane, swingOverPlane } from '../gate/swingOverPlane'
import { figureKey } from '../limit/boundDistance'
import type { Length } from '../measure/length'
import type { TrialLimit, TrialOf } from './trial'

/** One leaf of a trial, over the ground as it meets it from its own hinge. */
export interface TriedLeaf {
  /** At which end of the opening it hangs. */
  hinge: 'start' | 'end'
  leaf: Leaf
  ground: Ground
  swing: Swing
  closed: ClosedGaps
  /** Null where no limit is set on the gap under the closed leaf. */
  range: ClearanceRange | null
}

/** The figure of a trial's limit at one end, in the system of the trial; null where it has none. Throws what `figureKey` throws. */
export function limitFigure(limit: TrialLimit | null, end: 'low' | 'high', system: 'imperial' | 'metric'): Length | null {
  const bound = limit?.[end]
  return bound ? bound[figureKey(bound, 'length', system, limit!.id)]! : null
}

/**
 * Works a swing trial out: each leaf over its ground. Ground as slopes is turned for a leaf that hangs at the end of the opening: what rises along it from the start, falls
 * from there. Heights were measured from one hinge and serve that leaf alone.
 *
 * @throws {GateRefusal} what the functions of shared/gate refuse
 */
export function trySwing({ leaf, pair, hinge, ground, to, margin, closed, system }: TrialOf<'swing'>): TriedLeaf[] {
  const ends = pair && ground.by === 'slope' ? ['start', 'end'] as const : [hinge]
  const asked = Math.max(0, limitFigure(margin, 'low', system) ?? 0)
  const closedAtMost = limitFigure(closed, 'high', system)
  return ends.map((end) => {
    const met: Ground = ground.by === 'heights' ? { arc: ground.arc } : { plane: { along: end === 'start' ? ground.along : back(ground.along), across: ground.across } }
    const latch = 'plane' in met ? Math.round(leaf.width * (met.plane.along.rise / met.plane.along.over)) : Math.round(heightAt(met.arc, 0))
    return {
      hinge: end, leaf, ground: met,
      swing: 'plane' in met ? swingOverPlane(leaf, met.plane, asked, to) : swingOverArc(leaf, met.arc, asked, to),
      closed: closedGaps(leaf, [{ distance: leaf.width, height: latch }]),
      range: closedAtMost === null ? null : bottomClearanceRange({ width: leaf.width, rake: leaf.rake!, margin: asked, closedAtMost, to }, met),
    }
  })
}

/** The least gap anywhere under a leaf that stands at each of these angles: at its latch end, or at the hinge. */
export function gapsAt({ leaf, ground }: Pick<TriedLeaf, 'leaf' | 'ground'>, angles: readonly Angle[]): { angle: Angle, gap: Length }[] {
  return angles.map(angle => ({ angle, gap: Math.min(leaf.clearance, 'plane' in ground ? latchGapOverPlane(leaf, ground.plane, angle) : latchGapOverArc(leaf, ground.arc, angle)) }))
}

/** Angles that a leaf is looked at: every 15 degrees up to how far it opens, and that itself. */
export function anglesTo(to: Angle): Angle[] {
  const steps = Array.from({ length: Math.floor(to / (15 * DEGREE)) + 1 }, (_, i) => i * 15 * DEGREE)
  return steps.at(-1) === to ? steps : [...steps, to]
}

const back = (slope: Slope): Slope => ({ ...slope, rise: 0 - slope.rise })
