// `npm test`: brings everything in place, runs all tests, and ends with the line 'N passed, N failed'.
import { spawn, spawnSync } from 'node:child_process'
import { randomUUID } from 'node:crypto'
import { existsSync, mkdtempSync, readdirSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { dirname, join } from 'node:path'
import { ensureBuilt, ensureInstalled } from '../jobs/prepare.mjs'

const root = dirname(import.meta.dirname)
const RUN_ID = randomUUID()
const BROWSERS = ['/usr/bin/chromium', '/usr/bin/chromium-browser', '/usr/bin/google-chrome']

const findBrowser = () => [process.env.CHROMIUM_PATH, ...BROWSERS].find((path) => path && existsSync(path))

/** Path of a Chromium; installs one where that needs no questions. */
function ensureBrowser() {
  const found = findBrowser()
  if (found) return found
  if (process.getuid?.() === 0 && existsSync('/usr/bin/apt-get')) {
    const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' }
    spawnSync('apt-get', ['update', '-qq'], { stdio: 'inherit', env })
    spawnSync('apt-get', ['install', '-y', '-qq', '--no-install-recommends', 'chromium'], { stdio: 'inherit', env })
    const installed = findBrowser()
    if (installed) return installed
  }
  throw new Error('The browser tests need Chromium. Install it (Debian: apt-get install chromium) or set CHROMIUM_PATH to one.')
}

/** Ends what a killed test left behind: every process of this run carries its mark in the environment. */
function endLeftovers() {
  if (!existsSync('/proc/self/environ')) return
  for (const pid of readdirSync('/proc').filter((name) => /^\d+$/.test(name) && Number(name) !== process.pid)) {
    try {
      if (readFileSync(`/proc/${pid}/environ`, 'utf8').includes(`KILNWARD_TEST_RUN=${RUN_ID}`)) process.kill(Number(pid), 'SIGKILL')
    } catch {
      // Gone by now, or another user's.
    }
  }
}

function runVitest(env, report) {
  return new Promise((resolve) => {
    const args = ['run', '--reporter=default', '--reporter=json', `--outputFile.json=${report}`, ...process.argv.slice(2)]
    const vitest = spawn(process.execPath, ['node_modules/vitest/vitest.mjs', ...args], { cwd: root, stdio: 'inherit', env })
    for (const signal of ['SIGINT', 'SIGTERM']) process.on(signal, () => vitest.kill(signal))
    vitest.on('exit', (code) => resolve(code ?? 1))
  })
}

/** Counts tests, and a file that could not even be loaded as one failure. */
function count(report) {
  if (!existsSync(report)) return { passed: 0, failed: 0 }
  const { numPassedTests, numFailedTests, testResults } = JSON.parse(readFileSync(report, 'utf8'))
  const unloaded = testResults.filter((file) => file.status === 'failed' && !file.assertionResults.some((test) => test.status === 'failed'))
  return { passed: numPassedTests, failed: numFailedTests + unloaded.length }
}

async function main() {
  const folder = mkdtempSync(join(tmpdir(), 'kilnward-test-'))
  const report = join(folder, 'report.json')
  let code = 1
  try {
    ensureInstalled()
    const CHROMIUM_PATH = ensureBrowser()
    ensureBuilt()
    code = await runVitest(
      { ...process.env, CHROMIUM_PATH, NEXT_TELEMETRY_DISABLED: '1', KILNWARD_TEST_RUN: RUN_ID, TMPDIR: folder },
      report,
    )
  } catch (error) {
    process.stderr.write(`${error.message}\n`)
  }
  endLeftovers()
  const { passed, failed } = count(report)
  rmSync(folder, { recursive: true, force: true })
  // Trouble outside of any test still is a failure.
  process.stdout.write(`${passed} passed, ${code === 0 ? failed : Math.max(failed, 1)} failed\n`)
  process.exitCode = code
}

await main()
