import type { Browser, Page } from '@playwright/test'

interface TraceEvent { name: string, ph: string, ts: number, dur?: number, pid: number, tid: number, cat: string, args: { data?: { type?: string }, name?: string } }

export interface KeyFigures {
  /** Milliseconds of main-thread tasks from the key's handler to the commit of the frame that shows it, one figure a key. */
  readonly work: readonly number[]
  /** Milliseconds from the key event to the first task after the frame that shows it. */
  readonly painted: readonly number[]
}

/** Presses `keys` one by one, `pause` ms apart, and measures each from a trace of the renderer's main thread. */
export async function measureKeys(browser: Browser, page: Page, keys: readonly string[], pause = 150): Promise<KeyFigures> {
  await page.evaluate(() => {
    const figures: number[] = []
    Object.assign(window, { keyFigures: figures })
    window.addEventListener('keydown', (event) => {
      const start = event.timeStamp
      requestAnimationFrame(() => {
        const { port1, port2 } = new MessageChannel()
        port1.onmessage = () => figures.push(performance.now() - start)
        port2.postMessage(null)
      })
    }, { capture: true })
  })
  await browser.startTracing(page, { categories: ['devtools.timeline', 'disabled-by-default-devtools.timeline', '__metadata'] })
  for (const key of keys) {
    await page.keyboard.press(key)
    await page.waitForTimeout(pause)
  }
  const trace = JSON.parse((await browser.stopTracing()).toString()) as { traceEvents: TraceEvent[] }
  const painted = await page.evaluate(() => (window as unknown as { keyFigures: number[] }).keyFigures)
  return { work: workPerKey(trace.traceEvents), painted }
}

function workPerKey(events: readonly TraceEvent[]): number[] {
  const keys = events.filter(each => each.name === 'EventDispatch' && each.args.data?.type === 'keydown').sort((a, b) => a.ts - b.ts)
  const main = keys[0]
  if (!main) throw new Error('the trace holds no key')
  const own = events.filter(each => each.pid === main.pid && each.tid === main.tid)
  const tasks = own.filter(each => each.name === 'RunTask')
  const commits = own.filter(each => each.name === 'Commit').sort((a, b) => a.ts - b.ts)
  return keys.map((key) => {
    const commit = commits.find(each => each.ts > key.ts)
    if (!commit) throw new Error('a key was followed by no frame')
    const end = commit.ts + (commit.dur ?? 0)
    const spans = tasks.map(task => Math.min(task.ts + (task.dur ?? 0), end) - Math.max(task.ts, key.ts)).filter(span => span > 0)
    return spans.reduce((total, span) => total + span, 0) / 1000
  })
}

/** The value below which `share` (0 to 1) of the figures lie. */
export function percentile(figures: readonly number[], share: number): number {
  const sorted = [...figures].sort((a, b) => a - b)
  return sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))] ?? Number.NaN
}
