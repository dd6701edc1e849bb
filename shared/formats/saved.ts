import type { z } from 'zod'
import { scoreSchema } from '../score/schema'
import type { Score } from '../score/types'
import { validateScore } from '../score/validate'
import { scoreStatement } from './statement'

/** The saved form: versioned JSON with a canonical key order, so that equal scores are equal texts. */
export const SAVED_FORMAT = 'copperwound-score'
export const SAVED_VERSION = 1

export interface SavedProblem { readonly problem: string }
export type ReadSaved = { readonly score: Score } | SavedProblem

/** From a version to the next one, on the plain value of the whole file. Version 1 is the first, so that the table is empty. */
type Migration = (saved: Record<string, unknown>) => Record<string, unknown>
const migrations: ReadonlyMap<number, Migration> = new Map()

/** Keys in code unit order at every level; what is absent or undefined is left out. */
export function canonical(value: unknown): string {
  if (Array.isArray(value)) return `[${value.map(canonical).join(',')}]`
  if (typeof value !== 'object' || value === null) return JSON.stringify(value)
  const fields = Object.entries(value).filter(([, each]) => each !== undefined).sort(([a], [b]) => (a < b ? -1 : 1))
  return `{${fields.map(([key, each]) => `${JSON.stringify(key)}:${canonical(each)}`).join(',')}}`
}

/** SHA-256 of the canonical text, 64 hexadecimal digits: equal for equal scores. Needs Web Crypto (Node, or a page over HTTPS or localhost). */
export async function contentHash(score: Score): Promise<string> {
  const digest = await crypto.subtle.digest('SHA-256', new TextEncoder().encode(canonical(score)))
  return [...new Uint8Array(digest)].map(byte => byte.toString(16).padStart(2, '0')).join('')
}

/** The text to keep or to hand on.
 * @throws RangeError when the score is none: a defect of the caller, never to be written to a file. */
export function writeSaved(score: Score): string {
  const checked = checkScore(score)
  if ('problem' in checked) throw new RangeError(checked.problem)
  return canonical({ format: SAVED_FORMAT, version: SAVED_VERSION, statement: scoreStatement(score), score })
}

/** Reads the text of a saved score. Says what is wrong and where, never throws. */
export function readSaved(text: string): ReadSaved {
  let value: unknown
  try {
    value = JSON.parse(text.replace(/^\uFEFF/, ''))
  }
  catch (error) {
    return { problem: `This is no saved arrangement: the text is not JSON (${(error as Error).message}).` }
  }
  return readSavedValue(value)
}

const isRecord = (value: unknown): value is Record<string, unknown> => typeof value === 'object' && value !== null && !Array.isArray(value)

/** The same for a value that is parsed already. */
export function readSavedValue(value: unknown): ReadSaved {
  if (!isRecord(value) || value.format !== SAVED_FORMAT) {
    return { problem: `This is no saved arrangement: it should begin with "format": "${SAVED_FORMAT}".` }
  }
  const { version } = value
  if (typeof version !== 'number' || !Number.isInteger(version) || version < 1) return { problem: 'version: this should be a whole number, 1 or more.' }
  if (version > SAVED_VERSION) {
    return { problem: `This arrangement was saved in form ${version}; this Copperwound reads forms up to ${SAVED_VERSION}. Update it, or save the arrangement again where it came from.` }
  }
  return checkScore(migrated(value, version).score)
}

function migrated(saved: Record<string, unknown>, version: number): Record<string, unknown> {
  const migrate = migrations.get(version)
  return migrate ? migrated(migrate(saved), version + 1) : saved
}

/** What keeps a value from having the shape of a score, and where; null where nothing does. */
export function shapeProblem(value: unknown): string | null {
  const parsed = scoreSchema.safeParse(value)
  return parsed.success ? null : problemOf(parsed.error)
}

function checkScore(value: unknown): ReadSaved {
  const parsed = scoreSchema.safeParse(value)
  if (!parsed.success) return { problem: problemOf(parsed.error) }
  const problem = validateScore(parsed.data)
  return problem ? { problem } : { score: parsed.data }
}

/** "score.bars[3].voices.upper.events[0].notes[1].fret: expected number, received string". */
function problemOf(error: z.ZodError): string {
  const issue = error.issues[0]
  if (!issue) return 'score: this is no arrangement.'
  const path = issue.path.reduce<string>((before, part) => (typeof part === 'number' ? `${before}[${part}]` : `${before}.${String(part)}`), 'score')
  return `${path}: ${issue.message.replace(/^Invalid input: /, '')}`
}
