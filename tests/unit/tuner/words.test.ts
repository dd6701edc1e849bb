import { Note } from 'tonal'
import { describe, expect, it } from 'vitest'
import { approachOf, follow, judge, NOTHING_HEARD, singleStages, stagesOf, type Aim } from '../../../shared/sound/tuner'

const aim = (target: string, more: Partial<Aim> = {}): Aim => ({ string: 6, target: Note.midi(target)!, a4: 440, ...more })
/** By the definition of the cent (A. Ellis, 1885): 1200 to an octave. */
const off = (pitch: string, cents: number): number => Note.freq(pitch)! * 2 ** (cents / 1200)
const stringsOf = (lowToHigh: string) => lowToHigh.split(' ').reverse().map(pitch => ({ pitch }))

describe('judge', () => {
  it.each([
    [0, 'in-tune', 'In tune'], [2.9, 'in-tune', 'In tune'], [-14, 'low', 'Up 14 cents'], [8, 'high', 'Down 8 cents'], [200, 'high', 'Down 200 cents'],
  ])('%d cents: %s', (cents, kind, headline) => {
    expect(judge(off('D2', cents), aim('D2'))).toMatchObject({ kind, headline })
    expect(judge(off('D2', cents), aim('D2')).cents).toBeCloseTo(cents, 6)
  })

  it('says how far in half steps, where cents are many', () => {
    expect(judge(Note.freq('E2')!, aim('D2')).advice).toBe('Too high. Loosen about two half steps, go below, then come up.')
    expect(judge(Note.freq('C2')!, aim('D2')).advice).toBe('Too low. If this is string 6, tighten about two half steps, slowly.')
    expect(judge(Note.freq('D2')!, aim('Eb2')).advice).toBe('Too low. Tighten about one half step, slowly.')
    expect(judge(off('D2', -30), aim('D2')).advice).toBe('Too low. Tighten a little, slowly.')
  })

  it('follows the A that is set', () => {
    expect(judge(Note.freq('A4')!, { ...aim('A4'), a4: 432 }).cents).toBeCloseTo(1200 * Math.log2(440 / 432), 6)
    expect(judge(432, { ...aim('A4'), a4: 432 }).kind).toBe('in-tune')
  })

  it('has nothing turned for another string, nor for an octave', () => {
    expect(judge(Note.freq('G3')!, aim('D2'))).toMatchObject({ kind: 'other', headline: 'This is G3' })
    expect(judge(Note.freq('D3')!, aim('D2')).advice).toContain('An octave above D2')
    expect(judge(Note.freq('D3')!, aim('D2')).advice).toContain('Turn nothing')
  })

  it('has no lower neighbour tightened: strings a fourth or a major third apart, as in standard tuning', () => {
    for (const [target, neighbour] of [['A2', 'E2'], ['D3', 'A2'], ['G3', 'D3'], ['B3', 'G3'], ['E4', 'B3']] as const) {
      expect(judge(Note.freq(neighbour)!, aim(target)).kind).toBe('other')
      expect(judge(Note.freq(neighbour)!, aim(target, { from: Note.midi(target)! - 1 })).advice).toContain('Turn nothing')
    }
  })

  it('meets a string of standard tuning on its way to every lower pitch down to a fourth', () => {
    for (const target of ['Eb2', 'D2', 'C#2', 'C2', 'B1']) expect(judge(Note.freq('E2')!, aim(target)).kind).toBe('high')
  })

  it('knows the way from the old pitch to the new', () => {
    expect(judge(Note.freq('A3')!, aim('D3')).kind).toBe('other')
    expect(judge(Note.freq('A3')!, aim('D3', { from: Note.midi('A3')! })).kind).toBe('high')
  })
})

describe('approach', () => {
  const come = (...cents: number[]) => cents.reduce((before, each) => approachOf(before, judge(off('D2', each), aim('D2'))), null as ReturnType<typeof approachOf>)
  it('tells a string let down onto its pitch from one drawn up to it', () => {
    expect(come(200, 40, 1)).toBe('above')
    expect(come(200, -20, 0)).toBe('below')
    expect(come(-20, 60, 2)).toBe('above')
  })
  it('is not misled by a hard pluck, which starts a little sharp', () => {
    expect(come(7, 4, 1)).toBeNull()
    expect(come(-20, 8, 1)).toBe('below')
  })
})

describe('follow', () => {
  const take = (hertz: readonly (number | null)[]) => hertz.reduce((before, each, index) =>
    follow(before, each === null ? null : { hertz: each, clarity: 1, stretch: 0 }, index * 0.05), NOTHING_HEARD)
  it('shows nothing before three windows agree', () => {
    expect(take([110, 110]).pitch).toBeNull()
    expect(take([110, 110, 110]).pitch).toMatchObject({ hertz: 110, isSteady: true })
  })
  it('is not moved by single wrong windows', () => {
    expect(take([110, 110, 110, 220, 110]).pitch?.hertz).toBe(110)
    expect(take([110, 110, 110, 55, 330]).pitch?.hertz).toBe(110)
  })
  it('goes along with a peg that turns, without calling it steady', () => {
    const { pitch } = take([100, 101, 102, 103, 104])
    expect(pitch).toMatchObject({ hertz: 102, isSteady: false })
  })
  it('keeps what was heard for three seconds', () => {
    const heard = [110, 110, 110]
    expect(take([...heard, ...Array<null>(55).fill(null)]).pitch?.hertz).toBe(110)
    expect(take([...heard, ...Array<null>(65).fill(null)]).pitch).toBeNull()
  })
})

describe('stages', () => {
  it('walk the plan, then all strings once more', () => {
    const [from, to] = ['E2 A2 D3 G3 B3 E4', 'C2 G2 D3 G3 C4 D4'].map(stringsOf) as [{ pitch: string }[], { pitch: string }[]]
    const stages = stagesOf(from, to)
    const changes = stages.filter(({ pass }) => pass === 'change')
    // Strings 6, 5 and 1 down, 2 up, 4 and 3 as they were: by the pitches themselves.
    expect(changes.map(({ string }) => string).sort()).toEqual([1, 2, 5, 6])
    expect(changes.at(-1)).toMatchObject({ string: 2, from: 'B3', to: 'C4', isRisky: false })
    expect(stages.slice(4).map(({ pass, string }) => [pass, string].join()).sort()).toEqual([1, 2, 3, 4, 5, 6].map(string => `check,${string}`))
  })
  it('mark a rise of more than a half step', () => {
    expect(stagesOf(stringsOf('E2 A2 D3 G3 B3 E4'), stringsOf('E2 B2 E3 G#3 B3 E4')).filter(({ isRisky }) => isRisky).map(({ string }) => string).sort()).toEqual([4, 5])
  })
  it('are the strings themselves, thickest first, where no other tuning is given', () => {
    expect(singleStages(stringsOf('D2 A2 D3 G3')).map(({ string, to }) => `${string} ${to}`)).toEqual(['4 D2', '3 A2', '2 D3', '1 G3'])
  })
})
