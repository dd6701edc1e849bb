import 'fake-indexeddb/auto'
import { forceCloseDatabase, IDBFactory } from 'fake-indexeddb'
import { deleteDB } from 'idb'
import { beforeEach, describe, expect, it, vi } from 'vitest'
import { openWithUnsent } from '../../../composables/saving/opening'
import type { Reading } from '../../../composables/saving/readings'
import { createSaver } from '../../../composables/saving/saver'
import { createUnsentStore, UNSENT_DATABASE, type UnsentStore } from '../../../composables/saving/unsentStore'
import { saveSentence, type SaveStatus } from '../../../shared/editor/saving'
import type { Score } from '../../../shared/score/types'
import { entry, fretOf, memoryServer, settled, stoppedClock, threeBars } from './support'

beforeEach(() => void (globalThis.indexedDB = new IDBFactory()))

let tabs = 0

/** A tab on an arrangement, as the desk makes one. */
async function openTab(server: ReturnType<typeof memoryServer>, { live = [] as string[], user = 'maren', wrap = (store: UnsentStore) => store } = {}) {
  const clientId = `tab${tabs++}`
  const { clock, forward } = stoppedClock()
  const store = wrap(createUnsentStore('saltmarsh', user))
  const opened = await openWithUnsent({
    clientId, store, transport: server.transport, isLive: async id => live.includes(id), isLeft: () => false,
    load: async () => ({ id: 'saltmarsh', role: 'arranger', state: 'draft', revision: server.revision, score: server.score }),
  })
  const seen = { status: null as SaveStatus | null, score: opened.score as Score, readings: [...opened.readings] as Reading[], saves: 0 }
  const saver = createSaver({
    queue: opened.queue, saved: opened.detail.score, store, transport: server.transport, clock,
    onStatus: status => void (seen.status = status),
    onSaved: () => void seen.saves++,
    onRebased(score, readings) {
      seen.score = score
      seen.readings.push(...readings)
    },
    copy: async () => 'the whole arrangement',
  })
  await settled()
  return { clientId, saver, forward, store, seen, opened, says: () => saveSentence(seen.status!, time => `${time} ms`) }
}

