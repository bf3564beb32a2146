/** Why a gate calculation is refused; stable, screens word them by code. */
export const GATE_REFUSALS = [
  'notALength', 'notPositive', 'negativeClearance', 'tooSteep', 'angleOutOfRange', 'noRun', 'tooFewReadings', 'notAscending', 'notCovered',
  'noPointInSwing', 'obstacleInLeaf', 'leavesTooWide', 'diagonalTooLong', 'lean',
] as const
export type GateRefusalCode = (typeof GATE_REFUSALS)[number]

/** Thrown by every function of shared/gate on input that cannot be a gate: a stable code, the argument it is about, and a sentence that says what to do. */
export class GateRefusal extends RangeError {
  override readonly name = 'GateRefusal'
  constructor(readonly code: GateRefusalCode, readonly field: string, sentence: string) {
    super(sentence)
  }
}
