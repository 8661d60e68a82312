import { spawn, spawnSync, type ChildProcess } from 'node:child_process'
import { copyFileSync, existsSync, mkdtempSync, readdirSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { QueryTypes } from 'sequelize'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { openPlainHandle } from '@/db/plain-handle'
import { examineDatabase } from '@/db/snapshot'
import type { BackupManifest } from '@/lib/backups/manifest'
import { makeDataDir, startProgram, testEnv, type Program } from '@/tests/setup/server'

const DRILL_MS = 30_000
const READINGS = 200_000
const FILES = ['kilnward.sqlite', 'kilnward.sqlite-wal', 'kilnward.sqlite-shm']

/** Where backups of a foundry with a year and more of readings lie; each test restores them into a folder of its own. */
let home: string
let folder: string
let backup: BackupManifest
let dataDir: string
const programs: (Program | ChildProcess)[] = []

beforeAll(async () => {
  home = await makeDataDir()
  process.env['DATA_DIR'] = home
  folder = join(home, 'backups')
  const { buildFoundry, buildTree, NOW } = await import('@/tests/factories/shell-room')
  const { database, Session } = await import('@/models')
  const { seedMember } = await import('@/tests/setup/server')
  const { makeBackup } = await import('@/lib/commands/make-backup')
  const { newId } = await import('@/lib/core/ids')
  const foundry = await buildFoundry()
  await buildTree(foundry)
  const member = await seedMember('owner')
  await Session.create({ id: newId(), memberId: member.id, userAgent: '', createdAt: Date.now(), expiresAt: Date.now() + 1e7 })
  await database.query(
    `WITH RECURSIVE n(i) AS (SELECT 1 UNION ALL SELECT i + 1 FROM n WHERE i < :count)
     INSERT INTO readings (sensor_id, measured_at, air_temp_c, rel_humidity_pct, room_factor, source, received_at)
     SELECT :sensorId, :now - i * 300000, 21, 50, 1, 'sensor', :now FROM n`,
    { type: QueryTypes.INSERT, replacements: { count: READINGS, sensorId: foundry.sensorId, now: NOW } },
  )
  writeFileSync(join(home, 'secrets.json'), '{"NEXTAUTH_SECRET":"kept"}')
  const { keepBackups } = await import('@/lib/commands/keep-backups')
  backup = await makeBackup('daily', { member: null, clock: { now: () => Date.now() } })
  await keepBackups({ clock: { now: () => Date.now() } })
})
beforeEach(() => {
  dataDir = mkdtempSync(join(tmpdir(), 'kilnward-restore-'))
  return async () => {
    for (const program of programs.splice(0)) await ('stop' in program ? program.stop() : program.kill('SIGKILL'))
    rmSync(dataDir, { recursive: true, force: true })
  }
})
afterAll(() => rmSync(home, { recursive: true, force: true }))

async function restore(...args: string[]): Promise<{ code: number | null; output: string; ms: number }> {
  const began = performance.now()
  const program = startProgram(['jobs/restore.mjs', ...args], testEnv(dataDir, { BACKUP_DIR: folder }))
  programs.push(program)
  const code = await program.exited
  return { code, output: program.output(), ms: performance.now() - began }
}

/** Records of a program that was killed: a file with the newest changes only in its -wal. */
function leaveKilledRecords(): void {
  const script = `
    const sqlite3 = require('sqlite3')
    const db = new sqlite3.Database(process.argv[1])
    db.exec('PRAGMA journal_mode = WAL; CREATE TABLE later (n INTEGER); INSERT INTO later VALUES (1)', () => process.kill(process.pid, 'SIGKILL'))`
  const { status } = spawnSync(process.execPath, ['-e', script, join(dataDir, 'kilnward.sqlite')])
  expect(status).toBeNull()
  expect(statSync(join(dataDir, 'kilnward.sqlite-wal')).size).toBeGreaterThan(0)
}

const contentOf = (name: string) => readFileSync(join(dataDir, name))
const records = () => FILES.filter((name) => existsSync(join(dataDir, name)))

describe('npm run restore', () => {
  it('lists what there is, and changes nothing', async () => {
    const { code, output } = await restore()
    expect(code).toBe(0)
    expect(output).toContain(backup.fileName)
    expect(output).toContain('(Europe/London)')
    expect(readdirSync(dataDir)).toEqual([])
  })

  it('restores into an empty folder within 30 s, proves it, and says what it did', async () => {
    const { code, output, ms } = await restore('newest')
    expect(output).toContain('Restored and proved')
    expect(code).toBe(0)
    expect(ms).toBeLessThan(DRILL_MS)
    expect(output).toMatch(new RegExp(`readings +${READINGS} +${READINGS}\\n`))
    expect(output).toContain('The secrets were put back')
    expect(statSync(join(dataDir, 'secrets.json')).mode & 0o777).toBe(0o600)
    const found = await examineDatabase(join(dataDir, 'kilnward.sqlite'))
    expect(found).toMatchObject({ faults: [], brokenReferences: 0 })
    expect(found.counts).toEqual({ ...backup.counts, foundry_events: 1 })
    const handle = await openPlainHandle(join(dataDir, 'kilnward.sqlite'))
    const [event] = await handle.all('SELECT kind, subject_name AS name, detail FROM foundry_events')
    const sessions = await handle.all('SELECT ended_at FROM sessions WHERE ended_at IS NULL')
    const known = await handle.all('SELECT outcome FROM backups')
    const mode = await handle.all('PRAGMA journal_mode')
    await handle.close()
    expect(event).toMatchObject({ kind: 'backup restored', name: backup.fileName })
    expect((event as { detail: string }).detail).toContain('The records were restored from the backup of')
    // One that was ended after the backup must not be open again.
    expect(sessions).toEqual([])
    expect(known).toEqual([{ outcome: 'done' }])
    expect(mode).toEqual([{ journal_mode: 'wal' }])
    expect(existsSync(join(dataDir, 'running.json'))).toBe(false)
  })

  it('refuses beside a stale -wal, and moves all of it aside when it is told to', async () => {
    leaveKilledRecords()
    const before = records().map(contentOf)
    const refused = await restore(backup.fileName)
    expect(refused.code).toBe(1)
    expect(refused.output).toMatch(/kilnward\.sqlite-wal .*would destroy any other file put beside it/s)
    expect(refused.output).toContain('--set-aside')
    expect(records().map(contentOf)).toEqual(before)
    expect(existsSync(join(dataDir, 'kilnward.sqlite.restoring'))).toBe(false)

    const { code, output } = await restore(backup.fileName, '--set-aside')
    expect(output).toContain('Restored and proved')
    expect(code).toBe(0)
    const [aside] = readdirSync(dataDir).filter((name) => name.startsWith('set-aside-'))
    // The rows that were only in the -wal are still to be had.
    const old = await openPlainHandle(join(dataDir, aside!, 'kilnward.sqlite'))
    expect(await old.all('SELECT n FROM later')).toEqual([{ n: 1 }])
    await old.close()
    expect((await examineDatabase(join(dataDir, 'kilnward.sqlite'))).counts['trees']).toBe(1)
  })

  it('refuses a -wal whose file is gone', async () => {
    leaveKilledRecords()
    rmSync(join(dataDir, 'kilnward.sqlite'))
    const { code, output } = await restore(backup.fileName)
    expect(code).toBe(1)
    expect(output).toContain('kilnward.sqlite-wal')
    expect(existsSync(join(dataDir, 'kilnward.sqlite'))).toBe(false)
  })

  it('refuses while Kilnward runs on the folder, and while anything else has the records open', async () => {
    // A start script that stands still, as far as the lock can tell.
    const script = join(dataDir, 'start.mjs')
    writeFileSync(script, 'setInterval(() => {}, 1000)')
    const running = spawn(process.execPath, [script])
    programs.push(running)
    writeFileSync(join(dataDir, 'running.json'), JSON.stringify({ pid: running.pid, port: 3999, program: 'start.mjs', children: {} }))
    const refused = await restore(backup.fileName)
    expect(refused).toMatchObject({ code: 1 })
    expect(refused.output).toContain(`Kilnward is running on ${dataDir}: process ${running.pid}, port 3999`)
    expect(records()).toEqual([])
    running.kill('SIGKILL')
    await sleep(200)

    expect((await restore(backup.fileName)).code).toBe(0)
    const before = contentOf('kilnward.sqlite')
    const handle = await openPlainHandle(join(dataDir, 'kilnward.sqlite'))
    await handle.all('SELECT count(*) FROM trees')
    const open = await restore(backup.fileName, '--set-aside')
    await handle.close()
    expect(open.code).toBe(1)
    expect(open.output).toContain(`is open in process ${process.pid}`)
    expect(contentOf('kilnward.sqlite').equals(before)).toBe(true)
  })

  it.each<[string, (file: string) => Promise<void> | void, RegExp]>([
    [
      'a changed backup',
      (file) => {
        const bytes = readFileSync(file)
        bytes[bytes.length >> 1]! ^= 0xff
        writeFileSync(file, bytes)
      },
      /its sum is another/,
    ],
    [
      'half a backup that came without its sum',
      (file) => {
        writeFileSync(file, readFileSync(file).subarray(0, 100_000))
        rmSync(`${file}.json`)
      },
      /cannot be used/,
    ],
    [
      'a file that is no database',
      (file) => {
        writeFileSync(file, 'a letter to the foundry, kept under a wrong name')
        rmSync(`${file}.json`)
      },
      /cannot be used/,
    ],
    [
      'a backup of a newer program',
      async (file) => {
        const handle = await openPlainHandle(file)
        await handle.all("INSERT INTO migrations (name) VALUES ('9999-kiln-on-the-moon.sql')")
        await handle.close()
        rmSync(`${file}.json`)
      },
      /newer Kilnward \(9999-kiln-on-the-moon\.sql\)/,
    ],
  ])('refuses %s, and leaves the records alone', async (_what, spoil, words) => {
    const elsewhere = mkdtempSync(join(tmpdir(), 'kilnward-spoilt-'))
    const file = join(elsewhere, backup.fileName)
    copyFileSync(join(folder, backup.fileName), file)
    copyFileSync(join(folder, `${backup.fileName}.json`), `${file}.json`)
    await spoil(file)
    writeFileSync(join(dataDir, 'kilnward.sqlite'), 'the records')
    const { code, output } = await restore(file, '--set-aside')
    rmSync(elsewhere, { recursive: true })
    expect(code).toBe(1)
    expect(output).toMatch(words)
    expect(output).not.toMatch(/\n\s+at /)
    expect(contentOf('kilnward.sqlite').toString()).toBe('the records')
  })

  it('answers a wrong call with how it is called', async () => {
    expect(await restore('one', 'two')).toMatchObject({ code: 1 })
    const { code, output } = await restore('newest', '--yes')
    expect(code).toBe(1)
    expect(output).toContain('npm run restore -- NAME')
    expect((await restore('kilnward-nowhere.sqlite')).output).toContain('There is no backup')
  })
})