describe('saving', () => {
  it('sends what was typed 600 ms after the last key, in one batch', async () => {
    const server = memoryServer(threeBars())
    const tab = await openTab(server)
    tab.saver.record(entry('b0', null, 1))
    await tab.forward(500)
    tab.saver.record(entry('b0', 1, 12))
    await tab.forward(599)
    expect(server.posts).toHaveLength(0)
    expect(tab.says()).toBe('Saving …')
    await tab.forward(1)
    expect(server.posts.map(each => [each.seq, each.base, each.transactions.length])).toEqual([[1, 0, 2]])
    expect(fretOf(server.score, 'b0')).toBe(12)
    expect(tab.says()).toBe('Saved 1100 ms')
    expect(await tab.store.queues()).toMatchObject([{ unsent: [], base: 1 }])
  })

  it('sends every 3 s while the keys never pause', async () => {
    const server = memoryServer(threeBars())
    const tab = await openTab(server)
    for (let fret = 0; fret < 20; fret++) {
      tab.saver.record(entry('b0', fret ? fret - 1 : null, fret))
      await tab.forward(200)
    }
    expect(server.posts.map(each => each.transactions.length)).toEqual([15])
  })

  it('keeps every edit on the device within two frames, before it is sent', async () => {
    const tab = await openTab(memoryServer(threeBars()))
    tab.saver.record(entry('b0', null, 3))
    await tab.forward(32)
    expect((await tab.store.queues())[0]?.unsent.map(each => each.label)).toEqual(['Enter fret 3'])
  })

  it('goes on while offline, says how many edits it keeps, tries again ever more rarely, and sends all when the network is back', async () => {
    const server = memoryServer(threeBars())
    server.fail({ kind: 'unreachable' })
    const tab = await openTab(server)
    tab.saver.record(entry('b0', null, 3))
    await tab.forward(600)
    tab.saver.record(entry('b1', null, 5))
    await tab.forward(20)
    expect(tab.says()).toBe('Offline, 2 edits kept on this device')
    await tab.forward(60_000)
    // Tries at 0.6 s and then 1, 2, 4, 8, 16 and 30 s later: 61.6 s is not reached.
    expect(server.posts).toHaveLength(6)
    expect(new Set(server.posts.map(each => each.seq))).toEqual(new Set([1]))
    server.fail(null)
    tab.saver.network(true)
    await settled()
    await tab.forward(600)
    expect([fretOf(server.score, 'b0'), fretOf(server.score, 'b1')]).toEqual([3, 5])
    expect(tab.says()).toMatch(/^Saved \d/)
  })

  it('does not apply twice what arrived although the answer was lost', async () => {
    const server = memoryServer(threeBars())
    const tab = await openTab(server)
    server.loseAnswers(true)
    tab.saver.record(entry('b0', null, 3))
    await tab.forward(600)
    expect(tab.says()).toBe('Offline, 1 edit kept on this device')
    server.loseAnswers(false)
    await tab.forward(1000)
    expect(server.log).toHaveLength(1)
    expect(tab.says()).toMatch(/^Saved/)
  })

  it('puts its work on top of what others saved in other voices', async () => {
    const server = memoryServer(threeBars())
    const tab = await openTab(server)
    server.take({ clientId: 'ines', seq: 1, base: 0, transactions: [entry('b1', null, 7)] })
    tab.saver.record(entry('b0', null, 3))
    await tab.forward(600)
    await tab.forward(600)
    expect([fretOf(server.score, 'b0'), fretOf(server.score, 'b1')]).toEqual([3, 7])
    expect([fretOf(tab.seen.score, 'b0'), fretOf(tab.seen.score, 'b1')]).toEqual([3, 7])
    expect(tab.seen.readings).toEqual([])
  })

  it('keeps both readings where the same voice of the same bar changed on both sides', async () => {
    const server = memoryServer(threeBars())
    const tab = await openTab(server)
    server.take({ clientId: 'ines', seq: 1, base: 0, transactions: [entry('b0', null, 7)] })
    tab.saver.record(entry('b0', null, 3))
    await tab.forward(1500)
    expect(fretOf(tab.seen.score, 'b0')).toBe(7)
    expect(tab.seen.readings.map(each => each.conflict)).toMatchObject([{ kind: 'voice', bar: 'b0', voice: 'upper', mine: { events: [{ notes: [{ fret: 3 }] }] } }])
    // It outlives the tab until a person has chosen.
    const next = await openTab(server)
    expect(next.opened.readings).toEqual(tab.seen.readings)
    await next.store.dropReading(tab.seen.readings[0]!.id)
    expect((await openTab(server)).opened.readings).toEqual([])
  })

  it('fetches what another tab saved, without anything of its own to send', async () => {
    const server = memoryServer(threeBars())
    const tab = await openTab(server)
    server.take({ clientId: 'ines', seq: 1, base: 0, transactions: [entry('b1', null, 7)] })
    await tab.saver.catchUp()
    expect(fretOf(tab.seen.score, 'b1')).toBe(7)
    tab.saver.record(entry('b0', null, 3))
    await tab.forward(600)
    expect(server.posts.at(-1)?.base).toBe(1)
  })

  it('stops when signed out and goes on after signing in', async () => {
    const server = memoryServer(threeBars())
    const tab = await openTab(server)
    server.fail({ kind: 'signed-out' })
    tab.saver.record(entry('b0', null, 3))
    await tab.forward(60_000)
    expect(server.posts).toHaveLength(1)
    expect(tab.says()).toBe('Signed out, 1 edit kept on this device')
    server.fail(null)
    await tab.saver.now()
    await settled()
    expect(fretOf(server.score, 'b0')).toBe(3)
  })

  it('keeps a copy of everything where the server refuses, and hands it out at the next opening', async () => {
    const server = memoryServer(threeBars())
    const tab = await openTab(server)
    server.fail({ kind: 'refused', reason: 'Bar 1: there is no string 9.' })
    tab.saver.record(entry('b0', null, 3))
    await tab.forward(60_000)
    expect(server.posts).toHaveLength(1)
    expect(tab.seen.status?.hindrance).toEqual({ kind: 'refused', reason: 'Bar 1: there is no string 9.' })
    tab.saver.record(entry('b1', null, 4))
    await tab.forward(5000)
    server.fail(null)
    const next = await openTab(server)
    expect(next.opened.refused).toMatchObject([{ clientId: tab.clientId, refused: { reason: 'Bar 1: there is no string 9.', copy: 'the whole arrangement' }, unsent: [{ label: 'Enter fret 3' }, { label: 'Enter fret 4' }] }])
    expect(next.opened.recovered).toBe(0)
  })
})

