import { lt, or } from 'drizzle-orm'
import type { Db } from '../db/client'
import { mail, sessions, tokens } from '../db/schema'

const DAY = 24 * 60 * 60 * 1000
const daysAgo = (days: number) => new Date(Date.now() - days * DAY)

/** Takes away what is of no use any more: links and sessions that are over, old messages of the local mailbox. Nothing of an arrangement. */
export async function tidy(db: Db): Promise<void> {
  await db.delete(tokens).where(lt(tokens.expiresAt, daysAgo(7)))
  await db.delete(sessions).where(or(lt(sessions.expiresAt, daysAgo(7)), lt(sessions.endedAt, daysAgo(7))))
  await db.delete(mail).where(lt(mail.sentAt, daysAgo(90)))
}
