import 'fake-indexeddb/auto'
import { IDBFactory } from 'fake-indexeddb'
import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { effectScope } from 'vue'
import { createUnsentStore } from '../../../composables/saving/unsentStore'
import { useSaving } from '../../../composables/useSaving'
import { createScore } from '../../../shared/score/create'
import type { Score } from '../../../shared/score/types'
import { useEditorStore } from '../../../stores/editor'
import { entry, settled } from '../../unit/saving/support'

/** Locks as Web Locks (W3C) has them, as far as tabs need them: each is held until its call is done. */
function lockManager() {
  const held = new Set<string>()
  return {
    held,
    async request(name: string, call: () => Promise<void>) {
      held.add(name)
      await call()
      held.delete(name)
    },
    query: async () => ({ held: [...held].map(name => ({ name })) }),
  }
}

const arrangement = (title: string): Score => createScore({ title }, () => 'b0')
const loading = (title: string, revision = 0) => async () => ({ id: title, role: 'arranger' as const, state: 'draft' as const, revision, score: arrangement(title) })
const answer = (status: number, body: unknown) => new Response(JSON.stringify(body), { status })

/** A desk with an arrangement of this name, until it is left. */
function desk(title: string) {
  const scope = effectScope()
  const saving = scope.run(() => useSaving(title, 'maren'))!
  return { ...saving, leave: () => scope.stop() }
}

let locks: ReturnType<typeof lockManager>
const fetched = vi.fn<(url: string, init?: RequestInit) => Promise<Response>>()

beforeEach(() => {
  setActivePinia(createPinia())
  globalThis.indexedDB = new IDBFactory()
  locks = lockManager()
  vi.stubGlobal('fetch', fetched)
  Object.defineProperty(navigator, 'locks', { value: locks, configurable: true })
  fetched.mockReset()
  fetched.mockImplementation(async () => answer(200, { revision: 1 }))
})
afterEach(() => vi.unstubAllGlobals())

describe('leaving the desk', () => {
  it('leaves the next arrangement alone when an answer for the first one comes late', async () => {
    const editor = useEditorStore()
    let letGo = (_answer: Response) => {}
    fetched.mockImplementation(() => new Promise(resolve => (letGo = resolve)))
    const first = desk('Saltmarsh')
    await first.open(loading('Saltmarsh'))
    editor.run('fret.5')
    const asked = first.saveNow()
    await settled()
    const late = letGo
    editor.close()
    first.leave()
    const second = desk('Hay Fen')
    await second.open(loading('Hay Fen'))
    const shown = editor.state
    late(answer(409, { data: { code: 'stale', revision: 1, missed: [{ revision: 1, clientId: 'ines', seq: 1, transactions: [entry('b0', null, 7)] }] } }))
    await asked
    await settled()
    expect(editor.score?.head.title).toBe('Hay Fen')
    expect(editor.state).toBe(shown)
    second.leave()
  })

  it('puts nothing on the desk when the arrangement comes after that', async () => {
    const editor = useEditorStore()
    let arrive = () => {}
    const arrival = new Promise<void>(resolve => (arrive = resolve))
    const first = desk('Saltmarsh')
    const opening = first.open(async () => {
      await arrival
      return await loading('Saltmarsh')()
    })
    first.leave()
    const second = desk('Hay Fen')
    await second.open(loading('Hay Fen'))
    arrive()
    await opening
    expect(editor.score?.head.title).toBe('Hay Fen')
    editor.run('fret.5')
    await vi.waitFor(async () => expect(await createUnsentStore('Hay Fen', 'maren').queues()).toHaveLength(1))
    expect(await createUnsentStore('Saltmarsh', 'maren').queues()).toEqual([])
    second.leave()
    await vi.waitFor(() => expect(locks.held.size).toBe(0))
  })

  it('leaves a closed tab\'s work to the opening that is still wanted', async () => {
    const queue = { clientId: 'closed', base: 0, nextSeq: 1, nextNumber: 2, sending: null, unsent: [{ number: 1, ...entry('b0', null, 3) }] }
    const store = createUnsentStore('Saltmarsh', 'maren')
    await store.append(queue, queue.unsent)
    const first = desk('Saltmarsh')
    const opening = first.open(loading('Saltmarsh'))
    first.leave()
    await opening
    expect((await store.queues()).map(each => each.clientId)).toEqual(['closed'])
    const second = desk('Saltmarsh')
    await second.open(loading('Saltmarsh'))
    expect((await store.queues()).map(each => each.unsent.length)).toEqual([1])
    expect(useEditorStore().score?.bars[0]?.voices.upper?.events[0]?.notes[0]?.fret).toBe(3)
    second.leave()
  })

  it('counts as present until the last edit is kept, so that an opening at once finds it', async () => {
    const editor = useEditorStore()
    fetched.mockRejectedValueOnce(new TypeError('no network'))
    const first = desk('Saltmarsh')
    await first.open(loading('Saltmarsh'))
    editor.run('fret.5')
    first.leave()
    for (let turn = 0; turn < 5; turn++) await Promise.resolve()
    expect(locks.held.size).toBe(1)
    const kept = createUnsentStore('Saltmarsh', 'maren')
    await vi.waitFor(() => expect(locks.held.size).toBe(0))
    expect((await kept.queues()).map(each => each.unsent.length)).toEqual([1])
  })

  it('gives the lock back when the arrangement can not be opened', async () => {
    const { open, leave } = desk('Saltmarsh')
    await expect(open(() => Promise.reject(new Error('not found')))).rejects.toThrow('not found')
    await settled()
    expect(locks.held.size).toBe(0)
    leave()
  })
})

describe('saving by hand what the server has refused', () => {
  const refusal = () => answer(422, { data: { code: 'refused', message: 'Bar 1: there is no string 9.' } })

  it('asks once more, and says what came of it', async () => {
    const editor = useEditorStore()
    fetched.mockImplementation(async () => refusal())
    const { open, saveNow, status, leave } = desk('Saltmarsh')
    await open(loading('Saltmarsh'))
    editor.run('fret.5')
    await saveNow()
    expect(status.value.hindrance?.kind).toBe('refused')
    const again = saveNow()
    expect(editor.state?.notice).toBe('Asking the server once more …')
    await again
    expect(editor.state?.notice).toBe('Still not saved: Bar 1: there is no string 9.')
    fetched.mockImplementation(async () => answer(200, { revision: 1 }))
    await saveNow()
    expect(editor.state?.notice).toBe('The server has taken it.')
    expect(status.value).toMatchObject({ unsent: 0, hindrance: null })
    leave()
  })

  it('keeps the arrangement as it was on the desk beside it, also when the desk is left right after a key', async () => {
    const editor = useEditorStore()
    fetched.mockImplementation(async () => refusal())
    const { open, saveNow, leave } = desk('Saltmarsh')
    await open(loading('Saltmarsh'))
    editor.run('fret.5')
    await saveNow()
    editor.run('fret.7')
    editor.close()
    leave()
    await vi.waitFor(() => expect(locks.held.size).toBe(0))
    const [queue] = await createUnsentStore('Saltmarsh', 'maren').queues()
    expect(queue?.unsent).toHaveLength(2)
    expect(queue?.refused?.copy).toContain('Saltmarsh')
  })
})
