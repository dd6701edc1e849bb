import { and, desc, eq, isNotNull, isNull } from 'drizzle-orm'
import type { ArrangementRole } from '#shared/permissions'
import type { ArrangementDetail, ArrangementState, ArrangementSummary } from '#shared/schemas/arrangement'
import { shortened } from '#shared/score/text'
import type { Capo, OpenString, Score } from '#shared/score/types'
import type { Db } from '../db/client'
import { arrangements, members, snapshots } from '../db/schema'
import { remember, scoreAt } from './scores'
import { isUuid } from './uuid'

/** What the folio lists of a score. */
export const listed = ({ head, bars }: Score) => ({ title: head.title, strings: head.strings, capos: head.capos, bars: bars.length })

/** Someone's part in an arrangement; null when there is none, no such arrangement, or it is deleted. @param deleted asks for deleted ones as well */
export async function roleIn(db: Db, userId: string, arrangementId: string, deleted = false): Promise<ArrangementRole | null> {
  if (!isUuid(arrangementId)) return null
  const [row] = await db.select({ role: members.role, deletedAt: arrangements.deletedAt }).from(members)
    .innerJoin(arrangements, eq(arrangements.id, members.arrangementId))
    .where(and(eq(members.arrangementId, arrangementId), eq(members.userId, userId))).limit(1)
  return row && (deleted || !row.deletedAt) ? row.role : null
}

/** All arrangements someone has a part in, the last changed first. */
export async function listArrangements(db: Db, userId: string): Promise<ArrangementSummary[]> {
  const rows = await db.select({
    id: arrangements.id, title: arrangements.title, strings: arrangements.strings, capos: arrangements.capos, bars: arrangements.bars,
    state: arrangements.state, role: members.role, changedAt: arrangements.changedAt,
  }).from(members).innerJoin(arrangements, eq(arrangements.id, members.arrangementId))
    .where(and(eq(members.userId, userId), isNull(arrangements.deletedAt))).orderBy(desc(arrangements.changedAt), arrangements.id)
  return rows.map(row => ({ ...row, strings: row.strings as OpenString[], capos: row.capos as Capo[], changedAt: row.changedAt.toISOString() }))
}

/** Keeps a score, sound by the schema and validateScore, as a new arrangement of `userId`'s. */
export const createArrangement = (db: Db, userId: string, score: Score): Promise<string> => db.transaction(async (tx) => {
  const [row] = await tx.insert(arrangements).values(listed(score)).returning({ id: arrangements.id })
  const arrangementId = row!.id
  await tx.insert(members).values({ arrangementId, userId, role: 'arranger' })
  await tx.insert(snapshots).values({ arrangementId, revision: 0, score })
  return arrangementId
})

/** State, revision and score of an arrangement that is there. */
export async function readArrangement(db: Db, arrangementId: string): Promise<Omit<ArrangementDetail, 'role'>> {
  const [row] = await db.select({ state: arrangements.state, revision: arrangements.revision }).from(arrangements).where(eq(arrangements.id, arrangementId)).limit(1)
  if (!row) throw new Error(`no arrangement ${arrangementId}`)
  const score = await scoreAt(db, arrangementId, row.revision)
  remember(arrangementId, { revision: row.revision, score })
  return { id: arrangementId, ...row, score }
}

export async function setState(db: Db, arrangementId: string, state: ArrangementState): Promise<void> {
  await db.update(arrangements).set({ state, changedAt: new Date() }).where(eq(arrangements.id, arrangementId))
}

/** Puts an arrangement away; everything of it is kept. */
export async function deleteArrangement(db: Db, arrangementId: string): Promise<void> {
  await db.update(arrangements).set({ deletedAt: new Date() }).where(and(eq(arrangements.id, arrangementId), isNull(arrangements.deletedAt)))
}

export async function restoreArrangement(db: Db, arrangementId: string): Promise<void> {
  await db.update(arrangements).set({ deletedAt: null }).where(and(eq(arrangements.id, arrangementId), isNotNull(arrangements.deletedAt)))
}

/** A copy of its own: its history starts anew. */
export async function duplicateArrangement(db: Db, userId: string, arrangementId: string): Promise<string> {
  const { score } = await readArrangement(db, arrangementId)
  return createArrangement(db, userId, { ...score, head: { ...score.head, title: copyTitle(score.head.title) } })
}

/** Within what a title may hold. */
const copyTitle = (title: string): string => `${shortened(title, 190)} (copy)`
