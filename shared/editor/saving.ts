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

/** How many of the first unsent fit into a request of so many bytes, counted as UTF-16 units of their JSON with room to spare. */
export function fittingCount(unsent: readonly Unsent[], bytes: number): number {
  let left = bytes
  const over = unsent.findIndex(each => (left -= 2 * JSON.stringify(each).length) < 0)
  return over < 0 ? unsent.length : over
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

/** The server has refused the batch on its way: what is in it goes again under a number of its own, with what was done since. */
export const withdraw = (queue: SaveQueue): SaveQueue => ({ ...queue, sending: null })

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

/** What keeps work from being saved. Being offline and a server in trouble pass by themselves; the others need a person. */
export type Hindrance
  = | { readonly kind: 'offline' }
    | { readonly kind: 'trouble', readonly reason: string }
    | { readonly kind: 'forbidden', readonly reason: string }
    | { readonly kind: 'signed-out' }
    | { readonly kind: 'refused', readonly reason: string }

export const isPassing = (hindrance: Hindrance | null): boolean => hindrance === null || hindrance.kind === 'offline' || hindrance.kind === 'trouble'

/** How the work stands. */
export interface SaveStatus {
  /** Transactions that the server has not acknowledged. */
  readonly unsent: number
  /** Whether they are in the browser's own database, and so survive a closed tab. */
  readonly kept: boolean
  readonly hindrance: Hindrance | null
  /** When the server last acknowledged something (ms); null: not since the arrangement was opened. */
  readonly savedAt: number | null
}

const edits = (count: number): string => (count === 1 ? '1 edit' : `${count} edits`)

/** One line for the header.
 * @param clock turns milliseconds into a time of day */
export function saveSentence({ unsent, kept, hindrance, savedAt }: SaveStatus, clock: (time: number) => string): string {
  const where = kept ? `${edits(unsent)} kept on this device` : `${edits(unsent)} only in this tab: keep it open`
  switch (hindrance?.kind) {
    case 'offline': return unsent ? `Offline, ${where}` : 'Offline, all saved'
    case 'signed-out': return `Signed out, ${where}`
    case 'trouble': case 'forbidden': case 'refused': return unsent ? `Not saved, ${where}` : 'Not connected'
    default: return unsent ? 'Saving …' : savedAt === null ? 'Saved' : `Saved ${clock(savedAt)}`
  }
}
