import { millisecondsInDay, millisecondsInHour, millisecondsInMinute } from 'date-fns/constants'
import { holdsUntil } from '@/lib/drying/room-segments'
import type { ReadingSource } from '@/lib/drying/types'
import { formatBytes } from '@/lib/format/bytes'
import { formatDuration } from '@/lib/format/duration'
import { formatMoment } from '@/lib/format/local-time'
import { formatPercent } from '@/lib/format/units'
import { isBatteryLow } from '@/lib/room/sensor-warnings'
import { connectionWords, type ConnectionState } from '@/lib/mqtt/connection-words'

/** What was measured, for the page of upkeep. Instants in epoch milliseconds, sizes in bytes. */
export type UpkeepFacts = {
  now: number
  timeZone: string
  worker: {
    pulseAt: number | null
    isAlive: boolean
    /** Minutes of the last day in which it did not look: the machine was off, or too busy. */
    missedMinutes: number
    /** Jobs whose newest pass failed. */
    failing: readonly { job: string; at: number; error: string }[]
    failedPasses: number
  }
  sensors: readonly { name: string; source: ReadingSource; newestAt: number | null; batteryPct: number | null }[]
  /** The broker of loggers, counts of the last day; null where none is switched on. */
  mqtt: (ConnectionState & { readings: number; refused: number; dropped: number }) | null
  records: { sizeBytes: number; walBytes: number }
  disks: readonly { of: 'records' | 'backups'; freeBytes: number }[]
  pushes: {
    waiting: number
    /** Since when the oldest of them could have been sent; null when none waits. */
    dueSince: number | null
    failingDevices: readonly { label: string; memberName: string; since: number }[]
    refusing: readonly { host: string; since: number }[]
  }
  backups: {
    newest: { at: number; sizeBytes: number } | null
    standing: number
    /** The newest failure, where no copy has come after it. */
    failed: { at: number; error: string } | null
    provenAt: number | null
    isSameDisk: boolean
    folder: string
  }
  clock: { jump: { at: number; byMs: number } | null }
  program: { version: string; build: string; openSince: number }
}

/** One thing of upkeep: how it stands, and what to do where a person has to. */
export type UpkeepCheck = {
  key: 'worker' | 'sensors' | 'mqtt' | 'records' | 'disk' | 'pushes' | 'backups' | 'proof' | 'clock' | 'program'
  title: string
  isInOrder: boolean
  /** How it stands, a sentence each. */
  lines: string[]
  /** What to do; empty where all is in order. */
  todo: string
}

const LOW_DISK_BYTES = 1_000_000_000
/** The -wal is cut back to 64 MiB after each checkpoint: one that is far over it could not be brought into the file. */
const LONG_WAL_BYTES = 128_000_000
/** A send that is due waits for the next minute, and for the lease of a sender that died. */
const PUSH_LATE_MS = 5 * millisecondsInMinute
const BACKUP_LATE_MS = 3 * millisecondsInHour
const PROOF_LATE_MS = 2 * millisecondsInDay
/** A broker that is started again is back by then. */
const BROKER_AWAY_MS = 5 * millisecondsInMinute
/** After a start the worker needs its ten minutes before there can be a copy of today. */
const STARTED_LATELY_MS = 30 * millisecondsInMinute

const JOB_WORDS: Record<string, string> = {
  'watch-floor': 'The look at the floor',
  'send-pushes': 'Sending notices',
  prune: 'Tidying up',
  'back-up': 'The backup',
  'correct-readings': 'Bringing readings to their offsets',
  'demo-feed': 'The demo’s sensors',
}

/** Everything that the owner looks after, in order of what hurts first. */
export function upkeepChecks(facts: UpkeepFacts): UpkeepCheck[] {
  return [
    worker(facts),
    sensors(facts),
    ...mqtt(facts),
    disk(facts),
    backups(facts),
    proof(facts),
    pushes(facts),
    records(facts),
    clock(facts),
    program(facts),
  ]
}

/**
 * The page's headline.
 *
 * @example upkeepHeadline([]) // => 'All in order'
 */
export function upkeepHeadline(checks: readonly UpkeepCheck[]): string {
  const open = checks.filter(({ isInOrder }) => !isInOrder).length
  if (open === 0) return 'All in order'
  return open === 1 ? '1 thing to look at' : `${open} things to look at`
}

const ago = (at: number, now: number) => (now - at < millisecondsInMinute ? 'just now' : `${formatDuration(now - at)} ago`)

