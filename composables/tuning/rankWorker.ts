import { runRanking, type Progress, type RankingRequest, type Suggestion } from '#shared/tunings/rank'
import { reasonsFor, settingText } from '#shared/tunings/reasons'
import { slugOf } from '#shared/tunings/slug'
import { stringsOf } from '#shared/tunings/catalogue'
import { tuningLetters } from '#shared/tunings/parse'

/** A suggestion in words, as it is shown. */
export interface Suggested {
  readonly slug: string
  readonly name: string
  readonly letters: string
  readonly capo: number
  readonly setting: string
  /** Half steps from the melody's own pitch. */
  readonly shift: number
  /** 0 to 100. */
  readonly score: number
  readonly reasons: readonly string[]
}

export type ToRanking = { readonly kind: 'start', readonly request: RankingRequest } | { readonly kind: 'cancel' }
export type FromRanking
  = | { readonly kind: 'progress', readonly progress: Progress }
    | { readonly kind: 'done', readonly suggestions: readonly Suggested[], readonly milliseconds: number }
    | { readonly kind: 'cancelled' }
    | { readonly kind: 'failed', readonly message: string }

const inWords = (suggestion: Suggestion): Suggested => {
  const strings = stringsOf(suggestion.tuning)
  return {
    slug: slugOf(strings), name: suggestion.tuning.name, letters: tuningLetters(strings), capo: suggestion.capo,
    setting: settingText(suggestion), shift: suggestion.fit.shift, score: suggestion.score, reasons: reasonsFor(suggestion),
  }
}

let cancelled = false
const answer = (message: FromRanking) => postMessage(message)

async function rank(request: RankingRequest): Promise<void> {
  cancelled = false
  const started = performance.now()
  const found = await runRanking(request, {
    now: () => performance.now(), pause: () => new Promise(resolve => setTimeout(resolve)), isCancelled: () => cancelled,
    onProgress: progress => answer({ kind: 'progress', progress }),
  })
  answer(found ? { kind: 'done', suggestions: found.map(inWords), milliseconds: performance.now() - started } : { kind: 'cancelled' })
}

addEventListener('message', ({ data }: MessageEvent<ToRanking>) => {
  if (data.kind === 'cancel') cancelled = true
  else rank(data.request).catch((error: unknown) => answer({ kind: 'failed', message: error instanceof Error ? error.message : String(error) }))
})
