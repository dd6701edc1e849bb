import type { Edit } from '../edits'

/** One step of work as it travels: what the log keeps of a transaction. */
export interface LoggedTransaction { readonly label: string, readonly edits: readonly Edit[] }

/** What is posted at once. The same client and sequence always carry the same transactions, so that a retry is not applied twice. */
export interface Batch {
  readonly clientId: string
  readonly seq: number
  readonly base: number
  readonly transactions: readonly LoggedTransaction[]
}

/** A transaction that the server has not acknowledged yet; `number` orders it among its client's. */
export interface Unsent extends LoggedTransaction { readonly number: number }

/** The unsent work of one client (one open tab) on one arrangement. */
export interface SaveQueue {
  readonly clientId: string
  /** Revision of the arrangement that the first unsent transaction follows. */
  readonly base: number
  readonly nextSeq: number
  readonly nextNumber: number
  readonly unsent: readonly Unsent[]
  /** The batch on its way: the first `count` of the unsent. It stays until the server has answered for it. */
  readonly sending: { readonly seq: number, readonly base: number, readonly count: number } | null
}

export const emptyQueue = (clientId: string, base: number): SaveQueue =>
  ({ clientId, base, nextSeq: 1, nextNumber: 1, unsent: [], sending: null })

export const enqueue = (queue: SaveQueue, { label, edits }: LoggedTransaction): SaveQueue => ({
  ...queue,
  nextNumber: queue.nextNumber + 1,
  unsent: [...queue.unsent, { number: queue.nextNumber, label, edits }],
})

/** Transactions in one request at most: an hour's work offline goes out in several. */
export const BATCH_LIMIT = 100

/** Marks the next batch as on its way. A batch without an answer is given again as it was. */
export function startSending(queue: SaveQueue, limit = BATCH_LIMIT): SaveQueue {
  if (queue.sending || !queue.unsent.length) return queue
  return {
    ...queue,
    nextSeq: queue.nextSeq + 1,
    sending: { seq: queue.nextSeq, base: queue.base, count: Math.min(limit, queue.unsent.length) },
  }
}

/** The batch on its way; null when there is none. */
export const batchOf = ({ clientId, sending, unsent }: SaveQueue): Batch | null => sending && {
  clientId,
  seq: sending.seq,
  base: sending.base,
  transactions: unsent.slice(0, sending.count).map(({ label, edits }) => ({ label, edits })),
}

/** The server has the batch on its way, as this revision. */
export const acknowledge = (queue: SaveQueue, revision: number): SaveQueue => ({
  ...queue, base: revision, sending: null, unsent: queue.unsent.slice(queue.sending?.count ?? 0),
})

/** The server has answered that the batch on its way was not applied; these transactions follow `revision` instead. */
export const rebaseQueue = (queue: SaveQueue, revision: number, transactions: readonly LoggedTransaction[]): SaveQueue =>
  transactions.reduce(enqueue, { ...queue, base: revision, sending: null, unsent: [] })

/** Milliseconds without a key before the work is sent, and the longest that it waits while keys keep coming. */
export const QUIET_MS = 600
export const LONGEST_MS = 3000

/** When to send (ms), given when the oldest unsent and the newest transaction were made. */
export const sendTime = (oldest: number, newest: number): number => Math.min(newest + QUIET_MS, oldest + LONGEST_MS)

export const RETRY_MS = { first: 1000, longest: 30_000 } as const

/** Milliseconds until the next try: doubling from one second to thirty, spread by half so that many clients do not come back at once.
 * @param failures tries that failed in a row, from 1
 * @param random from 0 up to 1 */
export const retryDelay = (failures: number, random: number): number =>
  Math.min(RETRY_MS.longest, RETRY_MS.first * 2 ** (failures - 1)) * (0.5 + random / 2)

/** How the work stands, as the header says it. `unsent` counts transactions that the server has not acknowledged. */
export type SaveStatus =
  | { readonly kind: 'saved', readonly at: number | null }
  | { readonly kind: 'saving' }
  | { readonly kind: 'offline', readonly unsent: number, readonly kept: boolean }
  | { readonly kind: 'failed', readonly unsent: number, readonly reason: string }
  | { readonly kind: 'signed-out', readonly unsent: number }
  | { readonly kind: 'refused', readonly unsent: number, readonly reason: string }

const edits = (count: number): string => (count === 1 ? '1 edit' : `${count} edits`)

/** One line for the header.
 * @param clock turns milliseconds into a time of day */
export function saveSentence(status: SaveStatus, clock: (time: number) => string): string {
  switch (status.kind) {
    case 'saved': return status.at === null ? 'Saved' : `Saved ${clock(status.at)}`
    case 'saving': return 'Saving …'
    case 'offline': return status.kept
      ? `Offline, ${edits(status.unsent)} kept on this device`
      : `Offline, ${edits(status.unsent)} only in this tab: keep it open`
    case 'failed': return `Not saved, ${edits(status.unsent)} kept: ${status.reason}`
    case 'signed-out': return `Signed out, ${edits(status.unsent)} kept on this device`
    case 'refused': return `Not saved: ${status.reason}`
  }
}
