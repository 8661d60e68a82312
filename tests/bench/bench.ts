// `npm run bench`: how fast the floor is, always as a ratio to what the framework itself does in the same run on the same machine.
// Prints one table; everything it makes is taken away again. Minutes: it builds twice and makes ten years of readings.
import { execFileSync, spawnSync } from 'node:child_process'
import { mkdirSync, mkdtempSync, rmSync } from 'node:fs'
import { loadavg, tmpdir } from 'node:os'
import { join } from 'node:path'
import { openPlainHandle } from '@/db/plain-handle'
import { launchBrowser } from '@/tests/setup/browser'
import { signIn } from '@/tests/setup/client'
import { makeBuilds } from '@/tests/bench/builds'
import { ask, median, rate, type Answer } from '@/tests/bench/load'
import { pageCost, type PageCost } from '@/tests/bench/pages'
import { makeRecords, type Bench } from '@/tests/bench/records'
import { freePort, startProgram, testEnv } from '@/tests/setup/server'

const ROUNDS = 3
const REBUILDS = 15
const PASSES = 9
const GZIP = { 'accept-encoding': 'gzip' }

type Row = { what: string; value: string; ratio: number; aim: string; isMet: boolean; load: number }
const rows: Row[] = []

async function serve(folder: string, dataDir: string) {
  const port = await freePort()
  const baseUrl = `http://127.0.0.1:${port}`
  const env = testEnv(dataDir, { NEXTAUTH_URL: baseUrl })
  const program = startProgram(['node_modules/next/dist/bin/next', 'start', '-H', '127.0.0.1', '-p', String(port)], env, folder)
  for (;;) {
    if (program.process.exitCode !== null) throw new Error(`The server ended:\n${program.output()}`)
    const isUp = await fetch(baseUrl, { redirect: 'manual' }).then(
      () => true,
      () => false,
    )
    if (isUp) return { ...program, baseUrl }
    await new Promise((resolve) => setTimeout(resolve, 100))
  }
}

type SignIn = { email: string; password: string }
type Door = {
  bench: Bench
  queue: string
  empty: string
  headers: Record<string, string>
  touch: () => Promise<void>
  stop: () => Promise<void>
}

/** One foundry behind its own server, warm, with somebody signed in. */
async function openDoor(bench: Bench, product: string, signInAs: SignIn): Promise<Door> {
  const server = await serve(product, bench.dataDir)
  const handle = await openPlainHandle(join(bench.dataDir, 'kilnward.sqlite'))
  const { cookies } = await signIn(server.baseUrl, signInAs.email, signInAs.password)
  const headers = { ...GZIP, origin: server.baseUrl, cookie: [...cookies].map(([name, value]) => `${name}=${value}`).join('; ') }
  const [queue, empty] = [`${server.baseUrl}/api/v1/queue`, `${server.baseUrl}/api/empty`]
  for (const url of [empty, queue]) await rate({ url, headers, milliseconds: 2000, status: 200 })
  return {
    bench,
    queue,
    empty,
    headers,
    // Another process writes, as the worker does. A value that stays the same would not be written at all.
    touch: () => handle.exec('UPDATE foundry SET created_at = created_at + 1'),
    stop: async () => {
      await handle.close()
      await server.stop()
    },
  }
}

/** The queue door against the empty route beside it. */
async function measureDoor({ bench: { trees, history }, queue, empty, headers }: Door): Promise<void> {
  const rates = { empty: [] as number[], whole: [] as number[], unchanged: [] as number[] }
  for (let round = 0; round < ROUNDS; round += 1) {
    rates.empty.push(await rate({ url: empty, headers, status: 200 }))
    rates.whole.push(await rate({ url: queue, headers, status: 200 }))
    rates.unchanged.push(await unchangedRate(queue, headers))
  }
  const floor = median(rates.empty)
  for (const [way, words] of [
    ['whole', 'whole answer'],
    ['unchanged', 'If-None-Match'],
  ] as const) {
    const ratio = median(rates[way]) / floor
    add(
      `${trees} trees, ${history}: queue, ${words}`,
      `${median(rates[way]).toFixed(0)}/s of ${floor.toFixed(0)}/s`,
      ratio,
      '>= 0.5',
      ratio >= 0.5,
    )
  }
}

