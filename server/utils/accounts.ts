import { and, eq, gt, isNull, ne } from 'drizzle-orm'
import type { SessionUser } from '#shared/schemas/account'
import type { Db } from '../db/client'
import { sessions, users } from '../db/schema'
import { makeToken, useToken } from './tokens'

export type UserRow = typeof users.$inferSelect

/** Seconds: thirty days, as the cookie. */
export const SESSION_LIFE = 60 * 60 * 24 * 30

export const userByEmail = async (db: Db, email: string): Promise<UserRow | undefined> =>
  (await db.select().from(users).where(eq(users.email, email)).limit(1))[0]

export const sessionUser = ({ id, name, email, role }: UserRow): SessionUser => ({ id, name, email, role })

export interface Registration { readonly name: string, readonly email: string, readonly passwordHash: string }

/**
 * Notes a registration. The link carries the name and the password it was made with, so that confirming it never lets in
 * a password that someone else typed for the same address.
 * @returns the token for the mail; null when the address has a confirmed account
 */
export const register = (db: Db, { name, email, passwordHash }: Registration): Promise<{ token: string } | null> => db.transaction(async (tx) => {
  await tx.insert(users).values({ name, email, passwordHash }).onConflictDoNothing()
  const [user] = await tx.select().from(users).where(eq(users.email, email)).for('update')
  if (!user || user.confirmedAt) return null
  await tx.update(users).set({ name, passwordHash }).where(eq(users.id, user.id))
  return { token: await makeToken(tx, user.id, 'confirm', { name, passwordHash }) }
})

/** Confirms an address; null when the link is not good. */
export const confirm = (db: Db, token: string): Promise<UserRow | null> => db.transaction(async (tx) => {
  const used = await useToken(tx, 'confirm', token)
  if (!used) return null
  const [user] = await tx.update(users).set({ ...used.payload, confirmedAt: new Date() }).where(and(eq(users.id, used.userId), isNull(users.confirmedAt))).returning()
  return user ?? null
})

export async function makeAdmin(db: Db, user: UserRow): Promise<UserRow> {
  await db.update(users).set({ role: 'admin' }).where(eq(users.id, user.id))
  return { ...user, role: 'admin' }
}

/** Sets a password by a link from the mail, which proves the address too. All sessions end. */
export const resetPassword = (db: Db, token: string, passwordHash: string): Promise<UserRow | null> => db.transaction(async (tx) => {
  const used = await useToken(tx, 'reset', token)
  if (!used) return null
  const [user] = await tx.update(users).set({ passwordHash, confirmedAt: new Date() }).where(eq(users.id, used.userId)).returning()
  await tx.update(sessions).set({ endedAt: new Date() }).where(and(eq(sessions.userId, used.userId), isNull(sessions.endedAt)))
  return user ?? null
})

/** Sets a password; every session but `keep` ends. */
export const changePassword = (db: Db, userId: string, passwordHash: string, keep: string): Promise<void> => db.transaction(async (tx) => {
  await tx.update(users).set({ passwordHash }).where(eq(users.id, userId))
  await tx.update(sessions).set({ endedAt: new Date() }).where(and(eq(sessions.userId, userId), isNull(sessions.endedAt), ne(sessions.id, keep)))
})

export async function openSession(db: Db, userId: string): Promise<string> {
  const [row] = await db.insert(sessions).values({ userId, expiresAt: new Date(Date.now() + SESSION_LIFE * 1000) }).returning({ id: sessions.id })
  return row!.id
}

export async function endSession(db: Db, id: string): Promise<void> {
  await db.update(sessions).set({ endedAt: new Date() }).where(and(eq(sessions.id, id), isNull(sessions.endedAt)))
}

/** Whose session this is; null when it was ended or is over. */
export async function sessionOwner(db: Db, id: string): Promise<UserRow | null> {
  const [row] = await db.select({ user: users }).from(sessions).innerJoin(users, eq(users.id, sessions.userId))
    .where(and(eq(sessions.id, id), isNull(sessions.endedAt), gt(sessions.expiresAt, new Date()))).limit(1)
  return row?.user ?? null
}
