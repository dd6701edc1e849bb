import { describe, expect, it, vi } from 'vitest'
import { createTransport } from '../../../composables/saving/transport'

const batch = { clientId: 'tab', seq: 1, base: 0, transactions: [] }
const answering = (status: number, body: unknown = {}, headers: Record<string, string> = {}) =>
  createTransport('a/b', async () => new Response(JSON.stringify(body), { status, headers }))
const problem = (code: string, more = {}) => ({ statusCode: 0, data: { code, message: 'Bar 1 can not hold this.', ...more } })

describe('answers to a save', () => {
  // Codes of HTTP as RFC 9110 and RFC 6585 (429) mean them; bodies as the server's one shape of refusals.
  it.each([
    [200, { revision: 4 }, { kind: 'accepted', revision: 4 }],
    [409, problem('stale', { revision: 9, missed: [] }), { kind: 'stale', revision: 9, missed: [] }],
    [401, problem('signed-out'), { kind: 'signed-out' }],
    [403, problem('forbidden'), { kind: 'forbidden', reason: 'Bar 1 can not hold this.' }],
    [404, problem('not-found'), { kind: 'forbidden', reason: 'Bar 1 can not hold this.' }],
    [422, problem('refused'), { kind: 'refused', reason: 'Bar 1 can not hold this.' }],
    [400, problem('bad-request'), { kind: 'refused', reason: 'Bar 1 can not hold this.' }],
    [500, problem('failed'), { kind: 'trouble', reason: 'Bar 1 can not hold this.' }],
    [502, '<html>', { kind: 'trouble', reason: 'the server did not say why.' }],
  ])('%i', async (status, body, answer) => expect(await answering(status, body).post(batch)).toEqual(answer))

  it('waits as long as the server asks for', async () =>
    expect(await answering(503, problem('starting'), { 'retry-after': '7' }).post(batch)).toMatchObject({ kind: 'trouble', after: 7000 }))

  it('counts no answer as unreachable', async () => {
    const transport = createTransport('a', () => Promise.reject(new TypeError('no network')))
    expect(await transport.post(batch)).toEqual({ kind: 'unreachable' })
    expect(await transport.since(3)).toEqual({ kind: 'unreachable' })
  })

  it('asks the arrangement\'s own address, and lets a request outlive a page that closes', async () => {
    const send = vi.fn(async (_url: unknown, _init?: RequestInit) => new Response('{"revision":1}'))
    await createTransport('a/b', send as typeof fetch).post(batch, true)
    expect(send.mock.calls[0]![0]).toBe('/api/arrangements/a%2Fb/edits')
    expect(send.mock.calls[0]![1]).toMatchObject({ method: 'POST', keepalive: true, body: JSON.stringify(batch) })
  })
})
