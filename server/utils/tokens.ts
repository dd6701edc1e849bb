import { createHash, randomBytes } from 'node:crypto'
import { and, eq, gt, isNull } from 'drizzle-orm'
import type { Db } from '../db/client'
import { tokens } from '../db/schema'

export type TokenKind = 'confirm' | 'reset'
type Payload = typeof tokens.$inferSelect['payload']

/** Minutes. */
const LIFE: Readonly<Record<TokenKind, number>> = { confirm: 24 * 60, reset: 60 }

const hashOf = (token: string) => createHash('sha256').update(token).digest('hex')

/** A new link's secret, 256 random bits; only its hash is kept. */
export async function makeToken(db: Db, userId: string, kind: TokenKind, payload: Payload = null): Promise<string> {
  const token = randomBytes(32).toString('base64url')
  await db.insert(tokens).values({ userId, kind, payload, hash: hashOf(token), expiresAt: new Date(Date.now() + LIFE[kind] * 60_000) })
  return token
}

/** Uses a token up, together with all others of its kind and person; null when it is unknown, used or too old. One statement decides, so that two requests at once can't both win. */
export async function useToken(db: Db, kind: TokenKind, token: string): Promise<{ readonly userId: string, readonly payload: Payload } | null> {
  const now = new Date()
  const fresh = and(eq(tokens.kind, kind), isNull(tokens.usedAt), gt(tokens.expiresAt, now))
  const [used] = await db.update(tokens).set({ usedAt: now }).where(and(eq(tokens.hash, hashOf(token)), fresh)).returning()
  if (!used) return null
  await db.update(tokens).set({ usedAt: now }).where(and(eq(tokens.userId, used.userId), fresh))
  return { userId: used.userId, payload: used.payload }
}
