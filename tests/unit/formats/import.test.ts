import { describe, expect, it } from 'vitest'
import { fraction } from '../../../shared/score/fraction'
import { soundingMidi } from '../../../shared/score/sounding'
import { lengthOf } from '../../../shared/score/time'
import type { Score } from '../../../shared/score/types'
import { readMusicXml } from '../../../shared/formats/musicxml'

/** MusicXML as other programs may write it; element names and meanings by the W3C XSD of MusicXML 4.0. */

const TAB = '<clef><sign>TAB</sign><line>5</line></clef><staff-details><staff-lines>6</staff-lines>'
  + ['D2', 'A2', 'D3', 'G3', 'B3', 'E4'].map((pitch, index) => `<staff-tuning line="${index + 1}"><tuning-step>${pitch[0]}</tuning-step><tuning-octave>${pitch[1]}</tuning-octave></staff-tuning>`).join('')
  + '</staff-details>'
const tab = (inside: string, divisions = 4, more = '') =>
  `<score-partwise version="4.0"><part-list><score-part id="P1"><part-name>Guitar</part-name></score-part></part-list><part id="P1"><measure number="1"><attributes><divisions>${divisions}</divisions><time><beats>4</beats><beat-type>4</beat-type></time>${TAB}</attributes>${inside}</measure>${more}</part></score-partwise>`
const place = (string: number, fret: number, more = '') => `<notations><technical><string>${string}</string><fret>${fret}</fret>${more}</technical></notations>`
/** Pitch D4, string 2 (B3) fret 3. */
const note = (duration: number, rest = '', before = '', notations = place(2, 3)) =>
  `<note>${before}<pitch><step>D</step><octave>4</octave></pitch><duration>${duration}</duration>${rest}${notations}</note>`

function read(text: string): { score: Score, remarks: string[] } {
  const result = readMusicXml(text)
  if ('problem' in result) throw new Error(result.problem)
  return result
}
const upper = (score: Score, bar = 0) => score.bars[bar]!.voices.upper!
const lengths = (score: Score, bar = 0) => upper(score, bar).events.map(event => lengthOf(event.length, upper(score, bar).tuplets))
const problem = (text: string) => {
  const result = readMusicXml(text)
  return 'problem' in result ? result.problem : null
}

describe('what can’t be read is said', () => {
  it.each([
    ['malformed XML, with its place', '<score-partwise>\n<part></score-partwise>', /^This is no well-formed XML: line 2, column \d+: .+\. Export the file again/],
    ['no XML', 'hello', /^This is no well-formed XML: line 1/],
    ['nothing', '', /^This is no well-formed XML/],
    ['a web page', '<html><body/></html>', /outermost element is <html>; a MusicXML score begins with <score-partwise>/],
    ['no notes', '<score-partwise><part-list/></score-partwise>', /There are no notes/],
    ['a lute tab of eleven lines without tuning', tab(note(4)).replace(/<staff-tuning.*<\/staff-tuning>/, '').replace('<staff-lines>6', '<staff-lines>11'), /11 lines and no tuning for each/],
    ['three strings', tab(note(4, '', '', place(1, 0))).replace(/<staff-tuning line="[456]">.*?<\/staff-tuning>/g, '').replace('<staff-lines>6', '<staff-lines>3'), /4 to 10 strings, not 3/],
  ])('%s', (_, text, message) => expect(problem(text)).toMatch(message))

  it('more than an arrangement can hold', () => {
    const bars = Array.from({ length: 2000 }, (_, index) => `<measure number="${index + 2}">${note(16)}</measure>`).join('')
    expect(problem(tab(note(16), 4, bars))).toBe('The file has 2001 bars; an arrangement here has 2000 at most.')
    expect(problem(tab(note(1).repeat(257), 64))).toMatch(/can’t be read as an arrangement: score\.bars\[0\]\.voices\.upper\.events/)
  })

  it('long texts, which are shortened', () => {
    const title = `<work><work-title>${'x'.repeat(199)}𝄞</work-title></work><identification><rights>${'y'.repeat(1001)}</rights></identification><part-list>`
    const { score, remarks } = read(tab(note(16)).replace('<part-list>', title))
    expect([score.head.title, score.head.rights]).toEqual(['x'.repeat(199), 'y'.repeat(1000)])
    expect(remarks).toEqual(['Shortened to 200 characters: the title.', 'Shortened to 1000 characters: the rights.'])
  })

  it('absurd durations', () => {
    expect(problem(tab(note(1) + note(3), 9007199254740881))).toMatch(/can’t be computed/)
  })
})

