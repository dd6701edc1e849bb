import { describe, expect, it } from 'vitest'
import { validateScore } from '../../../shared/score/validate'
import { parseScore, parseState, printState } from '../../support/score'

const TEXTS = [
  '^', '^3:', '^e', '^2:q.', '^3/0q', '^3/0w 2/1h 1/3q 4/0e 5/2s 6/0t 1/1i', '3/0q. 2/1h.. ^', '^zq _e 3/0q',
  '^(3/0 1/2)q 3/0h', '3/0q ^2:(3/0 1/2)q', '3/0q | ^', '| ^3/0q', '3/0q | | ^ | 3/0q', '3/0q | | | | 3/0q ^', '^3/0xq 3/12<q 3/3.2<6q 3/9<6q',
  '^3/0hq 3/2pq 3/0=q 3/0hh', '^3/0lq 3/0!q 3/1\'Ab\'q (3/0l 2/1=\'C\')q', '[3 ^3/0e 3/2e 3/4e] 3/0q', '[5:4 ^3/0e 3/2e 3/4e zs 3/0s]',
  '[3:2q ^3/0h 3/2q]', '[3 ^3/0q [3 3/0e 3/2e 3/4e] 3/0q]', '[3 ^3/0e 3/2e 3/4e] [3 3/0e 3/2e 3/4e]', '3/0q ; 6/0h ^ | ; 6/0q ; 4/0q',
  '; ^6:', '{6/8} {G} {q.=60} {len=1/8} {ring=let-ring} {|:} ^3/0e | {Em} {:|} 3/0q. 3/0q.',
  '{:|3} ^3/0q', '@3/0q 3/2q ^3/4q', '3/0q @2:3/2q | 3/4q ^', '@^2:3/0q', '[3 3/0e @3/2e ^3/4e]', '3/0q @ ^',
]

describe('the text notation', () => {
  it.each(TEXTS)('prints what it read: %s', (text) => {
    expect(printState(parseState(text))).toBe(text)
  })

  it.each(TEXTS)('reads what it printed: %s', (text) => {
    const state = parseState(text)
    expect(parseState(printState(state))).toEqual(state)
  })

  it('reads valid scores', () => {
    for (const text of TEXTS) expect(validateScore(parseScore(text))).toBeNull()
  })

  it('names what it can\'t read', () => {
    for (const text of ['3/0', 'q', '3/0k', '{7}', '[x 3/0q]']) expect(() => parseScore(text), text).toThrow(SyntaxError)
  })

  it('makes deterministic ids', () => {
    const [bar] = parseScore('3/0q (2/1 1/0)e').bars
    expect(bar?.voices.upper?.events.map(event => [event.id, event.notes.map(note => note.id)])).toEqual([['e1', ['n1']], ['e2', ['n2', 'n3']]])
  })
})
