// `npm start`: from a fresh checkout to an open Kilnward in one command. Plain Node, because it runs before anything is installed.
import { spawn } from 'node:child_process'
import { createECDH, randomBytes, randomInt } from 'node:crypto'
import { chmodSync, closeSync, existsSync, mkdirSync, openSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs'
import { createServer } from 'node:net'
import { dirname, join, resolve } from 'node:path'
import { fileURLToPath } from 'node:url'
import { Refusal, takeLock } from './lock.mjs'
import { ensureBuilt, ensureInstalled } from './prepare.mjs'

const ROOT = dirname(dirname(fileURLToPath(import.meta.url)))
/** Under the ten seconds after which most service managers lose patience. */
const KILL_AFTER_MS = 9000
const LONGEST_WAIT_MS = 60_000
/** A child that ran this long was not in trouble: the next wait is short again. */
const STEADY_AFTER_MS = 5 * 60_000
const NEXT = 'node_modules/next/dist/bin/next'
const TSX = ['--import', 'tsx']

const isDev = process.argv.includes('--dev')
/** A new database stays empty, for a foundry of one's own. */
const isEmpty = process.argv.includes('--empty')
/** Set once the data folder is ours. */
let lock
let isStopping = false

/** Lines for a person; events of the program itself go to stderr as JSON. */
function say(line = '') {
  process.stdout.write(`${line}\n`)
}

process.chdir(ROOT)
main().catch((error) => {
  lock?.release()
  process.stderr.write(`${error instanceof Refusal ? error.message : error.stack}\n`)
  process.exit(1)
})

async function main() {
  if (Number(process.versions.node.split('.')[0]) !== 20) throw new Refusal(`Kilnward runs on Node 20; this is ${process.version}.`)
  if (existsSync('.env')) process.loadEnvFile('.env')
  const dataDir = resolve(process.env.DATA_DIR || 'data')
  const host = process.env.HOST || '127.0.0.1'
  const port = readPort(process.env.PORT || '3000')
  makeDataDir(dataDir)
  lock = await takeLock(dataDir, {
    port,
    refusal: (holder) =>
      holder.program === 'restore.mjs'
        ? `A backup is being restored to ${dataDir} by process ${holder.pid}. Start again when that has ended.`
        : `Kilnward is running already on ${dataDir}: process ${holder.pid}, port ${holder.port}. Stop it first, or set DATA_DIR and PORT.`,
  })
  await refuseTakenPort(host, port)

  ensureInstalled()
  const env = {
    ...process.env,
    ...secretsOf(dataDir),
    DATA_DIR: dataDir,
    HOST: host,
    PORT: String(port),
    NEXTAUTH_URL: process.env.NEXTAUTH_URL || `http://localhost:${port}`,
    VAPID_SUBJECT: process.env.VAPID_SUBJECT || 'mailto:shellroom@marramlane.example',
    NODE_ENV: isDev ? 'development' : 'production',
    NEXT_TELEMETRY_DISABLED: '1',
    // Read by Node before any code runs, so it cannot be set later.
    UV_THREADPOOL_SIZE: process.env.UV_THREADPOOL_SIZE || '16',
  }
  const records = await prepareRecords(env)
  const setupCode = setupCodeFor(records, env)
  if (setupCode) env.SETUP_CODE = setupCode
  else delete env.SETUP_CODE
  if (!isDev) ensureBuilt()

  const children = [
    keepRunning('web', [NEXT, isDev ? 'dev' : 'start', '-H', host, '-p', String(port)], env),
    keepRunning('worker', [...TSX, 'jobs/worker.ts'], env),
  ]
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, () => void stop(children, signal))
  await announce(env, records)
}

function readPort(text) {
  const port = Number(text)
  if (!Number.isInteger(port) || port < 1 || port > 65_535) throw new Refusal(`PORT must be a number from 1 to 65535; it is '${text}'.`)
  return port
}

function makeDataDir(dataDir) {
  try {
    mkdirSync(dataDir, { recursive: true, mode: 0o700 })
    const probe = join(dataDir, `.probe-${process.pid}`)
    closeSync(openSync(probe, 'w'))
    rmSync(probe)
  } catch (error) {
    throw new Refusal(`Kilnward cannot write to ${dataDir} (${error.code}). Set DATA_DIR to a folder of your own.`)
  }
}

