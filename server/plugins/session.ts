import { endSession } from '../utils/accounts'
import { database } from '../utils/database'
import { currentUser } from '../utils/session'

/** What the pages are told of the session is what its row says now: an ended one is gone, a changed role shows. */
export default defineNitroPlugin(() => {
  sessionHooks.hook('fetch', async (session, event) => {
    if (!session.user) return
    const current = await currentUser(event)
    if (current) {
      session.user = current.user
      return
    }
    await clearUserSession(event)
    Reflect.deleteProperty(session, 'user')
  })
  sessionHooks.hook('clear', async (_session, event) => {
    const current = await currentUser(event)
    if (current) await endSession(await database(), current.sessionId)
  })
})
