import 'fake-indexeddb/auto'
import { IDBFactory } from 'fake-indexeddb'
import { beforeEach, describe, expect, it } from 'vitest'
import { openWithUnsent } from '../../../composables/saving/opening'
import type { Reading } from '../../../composables/saving/readings'
import { createSaver } from '../../../composables/saving/saver'
import { createUnsentStore } from '../../../composables/saving/unsentStore'
import { saveSentence, type SaveStatus } from '../../../shared/editor/saving'
import type { Score } from '../../../shared/score/types'
import { entry, fretOf, memoryServer, settled, stoppedClock, threeBars } from './support'

beforeEach(() => void (globalThis.indexedDB = new IDBFactory()))

let tabs = 0

/** A tab on an arrangement, as the desk makes one. */
async function openTab(server: ReturnType<typeof memoryServer>, { live = [] as string[], user = 'maren' } = {}) {
  const clientId = `tab${tabs++}`
  const { clock, forward } = stoppedClock()
  const store = createUnsentStore('saltmarsh', user)
  const opened = await openWithUnsent({
    clientId, store, transport: server.transport, isLive: async id => live.includes(id),
    load: async () => ({ id: 'saltmarsh', role: 'arranger', state: 'draft', revision: server.revision, score: server.score }),
  })
  const seen = { status: null as SaveStatus | null, score: opened.score as Score, readings: [...opened.readings] as Reading[] }
  const saver = createSaver({
    queue: opened.queue, saved: opened.detail.score, store, transport: server.transport, clock,
    onStatus: status => void (seen.status = status),
    onSaved: () => {},
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