async function refuseTakenPort(host, port) {
  // A child of an earlier start that was just told to end may need a moment.
  for (let attempt = 0; ; attempt += 1) {
    const code = await new Promise((done) => {
      const probe = createServer()
      probe.once('error', (error) => done(error.code))
      probe.listen(port, host, () => probe.close(() => done(null)))
    })
    if (code === null) return
    if (code !== 'EADDRINUSE') throw new Refusal(`Kilnward cannot listen on ${host}, port ${port} (${code}). Set HOST and PORT.`)
    if (attempt >= 5) throw new Refusal(`Port ${port} is in use by another program. Stop it, or set PORT to another number.`)
    await new Promise((done) => setTimeout(done, 500))
  }
}

/** Secrets that a new foundry makes for itself and keeps; what the environment names wins. */
function secretsOf(dataDir) {
  const { VAPID_PUBLIC_KEY: publicKey, VAPID_PRIVATE_KEY: privateKey, NEXTAUTH_SECRET: secret } = process.env
  if (Boolean(publicKey) !== Boolean(privateKey)) throw new Refusal('Set both VAPID_PUBLIC_KEY and VAPID_PRIVATE_KEY, or neither.')
  if (publicKey && publicKeyOf(privateKey) !== publicKey) throw new Refusal('VAPID_PUBLIC_KEY does not belong to VAPID_PRIVATE_KEY.')
  const file = join(dataDir, 'secrets.json')
  const kept = existsSync(file) ? readSecrets(file) : {}
  const made = {
    NEXTAUTH_SECRET: kept.NEXTAUTH_SECRET ?? randomBytes(48).toString('base64url'),
    ...(kept.VAPID_PRIVATE_KEY ? { VAPID_PUBLIC_KEY: kept.VAPID_PUBLIC_KEY, VAPID_PRIVATE_KEY: kept.VAPID_PRIVATE_KEY } : makeVapidKeys()),
  }
  if (JSON.stringify(made) !== JSON.stringify(kept)) {
    writeFileSync(`${file}.new`, `${JSON.stringify(made, null, 2)}\n`, { mode: 0o600 })
    renameSync(`${file}.new`, file)
  }
  chmodSync(file, 0o600)
  return {
    ...made,
    ...(secret && { NEXTAUTH_SECRET: secret }),
    ...(publicKey && { VAPID_PUBLIC_KEY: publicKey, VAPID_PRIVATE_KEY: privateKey }),
  }
}

function readSecrets(file) {
  try {
    return JSON.parse(readFileSync(file, 'utf8'))
  } catch {
    throw new Refusal(`${file} cannot be read. Put it back from a backup; without it everybody signs in again and every device asks anew.`)
  }
}

function makeVapidKeys() {
  const pair = createECDH('prime256v1')
  pair.generateKeys()
  // Leading zeros belong to the key and are left out by Node.
  const privateKey = Buffer.concat([Buffer.alloc(32), pair.getPrivateKey()]).subarray(-32)
  return { VAPID_PUBLIC_KEY: pair.getPublicKey('base64url'), VAPID_PRIVATE_KEY: privateKey.toString('base64url') }
}

function publicKeyOf(privateKey) {
  try {
    const pair = createECDH('prime256v1')
    pair.setPrivateKey(Buffer.from(privateKey, 'base64url'))
    return pair.getPublicKey('base64url')
  } catch {
    return null
  }
}

/** Migrates, and fills a new database with the demo foundry, unless it is to stay empty. */
async function prepareRecords(env) {
  const records = await runScript('jobs/prepare-records.ts', env)
  if (!records.isNew || isEmpty) return records
  say('Kilnward: making the demo foundry.')
  await runScript('jobs/seed-demo.ts', env)
  return { ...records, isNew: false, isDemo: true }
}

/** Without letters and digits that are read for each other. */
const CODE_LETTERS = 'ABCDEFGHJKMNPQRSTUVWXYZ23456789'
const CODE_LENGTH = 12

/**
 * The code that the first owner types, where others can reach this server before them; null where nobody can, or where there is an owner.
 * A demo that is removed leaves records without one.
 */
function setupCodeFor({ isNew, isDemo }, { HOST, NEXTAUTH_URL }) {
  const isOpenToOthers = !isLoopback(HOST) || !URL.canParse(NEXTAUTH_URL) || !isLoopback(new URL(NEXTAUTH_URL).hostname)
  if (!isOpenToOthers || !(isNew || isDemo)) return null
  const letters = Array.from({ length: CODE_LENGTH }, () => CODE_LETTERS[randomInt(CODE_LETTERS.length)]).join('')
  return letters.replaceAll(/(.{4})(?=.)/g, '$1-')
}

