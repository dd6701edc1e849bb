import { readdirSync } from 'node:fs'
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest'
import { startMailServer, type MailServer } from '../support/mailServer'
import { createClient, demoClient, startServer, type Client, type Running } from '../support/server'

// A busy machine takes long to start a server.
vi.setConfig({ testTimeout: 90_000, hookTimeout: 120_000 })

/**
 * Every route of the API as a visitor, as a member who has no part in the arrangement, and as its arranger, on a server
 * in production. A route that is not in this table fails the first test.
 */
interface Route { readonly body?: object, readonly visitor: number, readonly stranger: number, readonly arranger: number }
const edits = { clientId: 'walk', seq: 1, base: 0, transactions: [{ label: 'Rename', edits: [{ kind: 'patchHead', before: { title: 'Low Water' }, after: { title: 'High Water' } }] }] }
const tuning = { name: 'Walked', strings: ['D4', 'A3', 'F#3', 'D3', 'A2', 'D2'].map(pitch => ({ pitch })) }
const token = 'a-token-that-is-none-at-all-123456'
const open = (body: object | undefined, status: number): Route => ({ body, visitor: status, stranger: status, arranger: status })

const routes: Readonly<Record<string, Route>> = {
  'GET ready': open(undefined, 200),
  'GET outbox': { visitor: 401, stranger: 403, arranger: 403 },
  'POST auth/register': open({ name: 'W', email: 'walker@example.com', password: 'a long pass phrase' }, 202),
  'POST auth/confirm': open({ token }, 400),
  'POST auth/sign-in': open({ email: 'nobody@example.com', password: 'x' }, 401),
  'POST auth/forgot': open({ email: 'nobody@example.com' }, 202),
  'POST auth/reset': open({ token, password: 'a long pass phrase' }, 400),
  'POST auth/password': { body: { current: 'x', password: 'a long pass phrase' }, visitor: 401, stranger: 400, arranger: 400 },
  'GET arrangements': { visitor: 401, stranger: 200, arranger: 200 },
  'POST arrangements': { body: { title: 'Walked' }, visitor: 401, stranger: 201, arranger: 201 },
  'GET arrangements/[id]': { visitor: 401, stranger: 404, arranger: 200 },
  'PATCH arrangements/[id]': { body: { state: 'ready' }, visitor: 401, stranger: 404, arranger: 200 },
  'GET arrangements/[id]/edits': { visitor: 401, stranger: 404, arranger: 200 },
  'POST arrangements/[id]/edits': { body: edits, visitor: 401, stranger: 404, arranger: 200 },
  'POST arrangements/[id]/duplicate': { visitor: 401, stranger: 404, arranger: 201 },
  'DELETE arrangements/[id]': { visitor: 401, stranger: 404, arranger: 204 },
  'POST arrangements/[id]/restore': { visitor: 401, stranger: 404, arranger: 200 },
  'GET arrangements/[id]/tuning-names': { visitor: 401, stranger: 404, arranger: 200 },
  'GET tunings': { visitor: 401, stranger: 200, arranger: 200 },
  'POST tunings': { body: tuning, visitor: 401, stranger: 201, arranger: 201 },
  'PATCH tunings/[id]': { body: { notes: 'For the slow airs.' }, visitor: 401, stranger: 404, arranger: 200 },
  'DELETE tunings/[id]': { visitor: 401, stranger: 404, arranger: 204 },
  'POST tunings/[id]/restore': { visitor: 401, stranger: 404, arranger: 200 },
  'POST auth/sign-out': open(undefined, 204),
}

const files = readdirSync('server/api', { recursive: true, encoding: 'utf8' }).filter(file => file.endsWith('.ts')).map((file) => {
  const [, path, method] = /^(.*?)(?:\/?index)?\.(\w+)\.ts$/.exec(file)!
  return `${method!.toUpperCase()} ${path}`
})

let server: Running
let mail: MailServer
let stranger: Client
let arranger: Client
let id: string
let tuningId: string

