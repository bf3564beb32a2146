import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { InstrumentInput } from '#shared/api/instrument'
import { INCH } from '#shared/measure/length'
import { endInstrument, keepInstrument, listInstruments } from '../../server/services/instrument/keepInstruments'
import { makeScene, type Scene } from '../helpers/scene'

let scene: Scene
beforeAll(async () => { scene = await makeScene() })
afterAll(() => scene.end())

const tape = (name: string): InstrumentInput => ({ id: randomUUID(), name, unit: 'length', uncertainty: INCH / 16, text: '1/16 in', source: 'class on the tape', checkedOn: '2026-09-01' })

describe('instruments of an organisation', () => {
  const input = tape('25 ft tape')

  it('are seen by its own people with their uncertainty, once each, and by nobody else', async () => {
    await keepInstrument(scene.one.as('inspector'), input)
    await keepInstrument(scene.one.as('manager'), input)
    const { source, checkedOn, ...rest } = input
    expect(await listInstruments(scene.one.as('manager'))).toEqual([{ ...rest, source, checkedOn, by: expect.any(String) }])
    expect((await listInstruments(scene.one.as('crew'))).map(one => one.name)).toEqual(['25 ft tape'])
    expect(await listInstruments(scene.other.as('manager'))).toEqual([])
  })
  it('have a name of their own while they are in use', async () => {
    await expect(keepInstrument(scene.one.as('manager'), tape('25 FT TAPE'))).rejects.toMatchObject({ code: 'taken', errors: [{ pointer: '/name' }] })
    await keepInstrument(scene.other.as('manager'), tape('25 ft tape'))
    await endInstrument(scene.one.as('manager'), input.id)
    await keepInstrument(scene.one.as('manager'), tape('25 ft tape'))
    expect(await listInstruments(scene.one.as('manager'))).toHaveLength(1)
  })
  it('are ended once, by their own people, and never changed', async () => {
    await expect(endInstrument(scene.one.as('manager'), input.id)).rejects.toMatchObject({ code: 'notFound' })
    const [theirs] = await listInstruments(scene.other.as('manager'))
    await expect(endInstrument(scene.one.as('manager'), theirs!.id)).rejects.toMatchObject({ code: 'notFound' })
    await expect(keepInstrument(scene.one.as('crew'), tape('crew tape'))).rejects.toThrow(/permission denied/)
  })
})
