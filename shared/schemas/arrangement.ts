import { z } from 'zod'
import type { ArrangementRole } from '../permissions'
import { caposSchema, fractionSchema, keySchema, meterSchema, ringRuleSchema, scoreSchema, stringsSchema, tempoSchema, text } from '../score/schema'
import type { Capo, OpenString, Score } from '../score/types'

const titleSchema = text(200).trim().min(1, 'is empty')

/** A new, empty arrangement. Left out: standard tuning, no capo, 4/4, C major, a quarter at 80. */
export const newArrangementSchema = z.strictObject({
  title: titleSchema,
  composer: text(200).optional(),
  strings: stringsSchema.optional(), capos: caposSchema.optional(), meter: meterSchema.optional(), key: keySchema.optional(),
  tempo: tempoSchema.optional(), pickup: fractionSchema.optional(), ring: ringRuleSchema.optional(),
})
/** An arrangement that exists already, read from a file. */
export const importArrangementSchema = z.strictObject({ score: scoreSchema })
export const createArrangementSchema = z.union([newArrangementSchema, importArrangementSchema])

export const ARRANGEMENT_STATES = ['draft', 'ready'] as const
export type ArrangementState = typeof ARRANGEMENT_STATES[number]

export const patchArrangementSchema = z.strictObject({ title: titleSchema.optional(), state: z.enum(ARRANGEMENT_STATES).optional() })
  .refine(({ title, state }) => title !== undefined || state !== undefined, 'names neither a title nor a state')

export const sinceSchema = z.strictObject({ since: z.coerce.number().int().min(0).max(2 ** 31 - 1) })

export type NewArrangement = z.infer<typeof newArrangementSchema>
export type PatchArrangement = z.infer<typeof patchArrangementSchema>

/** A row of the folio. */
export interface ArrangementSummary {
  readonly id: string
  readonly title: string
  /** String 1 first. */
  readonly strings: readonly OpenString[]
  readonly capos: readonly Capo[]
  readonly bars: number
  readonly state: ArrangementState
  readonly role: ArrangementRole
  /** ISO 8601, UTC. */
  readonly changedAt: string
}
export interface ArrangementList { readonly items: readonly ArrangementSummary[] }
export interface ArrangementCreated { readonly id: string }
export interface ArrangementDetail {
  readonly id: string
  readonly role: ArrangementRole
  readonly state: ArrangementState
  readonly revision: number
  readonly score: Score
}
