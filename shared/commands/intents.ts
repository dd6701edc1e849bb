import { deskCommand, scoreCommand, type Command, type Dialog, type ExportFile } from './command'

const dialog = (name: Dialog, title: string, group: 'Bars' | 'Arrangement'): Command =>
  deskCommand({ id: `dialog.${name}`, title, group, keys: [], run: () => ({ intent: 'dialog', dialog: name }) })

const exporting = (file: ExportFile, title: string, help: string): Command =>
  deskCommand({ id: `export.${file}`, title, group: 'Arrangement', keys: [], run: () => ({ intent: 'export', file }), help })

/** What hands the arrangement out, in the order in which menus show it. */
export const exportCommands: readonly Command[] = [
  exporting('musicxml', 'Export MusicXML', 'Notation, tablature, tuning and capo, for other programs.'),
  exporting('saved', 'Export a Copperwound file', 'Everything in it; the folio imports it again.'),
  deskCommand({ id: 'export.print', title: 'Print or save as PDF', group: 'Arrangement', keys: [], run: () => ({ intent: 'print' }) }),
]

export const intentCommands: readonly Command[] = [
  scoreCommand({ id: 'desk.play', title: 'Play or stop', group: 'Desk', keys: ['Space'], run: () => ({ intent: 'play' }), help: 'From the cursor, or the selection.' }),
  deskCommand({ id: 'desk.palette', title: 'Find a command', group: 'Desk', keys: ['Mod+k'], run: () => ({ intent: 'palette' }) }),
  deskCommand({ id: 'desk.keys', title: 'All keys', group: 'Desk', keys: ['?'], run: () => ({ intent: 'keys' }) }),
  deskCommand({ id: 'desk.save', title: 'Save now', group: 'Desk', keys: ['Mod+s'], run: () => ({ intent: 'save' }) }),
  dialog('meter', 'Set the meter', 'Bars'),
  dialog('key', 'Set the key', 'Bars'),
  dialog('tempo', 'Set the tempo', 'Bars'),
  dialog('details', 'Title, people, rights', 'Arrangement'),
  dialog('tuning', 'Change the tuning', 'Arrangement'),
  dialog('capo', 'Set capos', 'Arrangement'),
  ...exportCommands,
]