describe('what the server has refused', () => {
  const refusing = async () => {
    const server = memoryServer(threeBars())
    const tab = await openTab(server)
    server.fail({ kind: 'refused', reason: 'Bar 1: there is no string 9.' })
    tab.saver.record(entry('b0', null, 3))
    await tab.forward(600)
    tab.saver.record(entry('b1', null, 4))
    await tab.forward(5000)
    return { server, tab }
  }

  it('goes again when a person asks for it, under a number of its own and with what was done since', async () => {
    const { server, tab } = await refusing()
    server.fail(null)
    await tab.saver.now()
    expect(server.posts.map(each => [each.seq, each.transactions.length])).toEqual([[1, 1], [2, 2]])
    expect([fretOf(server.score, 'b0'), fretOf(server.score, 'b1')]).toEqual([3, 4])
    expect(tab.says()).toMatch(/^Saved \d/)
    const next = await openTab(server)
    expect([next.opened.refused, next.opened.recovered]).toEqual([[], 0])
  })

  it('stays with its reason and its copy when it is refused again', async () => {
    const { server, tab } = await refusing()
    await tab.saver.now()
    expect(server.posts).toHaveLength(2)
    expect(tab.seen.status).toMatchObject({ unsent: 2, hindrance: { kind: 'refused', reason: 'Bar 1: there is no string 9.' } })
    await tab.forward(60_000)
    expect(server.posts).toHaveLength(2)
    expect((await openTab(server)).opened.refused).toMatchObject([{ refused: { copy: 'the whole arrangement' }, unsent: [{ label: 'Enter fret 3' }, { label: 'Enter fret 4' }] }])
  })
})