function worker({ worker: { pulseAt, isAlive, missedMinutes, failing, failedPasses }, now, timeZone }: UpkeepFacts): UpkeepCheck {
  const lines = [pulseAt === null ? 'It has not looked at the floor yet.' : `It last looked at the floor ${ago(pulseAt, now)}.`]
  for (const { job, at, error } of failing) {
    lines.push(`${JOB_WORDS[job] ?? job} failed ${formatMoment(at, now, timeZone)}: ${error}`)
  }
  if (failing.length === 0 && failedPasses > 0) {
    lines.push(`${failedPasses} ${failedPasses === 1 ? 'pass' : 'passes'} failed in the last day, and went well since.`)
  }
  if (missedMinutes > 0) lines.push(`In the last day it was away for ${formatDuration(missedMinutes * millisecondsInMinute)}.`)
  const todo = !isAlive
    ? 'Nobody is told anything while it stands. Start Kilnward again; if that does not help, read what it writes on its terminal.'
    : failing.length > 0
      ? 'It tries again by itself. If it goes on failing, read what Kilnward writes on its terminal.'
      : ''
  return { key: 'worker', title: 'Worker', isInOrder: todo === '', lines, todo }
}

function sensors({ sensors: all, now, timeZone }: UpkeepFacts): UpkeepCheck {
  const isSilent = ({ newestAt, source }: (typeof all)[number]) => newestAt === null || holdsUntil({ measuredAt: newestAt, source }) < now
  const lines = all.map((sensor) => {
    if (sensor.newestAt === null) return `${sensor.name}: no reading yet.`
    if (isSilent(sensor)) return `${sensor.name}: no reading since ${formatMoment(sensor.newestAt, now, timeZone)}.`
    return `${sensor.name}: read ${ago(sensor.newestAt, now)}.`
  })
  if (all.length === 0) lines.push('There is no sensor yet.')
  const silent = all.filter(isSilent)
  const empty = all.filter(({ batteryPct }) => isBatteryLow(batteryPct))
  lines.push(...empty.map(({ name, batteryPct }) => `${name}: battery ${formatPercent(batteryPct)}.`))
  const todo = [
    ...(silent.length === 0
      ? []
      : silent.every(({ source }) => source === 'typed')
        ? ['Read the wall hygrometer and type it in on the floor.']
        : ['Look at the sensor, its network and its token. Until it sends again, trees in its air turn unknown.']),
    ...(empty.length === 0 ? [] : ['Change the battery before the sensor falls silent.']),
  ].join(' ')
  return { key: 'sensors', title: 'Sensors', isInOrder: todo === '', lines, todo }
}

/** Only where a broker is switched on. A connection that broke a moment ago comes back by itself. */
function mqtt({ mqtt: facts, now, timeZone }: UpkeepFacts): UpkeepCheck[] {
  if (facts === null) return []
  const { isGood, text } = connectionWords(facts, { now, timeZone })
  const { readings, refused, dropped, awaySince } = facts
  const lines = [
    text,
    `In the last day ${readings} new ${readings === 1 ? 'reading' : 'readings'}; ${refused} ${refused === 1 ? 'message' : 'messages'} refused.`,
  ]
  if (dropped > 0) lines.push(`${dropped} ${dropped === 1 ? 'message' : 'messages'} came too fast and were dropped.`)
  const isBrief = facts.isWorkerAlive && awaySince !== null && now - awaySince < BROKER_AWAY_MS
  const todo =
    isGood || isBrief ? '' : 'Look at the broker and its network, and at MQTT under Foundry. Until then its loggers are not heard.'
  return [{ key: 'mqtt', title: 'MQTT', isInOrder: todo === '', lines, todo }]
}

function disk({ disks }: UpkeepFacts): UpkeepCheck {
  const lines = disks.map(({ of, freeBytes }) => `${formatBytes(freeBytes)} free for the ${of}.`)
  const isLow = disks.some(({ freeBytes }) => freeBytes < LOW_DISK_BYTES)
  const todo = isLow ? 'Free some space: under 1 GB it will soon be full, and then no dip can be logged.' : ''
  return { key: 'disk', title: 'Disk', isInOrder: !isLow, lines, todo }
}

