/** Makes ids that no other session makes: a prefix of the session's own and a counter. */
export interface IdSource { next: () => string }

export function createIds(prefix: string): IdSource {
  let count = 0
  return { next: () => `${prefix}-${(count++).toString(36)}` }
}

/** A session prefix of eight letters and digits from a source of random bytes. */
export const sessionPrefix = (random: (size: number) => Uint8Array): string =>
  [...random(8)].map(byte => (byte % 36).toString(36)).join('')
