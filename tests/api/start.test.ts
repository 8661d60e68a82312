import { execFile } from 'node:child_process'
import { randomUUID } from 'node:crypto'
import { mkdirSync, mkdtempSync, readFileSync, rmSync, statSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { promisify } from 'node:util'
import sqlite3 from 'sqlite3'
import { afterEach, describe, expect, it } from 'vitest'
import { signIn } from '@/tests/setup/client'
import { freePort, makeDataDir, seedMember, startProgram, startRefused, startServer, type Program } from '@/tests/setup/server'

const running: Program[] = []
const folders: string[] = []

afterEach(async () => {
  await Promise.all(running.splice(0).map((program) => program.stop()))
  for (const folder of folders.splice(0)) rmSync(folder, { recursive: true, force: true })
})

const newFolder = () => {
  const folder = mkdtempSync(join(tmpdir(), 'kilnward-start-'))
  folders.push(folder)
  return folder
}

const OWN_SETTINGS = /^(NEXTAUTH_|VAPID_|PUSH_|DATA_DIR|HOST|PORT|UV_THREADPOOL_SIZE|NODE_ENV|NODE_OPTIONS|VITEST)/

/** `npm start` as a person would run it: nothing set but the folder and the port. */
function start(dataDir: string, port: number, settings: Record<string, string> = {}, flags: readonly string[] = []): Program {
  const bare = Object.fromEntries(Object.entries(process.env).filter(([name]) => !OWN_SETTINGS.test(name)))
  // NODE_ENV is left to the program.
  // oxlint-disable-next-line typescript/no-unsafe-type-assertion -- the framework's type insists on NODE_ENV
  const env = { ...bare, DATA_DIR: dataDir, PORT: String(port), DEMO_FEED: 'off', ...settings } as unknown as NodeJS.ProcessEnv
  const program = startProgram(['jobs/start.mjs', ...flags], env)
  running.push(program)
  return program
}

async function until(isTrue: () => boolean | Promise<boolean>, what: string, withinMs = 60_000): Promise<void> {
  const deadline = Date.now() + withinMs
  while (!(await isTrue())) {
    if (Date.now() > deadline) throw new Error(`${what} did not come:\n${running.map((program) => program.output()).join('\n---\n')}`)
    await sleep(50)
  }
}

type Lock = { pid: number; port: number; children: { web: number; worker: number; 'jobs/seed-demo.ts'?: number } }
// oxlint-disable-next-line typescript/no-unsafe-type-assertion -- written by the start script
const lockOf = (dataDir: string) => JSON.parse(readFileSync(join(dataDir, 'running.json'), 'utf8')) as Lock

function isAlive(pid: number): boolean {
  try {
    process.kill(pid, 0)
    // A dead child that nobody has waited for still answers.
    return !/\) Z /.test(readFileSync(`/proc/${pid}/stat`, 'utf8'))
  } catch {
    return false
  }
}

// The demo alone is ten seconds' work for a core, which the file beside this one may want as well.
const opens = (program: Program) => until(() => /Stop with Ctrl-C/.test(program.output()), 'The address', 90_000)
const health = (port: number) => fetch(`http://127.0.0.1:${port}/api/health`).then((response) => response.json())

