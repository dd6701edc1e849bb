import { getCookie, type H3Event } from 'h3'
import type { SessionUser } from '#shared/schemas/account'
import { endSession, makeAdmin, openSession, sessionOwner, sessionUser, type UserRow } from './accounts'
import { config } from './config'
import { database } from './database'
import { isUuid } from './uuid'

export interface Current { readonly user: SessionUser, readonly sessionId: string }

async function find(event: H3Event): Promise<Current | null> {
  // Reading a session makes one where there is none; a visitor needs no cookie.
  if (!getCookie(event, useRuntimeConfig().session.name!)) return null
  const { secure } = await getUserSession(event)
  if (!isUuid(secure?.sessionId)) return null
  const owner = await sessionOwner(await database(), secure.sessionId)
  return owner && { user: sessionUser(owner), sessionId: secure.sessionId }
}

/** Who is asking, looked up once a request: the sealed cookie counts only while its row does. */
export function currentUser(event: H3Event): Promise<Current | null> {
  const context = event.context as { current?: Promise<Current | null> }
  return (context.current ??= find(event))
}

/** Signs in: a new session and a new cookie; one that was there before ends. */
export async function signIn(event: H3Event, row: UserRow): Promise<SessionUser> {
  const before = await currentUser(event)
  const db = await database()
  if (before) await endSession(db, before.sessionId)
  const user = sessionUser(row.email === config().adminEmail && row.role !== 'admin' ? await makeAdmin(db, row) : row)
  await replaceUserSession(event, { user, secure: { sessionId: await openSession(db, row.id) } })
  return user
}

export async function signOut(event: H3Event): Promise<void> {
  const before = await currentUser(event)
  if (before) await endSession(await database(), before.sessionId)
  await clearUserSession(event)
}
