import { spawnSync } from 'node:child_process'
import { chmodSync, cpSync, existsSync, mkdirSync, mkdtempSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { dirname, join } from 'node:path'
import { afterAll, beforeEach, describe, expect, it, vi } from 'vitest'

// A busy machine takes long to start so many processes.
vi.setConfig({ testTimeout: 120_000 })

/**
 * `npm start` and `npm test` in a small project of their own, where npm and npx are stand-ins that note how they were called
 * and leave what the real ones would.
 */
const home = mkdtempSync(join(tmpdir(), 'copperwound-scripts-'))
let project: string
let count = 0

const at = (path: string) => join(project, path)
function put(path: string, text: string) {
  mkdirSync(dirname(at(path)), { recursive: true })
  writeFileSync(at(path), text)
}
function tool(name: string, script: string) {
  put(`bin/${name}`, `#!${process.execPath}\nconst { appendFileSync, mkdirSync, writeFileSync } = require('node:fs')\nconst args = process.argv.slice(2)\nappendFileSync('${at('calls')}', '${name} ' + args.join(' ') + '\\n')\n${script}`)
  chmodSync(at(`bin/${name}`), 0o755)
}

beforeEach(() => {
  project = join(home, `project-${count++}`)
  cpSync('scripts', at('scripts'), { recursive: true })
  put('package.json', '{ "type": "module" }')
  put('package-lock.json', '{}')
  put('pages/index.vue', '<template><p /></template>')
  put('tests/one.test.ts', '')
  put('bin/package.json', '{ "type": "commonjs" }')
  put('chromium', '')
  put('calls', '')
  tool('npm', 'mkdirSync(\'node_modules\', { recursive: true })')
  tool('npx', 'if (args[1] === \'build\') mkdirSync(\'.output\', { recursive: true })')
})
afterAll(() => rmSync(home, { recursive: true, force: true }))

interface Ended { readonly code: number | null, readonly lines: string[], readonly errors: string, readonly calls: string[] }

function run(args: readonly string[], env: Record<string, string> = {}): Ended {
  put('calls', '')
  const { status, stdout, stderr } = spawnSync(process.execPath, args, {
    cwd: project, encoding: 'utf8', stdio: ['ignore', 'pipe', 'pipe'],
    env: { PATH: at('bin'), CI: 'true', CHROMIUM_PATH: at('chromium'), ...env },
  })
  return { code: status, lines: stdout.trimEnd().split('\n'), errors: stderr, calls: readFileSync(at('calls'), 'utf8').split('\n').filter(Boolean) }
}
const prepare = (call: string, env = {}) => run(['--input-type=module', '-e', `import { ${call} } from '${at('scripts/prepare.mjs')}'; ${call}()`], env)

describe('what is installed', () => {
  it('follows the lock file, with what builds', () => {
    expect(prepare('ensureDependencies', { NODE_ENV: 'production' }).calls).toEqual(['npm ci --include=dev --no-audit --no-fund'])
    expect(prepare('ensureDependencies').calls).toEqual([])
    put('package-lock.json', '{ "lockfileVersion": 3 }')
    expect(prepare('ensureDependencies').calls).toHaveLength(1)
  })

  it('is installed again where that failed', () => {
    tool('npm', 'process.exit(1)')
    expect(prepare('ensureDependencies').code).toBe(1)
    expect(prepare('ensureDependencies').calls).toHaveLength(1)
  })
})

describe('the build', () => {
  const build = () => prepare('ensureBuild').calls

  it('is made anew when something it reads has changed', () => {
    expect(build()).toEqual(['npx nuxt build'])
    expect(build()).toEqual([])
    const changes = [['pages/index.vue', '<template><b /></template>'], ['pages/other.vue', ''], ['package.json', '{ "type": "module", "private": true }'], ['package-lock.json', '{ "lockfileVersion": 3 }'], ['nuxt.config.ts', '']] as const
    for (const [path, text] of changes) {
      put(path, text)
      expect(build(), path).toHaveLength(1)
    }
    rmSync(at('pages/other.vue'))
    expect(build(), 'a file less').toHaveLength(1)
  })

  it('stays when something else has', () => {
    build()
    for (const path of ['tests/one.test.ts', 'README.md', 'docs/notes.md', 'start.log', '.data/session-secret', '.git/index', 'test-results/last.json', 'vitest.config.ts']) {
      put(path, 'changed')
      expect(build(), path).toEqual([])
    }
  })
})

describe('the count of npm test', () => {
  /** Runners that report these counts; `exit` is the code of each. */
  function runners({ passed = 1, failed = 0, exit = 0, reports = true } = {}) {
    tool('npx', `
      if (args[1] === 'build') mkdirSync('.output', { recursive: true })
      const file = (args.find(arg => arg.startsWith('--outputFile')) ?? '').split('=')[1]
      if (${reports} && file) writeFileSync(file, JSON.stringify({ numPassedTests: ${passed}, numFailedTests: ${failed}, numPendingTests: 2, numTodoTests: 0 }))
      if (${reports} && args[0] === 'playwright') writeFileSync(process.env.PLAYWRIGHT_JSON_OUTPUT_NAME, JSON.stringify({ stats: { expected: ${passed}, flaky: 0, unexpected: ${failed}, skipped: 0 } }))
      process.exit(args[0] === 'vitest' || args[0] === 'playwright' ? ${exit} : 0)`)
  }
  const test = (env = {}) => run(['scripts/test.mjs'], env)

  it('is the sum over all runners, lint and types being one each', () => {
    runners({ passed: 10 })
    const { code, lines, calls } = test()
    expect(lines.at(-1)).toBe('tests: 52 passed, 0 failed')
    expect(code).toBe(0)
    expect(calls.map(call => call.split(' ').slice(0, 5).join(' '))).toEqual([
      'npm ci --include=dev --no-audit --no-fund', 'npx nuxt build', 'npx eslint .', 'npx nuxt typecheck',
      'npx vitest run --project unit', 'npx vitest run --project reference', 'npx vitest run --project nuxt', 'npx vitest run --project api', 'npx playwright test --reporter=list,json',
    ])
  })

  it('tells of failures, and of runners that die or run nothing', () => {
    runners({ passed: 3, failed: 2, exit: 1 })
    expect(test()).toMatchObject({ code: 1, lines: expect.arrayContaining(['tests: 17 passed, 10 failed']) })
    runners({ passed: 3, exit: 1 })
    expect(test().lines.at(-1)).toBe('tests: 17 passed, 5 failed')
    runners({ passed: 0 })
    expect(test().lines.at(-1)).toBe('tests: 2 passed, 5 failed')
    runners({ reports: false })
    expect(test()).toMatchObject({ code: 1, lines: expect.arrayContaining(['tests: 2 passed, 5 failed']) })
  })

  it('is said as well where nothing could be run', () => {
    tool('npx', 'process.exit(1)')
    const { code, lines } = test()
    expect([code, lines.at(-1)]).toEqual([1, 'tests: 0 passed, 1 failed'])
  })
})

describe('the secret that seals sessions', () => {
  const secret = () => run(['--input-type=module', '-e', `import { sessionSecret } from '${at('scripts/secret.mjs')}'; console.log(sessionSecret('${at('.data')}'))`])

  it('is made once, for this user only', () => {
    const first = secret().lines[0]!
    expect(first).toMatch(/^[\w-]{43}$/)
    expect(statSync(at('.data/session-secret')).mode & 0o777).toBe(0o600)
    expect(secret().lines[0]).toBe(first)
  })

  it('is made again where the file was cut short', () => {
    put('.data/session-secret', '')
    expect(secret().lines[0]).toMatch(/^[\w-]{43}$/)
    expect(existsSync(at('.data/session-secret.new'))).toBe(false)
  })

  it('says in one line that its folder can’t be written', () => {
    put('.data', 'a file')
    const { code, errors } = secret()
    expect([code, errors]).toEqual([1, `The folder ${at('.data')} can't be written (EEXIST). Give this user the right to write there.\n`])
  })
})