describe('time', () => {
  it('uses the duration where no type is given, with ties where one length is not enough', () => {
    const { score } = read(tab(note(6) + note(10)))
    expect(upper(score).events.map(event => [event.length, event.notes[0]?.link])).toEqual([
      [{ base: 4, dots: 1 }, undefined], [{ base: 2, dots: 0 }, 'tie'], [{ base: 8, dots: 0 }, undefined],
    ])
  })
  it('reads triplets with and without brackets', () => {
    const triplet = '<type>eighth</type><time-modification><actual-notes>3</actual-notes><normal-notes>2</normal-notes></time-modification>'
    const { score, remarks } = read(tab(Array.from({ length: 6 }, () => note(4, triplet)).join('') + note(12, '<type>quarter</type>').repeat(2), 12))
    expect(upper(score).tuplets).toMatchObject([{ actual: 3, normal: 2, base: 8 }, { actual: 3, normal: 2, base: 8 }])
    expect(upper(score).events.map(event => event.length.tuplets?.[0])).toEqual([...Array(3).fill(upper(score).tuplets![0]!.id), ...Array(3).fill(upper(score).tuplets![1]!.id), undefined, undefined])
    expect(lengths(score).slice(0, 3)).toEqual([fraction(1, 12), fraction(1, 12), fraction(1, 12)])
    expect(remarks).toEqual([])
  })
  it('turns gaps in a voice into hidden rests, and leaves the end of a bar open', () => {
    const { score } = read(tab(`${note(4)}<forward><duration>4</duration></forward>${note(4)}<forward><duration>4</duration></forward>`))
    expect(upper(score).events.map(event => [event.length.base, event.hidden ?? false, event.notes.length])).toEqual([[4, false, 1], [4, true, 0], [4, false, 1]])
    expect(score.bars[0]?.length).toBeUndefined()
  })
  it('reads a pickup and a short bar by what they hold', () => {
    const { score } = read(tab(note(4), 4, `<measure number="2">${note(16)}</measure><measure number="3">${note(12)}</measure>`))
    expect(score.bars.map(bar => bar.length)).toEqual([fraction(1, 4), undefined, fraction(3, 4)])
  })
  it('keeps repeats, and says what endings it leaves out', () => {
    const { score, remarks } = read(tab(`<barline location="left"><repeat direction="forward"/></barline>${note(16)}<barline location="right"><ending number="1" type="start"/><repeat direction="backward" times="3"/></barline>`))
    expect(score.bars[0]).toMatchObject({ repeatStart: true, repeatEnd: 3 })
    expect(remarks).toEqual(['Left out: first and second endings (bar 1).'])
  })
  it('adds up compound meters', () => {
    const { score } = read(tab(note(10)).replace('<beats>4</beats><beat-type>4</beat-type>', '<beats>3+2</beats><beat-type>8</beat-type>'))
    expect(score.bars[0]).toMatchObject({ meter: { beats: 5, unit: 8 } })
    expect(score.bars[0]?.length).toBeUndefined()
  })
  it('reads metronome marks exactly and bare tempos in quarters', () => {
    const mark = '<direction><direction-type><metronome><beat-unit>quarter</beat-unit><beat-unit-dot/><per-minute>60</per-minute></metronome></direction-type><sound tempo="90"/></direction>'
    expect(read(tab(mark + note(16))).score.bars[0]?.tempo).toEqual({ base: 4, dots: 1, perMinute: 60 })
    expect(read(tab('<sound tempo="90"/>' + note(16))).score.bars[0]?.tempo).toEqual({ base: 4, dots: 0, perMinute: 90 })
  })
})

