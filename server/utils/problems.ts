import { createError, type H3Error } from 'h3'
import type { Problem } from '#shared/schemas/problem'

const STATUS_TEXT: Readonly<Record<number, string>> = {
  400: 'Bad Request', 401: 'Unauthorized', 403: 'Forbidden', 404: 'Not Found', 409: 'Conflict', 411: 'Length Required',
  413: 'Content Too Large', 415: 'Unsupported Media Type', 422: 'Unprocessable Content', 429: 'Too Many Requests', 500: 'Server Error', 503: 'Service Unavailable',
}

/** A refusal as every client reads it: `data` holds code, message and, where one is meant, the field. */
export const problem = (statusCode: number, data: Problem): H3Error =>
  createError({ statusCode, statusMessage: STATUS_TEXT[statusCode], message: data.message, data })

export const notFound = (): H3Error => problem(404, { code: 'not-found', message: 'There is nothing at this address, or nothing that you may see.' })