describe('npm start', () => {
  it('opens after a killed start, brings a killed worker back, refuses a second start, and ends without a trace', async () => {
    const [dataDir, port] = [newFolder(), await freePort()]
    // One that is killed while it makes the demo leaves nothing in the way of the next.
    const killed = start(dataDir, port)
    const maker = () => (/making the demo/.test(killed.output()) ? lockOf(dataDir).children['jobs/seed-demo.ts'] : undefined)
    await until(() => maker() !== undefined, 'The making of the demo')
    const orphan = maker() ?? 0
    killed.process.kill('SIGKILL')
    await killed.exited

    const first = start(dataDir, port)
    await opens(first)
    expect(isAlive(orphan)).toBe(false)
    expect(first.output()).toContain(`Kilnward is open: http://localhost:${port}`)
    expect(first.output()).toContain(join(dataDir, 'kilnward.sqlite'))
    expect(first.output()).toMatch(/Sign in as:\n {2}\w+ +\S+@\S+ +\S+\n/)
    expect(statSync(join(dataDir, 'secrets.json')).mode & 0o777).toBe(0o600)
    // The worker has looked at the floor.
    await until(async () => JSON.stringify(await health(port)) === '{"status":"ok"}', 'A pulse of the worker')

    const second = start(dataDir, await freePort())
    expect(await second.exited).toBe(1)
    expect(second.output()).toContain(`is running already on ${dataDir}: process ${first.process.pid}, port ${port}`)
    const third = start(newFolder(), port)
    expect(await third.exited).toBe(1)
    expect(third.output()).toContain(`Port ${port} is in use`)

    const before = lockOf(dataDir).children
    process.kill(before.worker, 'SIGKILL')
    await until(() => /the worker has ended \(SIGKILL\)\. It starts again in 1 s/.test(first.output()), 'The report')
    await until(() => lockOf(dataDir).children.worker !== before.worker, 'Another worker')
    await until(() => first.output().split('"worker.started"').length === 3, 'Its start')

    const children = Object.values(lockOf(dataDir).children)
    const began = performance.now()
    first.process.kill('SIGTERM')
    expect(await first.exited).toBe(0)
    expect(performance.now() - began).toBeLessThan(10_000)
    expect([...children, before.worker].filter(isAlive)).toEqual([])
    expect(() => lockOf(dataDir)).toThrow(/ENOENT/)
  }, 240_000)

  it('keeps its secrets, and clears away what a killed start left running', async () => {
    const [dataDir, port] = [newFolder(), await freePort()]
    const first = start(dataDir, port, {}, ['--empty'])
    await opens(first)
    const secrets = readFileSync(join(dataDir, 'secrets.json'), 'utf8')
    const { children } = lockOf(dataDir)
    first.process.kill('SIGKILL')
    await until(() => !isAlive(children.worker), 'The end of the orphaned worker', 10_000)
    const began = performance.now()
    const second = start(dataDir, port, {}, ['--empty'])
    await opens(second)
    expect(performance.now() - began).toBeLessThan(30_000)
    expect(isAlive(children.web)).toBe(false)
    expect(readFileSync(join(dataDir, 'secrets.json'), 'utf8')).toBe(secrets)
  })

  it('opens empty for a foundry of one’s own, and says where to go', async () => {
    const [dataDir, port] = [newFolder(), await freePort()]
    const program = start(dataDir, port, {}, ['--empty'])
    await opens(program)
    expect(program.output()).toContain(`Open http://localhost:${port} to set up your foundry.`)
    expect(program.output()).not.toMatch(/Sign in as|demo foundry|setup code/i)
    const response = await fetch(`http://127.0.0.1:${port}/floor`, { redirect: 'manual' })
    expect(response.headers.get('location')).toBe('/first-run')
    // The worker has nothing to watch yet, and lives.
    await until(async () => JSON.stringify(await health(port)) === '{"status":"ok"}', 'A pulse of the worker')
  })

  it('prints a code for the first owner where others can reach it', async () => {
    const [dataDir, port] = [newFolder(), await freePort()]
    const program = start(dataDir, port, { HOST: '0.0.0.0' }, ['--empty'])
    await opens(program)
    expect(program.output()).toMatch(/It asks for this setup code: [A-Z2-9]{4}-[A-Z2-9]{4}-[A-Z2-9]{4}\n/)
    expect(await (await fetch(`http://127.0.0.1:${port}/first-run`)).text()).toContain('Setup code')
  })

  it.each([
    ['a short secret', { NEXTAUTH_SECRET: 'short' }, /NEXTAUTH_SECRET must be at least 32/],
    ['a contact that push services refuse', { VAPID_SUBJECT: 'mailto:x@localhost' }, /VAPID_SUBJECT must be mailto: or https:/],
    ['half a key pair', { VAPID_PUBLIC_KEY: 'B'.repeat(87) }, /Set both VAPID_PUBLIC_KEY and VAPID_PRIVATE_KEY/],
    ['keys of two pairs', { VAPID_PUBLIC_KEY: 'B'.repeat(87), VAPID_PRIVATE_KEY: 'a'.repeat(43) }, /does not belong to VAPID_PRIVATE_KEY/],
    ['too few threads', { UV_THREADPOOL_SIZE: '4' }, /UV_THREADPOOL_SIZE must be at least 16/],
    ['an example for a secret', { NEXTAUTH_SECRET: 'change-me-change-me-change-me-change-me' }, /NEXTAUTH_SECRET is an example/],
    ['a port that is none', { PORT: 'http' }, /PORT must be a number/],
    ['a folder that cannot be', { DATA_DIR: '/dev/null/kilnward' }, /cannot write to \/dev\/null\/kilnward/],
  ])('refuses %s in one line', async (_what, settings, line) => {
    const program = start(newFolder(), await freePort(), settings)
    expect(await program.exited).toBe(1)
    expect(program.output()).toMatch(line)
    expect(program.output()).not.toMatch(/\n\s+at /)
  })

  it('refuses records of a newer version, and a file that is none, in one line', async () => {
    const newer = await makeDataDir()
    folders.push(newer)
    await run(join(newer, 'kilnward.sqlite'), "INSERT INTO migrations (name) VALUES ('9999-kiln-on-the-moon.sql')")
    const folderForFile = newFolder()
    mkdirSync(join(folderForFile, 'kilnward.sqlite'))
    for (const [dataDir, line] of [
      [newer, /written by a newer Kilnward/],
      [folderForFile, /unable to open database file/],
    ] as const) {
      const program = start(dataDir, await freePort())
      expect(await program.exited).toBe(1)
      expect(program.output()).toMatch(line)
      expect(program.output()).not.toMatch(/\n\s+at /)
    }
  })
})

