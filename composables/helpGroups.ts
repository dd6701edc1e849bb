import { GROUPS, type Command, type Example, type Group } from '#shared/commands/command'
import { keyLabel } from '#shared/commands/labels'
import type { Platform } from '#shared/commands/keys'

export interface HelpRow {
  readonly id: string
  readonly title: string
  /** As printed on the keys, the first one first; none for what only menu and palette offer. */
  readonly keys: readonly string[]
  /** Absent where the row above says the same. */
  readonly help?: string
  readonly example?: Example
  /** Titles of the commands run before the example. */
  readonly first: readonly string[]
}
export interface HelpGroup { readonly group: Group, readonly rows: readonly HelpRow[] }

/** The commands as the help page shows them, in the groups' order, without empty groups.
 * @param search words that title, help or keys must have */
export function helpGroups(commands: readonly Command[], platform: Platform, search = ''): HelpGroup[] {
  const words = search.toLowerCase().split(/\s+/).filter(Boolean)
  const titles = new Map(commands.map(({ id, title }) => [id, title]))
  const rowOf = (command: Command, index: number, group: readonly Command[]): HelpRow => ({
    id: command.id,
    title: command.title,
    keys: command.keys.map(key => keyLabel(key, platform)),
    ...(command.help !== group[index - 1]?.help && { help: command.help }),
    ...(command.example && { example: command.example }),
    first: command.example?.first?.map(id => titles.get(id) ?? id) ?? [],
  })
  const fits = (command: Command) => {
    const text = [command.title, command.help, ...command.keys.map(key => keyLabel(key, platform))].join(' ').toLowerCase()
    return words.every(word => text.includes(word))
  }
  return GROUPS.flatMap((group) => {
    const found = commands.filter(command => command.group === group && fits(command))
    return found.length ? [{ group, rows: found.map(rowOf) }] : []
  })
}
