import fc from 'fast-check'
import * as vex from 'vexflow/core'
import { afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest'
import { geometryOf, notationAt } from '#shared/engraving'
import { openEditor } from '#shared/editor/state'
import { lanesOfBar } from '#shared/ring'
import type { Score } from '#shared/score/types'
import { patch } from '../../components/editor/score/draw/patch'
import { quickClone, quickLookup, withQuickClones } from '../../components/editor/score/draw/quick'
import { Sheet } from '../../components/editor/score/draw/sheet'
import { createPen, drawStaff } from '../../components/editor/score/draw/staff'
import { scoreArbitrary } from '../support/arbitraries'
import { denseScore } from '../support/dense'
import { parseScore } from '../support/score'

/** No canvas here: every glyph is as wide as its font is tall. Positions differ from the browser's, their rules do not. */
function measureWithoutCanvas(): void {
  const context = {
    font: '',
    measureText(text: string) {
      const size = Number.parseFloat(/([\d.]+)p[tx]/.exec(this.font)?.[1] ?? '10')
      return { width: size * text.length * 0.6, actualBoundingBoxAscent: size * 0.3, actualBoundingBoxDescent: size * 0.3, actualBoundingBoxLeft: 0, actualBoundingBoxRight: size * 0.6 }
    },
  }
  vex.Element.setTextMeasurementCanvas({ getContext: () => context } as unknown as HTMLCanvasElement)
}

const RICH = `{D} {6/8} 1/0q 2/3e 3/4e 2/1e 1/0e ; 6/0q. 5/0q. | 1/0=e 1/0e 1/3he 1/5pe 1/3e 2/1=e ; 6/0q. zq.
  | 2/1q. (1/12< 2/12<)q. | (1/2 2/3 3/2)q. 3/0xe 3/0xe 4/3le | [3 1/0e 1/1e 1/2e] 1/3s 1/2s 1/1s 1/0s zq | 1/0t 1/0t 1/0s zh`

beforeAll(() => {
  vex.VexFlow.setFonts('Bravura')
  measureWithoutCanvas()
})

describe('drawing without deep clones', { timeout: 30_000 }, () => {
  /** Draws every bar with the library's own clones, and with ours. */
  function drawings(score: Score): { own: string[], quick: string[] } {
    const draw = (index: number): string => {
      const notation = notationAt(score, index)
      return drawStaff(createPen(vex), notation, geometryOf(notation, 0, 300).columns).group.outerHTML
    }
    const bars = score.bars.map((_, index) => index)
    const quick = bars.map(draw)
    const structured = globalThis.structuredClone
    // `drawStaff` sets its own clone; a setter that ignores it keeps the library's.
    Object.defineProperty(globalThis, 'structuredClone', { get: () => structured, set: () => {}, configurable: true })
    try {
      return { quick, own: bars.map(draw) }
    }
    finally {
      Object.defineProperty(globalThis, 'structuredClone', { value: structured, writable: true, configurable: true })
    }
  }

  it('gives the same SVG, node for node', () => {
    const { own, quick } = drawings(parseScore(RICH))
    expect(quick).toEqual(own)
    expect(quick[0]).toContain('<text')
    const dense = drawings(denseScore(3))
    expect(dense.quick).toEqual(dense.own)
  })

  it('never hands out the same record twice', () => {
    const font = { family: 'Bravura', size: 30, dash: [1, 2], shadow: { blur: 3 } }
    const copy = quickClone(font)
    expect(copy).toEqual(font)
    expect([copy === font, copy.dash === font.dash, copy.shadow === font.shadow]).toEqual([false, false, false])
    expect([quickClone(null), quickClone('a'), quickClone([1, [2]])]).toEqual([null, 'a', [1, [2]]])
  })

  it('leaves the global as it was, after a failure too', () => {
    const before = globalThis.structuredClone
    expect(() => withQuickClones(() => {
      expect(globalThis.structuredClone).toBe(quickClone)
      throw new Error('no pen')
    })).toThrow('no pen')
    expect(globalThis.structuredClone).toBe(before)
  })

  it('looks measures up as the library does', () => {
    const quick = quickLookup(vex.Metrics.get.bind(vex.Metrics))
    for (const key of ['fontSize', 'Accidental.cautionary.fontSize', 'Stave.padding', 'NoteHead.minPadding', 'Stem.heightAdjustmentForFlag', 'Nothing.there']) {
      expect([quick(key, 7), quick(key, 7)]).toEqual([vex.Metrics.get(key, 7), vex.Metrics.get(key, 7)])
    }
  })
})

describe('patching a drawing', { timeout: 30_000 }, () => {
  it('gives the drawing that was wanted, whatever stood there', () => {
    const draw = (text: string): SVGGElement => {
      const notation = notationAt(parseScore(text), 0)
      return drawStaff(createPen(vex), notation, geometryOf(notation, 0, 300).columns).group
    }
    const texts = ['{4/4} 1/0w', '{4/4} 1/0e 1/1e 2/2q 3/0h ; 6/0w', RICH, '{4/4}', '{3/4} [3 1/0e 1/1e 1/2e] 1/12<q zq', '{4/4} (1/0 2/1 3/2)q. 4/4le 1/0h']
    for (const from of texts) {
      for (const to of texts) {
        const drawn = draw(from)
        patch(drawn, draw(to))
        expect(drawn.isEqualNode(draw(to)), `${from} to ${to}`).toBe(true)
      }
    }
  })

  it('touches nothing where nothing differs', async () => {
    const notation = notationAt(parseScore(RICH), 0)
    const draw = (): SVGGElement => drawStaff(createPen(vex), notation, geometryOf(notation, 0, 300).columns).group
    const drawn = draw()
    const parts = [...drawn.querySelectorAll('*')]
    const touched: MutationRecord[] = []
    const observer = new MutationObserver(records => touched.push(...records))
    observer.observe(drawn, { subtree: true, childList: true, attributes: true, characterData: true })
    patch(drawn, draw())
    await Promise.resolve()
    expect([...touched, ...observer.takeRecords()]).toEqual([])
    expect([...drawn.querySelectorAll('*')]).toEqual(parts)
  })
})

describe('the sheet', { timeout: 30_000 }, () => {
  let root: HTMLElement
  let sheet: Sheet

  beforeEach(() => {
    vi.useFakeTimers()
    // Nothing is laid out here: systems stand one below the other in a window of 768 points.
    vi.spyOn(Element.prototype, 'getBoundingClientRect').mockImplementation(function (this: Element) {
      const above = [...this.parentElement?.children ?? []].filter(each => each.compareDocumentPosition(this) & Node.DOCUMENT_POSITION_FOLLOWING)
      const height = (of: Element): number => Number.parseFloat((of as HTMLElement).style.height || '0')
      const top = above.reduce((sum, each) => sum + height(each), 0)
      return { top, bottom: top + height(this), left: 0, right: 900 } as DOMRect
    })
    root = document.createElement('div')
    sheet = new Sheet(root, vex, lanesOfBar)
    sheet.resize(900)
  })

  afterEach(() => {
    sheet.destroy()
    vi.useRealTimers()
    vi.restoreAllMocks()
  })

  const show = (score: Score): void => sheet.show(score, openEditor(score).selection)
  const barNodes = (): Map<string, Element> => new Map([...root.querySelectorAll('[data-bar]')].map(node => [(node as SVGElement).dataset.bar!, node]))
  const inOrder = (): string[] => [...root.querySelectorAll('[data-bar]')].map(node => (node as SVGElement).dataset.bar!)

  function refret(score: Score, index: number, fret: number): Score {
    return { ...score, bars: score.bars.map((bar, at) => (at !== index ? bar : { ...bar, voices: { ...bar.voices, upper: { events: bar.voices.upper!.events.map((event, place) => (place ? event : { ...event, notes: event.notes.map(note => ({ ...note, fret })) })) } } })) }
  }

  /** The first score with the voices of the second, as far as there are bars. */
  const withContentOf = (first: Score, second: Score): Score => ({
    ...first, bars: first.bars.map((bar, at) => ({ ...bar, voices: second.head.strings.length > first.head.strings.length ? bar.voices : second.bars[at]?.voices ?? {} })),
  })

  it('draws one group for each bar', () => {
    const score = denseScore(6)
    show(score)
    sheet.drawAll()
    expect([...barNodes().keys()].sort()).toEqual(score.bars.map(bar => bar.id).sort())
  })

  it('keeps the nodes of every bar but the edited one', () => {
    const score = denseScore(6)
    show(score)
    sheet.drawAll()
    const before = barNodes()
    const parts = new Map([...before].map(([id, node]) => [id, [...node.querySelectorAll('*')]]))
    const texts = new Map([...before].map(([id, node]) => [id, node.outerHTML]))
    show(refret(score, 3, 9))
    for (const [index, bar] of score.bars.entries()) {
      const now = barNodes().get(bar.id)!
      expect(now).toBe(before.get(bar.id))
      expect(now.outerHTML === texts.get(bar.id), `bar ${index + 1}`).toBe(index !== 3)
      if (index !== 3) for (const [at, part] of [...now.querySelectorAll('*')].entries()) expect(part).toBe(parts.get(bar.id)![at])
    }
  })

  it('draws the next bar anew too when what ties into it changes', () => {
    const score = parseScore('{4/4} 1/0w | 1/3w | 1/0w')
    show(score)
    const before = new Map([...barNodes()].map(([id, node]) => [id, node.outerHTML]))
    const tied = parseScore('{4/4} 1/3=w | 1/3w | 1/0w')
    show({ ...score, bars: [{ ...score.bars[0]!, voices: tied.bars[0]!.voices }, score.bars[1]!, score.bars[2]!] })
    const after = barNodes()
    expect(['b1', 'b2', 'b3'].map(id => before.get(id) === after.get(id)!.outerHTML)).toEqual([false, false, true])
    expect(after.get('b2')!.textContent).toContain('(3)')
  })

  it('moves the cursor, the selection and the playing place without touching a bar', () => {
    const score = denseScore(4)
    show(score)
    const html = barNodes()
    const texts = [...html.values()].map(node => node.outerHTML)
    const [bar, next] = score.bars
    const cursor = { barId: next!.id, voice: 'upper' as const, eventId: next!.voices.upper!.events[2]!.id, string: 4 }
    sheet.show(score, { cursor, anchor: { ...cursor, barId: bar!.id, eventId: bar!.voices.upper!.events[0]!.id } })
    sheet.showPlaying({ barId: bar!.id, eventIds: [bar!.voices.upper!.events[1]!.id] })
    expect(root.querySelectorAll('.cursor-cell, .selected, .playing').length).toBeGreaterThanOrEqual(3)
    expect([...barNodes().values()].map(node => node.outerHTML)).toEqual(texts)
    for (const [id, node] of barNodes()) expect(node).toBe(html.get(id))
  })

  it('adds, removes and keeps bars in their order', () => {
    const score = denseScore(6)
    show(score)
    sheet.drawAll()
    const before = barNodes()
    const extra = { id: 'extra', voices: {} }
    const longer = { ...score, bars: [...score.bars, extra] }
    show(longer)
    sheet.drawAll()
    expect(inOrder()).toEqual(longer.bars.map(bar => bar.id))
    for (const bar of score.bars.slice(0, 4)) expect(barNodes().get(bar.id)).toBe(before.get(bar.id))
    const shorter = { ...score, bars: score.bars.filter((_, index) => index !== 1) }
    show(shorter)
    sheet.drawAll()
    expect(inOrder()).toEqual(shorter.bars.map(bar => bar.id))
  })

  it('makes room at once for notes typed without a pause', () => {
    const frets = (count: number): string => Array.from({ length: count }, (_, at) => `1/${at % 9}s`).join(' ')
    const start = parseScore('{4/4} 3/0w | ')
    const gaps: number[] = []
    show(start)
    for (let count = 1; count <= 16; count++) {
      show(withContentOf(start, parseScore(`{4/4} 3/0w | ${frets(count)}`)))
      const columns = [...barNodes().get('b2')!.querySelectorAll('text')].filter(text => /^\d$/.test(text.textContent ?? '')).map(text => Number(text.getAttribute('x')))
      expect(columns).toHaveLength(count)
      gaps.push(...columns.slice(1).map((x, at) => x - columns[at]!))
    }
    expect(Math.min(...gaps)).toBeGreaterThan(12)
  })

  it('draws a long piece only where it is looked at, and all of it for print', () => {
    show(denseScore(24))
    vi.advanceTimersByTime(100)
    const drawn = barNodes().size
    expect(drawn).toBeGreaterThan(0)
    expect(drawn).toBeLessThan(24)
    sheet.drawAll()
    expect(barNodes().size).toBe(24)
  })

  it('finds the cell one system down and back', () => {
    const score = denseScore(6)
    show(score)
    const { cursor } = openEditor(score).selection
    const below = sheet.systemNeighbour(cursor, 1)!
    expect(score.bars.findIndex(bar => bar.id === below.barId)).toBeGreaterThan(0)
    expect(below).toMatchObject({ voice: 'upper', string: cursor.string })
    expect(sheet.systemNeighbour(below, -1)).toEqual(cursor)
    expect(sheet.systemNeighbour(cursor, -1)).toBeNull()
  })

  it('draws any score, however strange, and the same after any other', { timeout: 120_000 }, () => {
    fc.assert(fc.property(scoreArbitrary(3), scoreArbitrary(3), (first, second) => {
      const fresh = document.createElement('div')
      const other = new Sheet(fresh, vex, lanesOfBar)
      other.resize(900)
      other.show(second, null)
      other.drawAll()
      // The same bars' ids with other content, then another score altogether.
      show(first)
      show(withContentOf(first, second))
      sheet.show(second, null)
      sheet.drawAll()
      const bars = (of: HTMLElement): string[] => [...of.querySelectorAll('[data-bar]')].map(node => node.textContent)
      expect(bars(root)).toEqual(bars(fresh))
      expect(bars(root).length).toBe(second.bars.length)
      other.destroy()
    }), { numRuns: 12 })
  })

  it('runs no string line through a fret', () => {
    show(parseScore('{4/4} 3/12w'))
    const drawn = barNodes().get('b1')!
    const fret = [...drawn.querySelectorAll('text')].find(text => text.textContent === '12')!
    const x = Number(fret.getAttribute('x'))
    const line = [...drawn.querySelectorAll('path.sheet-line')].at(-1)!.getAttribute('d')!
    const third = [...line.matchAll(/M([\d.]+) ([\d.]+)H([\d.]+)/g)].filter(([, , y]) => Number(y) === 26)
    expect(third.length).toBe(2)
    for (const [, from, , to] of third) expect(Number(from) > x || Number(to) < x).toBe(true)
  })
})
