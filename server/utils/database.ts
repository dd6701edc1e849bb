import { createHash } from 'node:crypto'
import type { MigrationMeta } from 'drizzle-orm/migrator'
import { useStorage } from 'nitropack/runtime'
import { CannotOpen, openDb, type Db, type DbHandle } from '../db/client'
import { prepare } from '../db/migrate'
import { config } from './config'
import { layOutDemo } from './demo'
import { tidy } from './tidy'

interface Journal { readonly entries: readonly { readonly tag: string, readonly when: number, readonly breakpoints: boolean }[] }

/** The migrations travel inside the built server. */
async function readMigrations(): Promise<MigrationMeta[]> {
  const storage = useStorage('assets:migrations')
  const journal = await storage.getItem<Journal>('meta/_journal.json')
  if (!journal) throw new CannotOpen('The server was built without its database migrations. Build it again.')
  return Promise.all(journal.entries.map(async ({ tag, when, breakpoints }) => {
    const raw = await storage.getItemRaw<string | Uint8Array>(`${tag}.sql`)
    const query = typeof raw === 'string' ? raw : Buffer.from(raw ?? []).toString('utf8')
    return { sql: query.split('--> statement-breakpoint'), bps: breakpoints, folderMillis: when, hash: createHash('sha256').update(query).digest('hex') }
  }))
}

async function open(): Promise<DbHandle> {
  const { databaseUrl, dataDir, demo } = config()
  const handle = await openDb({ url: databaseUrl, dataDir })
  try {
    await prepare(handle, await readMigrations(), async (db) => {
      await tidy(db)
      if (demo) await layOutDemo(db, hashPassword)
    })
    return handle
  }
  catch (error) {
    await handle.close()
    throw error
  }
}

let opening: Promise<DbHandle> | undefined

/** The one database of this process, open and brought to this version. */
export const databaseHandle = (): Promise<DbHandle> => (opening ??= open())
export const database = async (): Promise<Db> => (await databaseHandle()).db
