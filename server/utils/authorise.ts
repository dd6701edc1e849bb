import { getRouterParam, type H3Event } from 'h3'
import { mayInArrangement, mayOnPlatform, type ArrangementAction, type ArrangementRole, type PlatformAction } from '#shared/permissions'
import type { SessionUser } from '#shared/schemas/account'
import { roleIn } from './arrangements'
import { config } from './config'
import { database } from './database'
import { notFound, problem } from './problems'
import { currentUser } from './session'

const signedOut = () => problem(401, { code: 'signed-out', message: 'You are signed out. Sign in to go on.' })
const forbidden = () => problem(403, { code: 'forbidden', message: 'Your role does not allow this here.' })

/** Lets pass who may, by the table. @throws 401 when signed out, 403 when the role does not reach */
export async function authorise(event: H3Event, action: PlatformAction): Promise<SessionUser | null> {
  const user = (await currentUser(event))?.user ?? null
  const roles = [user?.role ?? 'visitor', ...(config().mode === 'local' ? ['operator' as const] : [])] as const
  if (roles.some(role => mayOnPlatform(role, action))) return user
  throw user ? forbidden() : signedOut()
}

/** The same where it takes someone who is signed in. */
export async function authoriseUser(event: H3Event, action: PlatformAction): Promise<SessionUser> {
  const user = await authorise(event, action)
  if (!user) throw signedOut()
  return user
}

export interface InArrangement { readonly user: SessionUser, readonly arrangementId: string, readonly role: ArrangementRole }

/** The same for the arrangement that the route names. Who has no part in it is told that there is none. @param deleted reaches deleted ones, to bring them back */
export async function authoriseArrangement(event: H3Event, action: ArrangementAction, deleted = false): Promise<InArrangement> {
  const user = (await currentUser(event))?.user
  if (!user) throw signedOut()
  const arrangementId = getRouterParam(event, 'id') ?? ''
  const role = await roleIn(await database(), user.id, arrangementId, deleted)
  if (!role) throw notFound()
  if (!mayInArrangement(role, action)) throw forbidden()
  return { user, arrangementId, role }
}
