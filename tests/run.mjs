// npm test: everything CI runs, from a bare clone. The closing line counts what the runners themselves reported.
import { spawnSync } from 'node:child_process'
import { existsSync, mkdirSync, readFileSync, rmSync } from 'node:fs'
import { join } from 'node:path'
import { ensureBuilt, ensureInstalled, ROOT } from '../server/cli/setup.mjs'
import { findChromium } from './support/chromium.mjs'

ensureInstalled({ dev: true })

const totals = { passed: 0, failed: 0 }
const bin = (path) => join(ROOT, 'node_modules', path)

function node(args) {
  return spawnSync(process.execPath, args, { cwd: ROOT, stdio: 'inherit' }).status === 0
}

/** A check that says yes or no counts as one. */
function check(title, args) {
  process.stdout.write(`\n— ${title}\n`)
  const ok = node(args)
  totals[ok ? 'passed' : 'failed'] += 1
  if (!ok) process.stdout.write(`${title}: failed\n`)
}

/** A run of Vitest counts its tests, read from the report it writes. */
function vitest(title, projects) {
  process.stdout.write(`\n— ${title}\n`)
  const report = join(ROOT, '.cache', `report-${projects.join('-')}.json`)
  mkdirSync(join(ROOT, '.cache'), { recursive: true })
  rmSync(report, { force: true })
  const ok = node([
    bin('vitest/vitest.mjs'),
    'run',
    ...projects.flatMap((name) => ['--project', name]),
    '--reporter=default',
    '--reporter=json',
    `--outputFile.json=${report}`,
  ])
  const { numPassedTests = 0, numFailedTests = 0 } = existsSync(report)
    ? JSON.parse(readFileSync(report, 'utf8'))
    : {}
  totals.passed += numPassedTests
  // A run that broke without a failing test (a file that does not load) is a failure all the same.
  totals.failed += numFailedTests || (ok && numPassedTests > 0 ? 0 : 1)
}

check('types', [bin('vue-tsc/bin/vue-tsc.js'), '--build'])
// Typed rules hold four projects in memory at once.
check('lint', [
  '--max-old-space-size=8192',
  bin('eslint/bin/eslint.js'),
  '--config',
  'tests/eslint.config.js',
  '.',
])
check('unused code', [bin('knip/bin/knip.js')])
ensureBuilt()
vitest('rules, API and components', ['domain', 'api', 'components'])
if (findChromium({ install: true })) vitest('journeys in Chromium', ['journeys'])
else {
  process.stdout.write(
    '\nNo Chromium found, so the journeys did not run. Install it (Debian: apt-get install chromium) or set CHROMIUM_PATH.\n',
  )
  totals.failed += 1
}

process.stdout.write(`\n${totals.passed} passed, ${totals.failed} failed\n`)
process.exit(totals.failed > 0 ? 1 : 0)