describe('notes', () => {
  it('orders voices as they are numbered', () => {
    const { score } = read(tab(`${note(16, '<voice>2</voice>')}<backup><duration>16</duration></backup>${note(16, '<voice>7</voice>', '', place(6, 0))}`))
    expect(score.bars[0]?.voices.upper?.events[0]?.notes[0]?.string).toBe(2)
    expect(score.bars[0]?.voices.lower?.events[0]?.notes[0]?.string).toBe(6)
  })
  it('finds the partial of a natural harmonic by its touched fret, or by the pitch that sounds', () => {
    const base = note(4, '', '', place(2, 7, '<harmonic><natural/></harmonic>'))
    // String 2 is B3 (59): the fifth partial sounds two octaves and a major third above, 87 (calc: 12·log2 5 = 27.86).
    const sounding = `<note><pitch><step>D</step><alter>1</alter><octave>6</octave></pitch><duration>4</duration>${place(2, 4, '<harmonic><natural/><sounding-pitch/></harmonic>')}</note>`
    const { score, remarks } = read(tab(base + sounding))
    expect(upper(score).events.map(event => event.notes[0])).toMatchObject([{ fret: 7, harmonic: { partial: 3 } }, { fret: 4, harmonic: { partial: 5 } }])
    expect(remarks).toEqual([])
  })
  it('says which signs it leaves out, and in which bars', () => {
    const fingered = note(8, '', '', place(2, 3, '<fingering>3</fingering><pluck>m</pluck>'))
    const { remarks } = read(tab(fingered.repeat(2), 4, `<measure number="2">${fingered}</measure><measure number="3">${fingered}</measure><measure number="5"><note><grace/><pitch><step>C</step><octave>4</octave></pitch></note>${fingered}</measure>`))
    expect(remarks).toEqual([
      'Left out: fretting fingers (bars 1 to 3, 5).', 'Left out: plucking fingers (bars 1 to 3, 5).', 'Left out: grace notes (bar 5).',
    ])
  })
  it('keeps string and fret where the pitch does not fit, and says so', () => {
    const { score, remarks } = read(tab(note(16, '', '', place(1, 0))))
    expect(soundingMidi(score.head, upper(score).events[0]!.notes[0]!)).toBe(64)
    expect(remarks).toEqual(['1 note had a pitch that does not fit string and fret, which were kept (bar 1).'])
  })
  it('leaves out a second note on a string of the chord', () => {
    const { score, remarks } = read(tab(note(16) + note(16, '', '<chord/>', place(2, 5))))
    expect(upper(score).events[0]?.notes.map(each => [each.string, each.fret])).toEqual([[2, 3]])
    expect(remarks).toContain('Left out, as the string sounds already in the chord: 1 note (bar 1).')
  })
  it('places notes without string and fret at the lowest frets, one to a string', () => {
    const bare = (pitch: string, chord = '') => `<note>${chord}<pitch><step>${pitch[0]}</step><octave>${pitch[1]}</octave></pitch><duration>16</duration></note>`
    const { score, remarks } = read(tab(bare('D2') + bare('D3', '<chord/>') + bare('A3', '<chord/>') + bare('E4', '<chord/>') + bare('G1', '<chord/>')))
    expect(upper(score).events[0]?.notes.map(each => [each.string, each.fret])).toEqual([[6, 0], [4, 0], [3, 2], [1, 0]])
    expect(remarks).toEqual([
      '4 notes had no string and fret: placed at the lowest possible fret (bar 1). Check their fingering.',
      'Left out, as no string of this tuning is left to play it on: 1 note (bar 1).',
    ])
  })
  it('takes standard tuning where none is stated, and says so', () => {
    const { score, remarks } = read(tab(note(16)).replace(/<staff-tuning.*<\/staff-tuning>/, ''))
    expect(score.head.strings.map(open => open.pitch)).toEqual(['E4', 'B3', 'G3', 'D3', 'A2', 'E2'])
    expect(remarks).toEqual(['The file states no tuning: standard tuning was taken.'])
  })
  it('says where tuning or capo change, and keeps the first', () => {
    const { score, remarks } = read(tab(note(16), 4, `<measure number="2"><attributes><staff-details><capo>3</capo></staff-details></attributes>${note(16)}</measure>`))
    expect(score.head.capos).toEqual([])
    expect(remarks).toEqual(['Left out: a change of tuning or capo (bar 2).'])
  })
  it('turns a score of measures of parts round', () => {
    const partwise = tab(note(16))
    const timewise = partwise.replaceAll('score-partwise', 'score-timewise').replace('<part id="P1"><measure number="1">', '<measure number="1"><part id="P1">').replace('</measure></part>', '</part></measure>')
    expect(read(timewise)).toEqual(read(partwise))
  })
  it('names the parts that are not read', () => {
    const text = tab(note(16)).replace('</part></score', '</part><part id="P2"><measure number="1"><note><pitch><step>C</step><octave>5</octave></pitch><duration>4</duration></note></measure></part></score')
      .replace('</part-list>', '<score-part id="P2"><part-name>Flute</part-name></score-part></part-list>')
    expect(read(text).remarks).toEqual(['Left out: Flute, staff 1.'])
  })
})
