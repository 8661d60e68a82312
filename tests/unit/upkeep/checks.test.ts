import { describe, expect, it } from 'vitest'
import { formatBytes } from '@/lib/format/bytes'
import { isRefusalOfUs, refusalWords, refusingServices } from '@/lib/notices/push-refusal'
import { upkeepChecks, upkeepHeadline, type UpkeepFacts } from '@/lib/upkeep/checks'

const NOW = Date.parse('2026-10-13T09:00:00Z')
const MINUTE = 60_000
const HOUR = 60 * MINUTE

const inOrder: UpkeepFacts = {
  now: NOW,
  timeZone: 'Europe/London',
  worker: { pulseAt: NOW - 20_000, isAlive: true, missedMinutes: 0, failing: [], failedPasses: 0 },
  sensors: [
    { name: 'Shell room', source: 'sensor', newestAt: NOW - 4 * MINUTE, batteryPct: 80 },
    { name: 'Boat shed', source: 'typed', newestAt: NOW - 11 * HOUR, batteryPct: null },
  ],
  mqtt: {
    isOn: true,
    connectedSince: NOW - HOUR,
    awaySince: null,
    trouble: '',
    isWorkerAlive: true,
    readings: 288,
    refused: 0,
    dropped: 0,
  },
  records: { sizeBytes: 63_700_000, walBytes: 4_000_000 },
  disks: [{ of: 'records', freeBytes: 12e9 }],
  pushes: { waiting: 0, dueSince: null, failingDevices: [], refusing: [] },
  backups: {
    newest: { at: NOW - 30 * MINUTE, sizeBytes: 61_000_000 },
    standing: 9,
    failed: null,
    provenAt: NOW - 8 * HOUR,
    isSameDisk: false,
    folder: '/srv/backups',
  },
  clock: { jump: null },
  program: { version: '0.1.0', build: 'abc', openSince: NOW - 3 * HOUR },
}
const lookAt = (facts: Partial<UpkeepFacts>) => upkeepChecks({ ...inOrder, ...facts }).filter((check) => !check.isInOrder)

