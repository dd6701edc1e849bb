import { expect, it } from 'vitest'
import { keyRows } from '../../../components/editor/palette/keyRows'
import { helpGroups } from '../../../composables/helpGroups'
import { commands } from '../../../shared/commands/registry'

const groups = helpGroups(commands, 'other')
const rows = (group: string) => keyRows(groups.find(each => each.group === group)!.rows)

it('puts the ten digits in one row', () => expect(rows('Frets')).toMatchObject([{ title: 'Fret', keys: ['0 … 9'] }]))

it('shows every command that has a key, and none without', () => {
  const shown = new Set(groups.flatMap(each => keyRows(each.rows)).map(row => row.id))
  for (const command of commands) expect([command.id, shown.has(command.id)]).toEqual([command.id, command.keys.length > 0 && !/^fret\.[1-9]$/.test(command.id)])
})