beforeAll(async () => {
  mail = await startMailServer(4413)
  server = await startServer(4412, { COPPERWOUND_MODE: 'production', DEMO: 'on', SMTP_URL: 'smtp://127.0.0.1:4413', MAIL_FROM: 'Copperwound <desk@copperwound.example>', APP_URL: 'http://copperwound.example', ADMIN_EMAIL: 'ines.okafor@example.com' })
  arranger = await demoClient(server.url, 'maren.holt')
  const { body: { items } } = await arranger.send('GET', '/api/arrangements')
  id = items.find((each: { title: string }) => each.title === 'Low Water').id
  tuningId = (await arranger.send('POST', '/api/tunings', tuning)).body.id
  stranger = createClient(server.url)
})
afterAll(async () => {
  await server.stop()
  await mail.stop()
})

describe('mail', () => {
  it('goes through the mail server as plain text and HTML, with a link that works', async () => {
    const name = 'Siv <b>"Bold"</b>\r\nBcc: all@example.com'
    await stranger.send('POST', '/api/auth/register', { name, email: 'siv@example.com', password: 'a long pass phrase' })
    const message = await mail.waitFor('siv@example.com')
    expect(message.from?.text).toBe('"Copperwound" <desk@copperwound.example>')
    expect(message.subject).toBe('Confirm your address')
    expect(message.bcc).toBeUndefined()
    const link = /http:\/\/copperwound\.example\/confirm#token=([\w-]+)/.exec(message.text ?? '')
    expect(message.html).toContain(`href="${link![0]}"`)
    expect(message.html, 'a name can’t bring markup in').not.toContain('<b>"Bold"')
    expect(message.html).toContain('&lt;b&gt;')
    expect(await stranger.send('POST', '/api/auth/confirm', { token: link![1] })).toMatchObject({ status: 200, body: { user: { role: 'member' } } })
  })

  it('that went out is not kept, since it holds links that open accounts', async () => {
    const admin = await demoClient(server.url, 'ines.okafor')
    expect(await admin.send('GET', '/api/outbox')).toMatchObject({ status: 200, body: { items: [] } })
  })

  it('that can’t be sent leaves the server running and says so without the link', async () => {
    await mail.stop()
    expect((await createClient(server.url).send('POST', '/api/auth/forgot', { email: 'maren.holt@example.com' })).status).toBe(202)
    for (let tries = 0; tries < 60 && !server.output().includes('failed'); tries++) await new Promise(done => setTimeout(done, 50))
    expect(server.output()).toContain('Sending a link for a new password failed')
    expect(server.output()).not.toContain('token=')
  })
})

it('every route is in the table, and nothing else is', () => {
  expect(files.sort()).toEqual(Object.keys(routes).sort())
})

describe.each(Object.entries(routes))('%s', (name, { body, ...expected }) => {
  const [method, path] = name.split(' ')
  const known = () => (path!.startsWith('tunings') ? tuningId : id)
  const address = (of: string) => `/api/${path!.replace('[id]', of)}${name === 'GET arrangements/[id]/edits' ? '?since=0' : ''}`

  it.each(['visitor', 'stranger', 'arranger'] as const)('as %s', async (who) => {
    // Signing out ends the session: on copies of nothing but a visitor's.
    const client = who === 'visitor' || path === 'auth/sign-out' ? createClient(server.url) : who === 'stranger' ? stranger : arranger
    const answer = await client.send(method!, address(known()), body)
    expect(answer.status).toBe(expected[who])
    if (answer.status >= 400) expect(answer.body.data).toMatchObject({ code: expect.stringMatching(/^[a-z-]+$/), message: expect.stringMatching(/\.$/) })
  })

  if (path!.includes('[id]')) {
    it('answers for what is another’s as for one that is not there', async () => {
      const absent = await stranger.send(method!, address('00000000-0000-4000-8000-000000000000'), body)
      const nonsense = await stranger.send(method!, address('nonsense'), body)
      const strange = await stranger.send(method!, address(known()), body)
      expect([absent.status, nonsense.status]).toEqual([404, 404])
      expect([absent.body.data, nonsense.body.data]).toEqual([strange.body.data, strange.body.data])
    })
  }
})
