import { redoTransaction, undoTransaction } from '../editor'
import { deskCommand, type Command } from './command'

export const historyCommands: readonly Command[] = [
  deskCommand({
    id: 'history.undo', title: 'Undo', group: 'Desk', keys: ['Mod+z'], run: undoTransaction,
    example: { before: '^3/0q', first: ['fret.5', 'fret.7'], after: '^3/5q' },
  }),
  deskCommand({
    id: 'history.redo', title: 'Redo', group: 'Desk', keys: ['Mod+Shift+z', 'Mod+y'], run: redoTransaction,
    example: { before: '^3/0q', first: ['fret.5', 'history.undo'], after: '^3/5q' },
  }),
]
