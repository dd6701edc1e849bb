import { describe, expect, it } from 'vitest'
import { findCommands, score } from '../../../components/editor/palette/filter'
import { commands } from '../../../shared/commands/registry'

const titles = (typed: string) => findCommands(commands, typed).map(command => command.title)

describe('finding a command', () => {
  it('shows all in their own order while nothing is typed', () => expect(findCommands(commands, '  ')).toBe(commands))
  it('puts the title that is meant first', () => {
    expect(titles('undo')[0]).toBe('Undo')
    expect(titles('tuning')[0]).toBe('Change the tuning')
  })
  it('takes beginnings of words in any order', () => expect(titles('tun cha')).toContain('Change the tuning'))
  it('takes letters in order', () => expect(score({ title: 'Hammer-on', group: 'Techniques' }, 'hmr')).toBeGreaterThan(0))
  it('finds a command by what its help says, after those whose title says it', () => {
    expect(titles('pickup')).toEqual(['This bar is meant to hold what it holds'])
    expect(titles('export')).toEqual(['Export MusicXML', 'Export a Copperwound file'])
    expect(score({ title: 'Go on', group: 'Moving', help: 'To the next bar.' }, 'bar')).toBeLessThan(score({ title: 'Remove bars', group: 'Notes' }, 'bar'))
  })
  it('wants every word to fit', () => expect(titles('undo zebra')).toEqual([]))
  it('prefers the title to the group', () =>
    expect(score({ title: 'Bars', group: 'Moving' }, 'bars')).toBeGreaterThan(score({ title: 'Move', group: 'Bars' }, 'bars')))
})
