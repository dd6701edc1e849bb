import { z } from 'zod'
import type { Edit } from '../edits/types'
import { MOST_BARS, barFields, barSchema, headPatchSchema, idSchema, text, voiceSchema } from '../score/schema'

const place = idSchema.nullable()
const bars = z.array(barSchema).min(1).max(MOST_BARS)
const barPatch = z.strictObject({
  meter: barFields.meter.nullable(), key: barFields.key.nullable(), tempo: barFields.tempo.nullable(), length: barFields.length.nullable(),
  repeatStart: barFields.repeatStart.nullable(), repeatEnd: barFields.repeatEnd.nullable(), ring: barFields.ring.nullable(),
})

export const editSchema: z.ZodType<Edit> = z.discriminatedUnion('kind', [
  z.strictObject({
    kind: z.literal('replaceVoice'), bar: idSchema, voice: z.literal(['upper', 'lower', 'middle']), before: voiceSchema.nullable(), after: voiceSchema.nullable(),
  }),
  z.strictObject({ kind: z.literal('patchBar'), bar: idSchema, before: barPatch, after: barPatch }),
  z.strictObject({ kind: z.literal('patchHead'), before: headPatchSchema, after: headPatchSchema }),
  z.strictObject({ kind: z.literal('insertBars'), after: place, bars }),
  z.strictObject({ kind: z.literal('removeBars'), after: place, bars }),
  z.strictObject({ kind: z.literal('moveBars'), bars: z.array(idSchema).min(1).max(MOST_BARS), from: place, to: place }),
])

/** One undo step as it goes to the log. */
export interface LoggedTransaction { readonly label: string, readonly edits: readonly Edit[] }
export const loggedTransactionSchema: z.ZodType<LoggedTransaction> = z.strictObject({ label: text(200), edits: z.array(editSchema).min(1).max(4000) })

/** What one save sends. `seq` counts the saves of one client, from 1; a retry repeats it with the same transactions. */
export interface SaveEdits { readonly clientId: string, readonly seq: number, readonly base: number, readonly transactions: readonly LoggedTransaction[] }
export const saveEditsSchema: z.ZodType<SaveEdits> = z.strictObject({
  clientId: idSchema,
  seq: z.int().min(0).max(2 ** 31 - 1),
  base: z.int().min(0).max(2 ** 31 - 1),
  transactions: z.array(loggedTransactionSchema).min(1).max(1000),
})

/** One save as it stands in the log; every save makes one revision. */
export interface LoggedBatch { readonly revision: number, readonly clientId: string, readonly seq: number, readonly transactions: readonly LoggedTransaction[] }

export interface SaveAnswer { readonly revision: number }
export interface EditsSince { readonly revision: number, readonly batches: readonly LoggedBatch[] }
