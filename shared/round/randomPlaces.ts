import type { Line } from '../line/line'
import { elementsOf } from '../line/line'
import { pickRandom } from '../sampling/pickRandom'
import { zeroAcceptanceSample } from '../sampling/zeroAcceptanceSample'
import type { RoundBasis } from './basis'
import type { WalkPosition } from './walkPlan'

/** At most 1 in 20 may be bad and go unseen, with 95 % confidence where none that was tried is bad (arithmetic.md 3, its own example). */
const TOLERATED = 500
const CONFIDENCE = 9500

/** A number from 1 to 2^31 - 2 out of a text: FNV-1a, 32 bits. No secret; it only has to differ from round to round. */
function seedOf(text: string): number {
  let hash = 0x811C9DC5
  for (let at = 0; at < text.length; at++) hash = Math.imul(hash ^ text.charCodeAt(at), 0x01000193) >>> 0
  return hash % 2_147_483_646 + 1
}

/**
 * Where a check that a random sample may stand for is tried on this round: bays of the runs (the whole of anything else) that call for it, drawn from the
 * round's id, half of whose bits are random; the same on every device and after the seal. Along the walk. Empty where the check is no such one.
 *
 * A help for the hand, told as such: nothing is judged by it, and one bad piece within a child's reach means to try every one.
 */
export function randomPlaces(basis: RoundBasis, line: Line, checkId: string, roundId: string): WalkPosition[] {
  const check = basis.checks.find(one => one.id === checkId)
  if (!check?.sampled || check.method !== 'trial') return []
  const asking = new Set(basis.tasks.flatMap(task => task.line && task.check === checkId ? task.element : []))
  const places = elementsOf(line).flatMap(element => !asking.has(element.id) ? [] : Array.from({ length: element.kind === 'run' ? element.bays : 1 }, (_, at) => ({ element: element.id, bay: at + 1 })))
  if (places.length === 0) return []
  const count = zeroAcceptanceSample({ lot: places.length, tolerated: TOLERATED, confidence: CONFIDENCE })
  return pickRandom({ of: places.length, count, seed: seedOf(`${roundId} ${checkId}`) }).map(number => places[number - 1]!)
}
