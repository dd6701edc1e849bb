import { describe, expect, it } from 'vitest'
import { setCapos, setHead, setTuning } from '../../../shared/commands/head'
import { statement } from '../../../shared/commands/bar'
import { applyTransaction, createIds, type EditorState, type Transaction } from '../../../shared/editor'
import { contextsOf } from '../../../shared/score/context'
import { checkCommand, checkLaws, perform } from '../../support/checkCommand'
import { parseState, printState } from '../../support/score'

const after = (before: string, run: string, head = {}): EditorState => {
  const ids = createIds('new')
  return run.split(' ').reduce((state, id) => perform(state, id, ids), parseState(before, head))
}
const text = (before: string, run: string, head = {}) => printState(after(before, run, head))

const done = (state: EditorState, transaction: Transaction | null) => {
  const next = applyTransaction(state, transaction!, 0)
  checkLaws(state, next)
  return next
}

describe('techniques', () => {
  it.each([
    ['^3/0hq 3/2q', 'note.hammerOn', '^3/0q 3/2q'],
    ['^3/2hq 3/0q', 'note.pullOff', '^3/2pq 3/0q'],
    ['@3/0q 3/2q ^3/4q', 'note.tie', '@3/0=q 3/2=q ^3/4=q'],
    ['^3/0q', 'note.dead note.dead', '^3/0q'],
    ['3/0q ^4:', 'note.dead', '3/0q ^4/0xq'],
    ['^2:3/0q', 'note.dead', '^(2/0x 3/0)q'],
    ['^3/12q', 'note.dead note.harmonic', '^3/12<q'],
    ['^3/12<q', 'note.harmonic', '^3/12q'],
    ['@3/12q 3/6q ^3/7q', 'note.harmonic', '@3/12<q 3/6q ^3/7<q'],
    ['^3/0lq', 'note.letRing', '^3/0q'],
    ['{ring=let-ring} ^3/0q', 'note.letRing', '{ring=let-ring} ^3/0!q'],
    ['{ring=let-ring} ^3/0!q', 'note.letRing', '{ring=let-ring} ^3/0q'],
    ['@3/0lq ^3/2q', 'note.letRing', '@3/0q ^3/2q'],
    ['^3/0q', 'note.rest', '^3:zq'],
    ['@(2/0 3/0)q ^3/2q', 'note.rest', '@2:zq ^3:zq'],
  ])('from %s, %s gives %s', (before, run, wanted) => expect(text(before, run)).toBe(wanted))

  it('lets ring by the rule in force: where everything rings, ends as written', () => {
    expect(text('^3/0q', 'note.letRing', { ring: 'let-ring' })).toBe('^3/0!q')
    expect(text('{ring=written} ^3/0q', 'note.letRing', { ring: 'let-ring' })).toBe('{ring=written} ^3/0lq')
  })

  it('leaves bars alone in which it changes nothing', () => {
    checkCommand('note.pullOff', '@1/2pw | ^1/0w', '@1/2w | ^1/0w')
    expect(after('@zq ^zq', 'note.tie').notice).toBe('There is no note in the selection.')
  })

  it('says why there is no harmonic', () => {
    expect(after('^3/6q', 'note.harmonic').notice).toMatch(/^No natural harmonic sounds over fret 6/)
    expect(after('^2:3/6q', 'note.harmonic').notice).toBe('There is no note on string 2 here.')
    expect(after('^3/3.2<6q', 'note.harmonic').notice).toMatch(/touched between frets/)
  })
})

describe('taking away', () => {
  it.each([
    ['^(2/1 3/0)q', 'note.delete note.delete', '^2:3/0q'],
    ['^3/0q', 'note.delete', '^3:zq'],
    ['@3/0q ^(2/1 3/0)q', 'note.delete', '@3:zq ^2:zq'],
    ['3/0q ^3/2q', 'note.deleteEvent', '3/0q ^3:'],
    ['^3/0q', 'note.deleteEvent', '^3:'],
    ['3/5q @3/0q | ^3/2q 3/4q', 'note.deleteEvent', '3/5q ^3: | 3/4q'],
    ['[3 ^3/0e 3/2e] 3/4q', 'note.deleteEvent note.deleteEvent', '^3/4q'],
    ['3/0w | ^3/2w ; 6/0w', 'selection.bars note.delete', '3/0w | ^3:w'],
    ['3/0w | ^3/2w ; 6/0w | 3/4w', 'selection.bars note.deleteEvent', '3/0w | ^3/4w'],
  ])('from %s, %s gives %s', (before, run, wanted) => expect(text(before, run)).toBe(wanted))

  it('says where there is nothing', () => {
    expect(after('^1:3/0q', 'note.delete').notice).toBe('There is no note on string 1 here.')
    expect(after('^zq', 'note.delete').notice).toMatch(/rest already/)
  })
})

