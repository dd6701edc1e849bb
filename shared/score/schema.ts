import { z } from 'zod'
import { parsePitch } from './pitch'
import type { Bar, Base, Capo, Head, Key, Length, Meter, Note, Score, ScoreEvent, Tempo, Tuplet, Voice, Voices } from './types'

/**
 * Shapes of stored and sent scores: every field known, every list bounded, fractions in lowest terms. What a shape can't say
 * (a fret beyond the neck, an id used twice) is `validateScore`'s.
 */

const whole = (low: number, high: number) => z.number().int().min(low).max(high)
const line = (longest: number) => z.string().max(longest)
const gcd = (a: number, b: number): number => (b === 0 ? Math.abs(a) : gcd(b, a % b))

export const idSchema = z.string().min(1).max(64)
export const baseSchema: z.ZodType<Base> = z.literal([1, 2, 4, 8, 16, 32, 64])
export const ringSchema = z.enum(['written', 'let-ring'])
export const voiceNameSchema = z.enum(['upper', 'lower', 'middle'])

/** A positive length in whole notes. */
export const fractionSchema = z.strictObject({ n: whole(1, 100_000), d: whole(1, 100_000) })
  .refine(value => gcd(value.n, value.d) === 1, 'the fraction is not in lowest terms')

export const meterSchema: z.ZodType<Meter> = z.strictObject({ beats: whole(1, 32), unit: baseSchema })
export const keySchema: z.ZodType<Key> = z.strictObject({ fifths: whole(-7, 7), mode: z.enum(['major', 'minor']) })
export const tempoSchema: z.ZodType<Tempo> = z.strictObject({ base: baseSchema, dots: whole(0, 3), perMinute: z.number().min(10).max(400) })
export const openStringSchema = z.strictObject({
  pitch: z.string().max(6).refine(text => parsePitch(text) !== null, 'no pitch: write a letter, an accidental and an octave, like F#3'),
  from: whole(0, 36).optional(),
})
export const capoSchema: z.ZodType<Capo> = z.strictObject({ fret: whole(1, 36), strings: z.array(whole(1, 10)).min(1).max(10).optional() })
const spellingSchema = z.strictObject({ step: z.enum(['C', 'D', 'E', 'F', 'G', 'A', 'B']), alter: whole(-2, 2) })

export const noteSchema: z.ZodType<Note> = z.strictObject({
  id: idSchema,
  string: whole(1, 10),
  fret: z.number().min(0).max(36),
  harmonic: z.strictObject({ partial: whole(2, 12) }).optional(),
  dead: z.literal(true).optional(),
  ring: ringSchema.optional(),
  link: z.enum(['tie', 'hammer-on', 'pull-off']).optional(),
  spelling: spellingSchema.optional(),
})

export const lengthSchema: z.ZodType<Length> = z.strictObject({
  base: baseSchema, dots: whole(0, 3), tuplets: z.array(idSchema).min(1).max(4).optional(),
})
export const eventSchema: z.ZodType<ScoreEvent> = z.strictObject({
  id: idSchema, length: lengthSchema, notes: z.array(noteSchema).max(10), hidden: z.literal(true).optional(),
})
const tupletSchema: z.ZodType<Tuplet> = z.strictObject({ id: idSchema, actual: whole(2, 64), normal: whole(1, 64), base: baseSchema })
export const voiceSchema: z.ZodType<Voice> = z.strictObject({
  events: z.array(eventSchema).max(512), tuplets: z.array(tupletSchema).max(256).optional(),
})
const voicesSchema: z.ZodType<Voices> = z.strictObject({
  upper: voiceSchema.optional(), lower: voiceSchema.optional(), middle: voiceSchema.optional(),
})

/** Fields of a bar besides its id and voices; edits patch them one by one. */
export const barFields = {
  meter: meterSchema, key: keySchema, tempo: tempoSchema, length: fractionSchema,
  repeatStart: z.literal(true), repeatEnd: whole(2, 99), ring: ringSchema,
} as const

export const barSchema: z.ZodType<Bar> = z.strictObject({ id: idSchema, voices: voicesSchema, ...z.strictObject(barFields).partial().shape })

export const headFields = {
  title: line(300), composer: line(300), arranger: line(300), rights: line(1000), source: line(1000),
  ring: ringSchema,
  instrument: z.strictObject({ scaleLength: z.number().min(300).max(1000), frets: whole(5, 36) }),
  strings: z.array(openStringSchema).min(4).max(10),
  capos: z.array(capoSchema).max(10),
} as const
export const headSchema: z.ZodType<Head> = z.strictObject(headFields)

/** At most 4,000 bars. */
export const scoreSchema: z.ZodType<Score> = z.strictObject({ head: headSchema, bars: z.array(barSchema).min(1).max(4000) })
