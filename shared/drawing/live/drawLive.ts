import { drawClearWidth } from './clearWidth'
import { drawClosing, type ClosingInput } from './closing'
import { drawGapBelow, type GapBelowInput } from './gapBelow'
import { drawHeight, type HeightInput } from './height'
import { drawLatchHeight, type LatchHeightInput } from './latchHeight'
import type { LiveDrawing, LiveInput } from './live'
import { drawOpening, type OpeningInput } from './opening'
import { drawSpacing, type SpacingInput } from './spacing'
import { drawSwingClearance } from './swingClearance'
import type { SwingClearanceInput } from './swingSeen'
import { drawTieEnd, type TieEndInput } from './tieEnd'

/** What each live drawing takes, by the name that a check gives it (DRAWINGS of shared/checklist/check.ts). */
export interface LiveParameters {
  latchHeight: LatchHeightInput
  gapBelow: GapBelowInput
  swingClearance: SwingClearanceInput
  opening: OpeningInput
  tieEnd: TieEndInput
  spacing: SpacingInput
  height: HeightInput
  closing: ClosingInput
  clearWidth: LiveInput
}
export type LiveName = keyof LiveParameters

const DRAW: { [Name in LiveName]: (parameters: LiveParameters[Name]) => LiveDrawing } = {
  latchHeight: drawLatchHeight,
  gapBelow: drawGapBelow,
  swingClearance: drawSwingClearance,
  opening: drawOpening,
  tieEnd: drawTieEnd,
  spacing: drawSpacing,
  height: drawHeight,
  closing: drawClosing,
  clearWidth: drawClearWidth,
}

/**
 * The live drawing of a name, the same for screen and record: shapes, size and what it says.
 *
 * @throws what the limits' and gate's own functions throw: LimitRefused, GateRefusal, OpeningRefusal; a screen shows their advice in place of the drawing
 */
export function drawLive<Name extends LiveName>(name: Name, parameters: LiveParameters[Name]): LiveDrawing {
  return DRAW[name](parameters)
}