describe('a browser database in trouble', () => {
  /** Writes fail while there is no room, and so do a number of them at the start. */
  const disk = (failures = 0) => {
    const state = { isFull: false, failures }
    const over = <T extends readonly unknown[]>(write: (...args: T) => Promise<void>) =>
      async (...args: T) => await (state.isFull || state.failures-- > 0 ? Promise.reject(new DOMException('No room left.', 'QuotaExceededError')) : write(...args))
    const wrap = (store: UnsentStore): UnsentStore => ({ ...store, append: over(store.append), replace: over(store.replace), acknowledge: over(store.acknowledge) })
    return { state, wrap }
  }
  const offlineTab = async (wrap?: (store: UnsentStore) => UnsentStore) => {
    const server = memoryServer(threeBars())
    const tab = await openTab(server, { wrap })
    tab.saver.network(false)
    return { server, tab }
  }

  it('makes a failed write good at once', async () => {
    const { server, tab } = await offlineTab(disk(1).wrap)
    tab.saver.record(entry('b0', null, 3))
    await tab.forward(32)
    expect(tab.says()).toBe('Offline, 1 edit kept on this device')
    tab.saver.stop()
    expect((await openTab(server)).opened.recovered).toBe(1)
  })

  it('makes it good with the next key where it can not at once, and says in between that the edit is not kept', async () => {
    const { state, wrap } = disk()
    const { server, tab } = await offlineTab(wrap)
    state.isFull = true
    tab.saver.record(entry('b0', null, 3))
    await tab.forward(32)
    expect(tab.says()).toBe('Offline, 1 edit only in this tab: keep it open')
    state.isFull = false
    tab.saver.record(entry('b1', null, 4))
    await tab.forward(32)
    expect(tab.says()).toBe('Offline, 2 edits kept on this device')
    tab.saver.stop()
    const next = await openTab(server)
    expect([fretOf(next.opened.score, 'b0'), fretOf(next.opened.score, 'b1')]).toEqual([3, 4])
  })

  it('sends the same batch from the next tab as from the one that could not keep its first edit', async () => {
    const server = memoryServer(threeBars())
    const { state, wrap } = disk()
    const tab = await openTab(server, { wrap })
    state.isFull = true
    tab.saver.record(entry('b0', null, 3))
    await tab.forward(32)
    state.isFull = false
    tab.saver.record(entry('b1', null, 4))
    server.loseAnswers(true)
    await tab.forward(600)
    tab.saver.stop()
    server.loseAnswers(false)
    await openTab(server)
    expect(server.posts.at(-1)).toEqual(server.posts[0])
    expect(server.posts[0]!.transactions).toHaveLength(2)
    expect(server.log).toHaveLength(1)
  })

  it('keeps readings set aside that a failed write did not', async () => {
    const server = memoryServer(threeBars())
    const { state, wrap } = disk()
    const tab = await openTab(server, { wrap })
    server.take({ clientId: 'ines', seq: 1, base: 0, transactions: [entry('b0', null, 7)] })
    tab.saver.record(entry('b0', null, 3))
    state.isFull = true
    await tab.forward(1500)
    expect(await tab.store.readings()).toEqual([])
    state.isFull = false
    tab.saver.record(entry('b1', null, 4))
    await tab.forward(32)
    expect(await tab.store.readings()).toEqual(tab.seen.readings)
    expect(tab.seen.readings).toHaveLength(1)
  })

  it('gives way when the database is taken away, and writes everything anew', async () => {
    const { server, tab } = await offlineTab()
    tab.saver.record(entry('b0', null, 3))
    await tab.forward(32)
    const blocked = vi.fn()
    await deleteDB(UNSENT_DATABASE, { blocked })
    expect(blocked).not.toHaveBeenCalled()
    tab.saver.record(entry('b1', null, 4))
    await tab.forward(32)
    expect(tab.says()).toBe('Offline, 2 edits kept on this device')
    tab.saver.stop()
    const next = await openTab(server)
    expect([fretOf(next.opened.score, 'b0'), fretOf(next.opened.score, 'b1')]).toEqual([3, 4])
  })

  it('opens the database again when the browser has closed it', async () => {
    const opens = vi.spyOn(indexedDB, 'open')
    const { server, tab } = await offlineTab()
    const connections = opens.mock.results.map(({ value }) => (value as IDBOpenDBRequest).result)
    tab.saver.record(entry('b0', null, 3))
    await tab.forward(32)
    // Indexed Database API 3.0 (W3C), "close a database connection" with the forced flag: the connection is told by an event.
    for (const connection of connections) forceCloseDatabase(connection as never)
    tab.saver.record(entry('b1', null, 4))
    await tab.forward(32)
    expect(tab.says()).toBe('Offline, 2 edits kept on this device')
    tab.saver.stop()
    expect((await openTab(server)).opened.recovered).toBe(2)
  })
})

