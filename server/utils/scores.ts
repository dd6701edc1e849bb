import { and, asc, desc, eq, gt, lte } from 'drizzle-orm'
import { applyEdits, isRefused } from '#shared/edits'
import type { LoggedBatch, LoggedTransaction } from '#shared/schemas/edit'
import type { Score } from '#shared/score/types'
import type { Db } from '../db/client'
import { revisions, snapshots } from '../db/schema'

export interface AtRevision { readonly revision: number, readonly score: Score }

/** A snapshot is taken after this many revisions; opening replays fewer than that. */
export const SNAPSHOT_EVERY = 50

/** Scores lately in use, the longest unused first. A score at a revision never changes, so that other instances' saves make an entry old but never wrong: whoever asks names the revision. */
const cache = new Map<string, AtRevision>()
const MOST_CACHED = 64

export function remember(arrangementId: string, current: AtRevision): void {
  cache.delete(arrangementId)
  cache.set(arrangementId, current)
  if (cache.size > MOST_CACHED) cache.delete(cache.keys().next().value!)
}

export async function batchesAfter(db: Db, arrangementId: string, since: number, until = 2 ** 31 - 1): Promise<LoggedBatch[]> {
  const rows = await db.select().from(revisions)
    .where(and(eq(revisions.arrangementId, arrangementId), gt(revisions.revision, since), lte(revisions.revision, until)))
    .orderBy(asc(revisions.revision))
  return rows.map(({ revision, clientId, seq, transactions }) => ({ revision, clientId, seq, transactions: transactions as LoggedTransaction[] }))
}

async function nearestSnapshot(db: Db, arrangementId: string, revision: number): Promise<AtRevision> {
  const [row] = await db.select().from(snapshots)
    .where(and(eq(snapshots.arrangementId, arrangementId), lte(snapshots.revision, revision)))
    .orderBy(desc(snapshots.revision)).limit(1)
  if (!row) throw new Error(`arrangement ${arrangementId} has no snapshot`)
  return { revision: row.revision, score: row.score as Score }
}

/** The score at a revision that exists: from the cache, else the nearest earlier state with the log replayed onto it. */
export async function scoreAt(db: Db, arrangementId: string, revision: number): Promise<Score> {
  const cached = cache.get(arrangementId)
  const from = cached && cached.revision <= revision ? cached : await nearestSnapshot(db, arrangementId, revision)
  const batches = from.revision === revision ? [] : await batchesAfter(db, arrangementId, from.revision, revision)
  const applied = applyEdits(from.score, batches.flatMap(batch => batch.transactions.flatMap(each => each.edits)))
  if (isRefused(applied)) throw new Error(`the log of arrangement ${arrangementId} can't be replayed: ${applied.refused.message}`)
  return applied.score
}

/** Keeps a score for quick opening. It can be made again from the log, so that it need not be there when a save is acknowledged. */
export async function takeSnapshot(db: Db, arrangementId: string, { revision, score }: AtRevision): Promise<void> {
  await db.insert(snapshots).values({ arrangementId, revision, score }).onConflictDoNothing()
}
