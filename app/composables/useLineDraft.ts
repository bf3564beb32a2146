import { computed, shallowRef, toRaw, watch, type Ref } from 'vue'
import type { Line } from '#shared/line/line'

/** How many steps can be taken back. */
const MOST_STEPS = 200

/**
 * A line in the making, with its steps to be taken back. Edits are values (shared/line/editLine.ts), so a step is the line as it stood.
 * `join` puts an edit into the step before it when that one came from the same place: a sentence typed is one step, not one a letter.
 */
export function useLineDraft(line: Ref<Line | null | undefined>) {
  const past = shallowRef<(Line | null)[]>([])
  const future = shallowRef<(Line | null)[]>([])
  let joined: string | null = null
  const now = () => toRaw(line.value) ?? null
  let own = now()

  // A line that comes from elsewhere (another job, the server's answer) has no steps here.
  watch(line, () => {
    if (now() === own) return
    own = now()
    past.value = []
    future.value = []
    joined = null
  })

  function put(next: Line | null) {
    own = next
    line.value = next
  }
  function change(next: Line, join: string | null = null) {
    const before = now()
    if (next === before) return
    if (join === null || join !== joined) past.value = [...past.value, before].slice(-MOST_STEPS)
    future.value = []
    joined = join
    put(next)
  }
  function takeBack() {
    if (past.value.length === 0) return
    future.value = [...future.value, now()]
    put(past.value.at(-1) ?? null)
    past.value = past.value.slice(0, -1)
    joined = null
  }
  function doAgain() {
    if (future.value.length === 0) return
    past.value = [...past.value, now()]
    put(future.value.at(-1) ?? null)
    future.value = future.value.slice(0, -1)
    joined = null
  }
  return { now, change, takeBack, doAgain, canTakeBack: computed(() => past.value.length > 0), canDoAgain: computed(() => future.value.length > 0) }
}
