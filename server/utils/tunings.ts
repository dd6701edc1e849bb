import { and, count, eq, inArray, isNotNull, isNull, sql, type SQL } from 'drizzle-orm'
import { OWN_TUNINGS, type NewTuning, type OwnTuning, type PatchTuning, type TuningName } from '#shared/schemas/tuning'
import { STEEL_STRING_GUITAR } from '#shared/score/create'
import type { OpenString } from '#shared/score/types'
import { validateHead } from '#shared/score/validate'
import { slugOf } from '#shared/tunings/slug'
import type { Db } from '../db/client'
import { arrangements, members, tunings, users } from '../db/schema'
import { problem } from './problems'
import { isUuid } from './uuid'

/** @throws 422 where a string is none that an instrument here could have */
export function requireStrings(strings: readonly OpenString[]): void {
  const message = validateHead({ title: '', composer: '', arranger: '', rights: '', source: '', ring: 'written', instrument: STEEL_STRING_GUITAR, strings, capos: [] })
  if (message) throw problem(422, { code: 'refused', message, field: 'strings' })
}

export const noRoom = () => problem(422, { code: 'refused', message: `You keep ${OWN_TUNINGS.most} tunings, which is the most there is room for. Delete one that you no longer need.` })

const byName = sql`lower(${tunings.name})`
const owned = (ownerId: string, deleted: SQL = isNull(tunings.deletedAt)) => and(eq(tunings.ownerId, ownerId), deleted)

/** All that someone keeps, by name. */
export async function listTunings(db: Db, ownerId: string): Promise<OwnTuning[]> {
  const rows = await db.select().from(tunings).where(owned(ownerId)).orderBy(byName, tunings.id)
  return rows.map(({ id, name, notes, strings, changedAt }) => ({ id, name, notes, strings: strings as OpenString[], changedAt: changedAt.toISOString() }))
}

/** Whether one more may be kept. The owner's row is locked, so that two requests at once can't both be the last. */
async function hasRoom(tx: Db, ownerId: string): Promise<boolean> {
  await tx.select({ id: users.id }).from(users).where(eq(users.id, ownerId)).for('update')
  const [row] = await tx.select({ kept: count() }).from(tunings).where(owned(ownerId))
  return (row?.kept ?? 0) < OWN_TUNINGS.most
}

/** @returns the new tuning's id; null where as many are kept as may be */
export const createTuning = (db: Db, ownerId: string, { name, notes = '', strings }: NewTuning): Promise<string | null> => db.transaction(async (tx) => {
  if (!await hasRoom(tx, ownerId)) return null
  const [row] = await tx.insert(tunings).values({ ownerId, name, notes, strings }).returning({ id: tunings.id })
  return row!.id
})

/** @returns whether the person has such a tuning */
export async function patchTuning(db: Db, ownerId: string, id: string, patch: PatchTuning): Promise<boolean> {
  if (!isUuid(id)) return false
  return (await db.update(tunings).set({ ...patch, changedAt: new Date() }).where(and(eq(tunings.id, id), owned(ownerId))).returning({ id: tunings.id })).length > 0
}

/** Puts a tuning away; it is kept. @returns whether the person has such a tuning */
export async function deleteTuning(db: Db, ownerId: string, id: string): Promise<boolean> {
  if (!isUuid(id)) return false
  return (await db.update(tunings).set({ deletedAt: new Date() }).where(and(eq(tunings.id, id), owned(ownerId))).returning({ id: tunings.id })).length > 0
}

/** Brings a deleted tuning back; one that is there already stays as it is. */
export const restoreTuning = (db: Db, ownerId: string, id: string): Promise<'restored' | 'absent' | 'full'> => db.transaction(async (tx) => {
  if (!isUuid(id)) return 'absent'
  const [row] = await tx.select({ deletedAt: tunings.deletedAt }).from(tunings).where(and(eq(tunings.id, id), eq(tunings.ownerId, ownerId)))
  if (!row) return 'absent'
  if (row.deletedAt && !await hasRoom(tx, ownerId)) return 'full'
  await tx.update(tunings).set({ deletedAt: null }).where(and(eq(tunings.id, id), owned(ownerId, isNotNull(tunings.deletedAt))))
  return 'restored'
})

/** What an arrangement's arranger and co-arrangers call its tuning, where they keep it: the arranger's names first. Its other tunings stay their own affair. */
export async function tuningNames(db: Db, arrangementId: string): Promise<TuningName[]> {
  const [arrangement] = await db.select({ strings: arrangements.strings }).from(arrangements).where(eq(arrangements.id, arrangementId))
  if (!arrangement) return []
  const sound = slugOf(arrangement.strings as OpenString[])
  const rows = await db.select({ name: tunings.name, notes: tunings.notes, strings: tunings.strings, by: users.name }).from(tunings)
    .innerJoin(members, and(eq(members.userId, tunings.ownerId), eq(members.arrangementId, arrangementId), inArray(members.role, ['arranger', 'co-arranger'])))
    .innerJoin(users, eq(users.id, tunings.ownerId))
    .where(isNull(tunings.deletedAt)).orderBy(members.role, byName, tunings.id)
  return rows.filter(row => slugOf(row.strings as OpenString[]) === sound).map(({ name, notes, by }) => ({ name, notes, by }))
}
