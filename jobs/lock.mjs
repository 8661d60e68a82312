// One program per data folder: two workers would be harmless, two versions of the program would not, and a restore wants it alone.
// Plain Node, because the start script runs before anything is installed.
import { spawnSync } from 'node:child_process'
import { readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs'
import { basename, join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'

const LOCK_FILE = 'running.json'
const END_WITHIN_MS = 10_000

/** What a person should read instead of a stack. */
export class Refusal extends Error {}

/**
 * Takes a data folder for this process. What a program that ended without a word left running is ended first: it would hold
 * the port and the records.
 *
 * @param {string} dataDir
 * @param {{ port: number, refusal: (holder: { pid: number, port: number }) => string }} options the sentence when another program has it.
 * @returns {Promise<{ noteChild: (name: string, pid: number) => void, release: () => void }>}
 * @throws {Refusal}
 */
export async function takeLock(dataDir, { port, refusal }) {
  const file = join(dataDir, LOCK_FILE)
  const lock = { pid: process.pid, port, program: basename(process.argv[1] ?? ''), children: {} }
  let isHeld = false
  for (let attempt = 0; attempt < 2 && !isHeld; attempt += 1) {
    try {
      writeFileSync(file, JSON.stringify(lock), { flag: 'wx', mode: 0o600 })
      isHeld = true
    } catch (error) {
      if (error.code !== 'EEXIST') throw error
      const holder = await readHolder(file)
      if (holder && isOurs(holder.pid, holder.program ?? 'start.mjs')) throw new Refusal(refusal(holder))
      await endOrphans(holder)
      rmSync(file, { force: true })
    }
  }
  if (!isHeld) throw new Refusal(`Another Kilnward is starting on ${dataDir}. Try again in a moment.`)
  return {
    noteChild: (name, pid) => {
      lock.children[name] = pid
      if (!isHeld) return
      // Moved into its place whole: whoever read half of it would take it for that of a program that is gone.
      writeFileSync(`${file}.new`, JSON.stringify(lock), { mode: 0o600 })
      renameSync(`${file}.new`, file)
    },
    release: () => {
      if (isHeld) rmSync(file, { force: true })
      isHeld = false
    },
  }
}

/** Who has the folder; null where the file tells nobody. It is made empty and filled a moment later, so it is read again before. */
async function readHolder(file) {
  for (let attempt = 0; attempt < 5; attempt += 1) {
    try {
      return JSON.parse(readFileSync(file, 'utf8'))
    } catch {
      await sleep(100)
    }
  }
  return null
}

async function endOrphans(holder) {
  const orphans = Object.entries(holder?.children ?? {}).filter(([name, pid]) => isOurs(pid, name === 'web' ? 'next' : 'jobs/'))
  for (const [, pid] of orphans) process.kill(pid, 'SIGTERM')
  const deadline = Date.now() + END_WITHIN_MS
  while (orphans.some(([, pid]) => isAlive(pid)) && Date.now() < deadline) await sleep(50)
}

function isAlive(pid) {
  try {
    process.kill(pid, 0)
  } catch (error) {
    return error.code === 'EPERM'
  }
  try {
    // A dead child that nobody has waited for still answers.
    return !/\) Z /.test(readFileSync(`/proc/${pid}/stat`, 'utf8'))
  } catch {
    return true
  }
}

/** Whether a process lives and is the one we mean: numbers of processes are used again. */
function isOurs(pid, part) {
  if (!Number.isInteger(pid) || pid === process.pid || !isAlive(pid)) return false
  try {
    return readFileSync(`/proc/${pid}/cmdline`, 'utf8').replaceAll('\0', ' ').includes(part)
  } catch {
    const { status, stdout } = spawnSync('ps', ['-p', String(pid), '-o', 'command='], { encoding: 'utf8' })
    return status === 0 && stdout.includes(part)
  }
}
