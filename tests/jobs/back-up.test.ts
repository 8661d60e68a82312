import {
  existsSync,
  mkdirSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  statSync,
  truncateSync,
  utimesSync,
  writeFileSync,
} from 'node:fs'
import { basename, join } from 'node:path'
import { QueryTypes } from 'sequelize'
import { beforeAll, beforeEach, describe, expect, it } from 'vitest'
import type { Clock } from '@/lib/core/clock'

const { backUp } = await import('@/jobs/back-up')
const { runPass } = await import('@/jobs/run-pass')
const { keepBackups } = await import('@/lib/commands/keep-backups')
const { makeBackup } = await import('@/lib/commands/make-backup')
const { listBackupFiles } = await import('@/lib/server/backup-files')
const { loadUpkeep } = await import('@/lib/queries/upkeep')
const { openDatabase } = await import('@/db/connection')
const { Backup, BathStir, database, FoundryEvent, inTransaction, JobRun } = await import('@/models')
const { buildFoundry, buildMember, buildTree, NOW } = await import('@/tests/factories/shell-room')
const { newId } = await import('@/lib/core/ids')

const MINUTE = 60_000
const HOUR = 60 * MINUTE
const DAY = 24 * HOUR
const dataDir = process.env['DATA_DIR']!
const folder = join(dataDir, 'backups')

let now = NOW
const clock: Clock = { now: () => now }
const pass = () => backUp.run({ clock, isStopping: () => false })
const names = () => (existsSync(folder) ? readdirSync(folder).filter((name) => name !== 'kilnward-secrets.json') : [])
const rows = () => Backup.findAll({ order: ['startedAt'] })

let owner: Awaited<ReturnType<typeof buildMember>>
let foundry: Awaited<ReturnType<typeof buildFoundry>>
beforeAll(async () => {
  foundry = await buildFoundry()
  owner = await buildMember('owner')
  await buildTree(foundry)
})
beforeEach(async () => {
  now = NOW
  rmSync(folder, { recursive: true, force: true })
  await Backup.destroy({ where: {} })
  await JobRun.destroy({ where: {} })
})

describe('the job', () => {
  it('makes what is due, whole and for its owner only, and proves it', async () => {
    expect(await pass()).toEqual({ made: 'monthly', removed: 0, proved: 'kilnward-2026-10-13T09-00-00Z-monthly.sqlite' })
    expect(names()).toEqual(['kilnward-2026-10-13T09-00-00Z-monthly.sqlite', 'kilnward-2026-10-13T09-00-00Z-monthly.sqlite.json'])
    expect(names().map((name) => statSync(join(folder, name)).mode & 0o777)).toEqual([0o600, 0o600])
    const [row] = await rows()
    expect(row).toMatchObject({ kind: 'monthly', outcome: 'done', provenAt: NOW, error: null })
    const [manifest] = await listBackupFiles(folder)
    expect(manifest).toMatchObject({ timeZone: 'Europe/London', sha256: row!.sha256, counts: { trees: 1, foundry: 1 } })
  })

  it('makes nothing twice, and goes on by the hour and the day', async () => {
    const made = []
    for (const later of [0, 10 * MINUTE, HOUR, HOUR + 50 * MINUTE, 2 * HOUR, DAY, DAY + 10 * MINUTE]) {
      now = NOW + later
      made.push((await pass())['made'])
    }
    expect(made).toEqual(['monthly', null, 'hourly', null, 'hourly', 'daily', null])
    // Once a day, the newest.
    expect((await rows()).map(({ provenAt }) => provenAt)).toEqual([NOW, null, null, NOW + DAY])
  })

  it('takes away what the plan no longer keeps, file and sum', async () => {
    for (let hour = 0; hour <= 26; hour += 1) {
      now = NOW + hour * HOUR
      await pass()
    }
    const files = names().filter((name) => name.endsWith('.sqlite'))
    expect(files.filter((name) => name.includes('hourly'))).toHaveLength(24)
    expect(files).toHaveLength(26)
    expect(names()).toHaveLength(52)
    expect(await Backup.count({ where: { removedAt: now } })).toBe(1)
  }, 60_000)

  it('keeps the secrets beside the copies, for their owner only', async () => {
    writeFileSync(join(dataDir, 'secrets.json'), '{"a":1}')
    await pass()
    now += HOUR
    await pass()
    expect(readFileSync(join(folder, 'kilnward-secrets.json'), 'utf8')).toBe('{"a":1}')
    expect(statSync(join(folder, 'kilnward-secrets.json')).mode & 0o777).toBe(0o600)
    rmSync(join(dataDir, 'secrets.json'))
  })

  it('leaves other people’s files in the folder as they are', async () => {
    writeFileSync(join(dataDir, 'secrets.json'), '{"a":1}')
    mkdirSync(join(folder, 'proof-of-purchase'), { recursive: true })
    mkdirSync(join(folder, 'kilnward-proof-reading'))
    const others = ['letter.tmp', 'kilnward-notes.tmp', 'kilnward-plan.sqlite', 'secrets.json', 'proof-of-purchase/a.pdf']
    for (const name of others) writeFileSync(join(folder, name), 'theirs')
    for (const name of readdirSync(folder)) utimesSync(join(folder, name), NOW / 1000, NOW / 1000)
    now = NOW + DAY
    await pass()
    for (const name of others) expect(readFileSync(join(folder, name), 'utf8')).toBe('theirs')
    expect(existsSync(join(folder, 'kilnward-proof-reading'))).toBe(true)
    rmSync(join(dataDir, 'secrets.json'))
  })
})

