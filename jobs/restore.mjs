// `npm run restore`: lists the backups; with a name, puts that one in the place of the records. Plain Node, because it may be the
// first thing that a new machine runs.
import { spawn } from 'node:child_process'
import { existsSync, mkdirSync } from 'node:fs'
import { dirname, resolve } from 'node:path'
import { fileURLToPath } from 'node:url'
import { Refusal, takeLock } from './lock.mjs'
import { ensureInstalled } from './prepare.mjs'

const ROOT = dirname(dirname(fileURLToPath(import.meta.url)))
const SET_ASIDE = '--set-aside'
const USAGE = `npm run restore                          lists the backups
npm run restore -- NAME                  puts one in the place of the records ('newest' is a name, and so is the path of a file)
npm run restore -- NAME ${SET_ASIDE}      moves the present records into a dated folder first`

let lock

main().catch((error) => {
  lock?.release()
  process.stderr.write(`${error instanceof Refusal ? error.message : error.stack}\n`)
  process.exit(1)
})

async function main() {
  const flags = process.argv.slice(2).filter((word) => word.startsWith('-'))
  const names = process.argv.slice(2).filter((word) => !word.startsWith('-'))
  if (names.length > 1 || flags.some((flag) => flag !== SET_ASIDE)) throw new Refusal(USAGE)
  // npm runs this in the project's folder; a path is meant from where the person stands.
  const from = process.env.INIT_CWD || process.cwd()
  const args = [...names.map((name) => (name.includes('/') ? resolve(from, name) : name)), ...flags]
  process.chdir(ROOT)
  if (existsSync('.env')) process.loadEnvFile('.env')
  const dataDir = resolve(process.env.DATA_DIR || 'data')
  ensureInstalled()
  if (names.length > 0) {
    mkdirSync(dataDir, { recursive: true, mode: 0o700 })
    lock = await takeLock(dataDir, {
      port: 0,
      refusal: (holder) =>
        holder.program === 'restore.mjs'
          ? `Another restore is under way on ${dataDir}: process ${holder.pid}.`
          : `Kilnward is running on ${dataDir}: process ${holder.pid}, port ${holder.port}. Stop it first; nothing was changed.`,
    })
  }
  const code = await runToEnd(['--import', 'tsx', 'jobs/restore-records.ts', ...args], { ...process.env, DATA_DIR: dataDir })
  lock?.release()
  process.exit(code)
}

function runToEnd(args, env) {
  return new Promise((done, fail) => {
    const child = spawn(process.execPath, args, { env, stdio: ['ignore', 'inherit', 'inherit'] })
    lock?.noteChild('restore', child.pid)
    // Ctrl-C reaches both; the lock goes when the child has ended.
    for (const signal of ['SIGINT', 'SIGTERM']) process.on(signal, () => child.kill(signal))
    child.on('error', fail)
    child.on('exit', (code) => done(code ?? 2))
  })
}
