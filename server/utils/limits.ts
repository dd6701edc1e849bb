import { createHash } from 'node:crypto'
import { getRequestHeader, setResponseHeader, type H3Event } from 'h3'
import { RateLimiterPostgres, RateLimiterRes } from 'rate-limiter-flexible'
import { config } from './config'
import { databaseHandle } from './database'
import { placeOfAddress } from './place'
import { problem } from './problems'

/** Kept in the database, so that instances share them and a restart forgets none. Durations in seconds. */
const rules = {
  /** Wrong passwords from one place for one address … */
  'sign-in': { points: 10, duration: 15 * 60 },
  /** … for one address from anywhere … */
  'sign-in-address': { points: 50, duration: 15 * 60 },
  /** … and from one place for any address. */
  'sign-in-place': { points: 100, duration: 15 * 60 },
  'mail-address': { points: 5, duration: 60 * 60 },
  'mail-place': { points: 60, duration: 60 * 60 },
  'password': { points: 10, duration: 15 * 60 },
} as const
export type LimitName = keyof typeof rules
export interface Use { readonly limit: LimitName, readonly key: string }

const made = new Map<LimitName, Promise<RateLimiterPostgres>>()

function limiter(name: LimitName): Promise<RateLimiterPostgres> {
  const known = made.get(name)
  if (known) return known
  const making = databaseHandle().then(({ raw }) =>
    new RateLimiterPostgres({ ...rules[name], storeClient: raw, storeType: 'client', tableName: 'rate_limits', tableCreated: true, keyPrefix: name }))
  made.set(name, making)
  return making
}

/** Addresses are not kept in the clear for this. */
const hashed = (key: string) => createHash('sha256').update(key).digest('base64url').slice(0, 32)

/** Where a request comes from, as far as that is known. */
export function placeOf(event: H3Event): string {
  const forwarded = config().trustProxy ? getRequestHeader(event, 'x-forwarded-for')?.split(',').at(-1)?.trim() : undefined
  return placeOfAddress(forwarded || event.node.req.socket?.remoteAddress || 'unknown')
}

/** Takes one point of each. @throws 429 with Retry-After when one is used up */
export async function use(event: H3Event, uses: readonly Use[]): Promise<void> {
  for (const { limit, key } of uses) {
    try {
      await (await limiter(limit)).consume(hashed(key))
    }
    catch (error) {
      if (!(error instanceof RateLimiterRes)) throw error
      const seconds = Math.max(1, Math.ceil(error.msBeforeNext / 1000))
      setResponseHeader(event, 'Retry-After', seconds)
      throw problem(429, { code: 'too-many', message: `Too many attempts. Try again in ${seconds < 90 ? `${seconds} seconds` : `${Math.ceil(seconds / 60)} minutes`}.` })
    }
  }
}

/** Gives the points back: only failures count. */
export async function giveBack(uses: readonly Use[]): Promise<void> {
  for (const { limit, key } of uses) await (await limiter(limit)).reward(hashed(key))
}
