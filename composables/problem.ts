/** What went wrong, ready to be shown: the message says what happened, `help` what to do. */
export interface Problem {
  readonly code: string
  readonly message: string
  readonly help?: string
  /** The field of the form it belongs to. */
  readonly field?: string
}

const isRecord = (value: unknown): value is Record<string, unknown> => typeof value === 'object' && value !== null
const text = (value: unknown) => typeof value === 'string' && value ? value : undefined

/** Reads the one error shape of our server out of whatever a request threw; without an answer it was the connection. */
export function problemOf(error: unknown): Problem {
  const body = isRecord(error) && isRecord(error.data) ? error.data : undefined
  const data = body && isRecord(body.data) ? body.data : undefined
  const code = text(data?.code)
  if (data && code) {
    return { code, message: text(data.message) ?? text(body?.message) ?? 'The server refused this.', help: text(data.help), field: text(data.field) }
  }
  const status = isRecord(error) && typeof error.statusCode === 'number' ? error.statusCode : undefined
  if (status === undefined) return { code: 'offline', message: 'The server did not answer.', help: 'Check your connection and try again. Nothing is lost.' }
  if (status === 401) return { code: 'signed-out', message: 'You are no longer signed in.', help: 'Sign in again in another tab, then repeat this. Nothing is lost.' }
  if (status === 429) return { code: 'too-many', message: 'That was too often.', help: 'Wait a minute and try again.' }
  return { code: `http-${status}`, message: 'The server could not do this.', help: 'Try again in a moment. Nothing is lost.' }
}
