const UNITS: readonly (readonly [Intl.RelativeTimeFormatUnit, number])[] = [
  ['year', 365 * 86_400], ['month', 30 * 86_400], ['week', 7 * 86_400], ['day', 86_400], ['hour', 3600], ['minute', 60],
]
const words = new Intl.RelativeTimeFormat('en', { numeric: 'auto' })

/** "3 hours ago", "yesterday"; "just now" within a minute and for a clock that runs behind the server's. */
export function relativeTime(when: Date, now: Date): string {
  const seconds = (now.getTime() - when.getTime()) / 1000
  const [unit, size] = UNITS.find(([, each]) => seconds >= each) ?? []
  return unit && size ? words.format(-Math.floor(seconds / size), unit) : 'just now'
}

/** "1 December 2026 at 12:38".
 * @param timeZone an IANA name; without it the reader's own */
export const exactTime = (when: Date, timeZone?: string): string =>
  new Intl.DateTimeFormat('en-GB', { dateStyle: 'long', timeStyle: 'short', timeZone }).format(when)
