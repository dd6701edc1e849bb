import { computed, readonly, ref, toValue, watch, type MaybeRefOrGetter } from 'vue'
import type { Stage } from '#shared/sound/tuner'

/** Going through the strings one by one, in order or by choice. */
export function useWalk(stages: MaybeRefOrGetter<readonly Stage[]>, first: MaybeRefOrGetter<number | undefined>) {
  const start = () => Math.max(0, toValue(stages).findIndex(({ string }) => string === toValue(first)))
  const index = ref(start())
  const done = ref<ReadonlySet<string>>(new Set())
  const stage = computed(() => toValue(stages)[index.value] ?? null)
  const isOver = computed(() => toValue(stages).every(({ id }) => done.value.has(id)))

  function choose(id: string): void {
    const found = toValue(stages).findIndex(each => each.id === id)
    if (found >= 0) index.value = found
  }

  /** Marks the string and goes to the next one that is not done, round again from the first. */
  function finish(): void {
    const all = toValue(stages)
    if (!stage.value) return
    done.value = new Set([...done.value, stage.value.id])
    const next = all.map((_, step) => (index.value + 1 + step) % all.length).find(each => !done.value.has(all[each]!.id))
    if (next !== undefined) index.value = next
  }

  function again(): void {
    done.value = new Set()
    index.value = start()
  }

  watch(() => toValue(stages).map(({ id, to }) => `${id} ${to}`).join(), again)
  watch(() => toValue(first), () => {
    index.value = start()
  })
  return { stage, done: readonly(done), isOver, choose, finish, again }
}
