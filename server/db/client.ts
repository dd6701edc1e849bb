import { accessSync, constants, mkdirSync } from 'node:fs'
import { dirname } from 'node:path'
import type { MigrationMeta } from 'drizzle-orm/migrator'
import type { PgDatabase, PgQueryResultHKT } from 'drizzle-orm/pg-core'
import { FolderInUse, lockFolder } from './folderLock'
import * as schema from './schema'

export type Db = PgDatabase<PgQueryResultHKT, typeof schema>

/** What the rate limiter asks with. */
export interface RawQuery { query: (query: { text: string, values?: unknown[] }) => Promise<{ rows: unknown[] }> }

export interface DbHandle {
  readonly db: Db
  readonly raw: RawQuery
  /** Runs `work` while no other instance does, for migrations and what is laid out once. */
  readonly alone: <T>(work: (db: Db, migrate: Migrate) => Promise<T>) => Promise<T>
  readonly close: () => Promise<void>
}
export type Migrate = (migrations: readonly MigrationMeta[]) => Promise<void>

/** A reason for which the database can't be opened, in one line for the person who started the server. */
export class CannotOpen extends Error {}

/** drizzle's own migrate() reads a folder; a built server carries its migrations inside, so that the step below it is called. */
interface Dialected {
  readonly dialect: { migrate: (migrations: readonly MigrationMeta[], session: unknown, config: object) => Promise<void> }
  readonly session: unknown
}
const migrator = (db: Db): Migrate => (migrations) => {
  const { dialect, session } = db as unknown as Dialected
  return dialect.migrate(migrations, session, {})
}

/** "copperw" read as a number: any fixed key serves. */
const START_LOCK = 0x636F7070

async function openServer(url: string): Promise<DbHandle> {
  const { default: pg } = await import('pg')
  const { drizzle } = await import('drizzle-orm/node-postgres')
  const pool = new pg.Pool({ connectionString: url, max: 10 })
  // An idle connection that the server drops is replaced by the pool; unheard, its error would end the process.
  pool.on('error', () => {})
  return {
    db: drizzle(pool, { schema }),
    raw: { query: query => pool.query(query) },
    alone: async (work) => {
      const client = await pool.connect()
      try {
        await client.query('select pg_advisory_lock($1)', [START_LOCK])
        const db: Db = drizzle(client, { schema })
        return await work(db, migrator(db))
      }
      finally {
        await client.query('select pg_advisory_unlock($1)', [START_LOCK]).catch(() => {})
        client.release()
      }
    },
    close: () => pool.end(),
  }
}

function claim(dir: string): () => void {
  try {
    mkdirSync(dir, { recursive: true })
    for (const each of [dir, dirname(dir)]) accessSync(each, constants.R_OK | constants.W_OK | constants.X_OK)
    return lockFolder(dir)
  }
  catch (error) {
    if (error instanceof FolderInUse) throw new CannotOpen(`The data folder ${dir} is in use by another Copperwound (process ${error.pid} on ${error.host}). Stop that one, or set PGLITE_DIR to another folder.`)
    throw new CannotOpen(`The data folder ${dir} can't be written (${(error as NodeJS.ErrnoException).code ?? 'unknown reason'}). Give this user the right to write there, or set PGLITE_DIR to another folder.`)
  }
}

async function openFolder(dir: string | undefined): Promise<DbHandle> {
  const release = dir ? claim(dir) : () => {}
  try {
    const { PGlite } = await import('@electric-sql/pglite')
    const { drizzle } = await import('drizzle-orm/pglite')
    const client = await PGlite.create(dir ?? 'memory://')
    const db: Db = drizzle(client, { schema })
    return {
      db,
      raw: { query: ({ text, values }) => client.query(text, values) },
      // The folder lock sees to it that there is one process, and the start is its first work.
      alone: work => work(db, migrator(db)),
      close: async () => {
        await client.close()
        release()
      },
    }
  }
  catch (error) {
    release()
    throw new CannotOpen(`The database in ${dir} can't be opened: ${error instanceof Error ? error.message.split('\n')[0] : String(error)}`)
  }
}

/**
 * Opens the database: a PostgreSQL server where `url` is given, else the embedded one in a folder, else in memory.
 * @throws CannotOpen with one clear line
 */
export const openDb = ({ url, dataDir }: { readonly url?: string, readonly dataDir?: string }): Promise<DbHandle> =>
  url ? openServer(url) : openFolder(dataDir)
