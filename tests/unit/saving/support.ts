import type { Clock } from '../../../composables/saving/clock'
import type { Failure, PostAnswer, SinceAnswer, Transport } from '../../../composables/saving/transport'
import { applyEdits, isRefused } from '../../../shared/edits'
import type { Batch, LoggedTransaction } from '../../../shared/editor/saving'
import type { LoggedBatch } from '../../../shared/schemas'
import { createScore } from '../../../shared/score/create'
import type { Score, Voice } from '../../../shared/score/types'

/** A clock that stands still until it is set forward. */
export function stoppedClock() {
  let time = 0
  let waiting: { at: number, call: () => void }[] = []
  const clock: Clock = {
    now: () => time,
    after(ms, call) {
      const entry = { at: time + ms, call }
      waiting.push(entry)
      return () => void (waiting = waiting.filter(each => each !== entry))
    },
    random: () => 1,
    afterPaint: call => void clock.after(16, call),
  }
  async function forward(ms: number) {
    const until = time + ms
    for (;;) {
      const due = waiting.filter(each => each.at <= until).sort((a, b) => a.at - b.at)[0]
      if (!due) break
      waiting = waiting.filter(each => each !== due)
      time = Math.max(time, due.at)
      due.call()
      await settled()
    }
    time = until
    await settled()
  }
  return { clock, forward }
}

/** Lets the browser's database and all promises come to rest. */
export async function settled() {
  for (let turn = 0; turn < 12; turn++) await new Promise(resolve => setTimeout(resolve))
}

/** The server's side of saving as the contract has it: one log, a batch once for each client and sequence, a stale base turned away. */
export function memoryServer(start: Score) {
  let score = start
  const log: LoggedBatch[] = []
  const posts: Batch[] = []
  let outage: Failure | null = null
  let losesAnswer = false
  let answering: Promise<void> = Promise.resolve()

  function take(batch: Batch): PostAnswer {
    const known = log.find(each => each.clientId === batch.clientId && each.seq === batch.seq)
    if (known) return { kind: 'accepted', revision: known.revision }
    if (batch.base !== log.length) return { kind: 'stale', revision: log.length, missed: log.slice(batch.base) }
    const applied = applyEdits(score, batch.transactions.flatMap(each => each.edits))
    if (isRefused(applied)) return { kind: 'refused', reason: applied.refused.message }
    score = applied.score
    log.push({ revision: log.length + 1, clientId: batch.clientId, seq: batch.seq, transactions: batch.transactions })
    return { kind: 'accepted', revision: log.length }
  }
  const transport: Transport = {
    async post(batch) {
      posts.push(batch)
      if (outage) return outage
      const answer = take(structuredClone(batch))
      await answering
      return losesAnswer ? { kind: 'unreachable' } : answer
    },
    async since(revision): Promise<SinceAnswer> {
      const answer = { kind: 'since' as const, revision: log.length, batches: log.slice(revision) }
      await answering
      return outage ?? answer
    },
  }
  return {
    transport, posts, log, take,
    get score() { return score },
    get revision() { return log.length },
    fail: (failure: Failure | null) => void (outage = failure),
    loseAnswers: (loses: boolean) => void (losesAnswer = loses),
    /** Answers are on their way until the call that this gives back. */
    holdAnswers() {
      let letGo = () => {}
      answering = new Promise(resolve => (letGo = resolve))
      return letGo
    },
  }
}

/** Three empty bars: b0 b1 b2. */
export const threeBars = (): Score => {
  const { head, bars } = createScore({ title: 'Test' }, () => 'b0')
  return { head, bars: [...bars, { id: 'b1', voices: {} }, { id: 'b2', voices: {} }] }
}

export const voiceOf = (fret: number, string = 1): Voice =>
  ({ events: [{ id: 'e1', length: { base: 4, dots: 0 }, notes: [{ id: 'n1', string, fret }] }] })

/** Enters a fret in a bar's upper voice. */
export const entry = (bar: string, before: number | null, after: number): LoggedTransaction => ({
  label: `Enter fret ${after}`,
  edits: [{ kind: 'replaceVoice', bar, voice: 'upper', before: before === null ? null : voiceOf(before), after: voiceOf(after) }],
})

export const fretOf = (score: Score, bar: string): number | undefined =>
  score.bars.find(each => each.id === bar)?.voices.upper?.events[0]?.notes[0]?.fret
