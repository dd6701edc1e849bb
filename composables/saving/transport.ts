import type { Batch } from '#shared/editor/saving'
import type { EditsSince, LoggedBatch, Problem, SaveAnswer, StaleProblem } from '#shared/schemas'

/** What came of a request, in the terms that saving decides by. */
export type Failure
  /** No answer at all: the network, or a server that is down. */
  = | { readonly kind: 'unreachable' }
  /** An answer that may be another one later. `after` in ms, where the server says when. */
    | { readonly kind: 'trouble', readonly reason: string, readonly after?: number }
    | { readonly kind: 'signed-out' }
  /** No right to this arrangement, or it is gone. */
    | { readonly kind: 'forbidden', readonly reason: string }
  /** It will never be taken as it is. */
    | { readonly kind: 'refused', readonly reason: string }

export type PostAnswer
  = | { readonly kind: 'accepted', readonly revision: number }
    | { readonly kind: 'stale', readonly revision: number, readonly missed: readonly LoggedBatch[] }
    | Failure
export type SinceAnswer = { readonly kind: 'since', readonly revision: number, readonly batches: readonly LoggedBatch[] } | Failure

export interface Transport {
  /** @param leaving the page is closing: the request goes on without it */
  post: (batch: Batch, leaving?: boolean) => Promise<PostAnswer>
  since: (revision: number) => Promise<SinceAnswer>
}

/** Without an answer for so long, a request counts as lost (ms). */
const PATIENCE = 20_000

async function failureOf(response: Response, problem: Partial<Problem>): Promise<Failure> {
  const reason = problem.message ?? 'the server did not say why.'
  const after = Number(response.headers.get('retry-after')) * 1000
  if (response.status === 401) return { kind: 'signed-out' }
  if (response.status === 403 || response.status === 404) return { kind: 'forbidden', reason }
  if (response.status === 408 || response.status === 429 || response.status >= 500) return { kind: 'trouble', reason, ...(after > 0 && { after }) }
  return { kind: 'refused', reason }
}

async function problemOf(response: Response): Promise<Partial<Problem>> {
  const body = await response.json().catch(() => null) as { data?: Partial<Problem> } | null
  return body?.data ?? {}
}

/** Saving over HTTP; `send` is the browser's fetch. */
export function createTransport(arrangement: string, send: typeof fetch): Transport {
  const url = `/api/arrangements/${encodeURIComponent(arrangement)}/edits`
  const ask = async (query: string, init: RequestInit): Promise<Response | null> =>
    await send(url + query, { signal: AbortSignal.timeout(PATIENCE), ...init }).catch(() => null)

  return {
    async post(batch, leaving = false) {
      const response = await ask('', { method: 'POST', headers: { 'content-type': 'application/json' }, body: JSON.stringify(batch), keepalive: leaving })
      if (!response) return { kind: 'unreachable' }
      if (response.ok) return { kind: 'accepted', revision: (await response.json() as SaveAnswer).revision }
      const problem = await problemOf(response)
      if (response.status !== 409 || problem.code !== 'stale') return await failureOf(response, problem)
      const { revision, missed } = problem as StaleProblem
      return { kind: 'stale', revision, missed }
    },
    async since(revision) {
      const response = await ask(`?since=${revision}`, {})
      if (!response) return { kind: 'unreachable' }
      if (!response.ok) return await failureOf(response, await problemOf(response))
      const answer = await response.json() as EditsSince
      return { kind: 'since', ...answer }
    },
  }
}
