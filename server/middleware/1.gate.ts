import { defineEventHandler, setResponseHeader } from 'h3'
import { databaseHandle } from '../utils/database'
import { problem } from '../utils/problems'

/** Milliseconds that a request waits for the database to open. */
const PATIENCE = 8_000

let isOpen = false

const after = (ms: number) => new Promise<false>((resolve) => {
  setTimeout(resolve, ms, false).unref()
})

export default defineEventHandler(async (event) => {
  if (isOpen) return
  isOpen = await Promise.race([databaseHandle().then(() => true, () => false), after(PATIENCE)])
  if (isOpen) return
  setResponseHeader(event, 'Retry-After', 3)
  throw problem(503, { code: 'starting', message: 'Copperwound is starting. Try again in a few seconds.' })
})