describe('upkeep', () => {
  it('says so when all is in order, and asks for nothing', () => {
    const checks = upkeepChecks(inOrder)
    expect(upkeepHeadline(checks)).toBe('All in order')
    expect(checks.filter(({ isInOrder, todo }) => !isInOrder || todo !== '')).toEqual([])
  })

  it('says nothing of a broker where none is switched on, and waits a little for one that is started again', () => {
    expect(upkeepChecks({ ...inOrder, mqtt: null }).map(({ key }) => key)).not.toContain('mqtt')
    expect(lookAt({ mqtt: { ...inOrder.mqtt!, connectedSince: null, awaySince: NOW - MINUTE } })).toEqual([])
  })

  it.each<[string, string, Partial<UpkeepFacts>, RegExp]>([
    ['worker', 'a worker that stands', { worker: { ...inOrder.worker, isAlive: false, pulseAt: NOW - 10 * MINUTE } }, /10.min ago/],
    [
      'worker',
      'a job whose newest pass failed',
      { worker: { ...inOrder.worker, failing: [{ job: 'back-up', at: NOW, error: 'No room.' }] } },
      /The backup failed 10:00: No room\./,
    ],
    [
      'sensors',
      'a silent logger',
      { sensors: [{ name: 'Shell room', source: 'sensor', newestAt: NOW - 31 * MINUTE, batteryPct: null }] },
      /no reading since 09:29/,
    ],
    [
      'sensors',
      'a sensor that never sent',
      { sensors: [{ name: 'Loft', source: 'sensor', newestAt: null, batteryPct: null }] },
      /Loft: no reading yet/,
    ],
    [
      'sensors',
      'a battery that runs out',
      { sensors: [{ name: 'Shell room', source: 'sensor', newestAt: NOW, batteryPct: 15 }] },
      /Shell room: battery 15.%\./,
    ],
    [
      'mqtt',
      'a broker that is away for long',
      { mqtt: { ...inOrder.mqtt!, connectedSince: null, awaySince: NOW - 6 * MINUTE, trouble: 'No broker answers.' } },
      /Not connected since 09:54\. No broker answers\./,
    ],
    ['mqtt', 'a topic that the broker keeps to itself', { mqtt: { ...inOrder.mqtt!, trouble: 'Not shop/#.' } }, /Not shop/],
    ['disk', 'under 1 GB', { disks: [{ of: 'backups', freeBytes: 999_000_000 }] }, /999.MB free for the backups/],
    ['records', 'a log that only grows', { records: { sizeBytes: 1e9, walBytes: 400e6 } }, /400.MB/],
    ['backups', 'a late backup', { backups: { ...inOrder.backups, newest: { at: NOW - 4 * HOUR, sizeBytes: 1 } } }, /06:00/],
    ['backups', 'none at all', { backups: { ...inOrder.backups, newest: null } }, /none yet/],
    [
      'backups',
      'a failure with no copy after it',
      { backups: { ...inOrder.backups, failed: { at: NOW, error: 'The disk is full.' } } },
      /The disk is full/,
    ],
    ['proof', 'an old proof', { backups: { ...inOrder.backups, provenAt: NOW - 49 * HOUR } }, /Sun 09:00/],
    [
      'pushes',
      'a service that refuses us',
      { pushes: { ...inOrder.pushes, refusing: [{ host: 'web.push.apple.com', since: NOW - HOUR }] } },
      /web\.push\.apple\.com refuses our keys since 09:00/,
    ],
    ['pushes', 'a notice that is late', { pushes: { ...inOrder.pushes, waiting: 1, dueSince: NOW - 6 * MINUTE } }, /1 notice waits/],
    [
      'pushes',
      'a device out of reach',
      { pushes: { ...inOrder.pushes, failingDevices: [{ label: '', memberName: 'Maud', since: NOW - HOUR }] } },
      /Maud, a browser/,
    ],
    ['clock', 'a clock that jumped', { clock: { jump: { at: NOW, byMs: -HOUR } } }, /1.h back/],
  ])('%s: %s is looked at, with what to do', (key, _what, facts, words) => {
    const [check, ...others] = lookAt(facts)
    expect(others).toEqual([])
    expect(check?.key).toBe(key)
    expect(check?.lines.join(' ')).toMatch(words)
    expect(check?.todo).not.toBe('')
  })

  it('gives the worker half an hour after a start before it misses a backup', () => {
    const bare = { ...inOrder.backups, newest: null, provenAt: null }
    const openFor = (minutes: number) => ({ backups: bare, program: { ...inOrder.program, openSince: NOW - minutes * MINUTE } })
    expect(lookAt(openFor(29))).toEqual([])
    expect(lookAt(openFor(31)).map(({ key }) => key)).toEqual(['backups', 'proof'])
  })
})

describe('push services that refuse us', () => {
  const push = (host: string, minute: number, isRefusal: boolean) => ({ host, at: NOW + minute * MINUTE, isRefusal })

  it('are named after three refusals in a row, since the first of them', () => {
    const row = [push('a', 0, false), push('a', 3, true), push('a', 1, true), push('a', 2, true)]
    expect(refusingServices(row)).toEqual([{ host: 'a', since: NOW + MINUTE }])
    expect(refusingServices(row.slice(0, 3))).toEqual([])
    expect(refusingServices([...row, push('a', 4, false)])).toEqual([])
  })

  it('are counted each by itself', () => {
    const refused = [1, 2, 3].map((minute) => push('a', minute, true))
    const taken = [1, 2, 3].map((minute) => push('b', minute, false))
    expect(refusingServices([...refused, ...taken]).map(({ host }) => host)).toEqual(['a'])
  })

  it('are known by 400, 401 and 403, and by nothing else', () => {
    expect([400, 401, 403, 413, 415].filter((status) => isRefusalOfUs(refusalWords(status)))).toEqual([400, 401, 403])
    expect(isRefusalOfUs(null)).toBe(false)
  })
})

it('sizes are written in steps of 1000', () => {
  expect([0, 999, 1000, 63_700_000, 99_960_000, 999_600_000, 1.2e12].map((bytes) => formatBytes(bytes).replace('\u00A0', ' '))).toEqual([
    '0 B',
    '999 B',
    '1.0 kB',
    '63.7 MB',
    '100 MB',
    '1.0 GB',
    '1.2 TB',
  ])
})
