import { spawn } from 'node:child_process'
import { once } from 'node:events'
import { mkdirSync, rmSync, writeFileSync } from 'node:fs'
import { createServer, type AddressInfo, type Server } from 'node:net'
import { join } from 'node:path'
import { afterAll, afterEach, describe, expect, it, vi } from 'vitest'
import { openDb } from '../../server/db/client'
import { createClient, demoClient, launch as launchServer, ready, tempDir, type Running } from '../support/server'

const PORT = 4414
const home = tempDir()
const PGLITE_DIR = join(home, 'data', 'pglite')
const running: Running[] = []
// A busy machine takes long to start many servers.
vi.setConfig({ testTimeout: 180_000, hookTimeout: 60_000 })

function launch(port: number, env: Record<string, string>): Running {
  const server = launchServer(port, env)
  running.push(server)
  return server
}
const start = () => ready(launch(PORT, { PGLITE_DIR }))

afterEach(async () => {
  for (const server of running.splice(0)) await server.stop('SIGKILL')
})
afterAll(() => rmSync(home, { recursive: true, force: true }))

/** What a server says that gives up: its code, and what it printed besides the address it listens at. */
async function givesUp(server: Running): Promise<{ code: number | null, lines: string[] }> {
  const code = await server.ended
  return { code, lines: server.output().split('\n').filter(line => line && !line.startsWith('Listening on')) }
}

async function occupied(): Promise<{ port: number, blocker: Server }> {
  const blocker = createServer().listen(0, '127.0.0.1')
  await once(blocker, 'listening')
  return { port: (blocker.address() as AddressInfo).port, blocker }
}