function isLoopback(host) {
  return host === 'localhost' || host === '::1' || host === '[::1]' || /^127(\.\d{1,3}){3}$/.test(host)
}

/** Runs a script to its end and gives the message that it sent. */
function runScript(script, env) {
  return new Promise((done, fail) => {
    const child = spawn(process.execPath, [...TSX, script], { env, stdio: ['ignore', 'inherit', 'inherit', 'ipc'] })
    // Should this start be killed, the next one ends it: two that lay the demo would be in each other's way.
    if (child.pid) lock.noteChild(script, child.pid)
    let message = null
    child.on('message', (sent) => (message = sent))
    child.on('error', fail)
    child.on('exit', (code) => {
      if (code === 0 && message !== null) done(message)
      else fail(new Refusal('Kilnward did not start; the reason stands above.'))
    })
  })
}

/** Starts a child and starts it again when it ends by itself, after 1, 2, 4 and up to 60 seconds. */
function keepRunning(name, args, env) {
  const keeper = { name, child: null, isStopping: false, timer: null }
  let waitMs = 1000
  const start = () => {
    const startedAt = Date.now()
    // The channel tells the worker when this process is gone.
    const stdio = ['ignore', 'inherit', 'inherit', ...(name === 'worker' ? ['ipc'] : [])]
    const child = spawn(process.execPath, args, { env, stdio })
    keeper.child = child
    lock.noteChild(name, child.pid)
    child.on('error', (error) => say(`Kilnward: the ${name} cannot be started (${error.message}).`))
    child.on('exit', (code, signal) => {
      keeper.child = null
      if (keeper.isStopping) return
      if (Date.now() - startedAt > STEADY_AFTER_MS) waitMs = 1000
      say(`Kilnward: the ${name} has ended (${signal ?? `code ${code}`}). It starts again in ${waitMs / 1000} s.`)
      keeper.timer = setTimeout(start, waitMs)
      waitMs = Math.min(waitMs * 2, LONGEST_WAIT_MS)
    })
  }
  start()
  return keeper
}

async function stop(keepers, signal) {
  if (isStopping) {
    // The second Ctrl-C is not patient.
    for (const { child } of keepers) child?.kill('SIGKILL')
    return
  }
  isStopping = true
  say('Kilnward: stopping.')
  await Promise.all(
    keepers.map(async (keeper) => {
      keeper.isStopping = true
      clearTimeout(keeper.timer)
      const { child } = keeper
      if (!child) return
      const ended = new Promise((done) => child.once('exit', done))
      child.kill(signal === 'SIGHUP' ? 'SIGTERM' : signal)
      const patience = setTimeout(() => child.kill('SIGKILL'), KILL_AFTER_MS)
      await ended
      clearTimeout(patience)
    }),
  )
  lock.release()
  process.exit(0)
}

/** Says where Kilnward is, once it answers. */
async function announce(env, { file, isNew, isDemo }) {
  const host = env.HOST === '0.0.0.0' || env.HOST === '::' ? '127.0.0.1' : env.HOST
  const address = `http://${host.includes(':') ? `[${host}]` : host}:${env.PORT}/api/health`
  while (!(await isHealthy(address))) {
    await new Promise((done) => setTimeout(done, 300))
    if (isStopping) return
  }
  // Asked for first, so that nothing comes between the lines.
  const signIns = isDemo ? (await runScript('jobs/demo-sign-ins.ts', env)).signIns : []
  say()
  if (isNew) say(`Open ${env.NEXTAUTH_URL} to set up your foundry.`)
  else say(`Kilnward is open: ${env.NEXTAUTH_URL}`)
  if (env.SETUP_CODE) say(`${isNew ? 'It asks' : 'If you remove the demo, the first page asks'} for this setup code: ${env.SETUP_CODE}`)
  if (signIns.length > 0) say('This is the demo foundry. Sign in as:')
  for (const { role, email, password } of signIns) say(`  ${role.padEnd(10)}  ${email.padEnd(28)}  ${password}`)
  say(`Records: ${file}`)
  say('Stop with Ctrl-C.')
  say()
}

async function isHealthy(address) {
  try {
    // 'degraded' is an answer too: the worker may not have looked at the floor yet.
    return (await fetch(address, { signal: AbortSignal.timeout(2000) })).ok
  } catch {
    return false
  }
}