describe('a page that was left', () => {
  it('is not changed by an answer that comes later, and changes nothing on the device', async () => {
    const server = memoryServer(threeBars())
    const left = await openTab(server)
    server.take({ clientId: 'ines', seq: 1, base: 0, transactions: [entry('b0', null, 7)] })
    left.saver.record(entry('b0', null, 3))
    const letGo = server.holdAnswers()
    await left.forward(600)
    await left.saver.leave()
    left.saver.stop()
    const before = { ...left.seen }
    const kept = await left.store.queues()
    letGo()
    await left.forward(60_000)
    expect(left.seen).toEqual(before)
    expect(await left.store.queues()).toEqual(kept)
    expect(new Set(server.posts.map(each => each.seq))).toEqual(new Set([1]))
    // The next opening asks for the same choice, once.
    const next = await openTab(server)
    expect(next.opened.readings).toMatchObject([{ conflict: { kind: 'voice', bar: 'b0' } }])
  })

  it('takes nothing in that it had asked for', async () => {
    const server = memoryServer(threeBars())
    const left = await openTab(server)
    server.take({ clientId: 'ines', seq: 1, base: 0, transactions: [entry('b1', null, 7)] })
    const letGo = server.holdAnswers()
    const asked = left.saver.catchUp()
    left.saver.stop()
    const before = { ...left.seen }
    letGo()
    await asked
    await left.forward(5000)
    expect(left.seen).toEqual(before)
    expect(await left.store.queues()).toEqual([])
  })

  it('sends nothing and tries nothing again', async () => {
    const server = memoryServer(threeBars())
    const left = await openTab(server)
    server.fail({ kind: 'unreachable' })
    left.saver.record(entry('b0', null, 3))
    await left.forward(600)
    left.saver.stop()
    left.saver.network(true)
    await left.saver.now()
    await left.forward(60_000)
    expect(server.posts).toHaveLength(1)
  })

  it.each([
    [{ kind: 'signed-out' }],
    [{ kind: 'forbidden', reason: 'It is not yours.' }],
    [{ kind: 'refused', reason: 'Bar 1: there is no string 9.' }],
  ] as const)('has kept its last edit by the time it says so: %o', async (failure) => {
    const server = memoryServer(threeBars())
    const left = await openTab(server)
    server.fail(failure)
    left.saver.record(entry('b0', null, 3))
    await left.forward(600)
    left.saver.record(entry('b1', null, 4))
    const leaving = left.saver.leave()
    left.saver.stop()
    await leaving
    expect((await left.store.queues())[0]?.unsent.map(each => each.label)).toEqual(['Enter fret 3', 'Enter fret 4'])
    expect(server.posts).toHaveLength(1)
  })
})

describe('a closed tab', () => {
  it('leaves its edits to the next one', async () => {
    const server = memoryServer(threeBars())
    const closed = await openTab(server)
    closed.saver.record(entry('b0', null, 3))
    await closed.forward(32)
    closed.saver.stop()
    const next = await openTab(server)
    expect(fretOf(next.opened.score, 'b0')).toBe(3)
    await next.forward(600)
    expect(fretOf(server.score, 'b0')).toBe(3)
    expect((await next.store.queues()).map(each => [each.clientId, each.unsent.length])).toEqual([[next.clientId, 0]])
  })

  it('sends what it can while closing; the next tab does not send it again', async () => {
    const server = memoryServer(threeBars())
    const closed = await openTab(server)
    closed.saver.record(entry('b0', null, 3))
    closed.saver.leave()
    closed.saver.stop()
    await settled()
    expect(server.log).toHaveLength(1)
    const next = await openTab(server)
    await next.forward(5000)
    expect(server.log).toHaveLength(1)
    expect(fretOf(next.opened.score, 'b0')).toBe(3)
  })

  it('is told from an open one, whose queue is left alone', async () => {
    const server = memoryServer(threeBars())
    const first = await openTab(server)
    server.fail({ kind: 'unreachable' })
    first.saver.record(entry('b0', null, 3))
    await first.forward(600)
    server.fail(null)
    const second = await openTab(server, { live: [first.clientId] })
    await second.forward(5000)
    expect(server.log).toHaveLength(0)
    expect(second.opened.recovered).toBe(0)
    first.saver.network(true)
    await settled()
    expect(server.log.map(each => each.clientId)).toEqual([first.clientId])
  })

  it('keeps one person\'s work from another on the same device', async () => {
    const server = memoryServer(threeBars())
    const closed = await openTab(server)
    closed.saver.record(entry('b0', null, 3))
    await closed.forward(32)
    closed.saver.stop()
    const other = await openTab(server, { user: 'teo' })
    expect(other.opened.recovered).toBe(0)
    expect((await openTab(server)).opened.recovered).toBe(1)
  })

  it('does not open while the server can not be asked for what was on its way', async () => {
    const server = memoryServer(threeBars())
    const closed = await openTab(server)
    server.fail({ kind: 'unreachable' })
    closed.saver.record(entry('b0', null, 3))
    await closed.forward(600)
    closed.saver.stop()
    await expect(openTab(server)).rejects.toMatchObject({ failure: { kind: 'unreachable' } })
    server.fail(null)
    expect((await openTab(server)).opened.detail.revision).toBe(1)
  })
})
