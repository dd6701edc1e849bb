import type { Schedule, SoundNote } from '#shared/sound'

/** What the page tells the strings. */
export type ToStrings = SoundNow | PlaySchedule | SetRate | SetClick | Stop
interface SoundNow { readonly kind: 'sound', readonly notes: readonly SoundNote[] }
interface PlaySchedule { readonly kind: 'play', readonly schedule: Schedule, readonly rate: number, readonly click: boolean }
interface SetRate { readonly kind: 'rate', readonly rate: number }
interface SetClick { readonly kind: 'click', readonly click: boolean }
interface Stop { readonly kind: 'stop' }

/** How far playing has got, in seconds at the written tempo; null: it has ended. */
export interface FromStrings { readonly position: number | null }

export const PROCESSOR = 'copperwound-strings'
