import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest'
import type { Edit } from '../../shared/edits'
import type { Score } from '../../shared/score/types'
import { parseScore } from '../support/score'
import { createClient, demoClient, linkFor, startServer, type Client, type Running } from '../support/server'

// A busy machine takes long to start a server.
vi.setConfig({ testTimeout: 90_000, hookTimeout: 120_000 })

let server: Running
let maren: Client
beforeAll(async () => {
  server = await startServer(4411)
  maren = await demoClient(server.url, 'maren.holt')
})
afterAll(() => server.stop())

const client = () => createClient(server.url)
const signIn = (who: Client, email: string, password: string) => who.send('POST', '/api/auth/sign-in', { email, password })
const session = async (who: Client) => (await who.send('GET', '/api/_auth/session')).body.user as { name: string } | undefined

async function registered(email: string, password = 'a long pass phrase'): Promise<Client> {
  const who = client()
  await who.send('POST', '/api/auth/register', { name: 'Runa', email, password })
  await who.send('POST', '/api/auth/confirm', { token: await linkFor(who, email, 'Confirm your address') })
  return who
}

describe('registering and signing in', () => {
  it('leads from the form over the mail into the folio', async () => {
    const who = client()
    expect(await who.send('POST', '/api/auth/register', { name: ' Runa ', email: 'Runa@Example.com', password: 'a long pass phrase' })).toMatchObject({ status: 202, body: {} })
    expect(await signIn(who, 'runa@example.com', 'a long pass phrase')).toMatchObject({ status: 403, body: { data: { code: 'unconfirmed' } } })
    expect(await signIn(who, 'runa@example.com', 'another pass phrase')).toMatchObject({ status: 401, body: { data: { code: 'wrong-credentials' } } })
    const token = await linkFor(who, 'runa@example.com', 'Confirm your address')
    const confirmed = await who.send('POST', '/api/auth/confirm', { token })
    expect(confirmed).toMatchObject({ status: 200, body: { user: { name: 'Runa', email: 'runa@example.com', role: 'member' } } })
    expect(await session(who)).toMatchObject({ name: 'Runa' })
    expect((await who.send('GET', '/api/arrangements')).body).toEqual({ items: [] })
    expect(await who.send('POST', '/api/auth/confirm', { token })).toMatchObject({ status: 400, body: { data: { code: 'bad-token', field: 'token' } } })
  })

  it('answers the same whether or not the address is known, and tells its owner', async () => {
    const ask = (email: string, path: string, more: object) => client().send('POST', `/api/auth/${path}`, { email, ...more })
    const answers = [
      await ask('ines.okafor@example.com', 'register', { name: 'X', password: 'a long pass phrase' }), await ask('unknown-1@example.com', 'register', { name: 'X', password: 'a long pass phrase' }),
      await ask('ines.okafor@example.com', 'forgot', {}), await ask('unknown-2@example.com', 'forgot', {}),
    ]
    for (const { status, body } of answers) expect([status, body]).toEqual([202, {}])
    const wrong = [await signIn(client(), 'ines.okafor@example.com', 'wrong wrong wrong'), await signIn(client(), 'unknown-3@example.com', 'wrong wrong wrong')]
    expect(wrong[0]!.status).toBe(401)
    expect(wrong[0]!.body.data).toEqual(wrong[1]!.body.data)
    const { body } = await client().send('GET', '/api/outbox')
    const sent = (body.items as { to: string, subject: string }[]).filter(each => /ines|unknown/.test(each.to)).map(each => `${each.to}: ${each.subject}`)
    expect(sent.sort()).toEqual(['ines.okafor@example.com: Choose a new password', 'ines.okafor@example.com: You have an account already', 'unknown-1@example.com: Confirm your address'])
  })

  it('takes as long for an unknown address as for a wrong password', async () => {
    const time = async (email: string) => {
      const began = performance.now()
      await signIn(client(), email, 'wrong wrong wrong')
      return performance.now() - began
    }
    const median = (times: number[]) => times.sort((a, b) => a - b)[Math.floor(times.length / 2)]!
    const times = { known: [] as number[], unknown: [] as number[] }
    // By turns, so that a busy machine slows both alike.
    for (let index = 0; index < 9; index++) {
      times.known.push(await time('teo.lindqvist@example.com'))
      times.unknown.push(await time(`nobody-${index}@example.com`))
    }
    const [known, unknown] = [median(times.known), median(times.unknown)]
    // A password check is scrypt (RFC 7914) and takes tens of milliseconds; without one the answer would come at once.
    expect(unknown / known).toBeGreaterThan(0.6)
    expect(unknown / known).toBeLessThan(1.7)
  })

  it('sets cookies that scripts and other sites do not get', async () => {
    const { headers } = await signIn(client(), 'maren.holt@example.com', 'saltmarsh-road')
    const cookie = headers.getSetCookie().find(each => each.startsWith('copperwound-session='))!
    // RFC 6265bis: HttpOnly keeps it from scripts, SameSite=Lax from other sites' requests that change something.
    expect(cookie).toMatch(/HttpOnly/)
    expect(cookie).toMatch(/SameSite=Lax/)
    expect(cookie, 'on http://localhost other browsers than Chromium drop Secure cookies').not.toMatch(/Secure/)
  })

  it('ends a session for good: the old cookie is worth nothing after signing out', async () => {
    const who = await registered('leaver@example.com')
    const stolen = createClient(server.url, who.cookie())
    expect((await stolen.send('GET', '/api/arrangements')).status).toBe(200)
    expect((await who.send('POST', '/api/auth/sign-out')).status).toBe(204)
    expect((await stolen.send('GET', '/api/arrangements')).status).toBe(401)
    expect(await session(stolen)).toBeUndefined()
    expect(await session(who)).toBeUndefined()
  })

  it('ends the session’s row when the page clears it', async () => {
    const who = await registered('clearer@example.com')
    const stolen = createClient(server.url, who.cookie())
    await who.send('DELETE', '/api/_auth/session')
    expect((await stolen.send('GET', '/api/arrangements')).status).toBe(401)
  })

  it('changes the password, keeps this session and ends the others', async () => {
    const here = await registered('changer@example.com')
    const there = client()
    await signIn(there, 'changer@example.com', 'a long pass phrase')
    expect(await here.send('POST', '/api/auth/password', { current: 'not this one', password: 'another pass phrase' })).toMatchObject({ status: 400, body: { data: { code: 'wrong-credentials', field: 'current' } } })
    expect((await here.send('POST', '/api/auth/password', { current: 'a long pass phrase', password: 'another pass phrase' })).status).toBe(200)
    expect([(await here.send('GET', '/api/arrangements')).status, (await there.send('GET', '/api/arrangements')).status]).toEqual([200, 401])
    expect((await signIn(client(), 'changer@example.com', 'a long pass phrase')).status).toBe(401)
    expect((await signIn(client(), 'changer@example.com', 'another pass phrase')).status).toBe(200)
  })

  it('resets a forgotten password once, and ends all sessions', async () => {
    const before = await registered('forgetful@example.com')
    const who = client()
    await who.send('POST', '/api/auth/forgot', { email: 'forgetful@example.com' })
    const token = await linkFor(who, 'forgetful@example.com', 'Choose a new password')
    expect(await who.send('POST', '/api/auth/reset', { token, password: 'short' })).toMatchObject({ status: 400, body: { data: { field: 'password' } } })
    expect((await who.send('POST', '/api/auth/reset', { token, password: 'quite another phrase' })).status).toBe(200)
    expect(await who.send('POST', '/api/auth/reset', { token, password: 'a third pass phrase' })).toMatchObject({ status: 400, body: { data: { code: 'bad-token' } } })
    expect((await before.send('GET', '/api/arrangements')).status).toBe(401)
    expect((await signIn(who, 'forgetful@example.com', 'quite another phrase')).status).toBe(200)
  })

  it('stops guessing with 429 and says when to come back', async () => {
    await registered('guessed@example.com')
    const statuses: number[] = []
    let last = await signIn(client(), 'guessed@example.com', 'guess')
    for (let tries = 0; tries < 11 && last.status === 401; tries++) {
      statuses.push(last.status)
      last = await signIn(client(), 'guessed@example.com', 'guess')
    }
    expect(statuses).toHaveLength(10)
    expect(last).toMatchObject({ status: 429, body: { data: { code: 'too-many' } } })
    // RFC 9110, 10.2.3: a number of seconds.
    const seconds = Number(last.headers.get('retry-after'))
    expect(seconds).toBeGreaterThan(0)
    expect(seconds).toBeLessThanOrEqual(15 * 60)
    expect((await signIn(client(), 'guessed@example.com', 'a long pass phrase')).status, 'the right password must wait as well').toBe(429)
  })

  it('stops filling a mailbox', async () => {
    const statuses = []
    for (let tries = 0; tries < 6; tries++) statuses.push((await client().send('POST', '/api/auth/forgot', { email: 'flooded@example.com' })).status)
    expect(statuses).toEqual([202, 202, 202, 202, 202, 429])
  })
})

