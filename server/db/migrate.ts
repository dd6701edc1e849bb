import { sql } from 'drizzle-orm'
import type { MigrationMeta } from 'drizzle-orm/migrator'
import { CannotOpen, type Db, type DbHandle, type Migrate } from './client'

/** When the last migration that this database has seen was written, in ms; 0 for a new one. */
async function lastApplied(db: Db): Promise<number> {
  const tables = await db.select({ there: sql<boolean>`to_regclass('drizzle.__drizzle_migrations') is not null` }).from(sql`(select 1) as one`)
  if (!tables[0]?.there) return 0
  const last = await db.select({ at: sql<string | number | null>`max(created_at)` }).from(sql`drizzle.__drizzle_migrations`)
  return Number(last[0]?.at ?? 0)
}

/** @throws CannotOpen when a newer version has been here: its data must not be read by older rules. */
async function bringUp(db: Db, migrate: Migrate, migrations: readonly MigrationMeta[]): Promise<void> {
  const newest = Math.max(0, ...migrations.map(each => each.folderMillis))
  if (await lastApplied(db) > newest) throw new CannotOpen('This database was written by a newer version of Copperwound. Start that version, or use another data folder (PGLITE_DIR) or database (DATABASE_URL).')
  await migrate(migrations)
}

/** Brings the database to this version and lays out what it starts with; several instances may do so at once. */
export const prepare = (handle: DbHandle, migrations: readonly MigrationMeta[], layOut: (db: Db) => Promise<void> = async () => {}): Promise<void> =>
  handle.alone(async (db, migrate) => {
    await bringUp(db, migrate, migrations)
    await layOut(db)
  })
