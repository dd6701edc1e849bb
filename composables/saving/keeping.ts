import type { SaveQueue, Unsent } from '#shared/editor/saving'
import type { Clock } from './clock'
import type { Reading } from './readings'
import type { RefusedCopy, UnsentStore } from './unsentStore'

/** A write to the browser's database that takes longer than this (ms) does not hold up the sending. */
const WRITE_PATIENCE = 1000

/** One tab's writes to the browser's database. They go in the order of the calls, and what one could not keep is in the next. */
export interface Keeping {
  /** Whether the last write went through. */
  readonly isKept: boolean
  /** Whether there are transactions that no write was begun for. */
  readonly isDue: boolean
  add: (transaction: Unsent) => void
  /** Keeps the queue with what was added.
   * @param refused why the server would not take it, where that is so */
  append: (queue: SaveQueue, refused?: () => Promise<RefusedCopy>) => Promise<unknown>
  /** The server has everything up to and including transaction `through`. */
  acknowledge: (queue: SaveQueue, through: number) => Promise<unknown>
  /** Keeps a queue that was made anew, and the readings set aside. */
  replace: (queue: SaveQueue, readings: readonly Reading[]) => Promise<unknown>
  /** When all writes have come to their end, or have taken too long. */
  settled: () => Promise<unknown>
}

/** @param onWritten a write has come to its end */
export function createKeeping(store: UnsentStore, clock: Clock, onWritten: () => void): Keeping {
  let due: readonly Unsent[] = []
  let owed: readonly Reading[] = []
  let isKept = true
  let writes: Promise<unknown> = Promise.resolve()

  const settled = (): Promise<unknown> => Promise.race([writes, new Promise<void>(resolve => void clock.after(WRITE_PATIENCE, resolve))])

  async function writeWhole(queue: SaveQueue): Promise<void> {
    const readings = owed
    await store.replace(queue, [], readings)
    owed = owed.filter(each => !readings.includes(each))
  }

  /** A step upon what is kept already. Where that is not all there, the queue is written whole: a gap in it would pass for other work at the next opening. */
  const step = (queue: SaveQueue, write: () => Promise<void>): Promise<void> =>
    isKept ? write().catch(() => writeWhole(queue)) : writeWhole(queue)

  function enqueue(write: () => Promise<void>): Promise<unknown> {
    writes = writes.then(write).then(() => true, () => false).then((done) => {
      isKept = done
      onWritten()
    })
    return settled()
  }

  return {
    get isKept() { return isKept },
    get isDue() { return due.length > 0 },
    add: transaction => void (due = [...due, transaction]),
    append(queue, refused) {
      const added = due
      due = []
      return enqueue(async () => {
        await step(queue, () => store.append(queue, added))
        if (refused) await store.putHead(queue, await refused())
      })
    },
    acknowledge: (queue, through) => enqueue(() => step(queue, () => store.acknowledge(queue, through))),
    replace(queue, readings) {
      due = []
      owed = [...owed, ...readings]
      return enqueue(() => writeWhole(queue))
    },
    settled,
  }
}
