import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest'
import { hasPostgres, startPostgres, type Postgres } from '../support/database'
import { createClient, demoClient, launch, ready, type Running } from '../support/server'

// A busy machine takes long to start a server.
vi.setConfig({ testTimeout: 90_000, hookTimeout: 120_000 })

if (!hasPostgres) console.warn('Skipped: several instances on one PostgreSQL server, which is not installed (apt-get install postgresql).')

describe.skipIf(!hasPostgres)('several instances on one PostgreSQL server', () => {
  let postgres: Postgres
  let servers: Running[] = []

  beforeAll(async () => {
    postgres = startPostgres(4416)
    // All at once on an empty database: each wants to migrate it and to lay out the demo.
    servers = [4417, 4418, 4419].map(port => launch(port, { DATABASE_URL: postgres.url }))
    await Promise.all(servers.map(ready))
  })
  afterAll(async () => {
    await Promise.all(servers.map(server => server.stop()))
    postgres.stop()
  })

  it('lay the demo out once', async () => {
    const maren = await demoClient(servers[1]!.url, 'maren.holt')
    expect((await maren.send('GET', '/api/arrangements')).body.items).toHaveLength(3)
  })

  it('see each other’s saves, and number them in one row', async () => {
    const first = await demoClient(servers[0]!.url, 'maren.holt')
    const others = servers.map(server => createClient(server.url, first.cookie()))
    const { id } = (await first.send('GET', '/api/arrangements')).body.items.find((each: { title: string }) => each.title === 'Low Water')
    const at = `/api/arrangements/${id}`
    let title = 'Low Water'
    for (let seq = 1; seq <= 9; seq++) {
      const next = `Water ${seq}`
      const save = { clientId: `tab-${seq % 3}`, seq, base: seq - 1, transactions: [{ label: 'Rename', edits: [{ kind: 'patchHead', before: { title }, after: { title: next } }] }] }
      expect(await others[seq % 3]!.send('POST', `${at}/edits`, save)).toMatchObject({ status: 200, body: { revision: seq } })
      title = next
    }
    for (const client of others) expect((await client.send('GET', at)).body).toMatchObject({ revision: 9, score: { head: { title: 'Water 9' } } })
  })

  it('count wrong passwords together', async () => {
    const statuses: number[] = []
    for (let tries = 0; tries < 11; tries++) {
      const { status } = await createClient(servers[tries % 3]!.url).send('POST', '/api/auth/sign-in', { email: 'teo.lindqvist@example.com', password: 'guess' })
      statuses.push(status)
    }
    expect(statuses).toEqual([...Array.from({ length: 10 }, () => 401), 429])
  })

  it('end a session everywhere', async () => {
    const here = await demoClient(servers[0]!.url, 'ines.okafor')
    const there = createClient(servers[2]!.url, here.cookie())
    expect((await there.send('GET', '/api/arrangements')).status).toBe(200)
    await here.send('POST', '/api/auth/sign-out')
    expect((await there.send('GET', '/api/arrangements')).status).toBe(401)
  })
})