type Turns = { what: string; short: Door; long: Door; most: number; once: (door: Door) => Promise<Answer> }

/** How long one thing takes behind a change of the records, in turns at a foundry with much history and at one with little. */
async function measureTurns({ what, short, long, most, once }: Turns): Promise<void> {
  const times = { short: [] as number[], long: [] as number[] }
  for (let round = 0; round < REBUILDS; round += 1) {
    for (const [name, door] of [
      ['short', short],
      ['long', long],
    ] as const) {
      await door.touch()
      const { status, milliseconds } = await once(door)
      if (status !== 200) throw new Error(`${what}: answered ${status}.`)
      times[name].push(milliseconds)
    }
  }
  addTimes(what, median(times.long), median(times.short), most)
}

function addTimes(what: string, long: number, short: number, most: number): void {
  const ratio = long / short
  add(what, `${long.toFixed(0)} ms to ${short.toFixed(0)} ms`, ratio, `<= ${most}`, ratio <= most)
}

const remakeQueue = (door: Door) => ask(door.queue, door.headers)

/** Runs another program of the bench on records of its own, and gives what it printed. */
function runBeside(script: string, dataDir: string, args: string[]): string {
  const command = ['--import', 'tsx', join('tests/bench', script), ...args]
  const { status, stdout, stderr } = spawnSync(process.execPath, command, { env: testEnv(dataDir), encoding: 'utf8' })
  if (status !== 0) throw new Error(`${script} failed:\n${stdout}\n${stderr}`)
  return stdout
}

/**
 * A year of three sensors and ten thousand finished coats behind sixty that dry, against the same sixty with two weeks behind them: the
 * queue, the Room page and its what-if behind a change, and the worker's pass.
 */
async function measureYear(parent: string, product: string): Promise<void> {
  const folder = join(parent, 'year')
  mkdirSync(folder)
  runBeside('history-records.ts', join(folder, 'live'), [folder])
  const signInAs = { email: 'owner@kilnward.example', password: 'owner knows the way in' }
  const dirs = { short: join(folder, 'two weeks'), long: join(folder, 'a year') }

  const passes = { short: [] as number[], long: [] as number[] }
  for (let round = 0; round < ROUNDS; round += 1) {
    for (const name of ['short', 'long'] as const) {
      passes[name].push(Number(/median ([\d.]+)/.exec(runBeside('worker-passes.ts', dirs[name], [String(PASSES)]))?.[1]))
    }
  }
  const short = await openDoor({ trees: 60, history: 'two weeks', dataDir: dirs.short }, product, signInAs)
  const long = await openDoor({ trees: 60, history: 'a year', dataDir: dirs.long }, product, signInAs)
  try {
    const turns = { short, long, most: 1.3 }
    const page = (door: Door, path: string) => ask(door.queue.replace('/api/v1/queue', path), door.headers)
    const whatIf = JSON.stringify({ until: 'opening', relHumidityPct: 45 })
    const askWhatIf = (door: Door) => ask(door.queue.replace('/queue', '/rooms/1/what-if'), door.headers, { body: whatIf })
    await measureTurns({ ...turns, what: '60 drying, a year behind them: queue', once: remakeQueue })
    await measureTurns({ ...turns, what: '60 drying, a year behind them: Room page', once: (door) => page(door, '/room') })
    await measureTurns({ ...turns, what: '60 drying, a year behind them: what-if', once: askWhatIf })
  } finally {
    await Promise.all([short.stop(), long.stop()])
  }
  addTimes("60 drying, a year behind them: worker's pass", median(passes.long), median(passes.short), 1.3)
}

/** As tablets poll: each with the ETag of its last answer; a new minute brings one whole answer. */
async function unchangedRate(url: string, headers: Record<string, string>): Promise<number> {
  for (;;) {
    const { etag } = await ask(url, headers)
    try {
      return await rate({ url, headers: { ...headers, 'if-none-match': etag }, status: 304 })
    } catch {
      // The minute changed in the middle.
    }
  }
}

function add(what: string, value: string, ratio: number, aim: string, isMet: boolean): void {
  rows.push({ what, value, ratio, aim, isMet, load: loadavg()[0]! })
}

