import { defineEventHandler, isError, setResponseHeader, type EventHandler, type EventHandlerRequest, type H3Event } from 'h3'
import { safeMessage } from './later'
import { problem } from './problems'

/** Refused or broken connections, and a server that is going down or starting (PostgreSQL's error classes 08 and 57P). */
const isAway = (error: unknown): boolean => {
  const code = String((error as { cause?: { code?: string } })?.cause?.code ?? (error as { code?: string })?.code ?? '')
  return /^(?:ECONNREFUSED|ECONNRESET|EPIPE|08|57P)/.test(code)
}

/**
 * An API handler. What it throws on purpose goes to the client as it is; anything else is logged without the values of
 * its queries and answered 500, or 503 where the database is away.
 */
export function defineApi<T>(handle: (event: H3Event) => T | Promise<T>): EventHandler<EventHandlerRequest, Promise<T>> {
  return defineEventHandler(async (event) => {
    setResponseHeader(event, 'Cache-Control', 'no-store')
    try {
      return await handle(event)
    }
    catch (error) {
      if (isError(error)) throw error
      const where = `${event.method} ${event.path.split('?')[0]}`
      if (isAway(error)) {
        console.error(`${where}: the database is away: ${safeMessage(error)}`)
        setResponseHeader(event, 'Retry-After', 5)
        throw problem(503, { code: 'starting', message: 'The database can’t be reached just now. Try again in a moment.' })
      }
      console.error(`${where}: ${safeMessage(error)}${stackOf(error)}`)
      throw problem(500, { code: 'failed', message: 'Something went wrong on the server. Try again; nothing that was saved is lost.' })
    }
  })
}

/** The lines that say where, without the message in front of them. */
const stackOf = (error: unknown): string =>
  error instanceof Error ? `\n${(error.stack ?? '').split('\n').filter(line => line.startsWith('    at ')).slice(0, 8).join('\n')}` : ''
