import { and, eq } from 'drizzle-orm'
import { applyEdits, isRefused } from '#shared/edits'
import type { EditsSince, LoggedBatch, LoggedTransaction, SaveEdits } from '#shared/schemas/edit'
import { isEqual } from '#shared/score/equal'
import { MOST_BARS } from '#shared/score/schema'
import type { Score } from '#shared/score/types'
import type { Db } from '../db/client'
import { arrangements, revisions } from '../db/schema'
import { listed } from './arrangements'
import { later } from './later'
import { SNAPSHOT_EVERY, batchesAfter, remember, scoreAt, takeSnapshot } from './scores'

export type SaveResult
  = { readonly kind: 'saved', readonly revision: number, readonly repeated: boolean }
    | { readonly kind: 'stale', readonly revision: number, readonly missed: readonly LoggedBatch[] }
    | { readonly kind: 'refused', readonly message: string }

export interface Save extends SaveEdits { readonly arrangementId: string, readonly authorId: string }
interface Written { readonly result: SaveResult, readonly score?: Score }

/** Locks the arrangement's row: saves of one arrangement follow each other, whichever instance they reach. */
async function lockedRevision(tx: Db, arrangementId: string): Promise<number> {
  const [row] = await tx.select({ revision: arrangements.revision }).from(arrangements).where(eq(arrangements.id, arrangementId)).for('update')
  if (!row) throw new Error(`no arrangement ${arrangementId}`)
  return row.revision
}

/** What a save with this client and number made before; the same number with other edits is a fault that must not pass in silence. */
async function earlier(tx: Db, { arrangementId, clientId, seq, transactions }: Save): Promise<SaveResult | null> {
  const [row] = await tx.select({ revision: revisions.revision, transactions: revisions.transactions }).from(revisions)
    .where(and(eq(revisions.arrangementId, arrangementId), eq(revisions.clientId, clientId), eq(revisions.seq, seq)))
  if (!row) return null
  return isEqual(row.transactions, transactions)
    ? { kind: 'saved', revision: row.revision, repeated: true }
    : { kind: 'refused', message: `Save ${seq} of this client was kept with other edits already; send these under a new number.` }
}

function applyAll(score: Score, transactions: readonly LoggedTransaction[]): Score | string {
  const applied = applyEdits(score, transactions.flatMap(each => each.edits))
  if (isRefused(applied)) return applied.refused.message
  return applied.score.bars.length > MOST_BARS ? `An arrangement here has ${MOST_BARS} bars at most.` : applied.score
}

async function append(tx: Db, save: Save, current: number): Promise<Written> {
  const { arrangementId, authorId, clientId, seq, transactions } = save
  const next = applyAll(await scoreAt(tx, arrangementId, current), transactions)
  // What was saved already does not fit again: a retry that names the present revision as its base is a retry all the same.
  if (typeof next === 'string') return { result: await earlier(tx, save) ?? { kind: 'refused', message: next } }
  const revision = current + 1
  const added = await tx.insert(revisions).values({ arrangementId, revision, clientId, seq, authorId, transactions }).onConflictDoNothing().returning({ revision: revisions.revision })
  // The row is locked, so that only this client's number can stand in the way.
  if (!added.length) return { result: (await earlier(tx, save))! }
  await tx.update(arrangements).set({ ...listed(next), revision, changedAt: new Date() }).where(eq(arrangements.id, arrangementId))
  return { result: { kind: 'saved', revision, repeated: false }, score: next }
}

function settle(db: Db, arrangementId: string, { result, score }: Written): SaveResult {
  if (result.kind !== 'saved' || !score) return result
  const current = { revision: result.revision, score }
  remember(arrangementId, current)
  if (result.revision % SNAPSHOT_EVERY === 0) later('Taking a snapshot', () => takeSnapshot(db, arrangementId, current))
  return result
}

/** Appends transactions to the log, all or none, as one revision. A repeated save gets the answer it got before and changes nothing. */
export async function saveEdits(db: Db, save: Save): Promise<SaveResult> {
  const written = await db.transaction(async (tx): Promise<Written> => {
    const current = await lockedRevision(tx, save.arrangementId)
    if (save.base === current) return append(tx, save, current)
    const before = await earlier(tx, save)
    return { result: before ?? { kind: 'stale', revision: current, missed: await batchesAfter(tx, save.arrangementId, save.base) } }
  })
  return settle(db, save.arrangementId, written)
}

/** Gives an arrangement another title, as an edit like any other. */
export async function rename(db: Db, authorId: string, arrangementId: string, title: string): Promise<SaveResult> {
  const written = await db.transaction(async (tx): Promise<Written> => {
    const current = await lockedRevision(tx, arrangementId)
    const before = (await scoreAt(tx, arrangementId, current)).head.title
    if (before === title) return { result: { kind: 'saved', revision: current, repeated: true } }
    const transactions: LoggedTransaction[] = [{ label: 'Rename', edits: [{ kind: 'patchHead', before: { title: before }, after: { title } }] }]
    // A client's id has no colon, so that these numbers are nobody else's.
    return append(tx, { arrangementId, authorId, clientId: 'server:rename', seq: current + 1, base: current, transactions }, current)
  })
  return settle(db, arrangementId, written)
}

/** What was saved after a revision, with the present one. */
export async function editsSince(db: Db, arrangementId: string, since: number): Promise<EditsSince> {
  const batches = await batchesAfter(db, arrangementId, since)
  const last = batches.at(-1)
  if (last) return { revision: last.revision, batches }
  const [row] = await db.select({ revision: arrangements.revision }).from(arrangements).where(eq(arrangements.id, arrangementId))
  return { revision: row?.revision ?? 0, batches }
}
