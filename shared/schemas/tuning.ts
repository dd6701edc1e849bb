import { z } from 'zod'
import { stringsSchema, text } from '../score/schema'
import type { OpenString } from '../score/types'

/** Most tunings that one person keeps; name and notes in characters. */
export const OWN_TUNINGS = { most: 200, name: 80, notes: 2000 } as const

const nameSchema = text(OWN_TUNINGS.name).trim().min(1, 'is empty')
const notesSchema = text(OWN_TUNINGS.notes).trim()

/** A tuning to keep for oneself. Strings as in a score: string 1 first, sounding pitches without capo. */
export const newTuningSchema = z.strictObject({ name: nameSchema, notes: notesSchema.optional(), strings: stringsSchema })

export const patchTuningSchema = z.strictObject({ name: nameSchema.optional(), notes: notesSchema.optional(), strings: stringsSchema.optional() })
  .refine(patch => Object.values(patch).some(value => value !== undefined), 'names neither a name, notes nor strings')

export type NewTuning = z.infer<typeof newTuningSchema>
export type PatchTuning = z.infer<typeof patchTuningSchema>

/** One of my tunings. */
export interface OwnTuning {
  readonly id: string
  readonly name: string
  readonly notes: string
  /** String 1 first. */
  readonly strings: readonly OpenString[]
  /** ISO 8601, UTC. */
  readonly changedAt: string
}
/** By name. */
export interface OwnTuningList { readonly items: readonly OwnTuning[] }
export interface TuningCreated { readonly id: string }

/** What the arrangers of an arrangement call its tuning, and wrote of it. */
export interface TuningName { readonly name: string, readonly notes: string, readonly by: string }
export interface TuningNames { readonly items: readonly TuningName[] }
