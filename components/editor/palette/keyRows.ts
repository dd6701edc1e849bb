import type { HelpRow } from '~/composables/helpGroups'

export interface KeyRow { readonly id: string, readonly title: string, readonly keys: readonly string[] }

/** Rows for a table of keys: those without a key are left out, and a run of digits is one row, "0 … 9". */
export function keyRows(rows: readonly HelpRow[]): readonly KeyRow[] {
  const keyed = rows.filter(row => row.keys.length)
  const digits = keyed.filter(row => row.keys.every(key => /^\d$/.test(key)))
  if (digits.length < 3) return keyed
  const ends = [digits[0]!.keys[0]!, digits.at(-1)!.keys[0]!]
  const run: KeyRow = { id: digits[0]!.id, title: digits[0]!.title.replace(/\s*\d+$/, ''), keys: [ends.join(' … ')] }
  return keyed.flatMap(row => (row === digits[0] ? [run] : digits.includes(row) ? [] : [row]))
}
