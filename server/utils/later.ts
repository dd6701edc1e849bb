/**
 * Work done after the answer has gone, so that the time an answer takes tells nothing: whether an address is known, say.
 * The server finishes it before it closes.
 */
const running = new Set<Promise<unknown>>()

export function later(name: string, work: () => Promise<unknown>): void {
  const job = work().catch(error => console.error(`${name} failed: ${safeMessage(error)}`)).finally(() => running.delete(job))
  running.add(job)
}

export const finishLater = async (): Promise<void> => {
  await Promise.allSettled([...running])
}

/** An error's message without the values of a query, which may be secrets: drizzle puts them into its own message. */
export function safeMessage(error: unknown): string {
  if (!(error instanceof Error)) return 'unknown error'
  if (error.message.startsWith('Failed query')) return error.cause instanceof Error ? `query failed: ${error.cause.message}` : 'query failed'
  return error.message
}
