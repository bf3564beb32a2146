import { describe, expect, it } from 'vitest'
import { SETTINGS } from '#shared/line/line'
import { measurandsOfSetting } from '#shared/provision/measurandsOfSetting'
import { readBuiltIn } from '#server/services/checklist/readBuiltIn'

const lists = readBuiltIn()
const builtIn = (setting: (typeof SETTINGS)[number], measurand: string, datum: string) =>
  measurandsOfSetting(setting, lists).find(row => row.measurand === measurand && row.datum === datum)?.builtIn.map(limit => limit.basis.fact)

describe('measurandsOfSetting', () => {
  it('gives a row a measurand and datum, once, with the checks that take it', () => {
    for (const setting of SETTINGS) {
      const keys = measurandsOfSetting(setting, lists).map(row => `${row.measurand} ${row.datum}`)
      expect(new Set(keys).size).toBe(keys.length)
    }
    const opening = measurandsOfSetting('pool', lists).find(row => row.measurand === 'opening')!
    expect(opening.checks.map(check => check.id)).toEqual(expect.arrayContaining(['pool-sphere', 'tie-in-gap', 'gate-gap-hinge']))
    expect(opening.class).toBe('correctFirst')
  })
  it('shows on a setting\'s page the limits that can hold there, and no others', () => {
    expect(builtIn('pool', 'opening', 'between-faces')).toEqual(['A08'])
    expect(builtIn('school', 'opening', 'between-faces')).toEqual(['B01'])
    expect(builtIn('pool', 'latch-release-height', 'bottom-of-leaf')).toEqual(['A25'])
    // 34 to 48 in is for accessible gates away from pools, 54 in for those beside one
    expect(builtIn('pool', 'latch-release-height', 'ground')).toEqual(['C04'])
    expect(builtIn('accessibleRoute', 'latch-release-height', 'ground')).toEqual(['C03', 'C04'])
    expect(builtIn('playground', 'latch-release-height', 'ground')).toEqual(['B22'])
    expect(builtIn('school', 'latch-release-height', 'ground')).toEqual([])
  })
  it('leaves out what the setting does not call for', () => {
    expect(builtIn('school', 'latch-release-height', 'bottom-of-leaf')).toBeUndefined()
    expect(builtIn('pool', 'clear-width', 'leaf-face-to-stop')).toBeUndefined()
  })
  it('says why a row is empty', () => {
    const mesh = measurandsOfSetting('pool', lists).find(row => row.measurand === 'mesh-size')!
    expect(mesh).toMatchObject({ builtIn: [], sources: expect.arrayContaining(['A01', 'A04', 'A20']) })
    for (const setting of SETTINGS) for (const row of measurandsOfSetting(setting, lists)) if (row.builtIn.length === 0) expect(row.noLimit, row.measurand).not.toBeNull()
  })
})