describe('requests from elsewhere', () => {
  const create = (headers: Record<string, string>) => maren.send('POST', '/api/arrangements', { title: 'From elsewhere' }, headers)

  it('are refused when they would change something', async () => {
    const foreign: Record<string, string>[] = [{ origin: 'https://elsewhere.example' }, { origin: 'null' }, { 'sec-fetch-site': 'cross-site' }, { 'sec-fetch-site': 'same-site' }, { origin: 'not an origin' }]
    for (const headers of foreign) expect(await create(headers), JSON.stringify(headers)).toMatchObject({ status: 403, body: { data: { code: 'foreign-origin' } } })
    expect((await create({ 'origin': server.url, 'sec-fetch-site': 'same-origin' })).status).toBe(201)
  })

  it('can’t pass as a form', async () => {
    const response = await fetch(`${server.url}/api/arrangements`, { method: 'POST', headers: { 'cookie': maren.cookie(), 'content-type': 'text/plain' }, body: '{"title":"From a form"}' })
    expect(response.status).toBe(415)
    expect(JSON.stringify((await maren.send('GET', '/api/arrangements')).body)).not.toContain('From a form')
  })
})

describe('headers', () => {
  it('keep the page to itself', async () => {
    const { headers } = await client().send('GET', '/')
    const policy = headers.get('content-security-policy')!
    // OWASP Secure Headers; CSP Level 3 (W3C): no inline script runs without this answer's nonce.
    expect(policy).toMatch(/script-src 'self' 'nonce-[\w+/=]{22,}'(;|$)/)
    expect(policy).not.toMatch(/unsafe-eval/)
    expect(/script-src[^;]*unsafe-inline/.test(policy)).toBe(false)
    for (const part of ['default-src \'self\'', 'object-src \'none\'', 'base-uri \'none\'', 'frame-ancestors \'none\'', 'connect-src \'self\'']) expect(policy).toContain(part)
    expect(headers.get('x-content-type-options')).toBe('nosniff')
    expect(headers.get('x-powered-by')).toBeNull()
  })

  it('give every script of the page the nonce, a new one each time', async () => {
    const pages = [await client().send('GET', '/'), await client().send('GET', '/')]
    const nonces = pages.map(({ headers, body }) => {
      const nonce = /'nonce-([^']+)'/.exec(headers.get('content-security-policy')!)![1]!
      const scripts = (body as string).match(/<script\b[^>]*>/g)!
      expect(scripts.length).toBeGreaterThan(0)
      for (const script of scripts) expect(script).toContain(`nonce="${nonce}"`)
      return nonce
    })
    expect(nonces[0]).not.toBe(nonces[1])
  })

  it('let nobody keep answers about people', async () => {
    expect((await maren.send('GET', '/api/arrangements')).headers.get('cache-control')).toBe('no-store')
  })
})

