import { execFileSync } from 'node:child_process'
import { chmodSync, existsSync, mkdtempSync, readdirSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { readMigrationFiles } from 'drizzle-orm/migrator'
import { openDb, type DbHandle } from '../../server/db/client'
import { prepare } from '../../server/db/migrate'

export const migrations = readMigrationFiles({ migrationsFolder: 'server/db/migrations' })

/** A new database in memory, brought to this version. */
export async function memoryDatabase(): Promise<DbHandle> {
  const handle = await openDb({})
  await prepare(handle, migrations)
  return handle
}

const versions = existsSync('/usr/lib/postgresql') ? readdirSync('/usr/lib/postgresql').sort((a, b) => Number(b) - Number(a)) : []
const bin = versions.map(version => `/usr/lib/postgresql/${version}/bin`).find(folder => existsSync(join(folder, 'initdb')))
/** PostgreSQL refuses to run as root: then its own user runs it. */
const isRoot = process.getuid?.() === 0

/** Debian's PostgreSQL server is here and can be run. */
export const hasPostgres = bin !== undefined

function run(program: string, args: readonly string[]): void {
  const command = join(bin!, program)
  if (isRoot) execFileSync('runuser', ['-u', 'postgres', '--', command, ...args], { stdio: 'pipe' })
  else execFileSync(command, args, { stdio: 'pipe' })
}

export interface Postgres { readonly url: string, readonly stop: () => void }

/** A PostgreSQL server of its own, in a temporary folder. */
export function startPostgres(port: number): Postgres {
  const home = mkdtempSync(join(tmpdir(), 'copperwound-pg-'))
  chmodSync(home, 0o777)
  const data = join(home, 'data')
  run('initdb', ['-D', data, '-U', 'copperwound', '-A', 'trust', '-E', 'UTF8', '--no-sync'])
  run('pg_ctl', ['-D', data, '-w', '-o', `-p ${port} -c listen_addresses=127.0.0.1 -c unix_socket_directories=${home}`, '-l', join(home, 'log'), 'start'])
  return {
    url: `postgres://copperwound@127.0.0.1:${port}/postgres`,
    stop: () => {
      run('pg_ctl', ['-D', data, '-m', 'immediate', '-w', 'stop'])
      rmSync(home, { recursive: true, force: true })
    },
  }
}
