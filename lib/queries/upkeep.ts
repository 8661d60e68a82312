import { QueryTypes } from 'sequelize'
import type { Clock } from '@/lib/core/clock'
import { backupDir, dataDir } from '@/lib/core/env'
import type { SensorKind } from '@/lib/room/sensor-input'
import { isRefusalOfUs, refusingServices } from '@/lib/notices/push-refusal'
import { loadMqttState } from '@/lib/queries/mqtt-page'
import { workerPulse } from '@/lib/queries/worker-pulse'
import { freeBytesOf, isSameDisk, recordSizes } from '@/lib/server/disk'
import { programFacts } from '@/lib/server/program'
import type { UpkeepFacts } from '@/lib/upkeep/checks'
import { Backup, database, Foundry } from '@/models'

const DAY_MS = 86_400_000
/** Far more than any service refuses before somebody looks. */
const SETTLED_PUSHES = 500

const select = <Row extends object>(sql: string, replacements: Record<string, unknown> = {}) =>
  database.query<Row>(sql, { type: QueryTypes.SELECT, replacements })

/** Everything that the page of upkeep judges, at one moment. */
export async function loadUpkeep({ clock }: { clock: Clock }): Promise<UpkeepFacts> {
  const now = clock.now()
  const [foundry, pulse, passes, sensors, mqtt, pushes, backups, records, disks, program] = await Promise.all([
    Foundry.findByPk(1, { rejectOnEmpty: true }),
    workerPulse(now),
    loadPasses(now - DAY_MS),
    loadSensors(now),
    loadMqttState(now),
    loadPushes(),
    loadBackupFacts(),
    recordSizes(),
    loadDisks(),
    programFacts({ clock }),
  ])
  const { jump, ...worker } = passes
  return {
    now,
    timeZone: foundry.timeZone,
    worker: { ...pulse, ...worker },
    sensors,
    mqtt: mqtt.state.isOn ? { ...mqtt.state, ...mqtt.counts } : null,
    records,
    disks: disks.disks,
    pushes,
    backups: { ...backups, isSameDisk: disks.isSameDisk, folder: backupDir() },
    clock: { jump },
    program,
  }
}

type PassRow = { job: string; outcome: 'done' | 'failed'; startedAt: number; error: string | null }

async function loadPasses(since: number) {
  const [newest, [sums], [jump]] = await Promise.all([
    // SQLite takes the other columns from the row that has the maximum.
    select<PassRow & { tickAt: number }>(
      `SELECT job, max(tick_at) AS tickAt, outcome, started_at AS startedAt, detail ->> '$.error' AS error
         FROM job_runs WHERE started_at >= :since AND outcome IS NOT NULL GROUP BY job ORDER BY job`,
      { since },
    ),
    select<{ failed: number; missed: number }>(
      `SELECT coalesce(sum(outcome = 'failed'), 0) AS failed,
              coalesce(sum(CASE WHEN job = 'watch-floor' THEN detail ->> '$.missedMinutes' END), 0) AS missed
         FROM job_runs WHERE started_at >= :since`,
      { since },
    ),
    select<{ at: number; byMs: number }>(
      `SELECT started_at AS at, detail ->> '$.clockJumpMs' AS byMs FROM job_runs
        WHERE started_at >= :since AND job = 'watch-floor' AND detail ->> '$.clockJumpMs' IS NOT NULL ORDER BY started_at DESC LIMIT 1`,
      { since },
    ),
  ])
  return {
    failing: newest
      .filter(({ outcome }) => outcome === 'failed')
      .map(({ job, startedAt, error }) => ({ job, at: startedAt, error: (error ?? 'no reason given').replace(/^\w*Error: /, '') })),
    failedPasses: sums?.failed ?? 0,
    missedMinutes: Math.min(sums?.missed ?? 0, DAY_MS / 60_000),
    jump: jump ?? null,
  }
}

async function loadSensors(now: number): Promise<UpkeepFacts['sensors']> {
  const rows = await select<{ name: string; kind: SensorKind; newestAt: number | null; batteryPct: number | null }>(
    `SELECT s.name, s.kind, (SELECT max(measured_at) FROM readings WHERE sensor_id = s.id AND measured_at <= :now) AS newestAt,
            s.battery_pct AS batteryPct
       FROM sensors s WHERE s.retired_at IS NULL ORDER BY s.name`,
    { now },
  )
  return rows.map(({ kind, ...sensor }) => ({ ...sensor, source: kind === 'logger' ? 'sensor' : 'typed' }))
}

async function loadPushes(): Promise<UpkeepFacts['pushes']> {
  const [[waiting], failingDevices, settled] = await Promise.all([
    select<{ waiting: number; dueSince: number | null }>(
      `SELECT count(*) AS waiting, min(next_attempt_at) AS dueSince FROM deliveries WHERE status IN ('waiting', 'sending')`,
    ),
    select<{ label: string; memberName: string; since: number }>(
      `SELECT s.label, m.name AS memberName, s.failing_since AS since FROM push_subscriptions s JOIN members m ON m.id = s.member_id
        WHERE s.failing_since IS NOT NULL AND m.disabled_at IS NULL ORDER BY s.failing_since`,
    ),
    // Ids of deliveries sort by time, so this reads the newest only.
    select<{ endpoint: string; at: number; status: string; lastError: string | null }>(
      `SELECT s.endpoint, coalesce(d.sent_at, d.next_attempt_at) AS at, d.status, d.last_error AS lastError
         FROM (SELECT * FROM deliveries ORDER BY id DESC LIMIT :limit) d JOIN push_subscriptions s ON s.id = d.subscription_id
        WHERE d.status IN ('sent', 'failed')`,
      { limit: SETTLED_PUSHES },
    ),
  ])
  const told = settled
    .filter(({ status, lastError }) => status === 'sent' || isRefusalOfUs(lastError))
    .map(({ endpoint, at, status }) => ({ host: new URL(endpoint).host, at, isRefusal: status === 'failed' }))
  return { waiting: waiting?.waiting ?? 0, dueSince: waiting?.dueSince ?? null, failingDevices, refusing: refusingServices(told) }
}

async function loadBackupFacts() {
  const [newest, newestFailure, provenAt, standing] = await Promise.all([
    Backup.findOne({ where: { outcome: 'done', removedAt: null }, order: [['startedAt', 'DESC']] }),
    Backup.findOne({ where: { outcome: 'failed' }, order: [['startedAt', 'DESC']] }),
    Backup.max<number | null, Backup>('provenAt'),
    Backup.count({ where: { outcome: 'done', removedAt: null } }),
  ])
  const isOpen = newestFailure !== null && newestFailure.startedAt > (newest?.startedAt ?? 0)
  return {
    newest: newest ? { at: newest.startedAt, sizeBytes: newest.sizeBytes ?? 0 } : null,
    failed: isOpen ? { at: newestFailure.startedAt, error: newestFailure.error ?? 'No reason given.' } : null,
    provenAt,
    standing,
  }
}

async function loadDisks(): Promise<{ disks: UpkeepFacts['disks']; isSameDisk: boolean }> {
  const freeBytes = await freeBytesOf(dataDir())
  // Made with the first backup, and perhaps on a disk that is not there now.
  const ofBackups = await freeBytesOf(backupDir()).catch(() => null)
  if (ofBackups === null || (await isSameDisk(dataDir(), backupDir()))) {
    return { disks: [{ of: 'records', freeBytes }], isSameDisk: ofBackups !== null }
  }
  return {
    disks: [
      { of: 'records', freeBytes },
      { of: 'backups', freeBytes: ofBackups },
    ],
    isSameDisk: false,
  }
}