/** One statement on a file of records. */
function run(file: string, sql: string): Promise<void> {
  return new Promise((resolve, reject) => {
    const handle = new sqlite3.Database(file)
    handle.exec(sql, (error) => handle.close(() => (error ? reject(error) : resolve())))
  })
}

describe('the web server alone', () => {
  it.each([
    ['an example for a secret', { NEXTAUTH_SECRET: 'change-me-change-me-change-me-change-me' }, 'NEXTAUTH_SECRET is an example'],
    ['keys of two pairs', { VAPID_PUBLIC_KEY: 'B'.repeat(87) }, 'does not belong to VAPID_PRIVATE_KEY'],
    ['a folder that cannot be', { DATA_DIR: '/dev/null/kilnward' }, 'cannot be written'],
  ])('refuses %s in one line', async (_what, env, sentence) => {
    const { code, output } = await startRefused(env)
    expect(code).toBe(1)
    const lines = output.split('\n').filter((line) => line.includes('"start.refused"'))
    expect(lines).toHaveLength(1)
    expect(lines[0]).toContain(sentence)
  })

  it('refuses records of a newer version', async () => {
    const dataDir = await makeDataDir()
    folders.push(dataDir)
    await run(join(dataDir, 'kilnward.sqlite'), "INSERT INTO migrations (name) VALUES ('9999-kiln-on-the-moon.sql')")
    const { code, output } = await startRefused({ DATA_DIR: dataDir })
    expect(code).toBe(1)
    expect(output).toContain('written by another version of Kilnward')
  })

  it('is ready within five seconds, or what this machine makes of them', async () => {
    // How long the framework alone takes to load here: about a sixth of a second on a machine that does nothing else.
    const floorMs = await milliseconds(() => promisify(execFile)(process.execPath, ['node_modules/next/dist/bin/next', '--version']))
    const readyMs = await milliseconds(async () => {
      const server = await startServer()
      running.push(server)
    })
    expect(readyMs, `ready after ${Math.round(readyMs)} ms, floor ${Math.round(floorMs)} ms`).toBeLessThan(Math.max(5000, 15 * floorMs))
  })

  it('ends within five seconds of SIGTERM while eight tablets write, and loses nothing that it acknowledged', async () => {
    const server = await startServer()
    running.push(server)
    const { buildFoundry } = await import('@/tests/factories/shell-room')
    const { Operation, Reading } = await import('@/models')
    const foundry = await buildFoundry()
    const member = await seedMember('operator')
    const client = await signIn(server.baseUrl, member.email, member.password)
    const acknowledged: string[] = []
    const load = { isOver: false }
    const lane = async () => {
      while (!load.isOver) {
        const operationId = randomUUID()
        const body = { operationId, sensorId: foundry.sensorId, airTempC: 21, relHumidityPct: 50 }
        const answer = await client.send('POST', '/api/v1/readings/typed', body).catch(() => null)
        if (answer?.status === 201 && (await answer.text().catch(() => null))) acknowledged.push(operationId)
        if (answer === null) return
      }
    }
    const lanes = Array.from({ length: 8 }, lane)
    await until(() => acknowledged.length > 40, 'Forty answers')
    const began = performance.now()
    server.process.kill('SIGTERM')
    await server.exited
    const tookMs = performance.now() - began
    load.isOver = true
    await Promise.all(lanes)
    expect(tookMs).toBeLessThan(5000)
    const kept = new Set((await Operation.findAll({ attributes: ['operationId'] })).map((row) => row.operationId))
    expect(acknowledged.filter((id) => !kept.has(id))).toEqual([])
    expect(await Reading.count()).toBeGreaterThan(0)
  })
})

async function milliseconds(work: () => Promise<unknown>): Promise<number> {
  const began = performance.now()
  await work()
  return performance.now() - began
}
