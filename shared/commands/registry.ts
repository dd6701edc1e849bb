import type { EditorState, Transaction } from '../editor'
import type { IdSource } from '../editor/ids'
import type { Command, Intent } from './command'
import { fretCommands } from './fret'

export * from './command'

/** Every command there is, in the order in which menus and help show them within a group. */
export const commands: readonly Command[] = [
  ...fretCommands,
]

const byId = new Map(commands.map(command => [command.id, command]))

export const commandById = (id: string): Command | undefined => byId.get(id)

/** Runs a command by name. @throws RangeError when there is none of that name */
export function runCommand(id: string, state: EditorState, ids: IdSource): Transaction | Intent | null {
  const command = byId.get(id)
  if (!command) throw new RangeError(`no command ${id}`)
  return command.run(state, ids)
}
