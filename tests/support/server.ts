import { spawn, type ChildProcess } from 'node:child_process'
import { existsSync, mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join, resolve } from 'node:path'

/** The built server, as it is deployed. */
const entry = resolve(process.env.COPPERWOUND_OUTPUT ?? '.output', 'server/index.mjs')

export const SESSION_PASSWORD = 'only-for-tests-only-for-tests-only'

export interface Running {
  readonly url: string
  readonly child: ChildProcess
  readonly dataDir: string
  /** Everything it has printed so far. */
  readonly output: () => string
  /** Its exit code, once it has ended; null when a signal ended it. */
  readonly ended: Promise<number | null>
  readonly stop: (signal?: NodeJS.Signals) => Promise<void>
}

export const tempDir = (): string => mkdtempSync(join(tmpdir(), 'copperwound-api-'))

/** Starts the built server on a port; does not wait for it.
 * @param env more environment; `PGLITE_DIR` names a folder that is kept, else one is made and removed at the end */
export function launch(port: number, env: Record<string, string> = {}): Running {
  if (!existsSync(entry)) throw new Error(`The api tests run the built server, and ${entry} is not there: run \`npm run build\` first.`)
  const dataDir = env.PGLITE_DIR ?? join(tempDir(), 'pglite')
  const child = spawn(process.execPath, [entry], {
    env: {
      PATH: process.env.PATH, PORT: String(port), HOST: '127.0.0.1', NODE_ENV: 'production', COPPERWOUND_MODE: 'local',
      NUXT_SESSION_PASSWORD: SESSION_PASSWORD, PGLITE_DIR: dataDir, ...env,
    },
  })
  let printed = ''
  for (const stream of [child.stdout, child.stderr]) stream?.on('data', (chunk: Buffer) => (printed += chunk.toString()))
  const ended = new Promise<number | null>(done => child.once('exit', code => done(code)))
  return {
    url: `http://127.0.0.1:${port}`, child, dataDir, output: () => printed, ended,
    stop: async (signal = 'SIGTERM') => {
      if (child.exitCode === null && child.signalCode === null) child.kill(signal)
      await ended
      if (!env.PGLITE_DIR) rmSync(join(dataDir, '..'), { recursive: true, force: true })
    },
  }
}

/** Waits until the server has its database open. @throws with what it printed when it ends before */
export async function ready(server: Running): Promise<Running> {
  let over = false
  void server.ended.then(() => (over = true))
  for (let tries = 0; tries < 1200 && !over; tries++) {
    const answer = await fetch(`${server.url}/api/ready`).catch(() => null)
    if (answer?.ok) return server
    await new Promise(done => setTimeout(done, 100))
  }
  throw new Error(`The server did not get ready:\n${server.output()}`)
}

export const startServer = (port: number, env: Record<string, string> = {}): Promise<Running> => ready(launch(port, env))

// What the answers hold is asserted by the tests.
// eslint-disable-next-line @typescript-eslint/no-explicit-any
export interface Answer { readonly status: number, readonly body: any, readonly headers: Headers }

/** A browser as far as cookies go. */
export interface Client { readonly send: (method: string, path: string, body?: unknown, headers?: Record<string, string>) => Promise<Answer>, readonly cookie: () => string }

export function createClient(url: string, cookie = ''): Client {
  let jar = cookie
  return {
    cookie: () => jar,
    send: async (method, path, body, headers = {}) => {
      const response = await fetch(url + path, {
        method, redirect: 'manual',
        headers: { ...(body !== undefined && { 'content-type': 'application/json' }), ...(jar && { cookie: jar }), ...headers },
        ...(body !== undefined && { body: typeof body === 'string' ? body : JSON.stringify(body) }),
      })
      const set = response.headers.getSetCookie().find(each => each.startsWith('copperwound-session='))
      if (set) jar = set.split(';')[0]!
      const text = await response.text()
      return { status: response.status, headers: response.headers, body: response.headers.get('content-type')?.includes('json') && text ? JSON.parse(text) : text }
    },
  }
}

/** The link in the newest message to an address; waits for it, since mail is written after the answer. */
export async function linkFor(client: Client, address: string, subject: string): Promise<string> {
  for (let tries = 0; tries < 60; tries++) {
    const { body } = await client.send('GET', '/api/outbox')
    const message = (body.items as { to: string, subject: string, text: string }[]).find(each => each.to === address && each.subject === subject)
    const token = message && /token=([\w-]+)/.exec(message.text)?.[1]
    if (token) return token
    await new Promise(done => setTimeout(done, 50))
  }
  throw new Error(`no message “${subject}” to ${address}`)
}

/** Signs one of the demo's people in. */
export async function demoClient(url: string, name: 'maren.holt' | 'ines.okafor' | 'teo.lindqvist'): Promise<Client> {
  const client = createClient(url)
  const { status, body } = await client.send('POST', '/api/auth/sign-in', { email: `${name}@example.com`, password: 'saltmarsh-road' })
  if (status !== 200) throw new Error(`the demo's ${name} can't sign in: ${JSON.stringify(body)}`)
  return client
}
