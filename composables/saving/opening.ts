import { acknowledge, batchOf, emptyQueue, rebaseQueue, type SaveQueue } from '#shared/editor/saving'
import { rebaseOnto } from '#shared/editor/rebase'
import type { ArrangementDetail } from '#shared/schemas'
import type { Score } from '#shared/score/types'
import { readingsOf, type Reading } from './readings'
import type { Failure, Transport } from './transport'
import type { KeptQueue, UnsentStore } from './unsentStore'

export interface OpenOptions {
  readonly clientId: string
  readonly store: UnsentStore
  readonly transport: Transport
  readonly load: () => Promise<ArrangementDetail>
  /** Whether the tab of this client is still open: its queue is its own affair. */
  readonly isLive: (clientId: string) => Promise<boolean>
  /** Whether the page that opens was left meanwhile: what closed tabs have left is then another opening's. */
  readonly isLeft: () => boolean
}

export interface Opened {
  readonly detail: ArrangementDetail
  /** As saved, with the unsent work of closed tabs on top. */
  readonly score: Score
  readonly queue: SaveQueue
  /** Readings that wait for a choice. */
  readonly readings: readonly Reading[]
  /** Work that the server would not take. */
  readonly refused: readonly KeptQueue[]
  /** Transactions found on this device. */
  readonly recovered: number
}

export class OpeningFailed extends Error {
  constructor(readonly failure: Failure) { super(failure.kind) }
}

/** Asks once more for the batch that a closed tab left on its way: the same client and sequence, so that the server has it once. */
async function settle(queue: KeptQueue, { store, transport }: OpenOptions): Promise<KeptQueue> {
  const batch = batchOf(queue)
  if (!batch) return queue
  const answer = await transport.post(batch)
  switch (answer.kind) {
    case 'accepted': {
      const rest = acknowledge(queue, answer.revision)
      await store.acknowledge(rest, queue.unsent[batch.transactions.length - 1]?.number ?? 0)
      return rest
    }
    case 'stale': return queue
    case 'refused': {
      const refused = { reason: answer.reason, at: Date.now(), copy: JSON.stringify(queue.unsent) }
      await store.putHead(queue, refused)
      return { ...queue, refused }
    }
    default: throw new OpeningFailed(answer)
  }
}

/**
 * Opens an arrangement with whatever closed tabs have left unsent on this device. First what was on its way is cleared up, then
 * the arrangement is read, then the rest is put on top of it and becomes this tab's own.
 * @throws OpeningFailed when the server can't be asked; nothing is lost
 */
export async function openWithUnsent(options: OpenOptions): Promise<Opened> {
  const { store, clientId, load } = options
  // Asked for at once; only where a closed tab's batch has gone in since it is asked for again.
  const early = load()
  early.catch(() => null)
  const left: KeptQueue[] = []
  const kept = await store.queues().catch(() => [])
  const before = new Map(kept.map(queue => [queue.clientId, queue.base]))
  for (const queue of kept) {
    if (!await options.isLive(queue.clientId)) left.push(queue.refused || !queue.unsent.length ? queue : await settle(queue, options))
  }
  const detail = left.some(queue => queue.base !== before.get(queue.clientId)) ? await load() : await early
  const found = left.filter(queue => !queue.refused)
  const mine = found.flatMap(queue => queue.unsent)
  const rebased = rebaseOnto(detail.score, mine)
  const queue = rebaseQueue(emptyQueue(clientId, detail.revision), detail.revision, rebased.transactions)
  const aside = readingsOf(rebased.conflicts, `${clientId}-${detail.revision}`)
  if (found.length && !options.isLeft()) await store.replace(queue, found.map(each => each.clientId), aside)
  const readings = await store.readings().catch(() => aside)
  return { detail, score: rebased.score, queue, readings, refused: left.filter(each => each.refused), recovered: mine.length }
}
