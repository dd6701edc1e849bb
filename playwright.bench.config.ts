import base from './playwright.config'

/** Benchmarks drive the built app like the browser tests, one after another, and print their figures. */
export default { ...base, testDir: './tests/bench', testMatch: '*.bench.ts', timeout: 600_000, reporter: 'line' }
