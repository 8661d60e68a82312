import { randomUUID } from 'node:crypto'
import { setTimeout as sleep } from 'node:timers/promises'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { newClient, signIn, type Client } from '@/tests/setup/client'
import { startFakePushService, type FakePushService } from '@/tests/setup/fake-push-service'
import { makeDataDir, seedMember, startServer, startWorker, testEnv, type Program, type TestServer } from '@/tests/setup/server'

const DIPS = 200
const LANES = 4
/** After so many answered dips both processes are killed without warning. */
const KILL_AT = [25, 60, 95, 130, 165]
/** A killed sender's lease runs for a minute, the pass after it comes within another one, and then it still has to be sent. */
const MADE_UP_WITHIN_MS = 150_000

let dataDir: string
let service: FakePushService
let server: TestServer
let worker: Program
let pushEnv: Record<string, string>

const kill = ({ process: child }: Program) => {
  if (child.pid) process.kill(-child.pid, 'SIGKILL')
}

beforeAll(async () => {
  dataDir = await makeDataDir()
  service = await startFakePushService()
  pushEnv = { PUSH_EXTRA_HOSTS: service.host, PUSH_CA_FILE: service.caFile }
  server = await startServer({ dataDir, env: pushEnv })
  worker = startWorker(dataDir, pushEnv)
})
afterAll(async () => {
  await Promise.all([server.stop(), worker.stop(), service.stop()])
})

it('kill -9 of web and worker during 200 dips: none lost, none doubled, nothing told twice', async () => {
  const { buildFoundry, buildRecipe, buildTree } = await import('@/tests/factories/shell-room')
  const { Coat, Delivery, inTransaction, Notice, Operation, PushSubscription, database } = await import('@/models')
  const { newId } = await import('@/lib/core/ids')
  const foundry = await buildFoundry()
  const member = await seedMember('operator')
  // One coat to a shell, so that each dip is worth a notice: 'last coat on'.
  const recipeVersionId = await buildRecipe(foundry, [{ kind: 'backup', stucco: 'coarse', need: 4, target: 0.05 }])
  const trees: string[] = []
  await inTransaction(async () => {
    for (let index = 0; index < DIPS; index += 1) trees.push((await buildTree(foundry, { recipeVersionId })).id)
  })
  const vapidPublicKey = String(testEnv(dataDir)['VAPID_PUBLIC_KEY'])
  const device = service.subscribe(vapidPublicKey)
  await PushSubscription.create({
    id: newId(),
    memberId: member.id,
    endpoint: device.endpoint,
    ...device.keys,
    vapidPublicKey,
    scope: 'every tree',
    createdAt: Date.now(),
  })

  let client: Client = await signIn(server.baseUrl, member.email, member.password)
  const answered = new Map<string, number>()
  let kills = 0
  const waiting = [...trees]

  /** As a tablet does: the same operation id until there is an answer. */
  async function dip(treeId: string): Promise<void> {
    const operationId = randomUUID()
    const body = {
      operationId,
      bathId: foundry.backupBathId,
      stucco: 'coarse',
      way: 'dip',
      drainSeconds: 30,
      dippedAt: Date.now() - 60_000,
      trees: [{ treeId, coatNumber: 1, placeId: foundry.placeId }],
    }
    for (;;) {
      const response = await client.send('POST', '/api/v1/dips', body).catch(() => null)
      if (response?.status === 200 || response?.status === 201) {
        answered.set(operationId, response.status)
        return
      }
      if (response && response.status < 500) throw new Error(`${response.status}: ${await response.text()}`)
      await sleep(100)
    }
  }

  async function killer(): Promise<void> {
    for (const threshold of KILL_AT) {
      while (answered.size < threshold) await sleep(20)
      kill(server)
      kill(worker)
      kills += 1
      await Promise.all([server.exited, worker.exited])
      server = await startServer({ dataDir, env: pushEnv })
      // The cookie was made with the same secret; only the port is another.
      client = newClient(server.baseUrl, client.cookies)
      worker = startWorker(dataDir, pushEnv)
    }
  }

  async function lane(): Promise<void> {
    for (let treeId = waiting.pop(); treeId; treeId = waiting.pop()) await dip(treeId)
  }
  await Promise.all([killer(), ...Array.from({ length: LANES }, lane)])

  expect(kills).toBe(KILL_AT.length)
  expect(answered.size).toBe(DIPS)
  expect(await Coat.count()).toBe(DIPS)
  expect(await Coat.count({ distinct: true, col: 'treeId' })).toBe(DIPS)
  const stored = (await Operation.findAll({ attributes: ['operationId'] })).map((row) => row.operationId)
  expect(new Set(stored)).toEqual(new Set(answered.keys()))

  // A fresh worker looks at once, and makes up what was missed.
  await worker.stop()
  worker = startWorker(dataDir, pushEnv)
  const deadline = Date.now() + MADE_UP_WITHIN_MS
  const told = () => Notice.count({ where: { kind: 'last coat on' } })
  const open = () => Delivery.count({ where: { status: ['waiting', 'sending'] } })
  while (Date.now() < deadline && ((await told()) < DIPS || (await open()) > 0)) await sleep(500)
  expect(await told()).toBe(DIPS)
  expect(await open()).toBe(0)
  const episodes = (await Notice.findAll({ where: { kind: 'last coat on' } })).map((notice) => `${notice.subjectId} ${notice.episode}`)
  expect(new Set(episodes).size).toBe(DIPS)
  // A kill between a push and its record may repeat it, once for each kill; its topic then replaces the first on the device.
  const shown = new Map(device.received.map((push) => [push.text, push]))
  expect(device.received.length - shown.size).toBeLessThanOrEqual(kills)
  const [check] = await database.query('PRAGMA integrity_check')
  expect(check).toEqual([{ integrity_check: 'ok' }])
}, 300_000)
