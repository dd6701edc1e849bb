/** The library's two costly habits, met from outside: it deep-clones small records by the thousand, and measures the same glyphs anew. */

type Cloneable = Readonly<Record<string, unknown>>

/** A copy two levels deep. The library clones flat records of numbers, texts and, at most, one list. */
export function quickClone<T>(value: T): T {
  if (typeof value !== 'object' || value === null) return value
  const copy = Array.isArray(value) ? [...value] : { ...value as Cloneable }
  for (const [key, inner] of Object.entries(copy)) {
    if (typeof inner === 'object' && inner !== null) (copy as Record<string, unknown>)[key] = Array.isArray(inner) ? [...inner] : { ...inner as Cloneable }
  }
  return copy as T
}

/** Runs one drawing, synchronously, with quick clones in place of structured ones. */
export function withQuickClones<T>(draw: () => T): T {
  const original = globalThis.structuredClone
  globalThis.structuredClone = quickClone
  try {
    return draw()
  }
  finally {
    globalThis.structuredClone = original
  }
}

/** Text measuring that remembers: a page has a few dozen glyphs in a handful of fonts. */
export function quickMeasuring(canvas: HTMLCanvasElement): HTMLCanvasElement {
  const context = canvas.getContext('2d')!
  const measured = new Map<string, TextMetrics>()
  const remembering = {
    font: '',
    measureText(text: string): TextMetrics {
      const key = `${this.font}\n${text}`
      let metrics = measured.get(key)
      if (!metrics) {
        context.font = this.font
        if (measured.size > 2000) measured.clear()
        measured.set(key, metrics = context.measureText(text))
      }
      return metrics
    },
  }
  return { getContext: () => remembering } as unknown as HTMLCanvasElement
}
