import { spawn, type ChildProcess } from 'node:child_process'
import { randomInt } from 'node:crypto'
import { mkdtempSync, rmSync } from 'node:fs'
import { createServer } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import webPush from 'web-push'
import { migrate } from '@/db/migrator'
import type { Role } from '@/lib/members/roles'
import type { Client } from '@/tests/setup/client'
import { newClient, signIn } from '@/tests/setup/client'

export type Program = {
  process: ChildProcess
  /** All that it has written so far. */
  output: () => string
  exited: Promise<number | null>
  /** SIGTERM to its whole group, SIGKILL after five seconds. */
  stop: () => Promise<void>
}
export type TestServer = Program & { baseUrl: string; dataDir: string }

const vapid = webPush.generateVAPIDKeys()

/** A complete, valid environment of the program on its own data folder. An empty value takes a setting away. */
export function testEnv(dataDir: string, overrides: Record<string, string> = {}): NodeJS.ProcessEnv {
  return {
    ...process.env,
    NODE_ENV: 'production',
    NEXT_TELEMETRY_DISABLED: '1',
    DATA_DIR: dataDir,
    UV_THREADPOOL_SIZE: '16',
    NEXTAUTH_SECRET: 'a secret of the tests, long enough for any of them',
    NEXTAUTH_URL: 'http://localhost:3000',
    VAPID_PUBLIC_KEY: vapid.publicKey,
    VAPID_PRIVATE_KEY: vapid.privateKey,
    VAPID_SUBJECT: 'mailto:shell-room@kilnward.example',
    DEMO_FEED: 'off',
    ...overrides,
  }
}

/** An empty, migrated data folder. */
export async function makeDataDir(): Promise<string> {
  const dataDir = mkdtempSync(join(tmpdir(), 'kilnward-server-'))
  await migrate(join(dataDir, 'kilnward.sqlite'))
  return dataDir
}

/** Starts a Node program in its own process group, which ends with this process at the latest. */
export function startProgram(args: string[], env: NodeJS.ProcessEnv, cwd = process.cwd()): Program {
  const child = spawn(process.execPath, args, { env, cwd, detached: true, stdio: ['ignore', 'pipe', 'pipe'] })
  let text = ''
  for (const stream of [child.stdout, child.stderr]) stream.on('data', (chunk: Buffer) => (text += chunk.toString()))
  const exited = new Promise<number | null>((resolve) => child.on('exit', resolve))
  const signalGroup = (signal: NodeJS.Signals) => {
    try {
      if (child.pid) process.kill(-child.pid, signal)
    } catch {
      // Already gone.
    }
  }
  const killGroup = () => signalGroup('SIGKILL')
  process.on('exit', killGroup)
  const stop = async () => {
    signalGroup('SIGTERM')
    await Promise.race([exited, sleep(5000)])
    killGroup()
    process.off('exit', killGroup)
  }
  return { process: child, output: () => text, exited, stop }
}

// Below those that the system hands out to whoever asks for any: between our look and the server's start nobody else gets it.
const FIRST_PORT = 20_000
const PORTS_OF_A_WORKER = 500
let portsTried = randomInt(PORTS_OF_A_WORKER)

/** A port of the loopback that nothing listens on. Files that run side by side draw from ranges of their own. */
export async function freePort(): Promise<number> {
  const first = FIRST_PORT + PORTS_OF_A_WORKER * Number(process.env['VITEST_POOL_ID'] ?? 0)
  for (let tries = 0; tries < PORTS_OF_A_WORKER; tries += 1) {
    portsTried += 1
    const port = first + (portsTried % PORTS_OF_A_WORKER)
    if (await isFree(port)) return port
  }
  throw new Error(`No port from ${first} on is free.`)
}

function isFree(port: number): Promise<boolean> {
  return new Promise((resolve) => {
    const probe = createServer()
    probe.on('error', () => resolve(false))
    probe.listen(port, '127.0.0.1', () => probe.close(() => resolve(true)))
  })
}

