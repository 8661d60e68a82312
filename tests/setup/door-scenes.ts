import { randomUUID } from 'node:crypto'
import { mkdirSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import type * as Factories from '@/tests/factories/shell-room'
import type { FakePushService } from '@/tests/setup/fake-push-service'
import type { Client } from '@/tests/setup/client'
import type { UploadSettings } from '@/lib/uploads/upload-settings'

export type Scene = {
  foundry: Factories.TestFoundry
  factories: typeof Factories
  service: FakePushService
  operator: Client
  owner: Client
  dataDir: string
  anonymous: Client
  sensorToken: string
  /** Asks a door by its operation id; the answer is checked against the description. */
  ask: (client: Client, operationId: string, asked?: Asked) => Promise<Response>
}
/** `text` is a body that is no JSON, but a CSV file. */
export type Asked = {
  params?: Record<string, string>
  query?: Record<string, string>
  headers?: Record<string, string>
  body?: unknown
  text?: string
}

const operation = (body: Record<string, unknown> = {}) => ({ operationId: randomUUID(), ...body })

/** A tree with its first coat on, and the body that put it there. */
async function dippedTree({ factories, foundry, operator, ask }: Scene) {
  const { id } = await factories.buildTree(foundry)
  const body = operation({
    bathId: foundry.faceBathId,
    stucco: 'fine',
    way: 'dip',
    drainSeconds: 60,
    dippedAt: Date.now() - 60_000,
    trees: [{ treeId: id, coatNumber: 1, placeId: foundry.placeId }],
  })
  const answer = (await (await ask(operator, 'logDips', { body })).json()) as { coats: { coatId: string }[] }
  return { id, body, coatIds: answer.coats.map(({ coatId }) => coatId) }
}

async function subscribe({ service, operator, ask }: Scene) {
  const listed = (await (await ask(operator, 'listPushDevices')).json()) as { publicKey: string }
  const { endpoint, keys } = service.subscribe(listed.publicKey)
  const body = { endpoint, keys, vapidPublicKey: listed.publicKey, scope: 'every tree', label: 'Phone' }
  await ask(operator, 'savePushDevice', { body })
  return body
}

const CSV_FILE = 'time,temperature,humidity\n2026-10-13T13:05:00Z,21.4,52\n2026-10-13T13:10:00Z,warm,52\n'

async function broughtFile({ ask, owner, foundry }: Scene): Promise<{ uploadId: string }> {
  const query = { sensorId: String(foundry.sensorId), fileName: 'gauge.csv' }
  const { uploadId } = (await (await ask(owner, 'bringFile', { query, text: CSV_FILE })).json()) as { uploadId: string }
  return { uploadId }
}

/**
 * How each door is brought to give every answer that its description promises. A door without a scene fails its test,
 * and so does a promised answer that no scene brings about.
 */
export const SCENES: Record<string, (scene: Scene) => Promise<void>> = {
  sendReadings: async ({ ask, anonymous, sensorToken }) => {
    const headers = { authorization: `Bearer ${sensorToken}` }
    const readings = [
      { measuredAt: new Date().toISOString(), airTempC: 21.4, relHumidityPct: 52.5 },
      { measuredAt: Date.now(), airTempC: 214, relHumidityPct: 52.5, pressurePa: 100_900 },
      { measuredAt: Date.now() + 600_000, airTempC: 21.4, relHumidityPct: 52.5 },
    ]
    await ask(anonymous, 'sendReadings', { headers, body: { readings, sentAt: Date.now() + 420_000, batteryPct: 86 } })
    await ask(anonymous, 'sendReadings', { headers, body: { readings: [] } })
    await ask(anonymous, 'sendReadings', { body: { readings } })
  },
  typeReading: async ({ ask, operator, foundry }) => {
    await ask(operator, 'typeReading', { body: operation({ sensorId: foundry.sensorId, airTempC: 20.5, relHumidityPct: 55 }) })
    await ask(operator, 'typeReading', { body: operation({ sensorId: 4040, airTempC: 20.5, relHumidityPct: 55 }) })
  },
  readQueue: async (scene) => {
    const { ask, operator } = scene
    await dippedTree(scene)
    // The minute is part of the tag, and may turn between the two.
    for (let status = 200; status !== 304;) {
      const etag = (await ask(operator, 'readQueue')).headers.get('etag') ?? ''
      ;({ status } = await ask(operator, 'readQueue', { headers: { 'if-none-match': etag } }))
    }
  },
  estimateDrying: async ({ ask, operator }) => {
    const body = { airSpeedMps: 1, altitudeM: 0, need: { referenceHours: 4 }, dippedAt: Date.now() }
    await ask(operator, 'estimateDrying', { body: { ...body, climate: { constant: { airTempC: 21, relHumidityPct: 50 } } } })
    await ask(operator, 'estimateDrying', { body: { ...body, climate: {} } })
  },
  weighRoomAir: async (scene) => {
    const { ask, operator, foundry } = scene
    await dippedTree(scene)
    const params = { sensorId: String(foundry.sensorId) }
    await ask(operator, 'weighRoomAir', { params, body: { airTempC: 30, relHumidityPct: 30, airSpeedMps: 3 } })
    await ask(operator, 'weighRoomAir', { params, body: { fansOnAt: [foundry.placeId] } })
    await ask(operator, 'weighRoomAir', { params: { sensorId: '4040' }, body: {} })
  },
  exportClimate: async ({ ask, operator, foundry }) => {
    await ask(operator, 'exportClimate', { params: { sensorId: String(foundry.sensorId) } })
    await ask(operator, 'exportClimate', { params: { sensorId: '4040' } })
  },
  exportTrees: async ({ ask, operator, factories, foundry }) => {
    await factories.buildTree(foundry)
    await ask(operator, 'exportTrees')
  },
  logDips: async (scene) => {
    const { body } = await dippedTree(scene)
    await scene.ask(scene.operator, 'logDips', { body })
    // Another operation for the same coat.
    await scene.ask(scene.operator, 'logDips', { body: { ...body, operationId: randomUUID() } })
  },
  undoDips: async (scene) => {
    const { coatIds } = await dippedTree(scene)
    await scene.ask(scene.operator, 'undoDips', { body: operation({ coatIds }) })
    await scene.ask(scene.operator, 'undoDips', { body: operation({ coatIds }) })
  },
  holdTree: async ({ ask, operator, factories, foundry }) => {
    const params = { treeId: (await factories.buildTree(foundry)).id }
    await ask(operator, 'holdTree', { params, body: operation({ reason: 'Crack at the cup' }) })
    await ask(operator, 'holdTree', { params, body: operation({ reason: 'Crack at the cup' }) })
    await ask(operator, 'holdTree', { params, body: operation({ reason: '' }) })
    await ask(operator, 'holdTree', { params: { treeId: randomUUID() }, body: operation({ reason: 'Crack at the cup' }) })
  },
  addEvidence: async (scene) => {
    const { id } = await dippedTree(scene)
    const body = operation({ coatNumber: 1, kind: 'touch', spot: 'outside', verdict: 'dry' })
    await scene.ask(scene.operator, 'addEvidence', { params: { treeId: id }, body })
    const weighing = operation({ coatNumber: 1, kind: 'weighing', moment: 'after stucco', massKg: 4.2 })
    await scene.ask(scene.operator, 'addEvidence', { params: { treeId: id }, body: weighing })
  },
  withdrawEvidence: async (scene) => {
    const { id } = await dippedTree(scene)
    const body = operation({ coatNumber: 1, kind: 'touch', spot: 'outside', verdict: 'not yet' })
    await scene.ask(scene.operator, 'addEvidence', { params: { treeId: id }, body })
    const { Evidence } = await import('@/models')
    const evidence = await Evidence.findOne({ where: { treeId: id }, rejectOnEmpty: true })
    await scene.ask(scene.operator, 'withdrawEvidence', { params: { evidenceId: evidence.id }, body: operation() })
  },
  moveTree: async ({ ask, operator, factories, foundry }) => {
    const params = { treeId: (await factories.buildTree(foundry)).id }
    const place = await factories.buildPlace({ sensorId: foundry.sensorId })
    await ask(operator, 'moveTree', { params, body: operation({ placeId: place.id }) })
    const hourBack = Date.now() - 3_600_000
    await ask(operator, 'moveTree', { params, body: operation({ placeId: place.id, movedAt: hourBack + 60_000 }) })
    await ask(operator, 'moveTree', { params, body: operation({ placeId: foundry.placeId, movedAt: hourBack - 60_000 }) })
    await ask(operator, 'moveTree', { params, body: operation({ placeId: place.id, movedAt: Date.now() + 3_600_000 }) })
  },
  switchFans: async ({ ask, operator, factories, foundry }) => {
    const place = await factories.buildPlace({ sensorId: foundry.sensorId, airSpeedFansOffMps: 0.1 })
    const params = { placeId: place.id }
    for (const state of ['on', 'on', 'timetable']) await ask(operator, 'switchFans', { params, body: operation({ state }) })
    await ask(operator, 'switchFans', { params, body: operation({ state: 'fast' }) })
    await ask(operator, 'switchFans', { params: { placeId: foundry.placeId }, body: operation({ state: 'on' }) })
    await ask(operator, 'switchFans', { params: { placeId: randomUUID() }, body: operation({ state: 'on' }) })
  },
  stirBath: async ({ ask, operator, foundry }) => {
    const body = operation()
    await ask(operator, 'stirBath', { params: { bathId: foundry.faceBathId }, body })
    await ask(operator, 'stirBath', { params: { bathId: foundry.backupBathId }, body })
  },
  watchTree: async ({ ask, operator, factories, foundry }) => {
    await ask(operator, 'watchTree', { params: { treeId: (await factories.buildTree(foundry)).id } })
    await ask(operator, 'watchTree', { params: { treeId: randomUUID() } })
  },
  unwatchTree: async ({ ask, operator, factories, foundry }) => {
    await ask(operator, 'unwatchTree', { params: { treeId: (await factories.buildTree(foundry)).id } })
  },
  listPushDevices: async (scene) => {
    await subscribe(scene)
    await scene.ask(scene.operator, 'listPushDevices')
  },
  savePushDevice: async (scene) => {
    const body = await subscribe(scene)
    await scene.ask(scene.operator, 'savePushDevice', { body })
    await scene.ask(scene.operator, 'savePushDevice', { body: { ...body, endpoint: 'https://192.168.1.1/push' } })
  },
  removePushDevice: async (scene) => {
    const { endpoint } = await subscribe(scene)
    await scene.ask(scene.operator, 'removePushDevice', { body: { endpoint } })
  },
  testPush: async (scene) => {
    const { endpoint } = await subscribe(scene)
    for (let count = 0; count < 7; count += 1) await scene.ask(scene.operator, 'testPush', { body: { endpoint } })
    await scene.ask(scene.operator, 'testPush', { body: { id: randomUUID() } })
  },
  readHealth: async ({ ask, anonymous }) => {
    await ask(anonymous, 'readHealth')
    const { database } = await import('@/models')
    await database.query('ALTER TABLE job_runs RENAME TO job_runs_away')
    await ask(anonymous, 'readHealth')
    await database.query('ALTER TABLE job_runs_away RENAME TO job_runs')
  },
  downloadNewestBackup: async ({ ask, owner, operator, dataDir }) => {
    await ask(owner, 'downloadNewestBackup')
    const { Backup } = await import('@/models')
    const now = Date.now()
    const fileName = 'kilnward-test.sqlite'
    mkdirSync(join(dataDir, 'backups'), { recursive: true })
    writeFileSync(join(dataDir, 'backups', fileName), 'SQLite format 3')
    await Backup.create({ id: randomUUID(), fileName, kind: 'by hand', startedAt: now, finishedAt: now, outcome: 'done', sizeBytes: 15 })
    await ask(owner, 'downloadNewestBackup')
    await ask(operator, 'downloadNewestBackup')
  },
  bringFile: async ({ ask, owner, operator, foundry }) => {
    const query = { sensorId: String(foundry.sensorId), fileName: 'gauge.csv' }
    await ask(owner, 'bringFile', { query, text: CSV_FILE })
    await ask(owner, 'bringFile', { query, text: '' })
    await ask(owner, 'bringFile', { query: { ...query, sensorId: '4040' }, text: CSV_FILE })
    await ask(owner, 'bringFile', { query: { ...query, sensorId: 'x' }, text: CSV_FILE })
    await ask(operator, 'bringFile', { query, text: CSV_FILE })
  },
  readUpload: async (scene) => {
    await scene.ask(scene.owner, 'readUpload', { params: await broughtFile(scene) })
    await scene.ask(scene.owner, 'readUpload', { params: { uploadId: randomUUID() } })
  },
  previewUpload: async (scene) => {
    const { ask, owner } = scene
    const params = await broughtFile(scene)
    const { settings } = (await (await ask(owner, 'previewUpload', { params })).json()) as { settings: object }
    await ask(owner, 'previewUpload', { params, query: { settings: JSON.stringify({ ...settings, delimiter: ';' }) } })
    await ask(owner, 'previewUpload', { params, query: { settings: '{' } })
    await ask(owner, 'previewUpload', { params: { uploadId: randomUUID() } })
  },
  exportUploadErrors: async (scene) => {
    const { ask, owner } = scene
    const params = await broughtFile(scene)
    await ask(owner, 'exportUploadErrors', { params })
    const { settings } = (await (await ask(owner, 'previewUpload', { params })).json()) as { settings: UploadSettings }
    const { queueUpload } = await import('@/lib/commands/queue-upload')
    const { importNext } = await import('@/jobs/import-uploads')
    const { Member } = await import('@/models')
    const clock = { now: () => Date.now() }
    await queueUpload(params.uploadId, settings, { member: await Member.findOne({ where: { role: 'owner' }, rejectOnEmpty: true }), clock })
    await importNext({ clock, isStopping: () => false, monotonic: () => performance.now(), sleep: async () => {} })
    await ask(owner, 'exportUploadErrors', { params })
  },
  describeApi: async ({ ask, anonymous }) => {
    await ask(anonymous, 'describeApi')
  },
}