describe('a copy that fails', () => {
  it('leaves no half file, is shown, and is tried again in the next hour while the worker lives on', async () => {
    writeFileSync(folder, 'a file where the folder should be')
    const context = { clock, isStopping: () => false }
    expect(await runPass(backUp, context)).toBe('failed')
    rmSync(folder)
    mkdirSync(folder)
    const full = async (_from: string, to: string): Promise<void> => {
      // As SQLite does on a full disk.
      writeFileSync(to, '')
      throw Object.assign(new Error('SQLITE_FULL: database or disk is full'), { code: 'SQLITE_FULL' })
    }
    await expect(makeBackup('hourly', { member: null, clock, snapshot: full })).rejects.toMatchObject({
      code: 'unavailable',
      message: `No backup was made. The disk of ${folder} is full. Free some space.`,
    })
    expect(names()).toEqual([])
    const [row] = await rows()
    expect(row).toMatchObject({ outcome: 'failed', sha256: null })
    expect((await loadUpkeep({ clock })).backups.failed?.error).toMatch(/is full/)
    now = NOW + 20 * MINUTE
    expect((await pass())['made']).toBeNull()
    now = NOW + HOUR
    expect((await pass())['made']).toBe('monthly')
    expect((await loadUpkeep({ clock })).backups.failed).toBeNull()
  })

  it('is swept up when the program was ended in the middle', async () => {
    await pass()
    const copy = 'kilnward-2026-10-13T08-00-00Z-hourly.sqlite'
    const leftovers = [`${copy}.${newId(NOW)}.tmp`, `${copy}.${newId(NOW)}.tmp-journal`, `${copy}.json.tmp`, 'kilnward-secrets.json.tmp']
    for (const name of leftovers) writeFileSync(join(folder, name), 'half')
    const proof = mkdtempSync(join(folder, 'kilnward-proof-'))
    writeFileSync(join(proof, 'kilnward.sqlite'), 'half')
    for (const name of [...leftovers, basename(proof)]) utimesSync(join(folder, name), NOW / 1000, NOW / 1000)
    await Backup.create({ id: newId(NOW), fileName: 'kilnward-2026-10-13T08-00-00Z-hourly.sqlite', kind: 'hourly', startedAt: NOW - HOUR })
    now = NOW + 2 * HOUR
    await keepBackups({ clock })
    expect(names()).toHaveLength(2)
    expect((await rows())[0]).toMatchObject({ outcome: 'failed', error: 'Kilnward was ended before this copy was finished.' })
  })

  it('counts as none once its proof has failed, and its place is taken', async () => {
    await makeBackup('monthly', { member: null, clock })
    truncateSync(join(folder, names()[0]!), 8192)
    await expect(pass()).rejects.toThrow(/its sum is another/)
    expect((await rows())[0]).toMatchObject({ outcome: 'failed', provenAt: null })
    now = NOW + HOUR
    expect(await pass()).toMatchObject({ made: 'monthly', proved: expect.stringContaining('T10-00-00Z') as unknown })
  })
})