const nextStart = (port: number) => ['node_modules/next/dist/bin/next', 'start', '-H', '127.0.0.1', '-p', String(port)]

/**
 * Starts the production build and waits until it answers. Sets DATA_DIR of this process to the server's, so that models
 * imported after it look at the same records: import them inside the tests.
 *
 * @param options.dataDir an existing data folder, as for a restart; a new, migrated one otherwise (removed again by `stop`).
 * @throws {Error} with the output of the server when it ends instead.
 */
export async function startServer(options: { dataDir?: string; env?: Record<string, string> } = {}): Promise<TestServer> {
  const dataDir = options.dataDir ?? (await makeDataDir())
  process.env['DATA_DIR'] = dataDir
  const port = await freePort()
  const baseUrl = `http://127.0.0.1:${port}`
  const program = startProgram(nextStart(port), testEnv(dataDir, { NEXTAUTH_URL: baseUrl, ...options.env }))
  const deadline = Date.now() + 60_000
  while (program.process.exitCode === null && program.process.signalCode === null && Date.now() < deadline) {
    const isUp = await fetch(`${baseUrl}/api/health`).then(
      () => true,
      () => false,
    )
    if (isUp) {
      const stop = async () => {
        await program.stop()
        if (!options.dataDir) rmSync(dataDir, { recursive: true, force: true })
      }
      return { ...program, baseUrl, dataDir, stop }
    }
    await sleep(50)
  }
  await program.stop()
  throw new Error(`The server did not start:\n${program.output()}`)
}

/** Starts the production build where it should refuse, and gives its exit code and output. */
export async function startRefused(env: Record<string, string>): Promise<{ code: number | null; output: string }> {
  const dataDir = await makeDataDir()
  const program = startProgram(nextStart(await freePort()), testEnv(dataDir, env))
  const code = await Promise.race([program.exited, sleep(30_000, null)])
  await program.stop()
  rmSync(dataDir, { recursive: true, force: true })
  return { code, output: program.output() }
}

/** Starts the worker beside a server, on the same records. */
export function startWorker(dataDir: string, env: Record<string, string> = {}): Program {
  return startProgram(['--import', 'tsx', 'jobs/worker.ts'], testEnv(dataDir, env))
}

export type SeededMember = { id: string; name: string; email: string; password: string; role: Role }

const NAMES: Record<Role, string> = { crew: 'Cora Crew', operator: 'Otto Operator', supervisor: 'Sue Supervisor', owner: 'Olga Owner' }

/** One member of a role, straight into the records of DATA_DIR, with a password that is cheap to check. */
export async function seedMember(role: Role, overrides: Partial<SeededMember> = {}): Promise<SeededMember> {
  const { Member } = await import('@/models')
  const { hashPassword } = await import('@/lib/server/password')
  const { newId } = await import('@/lib/core/ids')
  const member = {
    id: newId(),
    name: NAMES[role],
    email: `${role}@kilnward.example`,
    password: `${role} knows the way in`,
    role,
    ...overrides,
  }
  const { password, ...row } = member
  await Member.create({ ...row, passwordHash: await hashPassword(password, 16), createdAt: Date.now() })
  return member
}

/** One member of each role. */
export async function seedMembers(): Promise<Record<Role, SeededMember>> {
  return {
    crew: await seedMember('crew'),
    operator: await seedMember('operator'),
    supervisor: await seedMember('supervisor'),
    owner: await seedMember('owner'),
  }
}

/** A signed-in client for each role, and one that is not signed in. */
export async function signInAll(baseUrl: string, members: Record<Role, SeededMember>): Promise<Record<Role | 'anonymous', Client>> {
  const enter = ({ email, password }: SeededMember) => signIn(baseUrl, email, password)
  return {
    anonymous: newClient(baseUrl),
    crew: await enter(members.crew),
    operator: await enter(members.operator),
    supervisor: await enter(members.supervisor),
    owner: await enter(members.owner),
  }
}