describe('moving', () => {
  it.each([
    ['3/0w ^ | 3/2q', 'cursor.next', '3/0w | ^1:3/2q'],
    ['3/0q ^3: | 3/2q', 'cursor.previous', '^3/0q | 3/2q'],
    ['3/0q | ^3/2q', 'cursor.previous', '3/0q ^3: | 3/2q'],
    ['3/0w | ^3/2q', 'cursor.previous', '^3/0w | 3/2q'],
    ['^3/0w', 'cursor.next cursor.next', '3/0w ^3:'],
    ['^3/0q', 'cursor.previous', '^3/0q'],
    ['3/0w | 3/2q 3/4q ^3:', 'cursor.previousBar cursor.previousBar', '^3/0w | 3/2q 3/4q'],
    ['3/0w | ^3/2q', 'cursor.nextBar', '3/0w | 3/2q ^3:'],
    ['3/0e ^3/2e 3/4q ; 6/0h', 'cursor.otherVoice', '3/0e 3/2e 3/4q ; ^3:6/0h'],
    ['3/0q 3/2q ; ^6/0h', 'cursor.otherVoice', '^6:3/0q 3/2q ; 6/0h'],
    ['3/0q ^3/2q', 'cursor.otherVoice', '3/0q 3/2q ; ^3:'],
    ['3/0q 3/2q ^ ; 6/0q', 'cursor.otherVoice', '3/0q 3/2q ; 6/0q ^'],
  ])('from %s, %s gives %s', (before, run, wanted) => expect(text(before, run)).toBe(wanted))

  it('selects to and fro', () => {
    expect(text('3/0q ^3/2q 3/4q', 'selection.next selection.previous selection.previous')).toBe('^3/0q @3/2q 3/4q')
    expect(text('3/0q @3/2q ^3/4q', 'cursor.previous')).toBe('3/0q ^3/2q 3/4q')
  })
})

describe('selecting whole bars', () => {
  it.each([
    ['3/0w | 3/1h ^3/2h | 3/4w', 'selection.nextBar', '3/0w | @3/1h 3/2h ^3: | 3/4w'],
    ['3/0w | 3/1h ^3/2h | 3/4w', 'selection.nextBar selection.nextBar selection.nextBar', '3/0w | @3/1h 3/2h | 3/4w ^3:h'],
    ['3/0w | 3/1h ^3/2h | 3/4w', 'selection.previousBar selection.previousBar', '^3/0w | 3/1h 3/2h @3: | 3/4w'],
    ['3/0w | 3/1h ^3/2h | 3/4w', 'selection.previousBar selection.previousBar selection.nextBar', '3/0w | @3/1h 3/2h ^3: | 3/4w'],
    ['^3/0w | 3/1h 3/2h | 3/4w', 'selection.bars selection.previous', '@^3/0w | 3/1h 3/2h | 3/4w'],
    ['6/0w ^3: ; 4/0w', 'selection.bars note.letRing', '@3:6/0lw ^3: ; 4/0lw'],
  ])('from %s, %s gives %s', (before, run, wanted) => expect(text(before, run)).toBe(wanted))

  it('begins and ends at bar lines, and says that bars are meant whole until events are selected again', () => {
    expect(after('^3/0w', 'selection.nextBar').selection.whole).toBe(true)
    expect(after('^3/0w', 'selection.nextBar selection.previous').selection).not.toHaveProperty('whole')
    expect(after('^3/0w', 'selection.nextBar selection.clear').selection).not.toHaveProperty('whole')
  })
})