describe('the list', () => {
  it('follows the folder: copies it does not know come in, those that are gone are marked, and come back', async () => {
    await makeBackup('before an upgrade', { member: null, clock })
    await Backup.destroy({ where: {} })
    await keepBackups({ clock })
    expect(await rows()).toMatchObject([{ kind: 'before an upgrade', outcome: 'done', startedAt: NOW, removedAt: null }])
    const kept = names().map((name) => [name, readFileSync(join(folder, name))] as const)
    rmSync(folder, { recursive: true })
    await keepBackups({ clock })
    expect((await rows())[0]?.removedAt).toBe(NOW)
    mkdirSync(folder)
    for (const [name, content] of kept) writeFileSync(join(folder, name), content)
    await keepBackups({ clock })
    expect((await rows())[0]?.removedAt).toBeNull()
  })

  it('of a backup by hand has a line in the history, and a second press within ten seconds makes no second', async () => {
    await makeBackup('by hand', { member: owner, clock })
    now = NOW + 5000
    await expect(makeBackup('by hand', { member: owner, clock })).rejects.toMatchObject({ code: 'conflict' })
    expect(await FoundryEvent.findAll({ where: { kind: 'backup made' } })).toMatchObject([{ memberId: owner.id, subjectType: 'backup' }])
  })
})

it('copies under load: no write fails, and the copy is one moment of the records', async () => {
  const READINGS = 60_000
  await database.query(
    `WITH RECURSIVE n(i) AS (SELECT 1 UNION ALL SELECT i + 1 FROM n WHERE i < :count)
     INSERT INTO readings (sensor_id, measured_at, air_temp_c, rel_humidity_pct, room_factor, source, received_at)
     SELECT :sensorId, :now - i * 300000, 21, 50, 1, 'sensor', :now FROM n`,
    { type: QueryTypes.INSERT, replacements: { count: READINGS, sensorId: foundry.sensorId, now: NOW } },
  )
  const load = { isOver: false, writes: 0 }
  const errors: unknown[] = []
  // Two rows of one transaction: a copy that holds one of them is torn.
  const lane = async () => {
    while (!load.isOver) {
      try {
        await inTransaction(async () => {
          for (const bathId of [foundry.faceBathId, foundry.backupBathId]) {
            await BathStir.create({ id: newId(), bathId, stirredAt: NOW, memberId: owner.id })
          }
        })
        load.writes += 1
      } catch (error) {
        errors.push(error)
      }
    }
  }
  const lanes = Array.from({ length: 8 }, lane)
  while (load.writes < 20) await new Promise((resolve) => setTimeout(resolve, 5))
  const before = load.writes
  const copies = []
  for (const kind of ['hourly', 'daily', 'by hand'] as const) copies.push(await makeBackup(kind, { member: null, clock }))
  const during = load.writes - before
  load.isOver = true
  await Promise.all(lanes)
  expect(errors).toEqual([])
  expect(during).toBeGreaterThan(0)
  for (const { fileName, counts } of copies) {
    expect(counts['readings']).toBe(READINGS)
    const copy = openDatabase(join(folder, fileName))
    const stirs = await copy.query('SELECT bath_id, count(*) AS n FROM bath_stirs GROUP BY bath_id', { type: QueryTypes.SELECT })
    await copy.close()
    expect(stirs).toHaveLength(2)
    expect(new Set(stirs.map((row) => (row as { n: number }).n)).size).toBe(1)
    expect((stirs[0] as { n: number }).n).toBeGreaterThanOrEqual(before)
  }
}, 120_000)
