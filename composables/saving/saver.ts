import { applyEdits, isRefused } from '#shared/edits'
import {
  acknowledge, batchOf, enqueue, fittingCount, isPassing, rebaseQueue, retryDelay, sendTime, startSending, withdraw,
  type Hindrance, type LoggedTransaction, type SaveQueue, type SaveStatus,
} from '#shared/editor/saving'
import { rebaseOnto } from '#shared/editor/rebase'
import type { LoggedBatch } from '#shared/schemas'
import type { Score } from '#shared/score/types'
import type { Clock } from './clock'
import { createKeeping } from './keeping'
import { readingsOf, type Reading } from './readings'
import type { Failure, PostAnswer, Transport } from './transport'
import type { RefusedCopy, UnsentStore } from './unsentStore'

export interface SaverOptions {
  readonly queue: SaveQueue
  /** The arrangement as saved at `queue.base`. */
  readonly saved: Score
  readonly store: UnsentStore
  readonly transport: Transport
  readonly clock: Clock
  readonly onStatus: (status: SaveStatus) => void
  /** What others saved has come in below the unsent work: the arrangement as it stands now, and the readings set aside. */
  readonly onRebased: (score: Score, readings: readonly Reading[]) => void
  /** The server has a new revision of ours. */
  readonly onSaved: (revision: number) => void
  /** The whole arrangement as it stands, as a file: kept where the server refuses it. */
  readonly copy: () => Promise<string>
}

export interface Saver {
  record: (transaction: LoggedTransaction) => void
  /** Sends what there is without waiting for a pause or the next try; also after a person has seen to what hindered it. What the server has refused is tried once more. */
  now: () => Promise<void>
  /** Fetches what others saved meanwhile. */
  catchUp: () => Promise<void>
  /** The network went or came, as the browser says. */
  network: (online: boolean) => void
  /** The page is being closed or left: what fits goes out in a request that outlives it. The answer comes when all is kept on the device. */
  leave: () => Promise<unknown>
  /** Ends the saver. The work is the next opening's from now on: answers that are still on their way change nothing, on the page or on the device. */
  stop: () => void
}

/** Browsers take 64 KiB from a page that is closing (Fetch standard, keepalive); the rest is for the frame around it. */
const LEAVING_BYTES = 60_000

/**
 * Sends one tab's work: every transaction is kept on the device, goes out after a pause in the typing, and stays until the server
 * has answered for it. One request at a time.
 */