describe('clipboard', () => {
  it.each([
    ['@3/0q ^3/2q 3/4q', 'clipboard.copy clipboard.paste', '3/0q ^3/0q 3/2q 3/2q 3/4q'],
    ['@3/0q ^3/2q 3/4q', 'clipboard.cut cursor.barEnd clipboard.paste', '3/4q ^3/0q 3/2q'],
    ['@[3 3/0e 3/2e ^3/4e] 3/5q', 'clipboard.copy cursor.barEnd clipboard.paste', '[3 3/0e 3/2e 3/4e] 3/5q [3 ^3/0e 3/2e 3/4e]'],
    ['@3/0q | ^3/2q', 'clipboard.copy cursor.barEnd clipboard.paste', '3/0q | 3/2q ^3/0q | 3/2q'],
    ['^3/5q | [3 3/0e 3/2e 3/4e]', 'clipboard.copy cursor.next cursor.next cursor.next clipboard.paste', '3/5q | ^3/5q [3 3/0e 3/2e 3/4e]'],
    ['^3/0w ; 6/0w | 3/2w', 'selection.bars clipboard.copy cursor.pieceEnd clipboard.paste', '3/0w ; 6/0w | 3/2w | ^3/0w ; 6/0w'],
    ['{3/4} {G} 3/0h. | ^3/2h. | {4/4} 3/4w', 'selection.bars clipboard.copy cursor.pieceEnd clipboard.paste', '{3/4} {G} 3/0h. | 3/2h. | {4/4} 3/4w | {3/4} ^3/2h.'],
    ['{3/4} 3/0h. | ^3/2h. | 3/4h.', 'selection.bars clipboard.cut', '{3/4} 3/0h. | ^3/4h.'],
    ['{4/4} {C} {q=80} ^3/0w | 3/2w', 'selection.all clipboard.cut clipboard.paste', '{4/4} {C} {q=80} ^3/0w | 3/2w |'],
  ])('from %s, %s gives %s', (before, run, wanted) => expect(text(before, run)).toBe(wanted))

  it('gives copies ids of their own', () => {
    const { score } = after('@[3 3/0e 3/2e ^3/4e]', 'clipboard.copy cursor.barEnd clipboard.paste clipboard.paste')
    const voice = score.bars[0]!.voices.upper!
    const all = [...voice.events.flatMap(event => [event.id, ...event.notes.map(note => note.id)]), ...voice.tuplets!.map(tuplet => tuplet.id)]
    expect(all).toHaveLength(21)
    expect(new Set(all).size).toBe(21)
  })

  it('does not paste what the instrument has no strings for', () => {
    const four = ['E2', 'A2', 'D3', 'G3'].map(pitch => ({ pitch })).toReversed()
    const state = { ...parseState('^', { strings: four }), clip: after('^6/0q', 'clipboard.copy').clip }
    const pasted = perform(state, 'clipboard.paste', createIds('new'))
    expect(pasted.score).toBe(state.score)
    expect(pasted.notice).toMatch(/strings or frets that this instrument does not have/)
  })
})

