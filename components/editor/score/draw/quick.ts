/** The library's two costly habits, met from outside: it deep-clones small records by the thousand, and measures the same glyphs anew. */

/** A copy two levels deep. The library clones flat records of numbers, texts and, at most, one list. */
export function quickClone<T>(value: T): T {
  const copy = shallow(value)
  for (const key in copy) {
    const inner = copy[key]
    if (typeof inner === 'object') copy[key] = shallow(inner)
  }
  return copy
}

function shallow<T>(value: T): T {
  if (typeof value !== 'object' || value === null) return value
  return (Array.isArray(value) ? [...value] : { ...value }) as T
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

type Lookup = (key: string, fallback?: unknown) => unknown

/** The library's table of measures by dotted key, remembering what it looked up. Its fonts must be set before. */
export function quickLookup(lookup: Lookup): Lookup {
  const found = new Map<string, unknown>()
  return (key, fallback) => {
    let value = found.get(key)
    if (value === undefined && !found.has(key)) found.set(key, value = lookup(key))
    return value ?? fallback
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
