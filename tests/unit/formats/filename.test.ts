import { describe, expect, it } from 'vitest'
import { fileName } from '../../../shared/formats/filename'

// Forbidden signs and reserved names: Microsoft, "Naming Files, Paths, and Namespaces"; 255 bytes: limits of ext4, APFS and NTFS (common practice).
describe('file names', () => {
  it.each([
    ['Blind Mary', 'Blind Mary.musicxml'],
    ['Sí Bheag, Sí Mhór', 'Sí Bheag, Sí Mhór.musicxml'],
    ['AC/DC: what? "why" <now>|*\\', 'AC-DC- what- -why- -now.musicxml'],
    ['  tabs\tand\nlines  ', 'tabs and lines.musicxml'],
    ['...hidden', 'hidden.musicxml'],
    ['../../etc/passwd', 'etc-passwd.musicxml'],
    ['The end.', 'The end.musicxml'],
    ['con', '_con.musicxml'],
    ['LPT1.draft', '_LPT1.draft.musicxml'],
    ['Concerto', 'Concerto.musicxml'],
    ['', 'untitled.musicxml'],
    ['???', 'untitled.musicxml'],
    ['a\u202Egnp', 'a gnp.musicxml'],
  ])('%j', (title, name) => expect(fileName(title, 'musicxml')).toBe(name))
  it('takes an extension with its dot', () => expect(fileName('Tune', '.json')).toBe('Tune.json'))
  it('is never longer than file systems allow and splits no character', () => {
    const name = fileName('é🎸'.repeat(200), 'musicxml')
    expect(new TextEncoder().encode(name).length).toBeLessThanOrEqual(255)
    expect(name).toMatch(/^(?:é🎸)+é?\.musicxml$/u)
  })
})
