/** How a string is set in motion. */
export type Touch = 'pluck' | 'hammer-on' | 'pull-off' | 'dead'

/** A note as the string model needs it. */
export interface SoundNote {
  readonly noteId: string
  readonly string: number
  /** Sounding pitch; with decimals for harmonics off the half step. */
  readonly midi: number
  readonly touch: Touch
  /** 0 to 1. */
  readonly velocity: number
  /** Until it has died away by 60 dB. */
  readonly seconds: number
  /** A harmonic has a rounder tone. */
  readonly harmonic?: true
}

/** Times are seconds from the start at the written tempo; a rate stretches them and leaves the pitch alone. */
export type SoundEvent = StartSound | StopSound | Click
export interface StartSound { readonly kind: 'sound', readonly at: number, readonly note: SoundNote }
/** The string is stopped, if that note still sounds on it. */
export interface StopSound { readonly kind: 'damp', readonly at: number, readonly string: number, readonly noteId: string }
export interface Click { readonly kind: 'click', readonly at: number, readonly accent: boolean }

/** Where playing has got to: the events under way in each voice, from `at` on. */
export interface Moment { readonly at: number, readonly barId: string, readonly eventIds: readonly string[] }

export interface Schedule {
  /** Seconds until the last bar line played; notes may ring on behind it. */
  readonly length: number
  /** By time; at one moment a damp comes before a sound. */
  readonly events: readonly SoundEvent[]
  readonly moments: readonly Moment[]
}
