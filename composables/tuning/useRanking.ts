import { computed, onScopeDispose, ref, shallowRef } from 'vue'
import type { RankingRequest } from '#shared/tunings/rank'
import type { FromRanking, Suggested, ToRanking } from './rankWorker'

export type RankingState = 'idle' | 'working' | 'done' | 'cancelled' | 'failed'

/** Ranks tunings for a tune in a worker, so that the page stays quick; it can be followed and cancelled. */
export function useRanking() {
  const state = ref<RankingState>('idle')
  const progress = ref(0)
  const suggestions = shallowRef<readonly Suggested[]>([])
  const milliseconds = ref(0)
  let worker: Worker | null = null

  function hear(message: FromRanking): void {
    if (state.value !== 'working') return
    if (message.kind === 'progress') progress.value = message.progress.done / message.progress.total
    else {
      state.value = message.kind
      if (message.kind === 'done') {
        suggestions.value = message.suggestions
        milliseconds.value = message.milliseconds
      }
    }
  }
  const send = (message: ToRanking) => worker?.postMessage(message)

  function start(request: RankingRequest): void {
    stop()
    worker = new Worker(new URL('./rankWorker.ts', import.meta.url), { type: 'module' })
    worker.onmessage = ({ data }: MessageEvent<FromRanking>) => hear(data)
    worker.onerror = () => (state.value = 'failed')
    state.value = 'working'
    progress.value = 0
    suggestions.value = []
    send({ kind: 'start', request })
  }
  /** The work ends at once, whatever the worker is doing. */
  function cancel(): void {
    if (state.value === 'working') state.value = 'cancelled'
    stop()
  }
  function stop(): void {
    worker?.terminate()
    worker = null
  }
  onScopeDispose(stop)
  return { state, progress, suggestions, seconds: computed(() => milliseconds.value / 1000), start, cancel }
}

export type Ranking = ReturnType<typeof useRanking>
