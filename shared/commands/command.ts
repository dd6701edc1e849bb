import type { EditorState, Transaction } from '../editor'
import type { IdSource } from '../editor/ids'

/** score: acts while the score has the focus. desk: acts anywhere on the desk outside text fields, the score included. */
export type CommandContext = 'score' | 'desk'

/** Headings of menu, palette and help page, in their order. */
export const GROUPS = ['Frets', 'Moving', 'Lengths', 'Techniques', 'Notes', 'Bars', 'Selection', 'Arrangement', 'Desk'] as const
export type Group = typeof GROUPS[number]

export type Dialog = 'meter' | 'key' | 'tempo' | 'details' | 'tuning' | 'capo'

/** A file that the desk hands out: MusicXML for other programs, or the saved form with everything in it. */
export type ExportFile = 'musicxml' | 'saved'

/** What only the view can do. `system` moves the cursor by a drawn system (−1 up, 1 down). */
export type Intent
  = | { readonly intent: 'play' | 'palette' | 'keys' | 'save' | 'print' }
    | { readonly intent: 'export', readonly file: ExportFile }
    | { readonly intent: 'system', readonly by: -1 | 1, readonly extend: boolean }
    | { readonly intent: 'dialog', readonly dialog: Dialog }

/**
 * A command is declared once; keys, menus, palette, tooltips, the help page and its test come from the declaration.
 * `run` is pure: null means that there is nothing for it to do here (menus show it disabled); a refusal is a transaction
 * with a notice and no edits.
 */
export interface Command {
  /** "bar.insertAfter" */
  readonly id: string
  /** Imperative, as menus show it: "Insert a bar after this one". */
  readonly title: string
  readonly group: Group
  /** As `keys.ts` reads them; the first is shown in menus. */
  readonly keys: readonly string[]
  readonly context: CommandContext
  readonly run: (state: EditorState, ids: IdSource) => Transaction | Intent | null
  /** One sentence for the help page where the title does not say it all. */
  readonly help?: string
  /** In the notation of tests/support/score.ts; `first` names commands run before. Commands that return an intent have none. */
  readonly example?: Example
}

export interface Example { readonly before: string, readonly after: string, readonly first?: readonly string[] }

export const isIntent = (result: Transaction | Intent): result is Intent => 'intent' in result

/** The command of the score's context; most are. */
export const scoreCommand = (declaration: Omit<Command, 'context'>): Command => ({ context: 'score', ...declaration })
export const deskCommand = (declaration: Omit<Command, 'context'>): Command => ({ context: 'desk', ...declaration })
