import type { Drawing } from '../../shared/drawing/displayList'
import type { Limit } from '../../shared/limit/limit'
import type { LineElement } from '../../shared/line/line'
import type { RecordCheck, RecordDocument, RecordReading } from '../../shared/record/record'
import type { Speech } from './speech'

/** The live drawing of a reading as it stood at the seal; null where its check has none. */
export function liveDrawing(_check: RecordCheck, _reading: RecordReading, _limits: Limit[], _element: LineElement, _record: RecordDocument, _say: Speech): Drawing | null {
  return null
}
