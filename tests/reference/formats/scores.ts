import { parseScore } from '../../support/score'
import type { Score } from '../../../shared/score/types'

const strings = (pitches: string) => pitches.split(' ').reverse().map(pitch => ({ pitch }))

/** Scores that together use everything an export has to say. */
export const scores: Readonly<Record<string, Score>> = {
  'altered tuning, two voices, repeat': parseScore(
    '{6/8} {G} {q.=60} {|:} 1/0q 2/2e 2/0q 3/0e ; 6/0q. 5/0q. | 1/2e 1/0e 2/2e 2/0q. ; 6/0h. {:|}',
    { title: 'Lark & Linnet <draft>', composer: 'Ida Fenn', arranger: 'R. Oake', rights: '© 2026 R. Oake', source: 'From a manuscript', strings: strings('C2 G2 D3 G3 C4 D4') },
  ),
  'capo, pickup and short closing bar': parseScore(
    '{2/4} {D} {q=88} {len=1/8} 1/0e | 1/2e 1/0e 2/2e 2/0e ; 4/0q 5/0q | {len=3/8} 2/0q. ; 6/0q.',
    { strings: strings('D2 A2 D3 F#3 A3 D4'), capos: [{ fret: 2 }] },
  ),
  'ties within and across bars, triplets, dots': parseScore(
    '{3/4} {Bb} {q=100} [3 1/1e 1/3e 2/1e] 2/3q. 2/1=e | 2/1=h 2/1q | [3:2q 3/0e 3/1q] 1/1h',
    { strings: strings('D2 G2 D3 G3 Bb3 D4') },
  ),
  'slurs, harmonics, dead notes, let ring, rests': parseScore(
    '{4/4} {Em} {q=72} 1/0hs 1/2ps 1/0e 2/12<q 3/0xe zq 1/3le ; 6/0lh 5/2h | _q 2/7<q 3/5<h',
    { ring: 'let-ring', strings: strings('E2 B2 E3 G3 B3 E4') },
  ),
  'partial capo over a full one': parseScore(
    '{4/4} {A} {q=96} (1/0 2/2 3/0)q 4/2q 5/0q 6/0q',
    { strings: strings('E2 A2 D3 G3 B3 E4'), capos: [{ fret: 1 }, { fret: 3, strings: [3, 4, 5] }] },
  ),
  'seven strings': parseScore('{4/4} {C} {q=60} 7/0q 6/3q 5/2q 1/3q', { strings: strings('B1 E2 A2 D3 G3 B3 E4') }),
  'five strings, the fifth short': parseScore(
    '{2/4} {G} {q=120} 3/0e 5/0e 2/1e 1/0e', { strings: [{ pitch: 'D4' }, { pitch: 'B3' }, { pitch: 'G3' }, { pitch: 'D3' }, { pitch: 'G4', from: 5 }] },
  ),
  'an empty bar, keys and meters that change': parseScore('{4/4} {C} {q=60} | {3/4} {Eb} 2/1h. | {6/8} {F#m} 1/2q. 2/2q.', {}),
}