describe('bodies', () => {
  const bad: readonly [string, string, unknown, string][] = [
    ['no title', '/api/arrangements', {}, 'title'],
    ['an empty title', '/api/arrangements', { title: '  ' }, 'title'],
    ['three strings', '/api/arrangements', { title: 'X', strings: [{ pitch: 'E4' }, { pitch: 'B3' }, { pitch: 'G3' }] }, 'strings'],
    ['a fraction not in lowest terms', '/api/arrangements', { title: 'X', pickup: { n: 2, d: 8 } }, 'pickup'],
    ['NUL in a title', '/api/arrangements', { title: 'a\0b' }, 'title'],
    ['half a surrogate pair', '/api/arrangements', { title: 'a\uD834b' }, 'title'],
    ['a field that is not known', '/api/arrangements', { title: 'X', owner: 'me' }, ''],
    ['a score with a string zero', '/api/arrangements', { score: { ...parseScore('3/0q'), bars: [{ id: 'b1', voices: { upper: { events: [{ id: 'e', length: { base: 4, dots: 0 }, notes: [{ id: 'n', string: 0, fret: 1 }] }] } } }] } }, 'score.bars.0.voices.upper.events.0.notes.0.string'],
    ['a tuning without a name', '/api/tunings', { name: ' ', strings: ['E4', 'B3', 'G3', 'D3'].map(pitch => ({ pitch })) }, 'name'],
    ['notes longer than a page', '/api/tunings', { name: 'X', notes: 'n'.repeat(2001), strings: ['E4', 'B3', 'G3', 'D3'].map(pitch => ({ pitch })) }, 'notes'],
    ['eleven strings', '/api/tunings', { name: 'X', strings: Array.from({ length: 11 }, () => ({ pitch: 'E3' })) }, 'strings'],
    ['no e-mail address', '/api/auth/sign-in', { email: 'nobody', password: 'x' }, 'email'],
    ['a short password', '/api/auth/register', { name: 'X', email: 'x@example.com', password: 'short' }, 'password'],
  ]
  it.each(bad)('with %s are refused, naming the field', async (_name, path, body, field) => {
    const answer = await maren.send('POST', path, body)
    expect(answer).toMatchObject({ status: 400, body: { data: { code: 'bad-request', ...(field && { field }) } } })
    expect(answer.body.data.message).toBe(answer.body.message)
  })

  it('that are no JSON are refused', async () => {
    expect(await maren.send('POST', '/api/arrangements', '{"title":')).toMatchObject({ status: 400, body: { data: { code: 'bad-request' } } })
  })

  it('that are too large are refused before they are read', async () => {
    const { status, body } = await client().send('POST', '/api/auth/sign-in', { email: 'a@example.com', password: 'x'.repeat(70_000) })
    expect([status, body.data.code]).toEqual([413, 'too-large'])
  })

  it('that are sound in shape and no music are refused with the reason', async () => {
    const strings = ['E4', 'B3', 'G3', 'H3'].map(pitch => ({ pitch }))
    const { status, body } = await maren.send('POST', '/api/arrangements', { title: 'X', strings })
    expect([status, body.data.code]).toEqual([422, 'refused'])
    expect(body.data.message).toContain('String 4')
    const tuning = await maren.send('POST', '/api/tunings', { name: 'X', strings })
    expect(tuning).toMatchObject({ status: 422, body: { data: { code: 'refused', field: 'strings', message: body.data.message } } })
  })
})

