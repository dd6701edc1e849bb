import type { EditorState, IdSource, Transaction } from '../editor'
import { advanceCommands } from './advance'
import { barCommands } from './bar'
import { clipboardCommands } from './clipboard'
import type { Command, Intent } from './command'
import { cursorCommands, extendCommands } from './cursor'
import { fretCommands } from './fret'
import { headCommands } from './head'
import { historyCommands } from './history'
import { intentCommands } from './intents'
import { lengthCommands } from './length'
import { noteCommands } from './note'

export * from './command'

/** Every command there is, in the order in which menus and help show them within a group. */
export const commands: readonly Command[] = [
  ...fretCommands, ...cursorCommands, ...advanceCommands, ...lengthCommands, ...noteCommands, ...barCommands,
  ...extendCommands, ...clipboardCommands, ...headCommands, ...historyCommands, ...intentCommands,
]

const byId = new Map(commands.map(command => [command.id, command]))

export const commandById = (id: string): Command | undefined => byId.get(id)

/** Runs a command by name. @throws RangeError when there is none of that name */
export function runCommand(id: string, state: EditorState, ids: IdSource): Transaction | Intent | null {
  const command = byId.get(id)
  if (!command) throw new RangeError(`no command ${id}`)
  return command.run(state, ids)
}
