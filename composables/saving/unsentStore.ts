import { openDB, type DBSchema, type IDBPDatabase, type IDBPTransaction } from 'idb'
import type { SaveQueue, Unsent } from '#shared/editor/saving'
import type { Reading } from './readings'

/** Why the server would not take a queue, with a copy of the whole arrangement as it stood on this device. */
export interface RefusedCopy { readonly reason: string, readonly at: number, readonly copy: string }

/** The head of a queue as it is kept; its transactions are records of their own, so that a key writes one small record. */
interface KeptHead extends Omit<SaveQueue, 'unsent'> {
  readonly arrangement: string
  readonly user: string
  readonly refused?: RefusedCopy
}

export interface KeptQueue extends SaveQueue { readonly refused?: RefusedCopy }

/** A reading set aside, until a person has chosen. */
interface KeptReading { readonly id: string, readonly arrangement: string, readonly user: string, readonly reading: Reading }

interface Unsents extends DBSchema {
  queues: { key: string, value: KeptHead, indexes: { arrangement: string } }
  unsent: { key: [string, number], value: Unsent & { clientId: string } }
  readings: { key: string, value: KeptReading, indexes: { arrangement: string } }
}

/** Unsent work of all tabs in the browser's own database. Every call is one transaction: all of it is kept or none. */
export interface UnsentStore {
  /** Adds the last transactions of a queue to the others. Rejects where these are not all there, as when the browser has cleared its data. */
  append: (queue: SaveQueue, transactions: readonly Unsent[]) => Promise<void>
  putHead: (queue: SaveQueue, refused?: RefusedCopy) => Promise<void>
  /** Drops what the server has: everything up to and including transaction `through`. */
  acknowledge: (queue: SaveQueue, through: number) => Promise<void>
  /** Writes the queue anew, takes `from` other clients' queues away whose work it holds now, and keeps these readings beside it. */
  replace: (queue: SaveQueue, from: readonly string[], readings: readonly Reading[]) => Promise<void>
  queues: () => Promise<readonly KeptQueue[]>
  readings: () => Promise<readonly Reading[]>
  dropReading: (id: string) => Promise<void>
  dropQueue: (clientId: string) => Promise<void>
}

type Writing = IDBPTransaction<Unsents, ('queues' | 'unsent' | 'readings')[], 'readwrite'>

export const UNSENT_DATABASE = 'copperwound-unsent'

/** @param lost the connection is no more: the browser closed it, or it made way for a newer version or a deletion */
const open = (lost: () => void): Promise<IDBPDatabase<Unsents>> => openDB<Unsents>(UNSENT_DATABASE, 1, {
  upgrade(db) {
    db.createObjectStore('queues', { keyPath: 'clientId' }).createIndex('arrangement', 'arrangement')
    db.createObjectStore('unsent', { keyPath: ['clientId', 'number'] })
    db.createObjectStore('readings', { keyPath: 'id' }).createIndex('arrangement', 'arrangement')
  },
  terminated: lost,
  blocking(_current, _blocked, event) {
    lost()
    const connection = event.target as IDBDatabase
    connection.close()
  },
})

const allOf = (clientId: string, through = Infinity): IDBKeyRange => IDBKeyRange.bound([clientId, -Infinity], [clientId, through])

/** The unsent work of one person on one arrangement: another person who signs in on the same device neither sees nor sends it. */
export function createUnsentStore(arrangement: string, user: string): UnsentStore {
  let opening: Promise<IDBPDatabase<Unsents>> | null = null
  const database = (): Promise<IDBPDatabase<Unsents>> => {
    if (opening) return opening
    // The next call tries anew.
    const lost = () => void (opening === current && (opening = null))
    const current = open(lost)
    opening = current
    current.catch(lost)
    return current
  }

  const headOf = ({ unsent: _, ...head }: SaveQueue, refused?: RefusedCopy): KeptHead =>
    ({ ...head, arrangement, user, ...(refused && { refused }) })

  const write = async (work: (transaction: Writing) => readonly Promise<unknown>[]): Promise<void> => {
    const transaction = (await database()).transaction(['queues', 'unsent', 'readings'], 'readwrite')
    await Promise.all([...work(transaction), transaction.done])
  }
  const put = (transaction: Writing, queue: SaveQueue, transactions: readonly Unsent[]) => [
    transaction.objectStore('queues').put(headOf(queue)),
    ...transactions.map(each => transaction.objectStore('unsent').put({ ...each, clientId: queue.clientId })),
  ]
  const drop = (transaction: Writing, clientId: string) => [
    transaction.objectStore('queues').delete(clientId),
    transaction.objectStore('unsent').delete(allOf(clientId)),
  ]

  const expectWhole = async (transaction: Writing, { clientId, unsent }: SaveQueue): Promise<void> => {
    if (await transaction.objectStore('unsent').count(allOf(clientId)) !== unsent.length) transaction.abort()
  }

  return {
    append: (queue, transactions) => write(transaction => [...put(transaction, queue, transactions), expectWhole(transaction, queue)]),
    putHead: (queue, refused) => write(transaction => [transaction.objectStore('queues').put(headOf(queue, refused))]),
    acknowledge: (queue, through) => write(transaction => [
      ...put(transaction, queue, []),
      transaction.objectStore('unsent').delete(allOf(queue.clientId, through)),
    ]),
    replace: (queue, from, readings) => write(transaction => [
      ...[queue.clientId, ...from].flatMap(clientId => drop(transaction, clientId)),
      ...put(transaction, queue, queue.unsent),
      ...readings.map(reading => transaction.objectStore('readings').put({ id: reading.id, arrangement, user, reading })),
    ]),
    queues: async () => {
      const transaction = (await database()).transaction(['queues', 'unsent'])
      const heads = (await transaction.objectStore('queues').index('arrangement').getAll(arrangement)).filter(head => head.user === user)
      return await Promise.all(heads.map(async ({ arrangement: _place, user: _owner, ...head }) => {
        const records = await transaction.objectStore('unsent').getAll(allOf(head.clientId))
        return { ...head, unsent: records.map(({ clientId: _client, ...each }) => each) }
      }))
    },
    readings: async () => (await (await database()).getAllFromIndex('readings', 'arrangement', arrangement)).filter(each => each.user === user).map(each => each.reading),
    dropReading: id => write(transaction => [transaction.objectStore('readings').delete(id)]),
    dropQueue: clientId => write(transaction => drop(transaction, clientId)),
  }
}
