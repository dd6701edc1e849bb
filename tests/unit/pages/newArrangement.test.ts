import { describe, expect, it } from 'vitest'
import { newArrangementSchema } from '../../../shared/schemas/arrangement'
import { KEYS, METERS, arrangementChecks, emptyForm, naturalBeat, newArrangement, pickupOptions } from '../../../composables/newArrangement'

const form = (more: Partial<ReturnType<typeof emptyForm>> = {}) => ({ ...emptyForm(), title: 'Lantern Waltz', ...more })

describe('a new arrangement', () => {
  it('is sent as it was filled in', () => {
    expect(newArrangement(form({ tuning: 'CGDGCD', capo: '2', meter: '9/8', key: '-1 minor', perMinute: 66, beat: '4.', pickup: '3/8', ring: 'let-ring' }))).toEqual({
      title: 'Lantern Waltz',
      strings: ['D4', 'C4', 'G3', 'D3', 'G2', 'C2'].map(pitch => ({ pitch })),
      capos: [{ fret: 2 }], meter: { beats: 9, unit: 8 }, key: { fifths: -1, mode: 'minor' }, tempo: { base: 4, dots: 1, perMinute: 66 },
      pickup: { n: 3, d: 8 }, ring: 'let-ring',
    })
  })
  it('is taken by the server’s schema whatever is chosen', () => {
    for (const { value: key } of KEYS) expect(newArrangementSchema.safeParse(newArrangement(form({ key }))).success).toBe(true)
    for (const { value: meter } of METERS) {
      for (const { value: pickup } of pickupOptions(meter)) expect(newArrangementSchema.safeParse(newArrangement(form({ meter, pickup }))).success).toBe(true)
    }
  })
  // Circle of fifths, common practice.
  it.each([['0 major', 'C major (no signs)'], ['-1 minor', 'D minor (1 flat)'], ['6 major', 'F♯ major (6 sharps)'], ['-3 minor', 'C minor (3 flats)'], ['3 minor', 'F♯ minor (3 sharps)']])(
    'names the key %s %s', (value, label) => expect(KEYS.find(key => key.value === value)?.label).toBe(label))
  // Compound meters count dotted quarters, common practice.
  it.each([['6/8', '4.'], ['12/8', '4.'], ['4/4', '4'], ['2/2', '2'], ['3/8', '8']])('counts %s in %s', (meter, beat) => expect(naturalBeat(meter)).toBe(beat))
  it('offers pickups shorter than a bar', () => {
    expect(pickupOptions('3/8').map(({ label }) => label)).toEqual(['None', '1 sixteenth', '1 eighth', '3 sixteenths', '1 quarter', '5 sixteenths'])
  })
  it('names what is wrong, string by string', () => {
    const checks = arrangementChecks(form({ title: ' ', tuning: 'C2 G2 D3 H3 C4 D4', capo: 1.5, perMinute: '' }))
    expect(checks.title()).toMatch(/title/)
    expect(checks.tuning()).toMatch(/String 3/)
    expect(checks.capo()).toMatch(/fret/)
    expect(checks.perMinute()).toMatch(/10 and 400/)
    expect(Object.values(arrangementChecks(form())).map(check => check())).toEqual([undefined, undefined, undefined, undefined])
  })
})
