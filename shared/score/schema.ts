import { z } from 'zod'
import type { Fraction } from './fraction'
import type { Bar, Base, Capo, Harmonic, Head, Key, Length, Meter, Note, OpenString, Score, ScoreEvent, Tempo, Tuplet, Voice, Voices } from './types'

/**
 * The shape of a score as plain data, for everything that comes from outside: request bodies and files. Strict, so that
 * an unknown field is an error and never lost silently, and bounded in size. The rules of music are `validateScore`'s.
 */

// In a browser the schemas are read, not compiled: compiling asks for eval, which the content policy refuses with a message in the console.
if ('document' in globalThis) z.config({ jitless: true })

/** A database keeps neither NUL nor half a surrogate pair in its JSON, so that text is refused before it gets there. */
const unkeepable = /\0|\p{Surrogate}/u
export const text = (max: number) => z.string().max(max).refine(value => !unkeepable.test(value), 'has a character that cannot be kept')

/** Made by clients and importers: letters, digits, underscore, dot, hyphen. */
export const idSchema = z.string().regex(/^[\w.-]{1,64}$/, 'is no id: 1 to 64 letters, digits, dots, hyphens or underscores')

const whole = (low: number, high: number) => z.int().min(low).max(high)
const gcd = (a: number, b: number): number => (b === 0 ? Math.abs(a) : gcd(b, a % b))

export const fractionSchema: z.ZodType<Fraction> = z.strictObject({ n: whole(-1e7, 1e7), d: whole(1, 1e6) })
  .refine(({ n, d }) => gcd(n, d) === 1, 'is not in lowest terms')

const baseSchema: z.ZodType<Base> = z.literal([1, 2, 4, 8, 16, 32, 64])
const dotsSchema = whole(0, 3)
const ringSchema = z.literal(['written', 'let-ring'])

export const meterSchema: z.ZodType<Meter> = z.strictObject({ beats: whole(1, 32), unit: baseSchema })
export const keySchema: z.ZodType<Key> = z.strictObject({ fifths: whole(-7, 7), mode: z.literal(['major', 'minor']) })
export const tempoSchema: z.ZodType<Tempo> = z.strictObject({ base: baseSchema, dots: dotsSchema, perMinute: z.number().min(10).max(400) })
export const ringRuleSchema = ringSchema

export const openStringSchema: z.ZodType<OpenString> = z.strictObject({ pitch: text(6), from: whole(0, 35).optional() })
export const stringsSchema = z.array(openStringSchema).min(4).max(10)
export const capoSchema: z.ZodType<Capo> = z.strictObject({ fret: whole(1, 35), strings: z.array(whole(1, 10)).min(1).max(10).optional() })
export const caposSchema = z.array(capoSchema).max(4)

/** Most characters of the head's texts. */
export const TEXT_MOST = { title: 200, composer: 200, arranger: 200, rights: 1000, source: 1000 } as const

const headFields = {
  title: text(TEXT_MOST.title), composer: text(TEXT_MOST.composer), arranger: text(TEXT_MOST.arranger), rights: text(TEXT_MOST.rights), source: text(TEXT_MOST.source),
  ring: ringSchema,
  instrument: z.strictObject({ scaleLength: z.number().min(300).max(1000), frets: whole(5, 36) }),
  strings: stringsSchema,
  capos: caposSchema,
}
export const headSchema: z.ZodType<Head> = z.strictObject(headFields)
export const headPatchSchema: z.ZodType<Partial<Head>> = z.strictObject(headFields).partial()

const tupletSchema: z.ZodType<Tuplet> = z.strictObject({ id: idSchema, actual: whole(2, 64), normal: whole(1, 64), base: baseSchema })
const lengthSchema: z.ZodType<Length> = z.strictObject({ base: baseSchema, dots: dotsSchema, tuplets: z.array(idSchema).max(3).optional() })
const harmonicSchema: z.ZodType<Harmonic> = z.strictObject({ partial: whole(2, 12) })

const noteSchema: z.ZodType<Note> = z.strictObject({
  id: idSchema,
  string: whole(1, 10),
  fret: z.number().min(0).max(36),
  harmonic: harmonicSchema.optional(),
  dead: z.literal(true).optional(),
  ring: ringSchema.optional(),
  link: z.literal(['tie', 'hammer-on', 'pull-off']).optional(),
  spelling: z.strictObject({ step: z.literal(['C', 'D', 'E', 'F', 'G', 'A', 'B']), alter: whole(-2, 2) }).optional(),
})

const eventSchema: z.ZodType<ScoreEvent> = z.strictObject({
  id: idSchema, length: lengthSchema, notes: z.array(noteSchema).max(10), hidden: z.literal(true).optional(),
})

export const voiceSchema: z.ZodType<Voice> = z.strictObject({ events: z.array(eventSchema).max(256), tuplets: z.array(tupletSchema).max(128).optional() })
const voicesSchema: z.ZodType<Voices> = z.strictObject({ upper: voiceSchema.optional(), lower: voiceSchema.optional(), middle: voiceSchema.optional() })

/** Everything a bar may say besides its id and its notes. */
export const barFields = {
  meter: meterSchema.optional(), key: keySchema.optional(), tempo: tempoSchema.optional(), length: fractionSchema.optional(),
  repeatStart: z.literal(true).optional(), repeatEnd: whole(2, 99).optional(), ring: ringSchema.optional(),
}
export const barSchema: z.ZodType<Bar> = z.strictObject({ id: idSchema, ...barFields, voices: voicesSchema })

export const MOST_BARS = 2000
export const scoreSchema: z.ZodType<Score> = z.strictObject({ head: headSchema, bars: z.array(barSchema).min(1).max(MOST_BARS) })
