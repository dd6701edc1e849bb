import { midiOfText } from '../score/pitch'
import type { OpenString } from '../score/types'

/**
 * Tunings that players use, low string first as they are said. A tuning is identified by its pitches; names are aliases and differ
 * from one circle of players to another. Sources: the music-encoding community's MEI Guidelines, data.COURSETUNING (M);
 * daviddarling.info, "alternative guitar tunings" (D); whitetreeaz.com, tunings (W); S. Baughman, "Orkney Tuning" (O);
 * givemesomeslack.com (K); kbeamer.com (B); Aaron Shearer Foundation, "Scordatura" (F); guitarloot.org.uk, "Lute tuning" (G);
 * the rest common practice.
 */
export interface CatalogueTuning {
  readonly name: string
  /** Sounding pitches from string N to string 1. */
  readonly pitches: readonly string[]
  readonly instrument: string
  /** The fret at which the last string starts, where that one is short. */
  readonly lastStringFrom?: number
}

const on = (instrument: string) => (name: string, pitches: string): CatalogueTuning => ({ name, pitches: pitches.split(' '), instrument })
const row = on('guitar')

export const STANDARD: CatalogueTuning = row('Standard', 'E2 A2 D3 G3 B3 E4')

export const GUITAR_TUNINGS: readonly CatalogueTuning[] = [
  row('Drop D', 'D2 A2 D3 G3 B3 E4'), // M
  row('Double drop D', 'D2 A2 D3 G3 B3 D4'), // W
  row('D A D G A D (Dsus4)', 'D2 A2 D3 G3 A3 D4'), // F W
  row('Open D', 'D2 A2 D3 F#3 A3 D4'), // M
  row('Open D minor, cross-note', 'D2 A2 D3 F3 A3 D4'), // D
  row('D A D E A D (Dsus2)', 'D2 A2 D3 E3 A3 D4'),
  row('D A D D A D', 'D2 A2 D3 D3 A3 D4'), // W
  row('Open G, taro patch', 'D2 G2 D3 G3 B3 D4'), // M K
  row('Open G minor', 'D2 G2 D3 G3 Bb3 D4'),
  row('Gsus4, sawmill', 'D2 G2 D3 G3 C4 D4'),
  row('G wahine', 'D2 G2 D3 F#3 B3 D4'),
  row('D G D G B E', 'D2 G2 D3 G3 B3 E4'), // K
  row('Orkney', 'C2 G2 D3 G3 C4 D4'), // O
  row('Taro patch, C bass', 'C2 G2 D3 G3 B3 D4'), // K
  row('C wahine', 'C2 G2 D3 G3 B3 E4'), // B
  row('Open C', 'C2 G2 C3 G3 C4 E4'), // D K
  row('Csus2', 'C2 G2 C3 G3 C4 D4'),
  row('C6', 'C2 A2 C3 G3 C4 E4'),
  row('Open E', 'E2 B2 E3 G#3 B3 E4'), // W
  row('Cross-note E', 'E2 B2 E3 G3 B3 E4'), // D
  row('Open A', 'E2 A2 E3 A3 C#4 E4'), // M D
  row('E A D E A E', 'E2 A2 D3 E3 A3 E4'),
  row('Lute-like, third string F♯', 'E2 A2 D3 F#3 B3 E4'), // F G
  row('Sixth string D, third string F♯', 'D2 A2 D3 F#3 B3 E4'),
  row('All fourths', 'E2 A2 D3 G3 C4 F4'),
  row('All down one', 'Eb2 Ab2 Db3 Gb3 Bb3 Eb4'),
  row('All down two', 'D2 G2 C3 F3 A3 D4'),
  row('C G D A E G', 'C2 G2 D3 A3 E4 G4'),
]

/** Other instruments: MEI Guidelines for the lutes, the rest from memory. Re-entrant ones are not sorted by pitch. */
export const OTHER_TUNINGS: readonly CatalogueTuning[] = [
  on('lute')('Renaissance lute in G', 'G2 C3 F3 A3 D4 G4'),
  on('lute')('Baroque lute, D minor, upper six courses', 'A2 D3 F3 A3 D4 F4'),
  on('mandolin')('Mandolin', 'G3 D4 A4 E5'),
  on('tenor guitar')('Tenor guitar', 'C3 G3 D4 A4'),
  on('baritone ukulele')('Baritone ukulele', 'D3 G3 B3 E4'),
  on('ukulele')('Ukulele', 'G4 C4 E4 A4'),
  { ...on('banjo')('Banjo, open G', 'G4 D3 G3 B3 D4'), lastStringFrom: 5 },
  on('seven-string guitar')('Seven strings', 'B1 E2 A2 D3 G3 B3 E4'),
  on('eight-string guitar')('Eight strings', 'F#1 B1 E2 A2 D3 G3 B3 E4'),
]

export const catalogue: readonly CatalogueTuning[] = [STANDARD, ...GUITAR_TUNINGS, ...OTHER_TUNINGS]

/** As the score keeps strings: string 1 first. */
export const stringsOf = (tuning: CatalogueTuning): OpenString[] => tuning.pitches
  .map((pitch, index) => (index === 0 && tuning.lastStringFrom ? { pitch, from: tuning.lastStringFrom } : { pitch })).reverse()

const sound = (pitches: readonly string[]): string => pitches.map(midiOfText).join()

/** The entries that sound like these strings (string 1 first), however either is spelled. */
export const entriesFor = (strings: readonly OpenString[]): readonly CatalogueTuning[] => {
  const sought = sound(strings.map(({ pitch }) => pitch).reverse())
  return catalogue.filter(({ pitches }) => sound(pitches) === sought)
}