describe('bars', () => {
  it.each([
    ['{6/8} {G} ^3/0h. | {4/4} 3/2w | 3/4w', 'bar.moveLater', '{4/4} {G} 3/2w | {6/8} ^3/0h. | {4/4} 3/4w'],
    ['{6/8} ^3/0h. | 3/2h.', 'bar.remove', '{6/8} ^3/2h.'],
    ['{6/8} 3/0h. | {3/4} ^3/2h. | 3/4h.', 'bar.remove', '{6/8} 3/0h. | {3/4} ^3/4h.'],
    ['{6/8} {Em} ^3/0h.', 'bar.remove', '{6/8} {Em} ^3:h.'],
    ['3/0w | @3/2w | ^3/4w', 'bar.moveEarlier', '@3/2w | ^3/4w | 3/0w'],
    ['^3/0e', 'bar.meant bar.meant', '^3/0e'],
    ['^3/0q. ; 6/0e', 'bar.meant', '{len=3/8} ^3/0q. ; 6/0e'],
    ['3/0w | ^3/2w', 'bar.repeatEnd bar.repeatEnd', '3/0w | ^3/2w'],
    ['^3/0e', 'bar.pad', '^3/0e ze zq zh'],
    ['^', 'bar.pad', 'zw ^q'],
    ['{3/4} ^', 'bar.pad', '{3/4} zh. ^q'],
    ['{3/4} ^3/0q', 'bar.pad', '{3/4} ^3/0q zq zq'],
    ['{9/8} ^3/0q.', 'bar.pad', '{9/8} ^3/0q. zq. zq.'],
    ['@3/0h | ^3/0h', 'bar.pad', '@3/0h zh | ^3/0h zh'],
  ])('from %s, %s gives %s', (before, run, wanted) => expect(text(before, run)).toBe(wanted))

  it('says why nothing can be filled or meant', () => {
    expect(after('^3/0w', 'bar.pad').notice).toMatch(/no room/)
    expect(after('[3 ^3/0e]', 'bar.pad').notice).toMatch(/unfinished tuplet/)
    expect(after('^3/0w', 'bar.meant').notice).toMatch(/fits its meter/)
    expect(after('^', 'bar.meant').notice).toMatch(/empty/)
  })

  it('keeps every bar in its meter, key and tempo when others go, come or move', () => {
    const start = parseState('{6/8} {G} {q.=60} 3/0h. | {3/4} 3/2h. | ^3/4h. | {D} {q=100} 3/5h. | {6/8} 3/7h.')
    const contexts = new Map(start.score.bars.map((bar, index) => [bar.id, contextsOf(start.score)[index]!]))
    const runs = ['bar.remove', 'bar.moveEarlier', 'bar.moveLater', 'bar.moveLater bar.moveLater', 'bar.insertBefore', 'cursor.pieceStart bar.insertBefore',
      'cursor.pieceStart bar.remove', 'cursor.pieceStart selection.nextBar bar.moveLater', 'selection.bars clipboard.cut cursor.pieceStart clipboard.paste']
    for (const run of runs) {
      const ids = createIds('new')
      const { score } = run.split(' ').reduce((state, id) => perform(state, id, ids), start)
      for (const [index, bar] of score.bars.entries()) {
        const { meter, key, tempo } = contexts.get(bar.id) ?? contextsOf(score)[index]!
        expect({ run, ...contextsOf(score)[index], head: 0 }).toEqual({ run, meter, key, tempo, head: 0 })
      }
    }
  })

  it('states what does not hold anyway', () => {
    const { score } = parseState('{4/4} 3/0w | {3/4} 3/2h. | 3/4h.')
    expect(statement(score, 1, 'meter', { beats: 4, unit: 4 })).toBeNull()
    expect(statement(score, 2, 'meter', { beats: 3, unit: 4 })).toBeNull()
    expect(statement(score, 2, 'meter', { beats: 4, unit: 4 })).toEqual({ beats: 4, unit: 4 })
    expect(statement(score, 0, 'key', { fifths: 0, mode: 'major' })).toEqual({ fifths: 0, mode: 'major' })
    expect(statement(score, 1, 'tempo', { base: 4, dots: 1, perMinute: 72 })).toEqual({ base: 4, dots: 1, perMinute: 72 })
  })
})

describe('the head', () => {
  it('takes title, people, tuning and capos, and undoes them', () => {
    const start = parseState('^3/0q')
    expect(done(start, setHead(start, { title: 'The Copper Kettle', rights: '© 2026' }, 'Change title or people')).score.head).toMatchObject({ title: 'The Copper Kettle', rights: '© 2026' })
    expect(setHead(start, { title: start.score.head.title }, 'Change title or people')).toBeNull()
    expect(done(start, setCapos(start, [{ fret: 2 }])).score.head.capos).toEqual([{ fret: 2 }])
    const lower = ['D4', 'B3', 'G3', 'D3', 'G2', 'D2'].map(pitch => ({ pitch }))
    expect(done(start, setTuning(start, lower)).score.head.strings).toEqual(lower)
  })

  it('keeps an instrument on which every note can be played', () => {
    const start = parseState('^6/0q')
    const four = ['A4', 'E4', 'C4', 'G4'].map(pitch => ({ pitch }))
    const refused = applyTransaction(start, setTuning(start, four)!, 0)
    expect(refused.score).toBe(start.score)
    expect(refused.notice).toBe('Bar 1: there is no string 6.')
  })

  it('rings throughout or as written', () => {
    expect(after('^3/0q', 'head.ring').score.head.ring).toBe('let-ring')
    checkCommand('head.ring', '^3/0q', '^3/0q')
  })
})