function backups({
  backups: { newest, failed, standing, isSameDisk, folder },
  program: { openSince },
  now,
  timeZone,
}: UpkeepFacts): UpkeepCheck {
  const lines = [
    newest === null
      ? 'There is none yet.'
      : `The newest is of ${formatMoment(newest.at, now, timeZone)}, ${formatBytes(newest.sizeBytes)}. ${standing} ${standing === 1 ? 'lies' : 'lie'} in ${folder}.`,
  ]
  if (failed) lines.push(`${formatMoment(failed.at, now, timeZone)}: ${failed.error}`)
  if (isSameDisk) lines.push('If the disk of the records dies, these die with it: set BACKUP_DIR to a folder on another disk.')
  const isLate = now - (newest?.at ?? 0) > BACKUP_LATE_MS && now - openSince > STARTED_LATELY_MS
  const todo = failed
    ? 'Mend what stands above, then press ‘Back up now’.'
    : isLate
      ? 'One is made every hour while the worker runs. Look at the worker, or press ‘Back up now’.'
      : ''
  return { key: 'backups', title: 'Backups', isInOrder: todo === '', lines, todo }
}

function proof({ backups: { provenAt }, program: { openSince }, now, timeZone }: UpkeepFacts): UpkeepCheck {
  const lines = [
    provenAt === null
      ? 'No backup has been restored for a try yet.'
      : `A backup was last restored for a try ${formatMoment(provenAt, now, timeZone)}, and was whole.`,
  ]
  const isInOrder = now - (provenAt ?? 0) <= PROOF_LATE_MS || now - openSince <= STARTED_LATELY_MS
  const todo = isInOrder ? '' : 'It is done once a day while the worker runs. Do not rely on the backups until it has gone well.'
  return { key: 'proof', title: 'Trial restore', isInOrder, lines, todo }
}

function pushes({ pushes: { waiting, dueSince, failingDevices, refusing }, now, timeZone }: UpkeepFacts): UpkeepCheck {
  const since = (at: number) => formatMoment(at, now, timeZone)
  const lines = [
    waiting === 0 ? 'No notice waits to be sent.' : `${waiting} ${waiting === 1 ? 'notice waits' : 'notices wait'} to be sent.`,
  ]
  for (const { host, since: at } of refusing) lines.push(`The push service ${host} refuses our keys since ${since(at)}.`)
  for (const { label, memberName, since: at } of failingDevices) {
    lines.push(`${memberName}, ${label || 'a browser'}: not reached since ${since(at)}.`)
  }
  const isLate = dueSince !== null && now - dueSince > PUSH_LATE_MS
  const todo =
    refusing.length > 0
      ? 'Look at VAPID_SUBJECT (an address of yours with a real domain), at the keys and at this machine’s clock. With other keys every device has to turn its notices on again.'
      : isLate
        ? 'Look at the worker, and whether this machine reaches the internet.'
        : failingDevices.length > 0
          ? 'Ask them to turn notices off and on again on that device.'
          : ''
  return { key: 'pushes', title: 'Notices', isInOrder: todo === '', lines, todo }
}

function records({ records: { sizeBytes, walBytes } }: UpkeepFacts): UpkeepCheck {
  const isInOrder = walBytes < LONG_WAL_BYTES
  return {
    key: 'records',
    title: 'Records',
    isInOrder,
    lines: [`The records take ${formatBytes(sizeBytes)}, and ${formatBytes(walBytes)} more that are not folded in yet.`],
    todo: isInOrder ? '' : 'What is new is not folded in: something reads the records without end. Start Kilnward again.',
  }
}

function clock({ clock: { jump }, now, timeZone }: UpkeepFacts): UpkeepCheck {
  if (!jump) return { key: 'clock', title: 'Clock', isInOrder: true, lines: ['It made no jump in the last day.'], todo: '' }
  return {
    key: 'clock',
    title: 'Clock',
    isInOrder: false,
    lines: [
      `It jumped ${formatDuration(Math.abs(jump.byMs))} ${jump.byMs > 0 ? 'ahead' : 'back'}, ${formatMoment(jump.at, now, timeZone)}.`,
    ],
    todo: 'Let this machine set its clock from the network: every drying time is counted by it.',
  }
}

function program({ program: { version, build, openSince }, now, timeZone }: UpkeepFacts): UpkeepCheck {
  return {
    key: 'program',
    title: 'Program',
    isInOrder: true,
    lines: [
      `Kilnward ${version}, build ${build}. Open since ${formatMoment(openSince, now, timeZone)}, ${formatDuration(now - openSince)}.`,
    ],
    todo: '',
  }
}