export function createSaver(options: SaverOptions): Saver {
  const { store, transport, clock } = options
  const keeping = createKeeping(store, clock, () => publish())
  let { queue, saved } = options
  let stopped = false
  let busy = false
  let failures = 0
  let hindrance: Hindrance | null = null
  let savedAt: number | null = null
  let oldest: number | null = queue.unsent.length ? clock.now() : null
  let newest = clock.now()
  let cancelTimer = () => {}
  let shown = ''

  function publish(): void {
    const { isKept: kept, isDue } = keeping
    // Edits are not said to be kept before they are: the write that is due publishes.
    if (stopped || (hindrance && kept && isDue)) return
    // While all goes well the count is nobody's concern, and every key would redraw the header.
    const { length } = queue.unsent
    const status: SaveStatus = { unsent: hindrance || !kept ? length : Math.min(1, length), kept, hindrance, savedAt }
    const text = JSON.stringify(status)
    if (text !== shown) options.onStatus(status)
    shown = text
  }

  const refusedCopy = (reason: string) => async (): Promise<RefusedCopy> => ({ reason, at: clock.now(), copy: await options.copy() })
  const keepQueue = (): Promise<unknown> => keeping.append(queue, hindrance?.kind === 'refused' ? refusedCopy(hindrance.reason) : undefined)

  function schedule(ms: number): void {
    cancelTimer()
    cancelTimer = clock.after(Math.max(0, ms), () => void send())
  }

  /** The next sending: after the pause, or when the next try after a failure is due, which typing does not bring forward. */
  function scheduleNext(): void {
    if (stopped || busy || failures || !isPassing(hindrance) || oldest === null) return
    schedule(sendTime(oldest, newest) - clock.now())
  }

  /** @param again what the server has refused, too */
  async function send(again = false): Promise<void> {
    if (stopped || busy || !queue.unsent.length || !(again || isPassing(hindrance))) return
    cancelTimer()
    busy = true
    if (hindrance?.kind === 'refused') queue = withdraw(queue)
    queue = startSending(queue)
    publish()
    await keepQueue()
    const batch = batchOf(queue)
    const answer = batch && !stopped && await transport.post(batch).catch((): Failure => ({ kind: 'unreachable' }))
    busy = false
    if (stopped) return
    if (answer) settle(answer)
    publish()
    scheduleNext()
  }

  function settle(answer: PostAnswer): void {
    switch (answer.kind) {
      case 'accepted': return accept(answer.revision)
      case 'stale': return takeMissed(answer.revision, answer.missed)
      default: return hinder(answer)
    }
  }

  function accept(revision: number): void {
    const sent = queue.unsent.slice(0, queue.sending?.count ?? 0)
    const applied = applyEdits(saved, sent.flatMap(each => each.edits))
    if (!isRefused(applied)) saved = applied.score
    queue = acknowledge(queue, revision)
    failures = 0
    hindrance = null
    savedAt = clock.now()
    oldest = queue.unsent.length ? clock.now() : null
    void keeping.acknowledge(queue, sent.at(-1)?.number ?? 0)
    options.onSaved(revision)
  }

  /** Puts the unsent work on top of what others saved. */
  function takeMissed(revision: number, missed: readonly LoggedBatch[]): void {
    const theirs = applyEdits(saved, missed.flatMap(batch => batch.transactions).flatMap(each => each.edits))
    if (isRefused(theirs)) return hinder({ kind: 'forbidden', reason: 'what others saved meanwhile does not fit what this page shows. Reload the page; your edits are kept.' })
    const rebased = rebaseOnto(theirs.score, queue.unsent, saved)
    const readings = readingsOf(rebased.conflicts, `${queue.clientId}-${revision}`)
    saved = theirs.score
    queue = rebaseQueue(queue, revision, rebased.transactions)
    hindrance = null
    failures = 0
    oldest = queue.unsent.length ? newest : null
    void keeping.replace(queue, readings)
    options.onRebased(rebased.score, readings)
  }

  function hinder(failure: Failure): void {
    failures += 1
    const wait = retryDelay(failures, clock.random())
    switch (failure.kind) {
      case 'unreachable':
        hindrance = { kind: 'offline' }
        return schedule(wait)
      case 'trouble':
        hindrance = { kind: 'trouble', reason: failure.reason }
        return schedule(Math.max(wait, failure.after ?? 0))
    }
    hindrance = failure
    void keepQueue()
  }

  async function retry(): Promise<void> {
    if (stopped) return
    const done = hindrance?.kind === 'offline' ? !queue.unsent.length : !isPassing(hindrance) && hindrance?.kind !== 'refused'
    if (done) hindrance = null
    failures = 0
    publish()
    await send(true)
  }

  publish()
  scheduleNext()

  return {
    record(transaction) {
      queue = enqueue(queue, transaction)
      const isFirst = !keeping.isDue
      const added = queue.unsent.at(-1)
      if (added) keeping.add(added)
      newest = clock.now()
      oldest ??= newest
      if (isFirst) clock.afterPaint(() => void (!stopped && keeping.isDue && keepQueue()))
      publish()
      scheduleNext()
    },
    now: retry,
    async catchUp() {
      // A batch without an answer may be among what the server has: its own retry clears that up first.
      if (stopped || busy || queue.sending || !isPassing(hindrance)) return
      busy = true
      const answer = await transport.since(queue.base).catch((): Failure => ({ kind: 'unreachable' }))
      busy = false
      if (stopped) return
      if (answer.kind === 'since' && answer.batches.length && !queue.sending) takeMissed(answer.revision, answer.batches)
      publish()
      scheduleNext()
    },
    network(online) {
      if (online) return void retry()
      if (isPassing(hindrance)) hindrance = { kind: 'offline' }
      publish()
    },
    leave() {
      if (stopped) return keeping.settled()
      const isSending = isPassing(hindrance) && queue.unsent.length > 0
      if (isSending) {
        const started = startSending(queue, fittingCount(queue.unsent, LEAVING_BYTES))
        if (started.sending?.count) queue = started
      }
      if (isSending || keeping.isDue) void keepQueue()
      const batch = isSending ? batchOf(queue) : null
      if (batch && fittingCount(queue.unsent.slice(0, queue.sending?.count), LEAVING_BYTES) === queue.sending?.count) void transport.post(batch, true).catch(() => null)
      return keeping.settled()
    },
    stop() {
      stopped = true
      cancelTimer()
    },
  }
}
