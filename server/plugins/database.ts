import { CannotOpen } from '../db/client'
import { config } from '../utils/config'
import { databaseHandle } from '../utils/database'
import { DEMO_PASSWORD, DEMO_PEOPLE } from '../utils/demo'
import { finishLater } from '../utils/later'

/** What ends the process says so in one line; only what we did not foresee shows where it happened. */
function giveUp(error: unknown): never {
  if (error instanceof CannotOpen) console.error(error.message)
  else if ((error as NodeJS.ErrnoException).code === 'ECONNREFUSED') console.error('The database server at DATABASE_URL does not answer. Start it, or correct the address.')
  else console.error('The database could not be made ready:', error)
  process.exit(1)
}

function greet(): void {
  const { appUrl, mode, demo, smtpUrl } = config()
  console.log(`Copperwound is ready at ${appUrl}`)
  if (demo) console.log(`Demo: sign in as ${DEMO_PEOPLE.maren.email} with the password ${DEMO_PASSWORD}`)
  if (mode === 'local' && !smtpUrl) console.log(`Mail is not sent; what would have been is at ${appUrl}/outbox`)
}

export default defineNitroPlugin((nitro) => {
  const opening = databaseHandle()
  opening.then(greet, giveUp)
  nitro.hooks.hook('close', async () => {
    await finishLater()
    await (await opening).close()
  })
  process.on('uncaughtException', (error: NodeJS.ErrnoException) => {
    if (error.code !== 'EADDRINUSE') return
    console.error(`Port ${process.env.PORT ?? 3000} is in use by another program. Stop that one, or set PORT to another number.`)
    process.exit(1)
  })
})