describe('an arrangement', () => {
  const edit = (score: Score, fret: number): Edit => ({
    kind: 'replaceVoice', bar: score.bars[0]!.id, voice: 'upper', before: score.bars[0]!.voices.upper ?? null,
    after: { events: [{ id: `e${fret}`, length: { base: 4, dots: 0 }, notes: [{ id: `n${fret}`, string: 1, fret }] }] },
  })
  const body = (seq: number, base: number, edits: readonly Edit[], clientId = 'tab-a') => ({ clientId, seq, base, transactions: [{ label: 'Enter', edits }] })

  it('is made, edited, renamed, copied, deleted and brought back', async () => {
    const strings = ['D4', 'C4', 'G3', 'D3', 'G2', 'C2'].map(pitch => ({ pitch }))
    const made = await maren.send('POST', '/api/arrangements', { title: 'Heron’s Ford', strings, capos: [{ fret: 2 }], meter: { beats: 6, unit: 8 }, key: { fifths: 1, mode: 'major' }, tempo: { base: 4, dots: 1, perMinute: 60 }, pickup: { n: 1, d: 8 }, ring: 'let-ring' })
    expect(made.status).toBe(201)
    const at = `/api/arrangements/${made.body.id}`
    const opened = (await maren.send('GET', at)).body
    expect(opened).toMatchObject({ id: made.body.id, role: 'arranger', state: 'draft', revision: 0, score: { head: { title: 'Heron’s Ford', arranger: 'Maren Holt', strings, capos: [{ fret: 2 }], ring: 'let-ring' } } })
    expect(opened.score.bars[0]).toMatchObject({ length: { n: 1, d: 8 }, meter: { beats: 6, unit: 8 } })

    const save = body(1, 0, [edit(opened.score, 3)])
    expect(await maren.send('POST', `${at}/edits`, save)).toMatchObject({ status: 200, body: { revision: 1 } })
    expect(await maren.send('POST', `${at}/edits`, save), 'a retry').toMatchObject({ status: 200, body: { revision: 1 } })
    expect(await maren.send('POST', `${at}/edits`, body(1, 0, [edit(opened.score, 5)], 'tab-b'))).toMatchObject({
      status: 409, body: { data: { code: 'stale', revision: 1, missed: [{ revision: 1, clientId: 'tab-a', seq: 1, transactions: save.transactions }] } },
    })
    expect(await maren.send('POST', `${at}/edits`, body(2, 1, [edit(opened.score, 5)]))).toMatchObject({ status: 422, body: { data: { code: 'refused' } } })
    expect((await maren.send('GET', `${at}/edits?since=0`)).body).toMatchObject({ revision: 1, batches: [{ revision: 1 }] })
    expect(await maren.send('GET', `${at}/edits?since=x`)).toMatchObject({ status: 400, body: { data: { field: 'since' } } })

    expect((await maren.send('PATCH', at, { title: 'Heron Ford', state: 'ready' })).status).toBe(200)
    expect((await maren.send('GET', at)).body).toMatchObject({ state: 'ready', revision: 2, score: { head: { title: 'Heron Ford' } } })
    const copy = await maren.send('POST', `${at}/duplicate`)
    expect(copy.status).toBe(201)

    expect((await maren.send('DELETE', at)).status).toBe(204)
    expect((await maren.send('GET', at)).status).toBe(404)
    expect((await maren.send('POST', `${at}/edits`, body(3, 2, [edit(opened.score, 5)]))).status).toBe(404)
    expect((await maren.send('POST', `${at}/restore`)).status).toBe(200)
    expect((await maren.send('GET', at)).body.revision).toBe(2)
  })

  it('comes in whole from a file', async () => {
    const score = parseScore('3/0q 3/2q 2/1h | 1/0w', { title: 'From a file' })
    const { status, body: { id } } = await maren.send('POST', '/api/arrangements', { score })
    expect(status).toBe(201)
    expect((await maren.send('GET', `/api/arrangements/${id}`)).body.score).toEqual(score)
  })

  it('lets each role do what its part is', async () => {
    const { items } = (await maren.send('GET', '/api/arrangements')).body
    const { id } = items.find((each: { title: string }) => each.title === 'The Saltmarsh Road')
    const at = `/api/arrangements/${id}`
    const performer = await demoClient(server.url, 'teo.lindqvist')
    const coArranger = await demoClient(server.url, 'ines.okafor')
    const opened = (await performer.send('GET', at)).body
    expect(opened.role).toBe('performer')
    expect(await performer.send('POST', `${at}/edits`, body(1, 0, [edit(opened.score, 3)], 'teo'))).toMatchObject({ status: 403, body: { data: { code: 'forbidden' } } })
    expect((await performer.send('PATCH', at, { title: 'Mine' })).status).toBe(403)
    expect((await performer.send('DELETE', at)).status).toBe(403)
    expect((await coArranger.send('POST', `${at}/edits`, body(1, 0, [edit(opened.score, 3)], 'ines'))).status).toBe(200)
    expect((await coArranger.send('DELETE', at)).status).toBe(403)
  })
})

describe('the local mailbox', () => {
  it('lies open where the server is one’s own', async () => {
    expect((await client().send('GET', '/api/outbox')).status).toBe(200)
  })
})
