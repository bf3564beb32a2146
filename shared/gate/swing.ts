import type { Length } from '../measure/length'
import type { Angle } from './leaf'

/** What comes of a leaf that is swung over ground. */
export interface Swing {
  /** The least gap anywhere under the leaf up to the wanted angle, and where; under 0 it would have to pass through the ground by so much. */
  least: { gap: Length, angle: Angle, at: 'hinge' | 'latch' }
  /** First angle at which the leaf touches the ground; null when it never does. */
  contact: Angle | null
  /** Stretches of the swing in which the gap is under the margin asked. */
  under: { from: Angle, to: Angle }[]
  /** Smallest gap at the hinge that leaves the margin asked all the way. */
  needed: Length
}
