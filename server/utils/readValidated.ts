import { getQuery, getRequestHeader, readRawBody, type H3Event } from 'h3'
import type { z } from 'zod'
import { firstComplaint } from './issues'
import { problem } from './problems'

/** Bytes. Enough for every form; saves and imports say their own. */
const ORDINARY = 64 * 1024

function checkSize(event: H3Event, most: number): void {
  const stated = getRequestHeader(event, 'content-length')
  if (stated === undefined && getRequestHeader(event, 'transfer-encoding')) throw problem(411, { code: 'bad-request', message: 'Say how long the body is (Content-Length).' })
  if (Number(stated ?? 0) > most) throw problem(413, { code: 'too-large', message: `This is larger than the ${Math.round(most / 1024)} kB that are accepted here.` })
}

function parseJson(body: string | undefined): unknown {
  try {
    return JSON.parse(body || '{}')
  }
  catch {
    throw problem(400, { code: 'bad-request', message: 'The body is no valid JSON.' })
  }
}

function check<T>(schema: z.ZodType<T>, value: unknown): T {
  const result = schema.safeParse(value, { reportInput: true })
  if (result.success) return result.data
  const { field, message } = firstComplaint(result.error)
  throw problem(400, { code: 'bad-request', message, ...(field && { field }) })
}

/** The JSON body, checked. @param most bytes accepted */
export async function readValidated<T>(event: H3Event, schema: z.ZodType<T>, most = ORDINARY): Promise<T> {
  checkSize(event, most)
  if (!/^application\/json\b/i.test(getRequestHeader(event, 'content-type') ?? '')) throw problem(415, { code: 'unsupported', message: 'Send the body as application/json.' })
  return check(schema, parseJson(await readRawBody(event, 'utf8')))
}

export const queryValidated = <T>(event: H3Event, schema: z.ZodType<T>): T => check(schema, getQuery(event))
