import { describe, expect, it } from 'vitest'
import { commands } from '../../../shared/commands/registry'
import { helpGroups } from '../../../composables/helpGroups'
import { readSettings, DEFAULTS } from '../../../stores/settings'

describe('the help page', () => {
  it('shows every command once, with its keys', () => {
    const rows = helpGroups(commands, 'other').flatMap(({ rows }) => rows)
    expect(rows.map(({ id }) => id).sort()).toEqual(commands.map(({ id }) => id).sort())
    for (const row of rows) expect(row.keys).toHaveLength(commands.find(({ id }) => id === row.id)!.keys.length)
  })
  it('writes keys as each platform prints them', () => {
    const [command] = commands
    const tied = [{ ...command!, id: 'x', keys: ['Mod+k'] }]
    expect(helpGroups(tied, 'other')[0]!.rows[0]!.keys).toEqual(['Ctrl K'])
    expect(helpGroups(tied, 'mac')[0]!.rows[0]!.keys).toEqual(['⌘K'])
  })
  it('finds by all words of title, help and keys', () => {
    const found = helpGroups(commands, 'other', 'FRET 7').flatMap(({ rows }) => rows.map(({ id }) => id))
    expect(found).toContain('fret.7')
    expect(found).not.toContain('fret.6')
    expect(helpGroups(commands, 'other', 'no such words here')).toEqual([])
  })
})

describe('settings kept in a browser', () => {
  it.each([[undefined], ['text'], [null], [{ palette: 'plaid', soundNotes: 'yes' }], [[]]])('are whole whatever was kept: %j', kept => expect(readSettings(kept)).toEqual(DEFAULTS))
  it('are taken one by one', () => expect(readSettings({ palette: 'night', click: true, unknown: 1 })).toEqual({ ...DEFAULTS, palette: 'night', click: true }))
})
