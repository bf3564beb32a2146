import { nextTick, ref, shallowRef, type Ref } from 'vue'
import { describe, expect, it } from 'vitest'
import { useLineDraft } from '~/composables/useLineDraft'
import { addSide, renameSide } from '#shared/line/editLine'
import type { Line } from '#shared/line/line'
import { schoolLine } from '~~/tests/fixtures/line/schoolLine'

const keys = (line: Line | null | undefined) => line?.sides.map(side => side.key).join('')

describe('steps of a line in the making', () => {
  for (const [name, hold] of [['a deep ref', (line: Line | null) => ref(line) as Ref<Line | null>], ['a shallow ref', (line: Line | null) => shallowRef(line) as Ref<Line | null>]] as const) {
    it(`can be taken back and done again, held in ${name}`, async () => {
      const line = hold(schoolLine)
      const draft = useLineDraft(line)
      expect(draft.canTakeBack.value).toBe(false)
      draft.change(addSide(draft.now()!, 'a'))
      await nextTick()
      draft.change(addSide(draft.now()!, 'b'))
      await nextTick()
      expect(keys(line.value)).toBe('ABCDEF')
      draft.takeBack()
      await nextTick()
      draft.takeBack()
      await nextTick()
      expect(draft.now()).toBe(schoolLine)
      expect([draft.canTakeBack.value, draft.canDoAgain.value]).toEqual([false, true])
      draft.doAgain()
      await nextTick()
      expect(keys(line.value)).toBe('ABCDE')
      draft.change(renameSide(draft.now()!, 'A', 'Back'))
      expect(draft.canDoAgain.value).toBe(false)
    })
  }

  it('joins what is typed in one go into one step', async () => {
    const line = ref<Line | null>(schoolLine)
    const draft = useLineDraft(line)
    for (const name of ['B', 'Ba', 'Bac', 'Back']) {
      draft.change(renameSide(draft.now()!, 'A', name), 'typing')
      await nextTick()
    }
    draft.takeBack()
    expect(draft.now()).toBe(schoolLine)
  })

  it('forgets its steps when another line comes from elsewhere', async () => {
    const line = ref<Line | null>(schoolLine)
    const draft = useLineDraft(line)
    draft.change(addSide(draft.now()!, 'a'))
    await nextTick()
    line.value = { ...schoolLine, version: 2 }
    await nextTick()
    expect(draft.canTakeBack.value).toBe(false)
  })
})
