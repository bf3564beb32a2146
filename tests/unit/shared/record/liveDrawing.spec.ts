import { beforeAll, describe, expect, it } from 'vitest'
import { liveDrawing } from '#shared/record/liveDrawing'
import { Speech } from '#shared/record/speech'
import { WORDING } from '#shared/record/wording'
import { elementsOf } from '#shared/line/line'
import { sampleRecord, type Sample } from '../../../helpers/sampleRecord'

let sample: Sample
beforeAll(async () => { sample = await sampleRecord() })

describe('the drawings of a record', () => {
  it('stand by every reading of a check that names one, and say what they show', () => {
    const { record } = sample
    const say = new Speech({ wording: WORDING.en, system: 'imperial', zones: {} })
    const drawn = record.checks.flatMap(check => check.drawing === null ? [] : check.readings.map((reading) => {
      const limits = check.limits.flatMap(key => record.limits[key] ?? [])
      return { check: check.check, drawing: liveDrawing(check, reading, limits, elementsOf(record.line).find(one => one.id === check.element)!, say) }
    }))
    expect(drawn.length).toBeGreaterThan(10)
    expect([...new Set(drawn.filter(({ drawing }) => !drawing?.list.length).map(({ check }) => check))]).toEqual([])
    expect(drawn.find(({ check }) => check === 'sphere')!.drawing!.summary).toBe('the gauge stopped')
    expect(drawn.find(({ check }) => check === 'ground-clearance')!.drawing!.summary).toContain('short')
  })
})
