import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { envelopeSchema } from '#shared/entry/entry'
import { withOffset } from '~/offline/instant'

const at = (instant: string, minutesWest: number) => Object.assign(new Date(instant), { getTimezoneOffset: () => minutesWest })

describe('an instant with its offset', () => {
  it.each([
    ['2026-12-01T20:04:05.123Z', 300, '2026-12-01T15:04:05.123-05:00'],
    ['2026-12-01T20:04:05.000Z', -330, '2026-12-02T01:34:05.000+05:30'],
    ['2026-12-01T20:04:05.000Z', 210, '2026-12-01T16:34:05.000-03:30'],
    ['2026-12-01T20:04:05.000Z', 0, '2026-12-01T20:04:05.000+00:00'],
  ])('%s, %i minutes west, is %s', (instant, west, written) => {
    expect(withOffset(at(instant, west))).toBe(written)
  })
  it('is always one that an envelope takes, and the same instant', () => {
    fc.assert(fc.property(fc.date({ min: new Date('2000-01-01'), max: new Date('2100-01-01'), noInvalidDate: true }), fc.integer({ min: -14 * 60, max: 12 * 60 }), (date, west) => {
      const written = withOffset(at(date.toISOString(), west))
      expect(envelopeSchema.shape.madeAt.safeParse(written).success).toBe(true)
      expect(new Date(written).getTime()).toBe(date.getTime())
    }))
  })
})
