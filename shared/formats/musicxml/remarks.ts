/** What an import could not keep as it stood, for people to read. Nothing is left out without being said. */
export interface Remarks {
  /** A kind of thing that is left out, in the bar of this number. */
  readonly leaveOut: (what: string, bar: string) => void
  /** Something told of bars: in the sentence `{bars}` becomes their numbers and `{n} notes` how often, "1 note" or "3 notes". */
  readonly count: (sentence: string, bar: string) => void
  readonly say: (sentence: string) => void
  readonly list: () => string[]
}

const unique = (items: readonly string[]): string[] => [...new Set(items)]

/** "bar 4", "bars 1 to 3, 7". Runs are of whole numbers that follow each other. */
export function barWords(bars: readonly string[]): string {
  const runs: string[][] = []
  for (const bar of unique(bars)) {
    const last = runs.at(-1)?.at(-1)
    if (last !== undefined && Number(bar) === Number(last) + 1) runs.at(-1)?.push(bar)
    else runs.push([bar])
  }
  const words = runs.map(run => (run.length > 2 ? `${run[0]} to ${run.at(-1)}` : run.join(', '))).join(', ')
  return `${unique(bars).length === 1 ? 'bar' : 'bars'} ${words}`
}

const told = (sentence: string, bars: readonly string[]): string =>
  sentence.replace(/\{n\} (\w+)s\b/, (_, thing: string) => `${bars.length} ${thing}${bars.length === 1 ? '' : 's'}`).replace('{bars}', barWords(bars))

export function createRemarks(): Remarks {
  const left = new Map<string, string[]>()
  const counted = new Map<string, string[]>()
  const said = new Set<string>()
  const put = (map: Map<string, string[]>, key: string, bar: string) => {
    const bars = map.get(key)
    if (bars) bars.push(bar)
    else map.set(key, [bar])
  }
  return {
    leaveOut: (what, bar) => put(left, what, bar),
    count: (sentence, bar) => put(counted, sentence, bar),
    say: sentence => void said.add(sentence),
    list: () => [
      ...said,
      ...[...counted].map(([sentence, bars]) => told(sentence, bars)),
      ...[...left].map(([what, bars]) => `Left out: ${what} (${barWords(bars)}).`),
    ],
  }
}

/** Elements that are left out, as people call them. Others are named by their element. */
export const PLAIN_WORDS: Readonly<Record<string, string>> = {
  'lyric': 'words to sing', 'harmony': 'chord symbols', 'figured-bass': 'figured bass', 'fingering': 'fretting fingers', 'pluck': 'plucking fingers',
  'bend': 'bends', 'slide': 'slides', 'glissando': 'glissandos', 'arpeggiate': 'arpeggio signs', 'dynamics': 'dynamics', 'articulations': 'articulations',
  'ornaments': 'ornaments', 'fermata': 'fermatas', 'words': 'text above the staff', 'rehearsal': 'rehearsal letters', 'wedge': 'hairpins',
  'ending': 'first and second endings', 'segno': 'segno signs', 'coda': 'coda signs', 'slur': 'slurs', 'tap': 'taps', 'unpitched': 'unpitched notes',
  'octave-shift': 'octave lines', 'measure-style': 'measure styles', 'credit': 'text on the page', 'non-arpeggiate': 'non-arpeggio signs',
}
