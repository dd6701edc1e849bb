import { describe, expect, it } from 'vitest'
import { commands, commandById, GROUPS, isIntent, runCommand } from '../../../shared/commands/registry'
import { conflictsOf, isReserved } from '../../../shared/commands/keys'
import { createIds } from '../../../shared/editor'
import { checkCommand } from '../../support/checkCommand'
import { parseState } from '../../support/score'

describe('the registry', () => {
  it('names every command once', () => {
    expect(new Set(commands.map(command => command.id)).size).toBe(commands.length)
    expect(commandById('note.delete')?.title).toBe('Delete note')
    expect(() => runCommand('no.such', parseState('^'), createIds('x'))).toThrow(RangeError)
  })

  it('gives no key to two commands in overlapping contexts, on any platform', () => {
    expect(conflictsOf().map(({ key, commands: two }) => [key, ...two.map(each => each.id)])).toEqual([])
  })

  it('uses no key that a browser keeps', () => {
    expect(commands.flatMap(command => command.keys.filter(isReserved))).toEqual([])
  })

  it('has a command in every group', () => {
    expect(GROUPS.filter(group => !commands.some(command => command.group === group))).toEqual([])
  })

  it('shows an example of every command but those the view carries out', () => {
    const bare = commands.filter(command => !command.example)
    for (const command of bare) {
      const result = command.run(parseState('^3/0q'), createIds('x'))
      expect(result && isIntent(result), command.id).toBe(true)
    }
    expect(bare.length).toBeLessThan(commands.length / 4)
  })

  const shown = commands.flatMap(({ id, example }) => (example ? [{ id, ...example }] : []))
  it.each(shown)('$id: $before → $after', ({ id, before, after, first }) => {
    checkCommand(id, before, after, { first })
  })
})