describe('what can’t start says why in one line', () => {
  it('a second process on the same folder', async () => {
    const first = await start()
    const { code, lines } = await givesUp(launch(PORT + 1, { PGLITE_DIR }))
    expect(code).toBe(1)
    expect(lines).toHaveLength(1)
    expect(lines[0]).toContain(`in use by another Copperwound (process ${first.child.pid} on`)
    expect((await fetch(`${first.url}/api/ready`)).status).toBe(200)
  })

  it('a database of a newer version', async () => {
    const folder = join(home, 'newer', 'pglite')
    mkdirSync(join(home, 'newer'), { recursive: true })
    const handle = await openDb({ dataDir: folder })
    await handle.raw.query({ text: 'create schema drizzle' })
    await handle.raw.query({ text: 'create table drizzle.__drizzle_migrations (id serial primary key, hash text not null, created_at bigint)' })
    await handle.raw.query({ text: 'insert into drizzle.__drizzle_migrations (hash, created_at) values (\'later\', 99999999999999)' })
    await handle.close()
    const { code, lines } = await givesUp(launch(PORT, { PGLITE_DIR: folder }))
    expect(code).toBe(1)
    expect(lines).toEqual([expect.stringContaining('written by a newer version of Copperwound')])
  })

  it('a folder that can’t be made', async () => {
    const file = join(home, 'a-file')
    writeFileSync(file, '')
    const { code, lines } = await givesUp(launch(PORT, { PGLITE_DIR: join(file, 'pglite') }))
    expect(code).toBe(1)
    expect(lines).toEqual([expect.stringMatching(/data folder .* can't be written \(ENOTDIR\)/)])
  })

  it('a database server that does not answer', async () => {
    const { code, lines } = await givesUp(launch(PORT, { DATABASE_URL: 'postgres://nobody@127.0.0.1:1/none' }))
    expect(code).toBe(1)
    expect(lines).toEqual([expect.stringContaining('DATABASE_URL does not answer')])
  })

  it('a missing secret', async () => {
    const { code, lines } = await givesUp(launch(PORT, { PGLITE_DIR, NUXT_SESSION_PASSWORD: 'short' }))
    expect(code).toBe(1)
    expect(lines).toEqual([expect.stringContaining('NUXT_SESSION_PASSWORD is missing or shorter than 32 characters')])
  })

  it('a busy port, for the server itself', async () => {
    const { port, blocker } = await occupied()
    const { code, lines } = await givesUp(launch(port, { PGLITE_DIR: join(home, 'busy', 'pglite') }))
    blocker.close()
    expect(code).toBe(1)
    expect(lines).toEqual([`Port ${port} is in use by another program. Stop that one, or set PORT to another number.`])
  })

  it('a busy port, for npm start', async () => {
    const { port, blocker } = await occupied()
    const child = spawn(process.execPath, ['scripts/start.mjs'], { env: { PATH: process.env.PATH, PORT: String(port) } })
    let printed = ''
    for (const stream of [child.stdout, child.stderr]) stream.on('data', (chunk: Buffer) => (printed += chunk.toString()))
    const [code] = await once(child, 'exit') as [number]
    blocker.close()
    expect(code).toBe(1)
    expect(printed).toBe(`Port ${port} is in use by another program. Stop that one, or set PORT to another number.\n`)
  })
})

it('requests that come before the database is open wait, or are told when to come back', async () => {
  const server = launch(PORT, { PGLITE_DIR: join(home, 'early', 'pglite') })
  const statuses: number[] = []
  for (let tries = 0; tries < 400 && !statuses.includes(200); tries++) {
    const answer = await fetch(`${server.url}/api/arrangements`, { headers: { accept: 'application/json' } }).catch(() => null)
    if (answer) statuses.push(answer.status === 401 ? 200 : answer.status)
    if (answer?.status === 503) expect(Number(answer.headers.get('retry-after'))).toBeGreaterThan(0)
    if (!answer) await new Promise(done => setTimeout(done, 20))
  }
  expect(statuses.at(-1)).toBe(200)
  expect(statuses.filter(status => status !== 200 && status !== 503)).toEqual([])
})

describe('killed in mid-work', () => {
  const ROUNDS = 5

  it(`opens again ${ROUNDS} times with everything that it had acknowledged`, async () => {
    const acknowledged = new Map<string, Map<string, number>>()
    for (let round = 0; round < ROUNDS; round++) {
      const server = await start()
      const maren = await demoClient(server.url, 'maren.holt')
      const ids = ((await maren.send('GET', '/api/arrangements')).body.items as { id: string }[]).map(each => each.id)
      let left = 12 + 7 * round
      await Promise.all(ids.map(async (id) => {
        const kept = acknowledged.get(id) ?? new Map<string, number>()
        acknowledged.set(id, kept)
        let { revision, score: { head: { title } } } = (await maren.send('GET', `/api/arrangements/${id}`)).body
        for (let seq = 1; ; seq++) {
          const next = `Round ${round} save ${seq}`
          const edit = { kind: 'patchHead', before: { title }, after: { title: next } }
          const answer = await maren.send('POST', `/api/arrangements/${id}/edits`, { clientId: `round-${round}`, seq, base: revision, transactions: [{ label: 'Rename', edits: [edit] }] }).catch(() => null)
          if (!answer) return
          expect(answer.status).toBe(200)
          revision = answer.body.revision
          title = next
          kept.set(`round-${round}/${seq}`, revision)
          // The other arrangements' saves are on their way now.
          if (--left === 0) server.child.kill('SIGKILL')
        }
      }))
      await server.ended
    }

    const server = await start()
    const maren = await demoClient(server.url, 'maren.holt')
    let total = 0
    for (const [id, kept] of acknowledged) {
      const { revision, batches } = (await maren.send('GET', `/api/arrangements/${id}/edits?since=0`)).body as { revision: number, batches: { clientId: string, seq: number, revision: number }[] }
      const there = new Map(batches.map(batch => [`${batch.clientId}/${batch.seq}`, batch.revision]))
      for (const [save, at] of kept) expect(there.get(save), `${id}: ${save}`).toBe(at)
      expect(batches.map(batch => batch.revision)).toEqual(Array.from({ length: revision }, (_, index) => index + 1))
      expect((await maren.send('GET', `/api/arrangements/${id}`)).status).toBe(200)
      total += kept.size
    }
    expect(total).toBeGreaterThanOrEqual(ROUNDS * 12)
    console.log(`Killed ${ROUNDS} times; all ${total} acknowledged saves were there.`)
  })
})

it('ends in good order on SIGTERM and starts again on the same folder', async () => {
  const first = await start()
  await createClient(first.url).send('GET', '/api/ready')
  first.child.kill('SIGTERM')
  expect(await first.ended).toBe(0)
  await ready(await start())
})