async function measurePages(
  { dataDir }: Bench,
  product: string,
  bare: string,
  signInAs: { email: string; password: string },
): Promise<void> {
  const [server, other, browser] = [await serve(product, dataDir), await serve(bare, dataDir), await launchBrowser()]
  try {
    const { cookies } = await signIn(server.baseUrl, signInAs.email, signInAs.password)
    const costs = { floor: [] as PageCost[], bare: [] as PageCost[] }
    // The first of each is not counted.
    for (let round = 0; round <= ROUNDS; round += 1) {
      const bareCost = await pageCost(browser, `${other.baseUrl}/`, new Map())
      const floorCost = await pageCost(browser, `${server.baseUrl}/floor`, cookies)
      if (round === 0) continue
      costs.bare.push(bareCost)
      costs.floor.push(floorCost)
    }
    const of = (which: keyof typeof costs, key: keyof PageCost) => median(costs[which].map((cost) => cost[key]))
    const bytes = of('floor', 'scriptBytes') / of('bare', 'scriptBytes')
    const kilobytes = (which: keyof typeof costs) => `${(of(which, 'scriptBytes') / 1000).toFixed(0)} kB`
    add('Floor: JavaScript sent', `${kilobytes('floor')} to ${kilobytes('bare')}`, bytes, '<= 1.6', bytes <= 1.6)
    const paint = of('floor', 'firstPaintMs') / of('bare', 'firstPaintMs')
    const milliseconds = (which: keyof typeof costs) => `${of(which, 'firstPaintMs').toFixed(0)} ms`
    add('Floor: first paint', `${milliseconds('floor')} to ${milliseconds('bare')}`, paint, '<= 1.6', paint <= 1.6)
  } finally {
    await Promise.all([browser.close(), server.stop(), other.stop()])
  }
}

/** A million readings out of a file, while dips are logged. In a process of its own, since it has records of its own. */
function measureUploads(): void {
  const args = ['--import', 'tsx', 'tests/bench/uploads.ts', '1000000']
  const env = { ...process.env, UV_THREADPOOL_SIZE: '16' }
  const text = execFileSync(process.execPath, args, { env, encoding: 'utf8', stdio: ['ignore', 'pipe', 'inherit'] })
  rows.push(...(JSON.parse(text.trim().split('\n').at(-1) ?? '[]') as Row[]))
}

function print(): void {
  const head = { what: 'What', value: 'Measured', ratio: 'Ratio', aim: 'Aim', met: 'Met', load: 'Load' }
  const lines = [
    head,
    ...rows.map(({ what, value, ratio, aim, isMet, load }) => ({
      what,
      value,
      ratio: ratio.toFixed(2),
      aim,
      met: isMet ? 'yes' : 'no',
      load: load.toFixed(1),
    })),
  ]
  const columns = ['what', 'value', 'ratio', 'aim', 'met', 'load'] as const
  const widths = columns.map((column) => Math.max(...lines.map((line) => line[column].length)))
  for (const line of lines) {
    process.stdout.write(
      `${columns
        .map((column, index) => line[column].padEnd(widths[index]!))
        .join('  ')
        .trimEnd()}\n`,
    )
  }
}

const folder = mkdtempSync(join(tmpdir(), 'kilnward-bench-'))
Object.assign(process.env, testEnv(join(folder, 'live')))
const builds = makeBuilds()
try {
  const { cases, member } = await makeRecords(folder)
  for (const trees of [30, 300]) {
    const doors: Door[] = []
    for (const bench of cases.filter((each) => each.trees === trees)) doors.push(await openDoor(bench, builds.product, member))
    try {
      for (const door of doors) await measureDoor(door)
      await measureTurns({
        what: `${trees} trees: queue made anew, ten years to two weeks`,
        short: doors[0]!,
        long: doors[1]!,
        most: 1.2,
        once: remakeQueue,
      })
    } finally {
      for (const door of doors) await door.stop()
    }
  }
  await measureYear(folder, builds.product)
  await measurePages(cases[0]!, builds.product, builds.bare, member)
  measureUploads()
  print()
} finally {
  builds.remove()
  rmSync(folder, { recursive: true, force: true })
}
