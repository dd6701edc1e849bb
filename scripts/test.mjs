// `npm test`: everything from a fresh clone. Only Node's own modules, since nothing may be installed yet.
import { mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { ensureBuild, ensureChromium, ensureDependencies } from './prepare.mjs'
import { run } from './run.mjs'

const reports = mkdtempSync(join(tmpdir(), 'copperwound-tests-'))
const rows = []

/** A check that passes or fails as a whole. */
function check(name, command, args) {
  const began = Date.now()
  const ok = run(command, args) === 0
  rows.push({ name, passed: ok ? 1 : 0, failed: ok ? 0 : 1, skipped: 0, seconds: seconds(began) })
}

/** A runner that writes a JSON report; a runner that dies without one, or that ran nothing, counts as a failure. */
function suite(name, command, args, env, file, read) {
  const began = Date.now()
  const status = run(command, args, env)
  let counts = { passed: 0, failed: 0, skipped: 0 }
  try {
    counts = read(JSON.parse(readFileSync(file, 'utf8')))
  }
  catch (error) {
    console.error(`${name}: no report (${error.message})`)
  }
  if ((status !== 0 && counts.failed === 0) || counts.passed + counts.failed === 0) counts.failed += 1
  rows.push({ name, ...counts, seconds: seconds(began) })
}

const seconds = began => ((Date.now() - began) / 1000).toFixed(1)

function vitest(project) {
  const file = join(reports, `${project}.json`)
  suite(project, 'npx', ['vitest', 'run', '--project', project, '--reporter=default', '--reporter=json', `--outputFile.json=${file}`], {}, file, report => ({
    passed: report.numPassedTests,
    failed: report.numFailedTests,
    skipped: report.numPendingTests + (report.numTodoTests ?? 0),
  }))
}

function browser() {
  const file = join(reports, 'browser.json')
  suite('browser', 'npx', ['playwright', 'test', '--reporter=list,json'], { PLAYWRIGHT_JSON_OUTPUT_NAME: file }, file, ({ stats }) => ({
    passed: stats.expected + stats.flaky,
    failed: stats.unexpected,
    skipped: stats.skipped,
  }))
}

/** Said last, whatever ends the run: one that ends before its checks has failed. */
process.on('exit', (code) => {
  rmSync(reports, { recursive: true, force: true })
  console.log()
  for (const row of rows) console.log(`${row.name.padEnd(10)} ${String(row.passed).padStart(5)} passed ${String(row.failed).padStart(3)} failed ${String(row.skipped).padStart(3)} skipped  ${row.seconds} s`)
  const total = key => rows.reduce((sum, row) => sum + row[key], 0)
  const failed = total('failed') || (code ? 1 : 0)
  console.log(`tests: ${total('passed')} passed, ${failed} failed`)
  process.exitCode = failed ? 1 : 0
})

ensureDependencies()
ensureChromium()
ensureBuild()
check('lint', 'npx', ['eslint', '.'])
check('types', 'npx', ['nuxt', 'typecheck'])
for (const project of ['unit', 'reference', 'nuxt', 'api']) vitest(project)
browser()
