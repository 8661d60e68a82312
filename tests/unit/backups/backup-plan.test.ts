import { describe, expect, it } from 'vitest'
import { backupDue, backupsToRemove, isProofDue, missingRoom, type BackupKind, type StandingBackup } from '@/lib/backups/backup-plan'
import { localDay } from '@/lib/format/local-time'

const HOUR = 3_600_000
const MINUTE = 60_000
const LONDON = 'Europe/London'
const at = (iso: string) => Date.parse(iso)

const copy = (kind: BackupKind, startedAt: number, isSound = true): StandingBackup => ({
  fileName: `${kind} ${new Date(startedAt).toISOString()}`,
  kind,
  startedAt,
  isSound,
})

/** Runs the plan every ten minutes, as the worker does, and gives what then lies there and all that was ever made. */
function runPlan(from: number, to: number, { timeZone = LONDON, everyMs = 10 * MINUTE, isOn = (_at: number): boolean => true } = {}) {
  let standing: StandingBackup[] = []
  const made: StandingBackup[] = []
  for (let now = from; now < to; now += everyMs) {
    if (!isOn(now)) continue
    const kind = backupDue(standing, { now, timeZone, lastTriedAt: null })
    if (kind) {
      made.push(copy(kind, now))
      standing.push(made.at(-1)!)
    }
    const leaving = backupsToRemove(standing, now)
    standing = standing.filter((backup) => !leaving.includes(backup))
  }
  const of = (kind: BackupKind, list = standing) => list.filter((backup) => backup.kind === kind)
  return { standing, made, of }
}

describe('the plan', () => {
  it('keeps 24 hourly and 14 daily copies over forty days', () => {
    const { of } = runPlan(at('2026-03-10T00:00:00Z'), at('2026-04-20T00:00:00Z'), { everyMs: HOUR })
    expect([of('hourly').length, of('daily').length, of('monthly').length]).toEqual([24, 14, 2])
    expect(of('hourly').every(({ startedAt }) => startedAt > at('2026-04-18T20:00:00Z'))).toBe(true)
    expect(localDay(of('daily')[0]!.startedAt, LONDON)).toBe('2026-04-07')
  })

  it('keeps 12 monthly copies over fifteen months, each of the first day', () => {
    const { of } = runPlan(at('2026-01-01T00:00:00Z'), at('2027-04-01T00:00:00Z'), { everyMs: 12 * HOUR })
    const days = of('monthly').map(({ startedAt }) => localDay(startedAt, LONDON))
    expect(days).toHaveLength(12)
    expect([days[0], days.at(-1)]).toEqual(['2026-04-01', '2027-03-01'])
    expect(days.every((day) => day.endsWith('-01'))).toBe(true)
  })

  it.each([
    ['spring', '2026-03-28T12:00:00Z', '2026-03-30T12:00:00Z'],
    ['autumn', '2026-10-24T12:00:00Z', '2026-10-26T12:00:00Z'],
  ])('makes one copy in each of 48 hours, and one daily for each local day, over the clock change in %s', (_name, from, to) => {
    const { made, of } = runPlan(at(from), at(to))
    expect(made).toHaveLength(48)
    expect(new Set(made.map(({ startedAt }) => Math.floor(startedAt / HOUR))).size).toBe(48)
    const midnights = of('daily', made).map(({ startedAt }) =>
      new Intl.DateTimeFormat('en-GB', { timeZone: LONDON, timeStyle: 'short', dateStyle: 'short' }).format(startedAt),
    )
    expect(midnights).toHaveLength(2)
    expect(midnights.every((moment) => moment.endsWith('00:00'))).toBe(true)
  })

  it('makes the copies of a machine that is off at night when it is on again', () => {
    const isOn = (now: number) => {
      const hour = new Date(now).getUTCHours()
      return hour >= 8 && hour < 16
    }
    const { made, of } = runPlan(at('2026-06-01T00:00:00Z'), at('2026-06-08T00:00:00Z'), { isOn })
    expect(made).toHaveLength(7 * 8)
    expect(of('monthly', made).length + of('daily', made).length).toBe(7)
    expect([...of('monthly', made), ...of('daily', made)].every(({ startedAt }) => new Date(startedAt).getUTCHours() === 8)).toBe(true)
  })

  it('takes one copy at once after a month without power, and no heap of missed ones', () => {
    const before = runPlan(at('2026-06-01T00:00:00Z'), at('2026-06-03T00:00:00Z')).standing
    const now = at('2026-07-20T09:30:00Z')
    expect(backupDue(before, { now, timeZone: LONDON, lastTriedAt: null })).toBe('monthly')
    const after = [...before, copy('monthly', now)]
    expect(backupDue(after, { now: now + 10 * MINUTE, timeZone: LONDON, lastTriedAt: null })).toBeNull()
    expect(backupsToRemove(after, now)).toEqual([])
  })

  it('counts days in the foundry’s zone', () => {
    const standing = [copy('monthly', at('2026-12-01T06:00:00Z'))]
    const now = at('2026-12-01T12:30:00Z')
    expect(backupDue(standing, { now, timeZone: LONDON, lastTriedAt: null })).toBe('hourly')
    expect(backupDue(standing, { now, timeZone: 'Pacific/Auckland', lastTriedAt: null })).toBe('daily')
  })

  it('tries a failed copy again in the next hour, not in the next minute', () => {
    const lastTriedAt = at('2026-12-01T12:10:00Z')
    expect(backupDue([], { now: at('2026-12-01T12:50:00Z'), timeZone: LONDON, lastTriedAt })).toBeNull()
    expect(backupDue([], { now: at('2026-12-01T13:00:00Z'), timeZone: LONDON, lastTriedAt })).toBe('monthly')
  })

  it('does not count a copy that failed its proof, and lets it push no sound one out', () => {
    const now = at('2026-12-02T12:30:00Z')
    const damaged = Array.from({ length: 30 }, (_, index) => copy('hourly', now - index * HOUR, false))
    const sound = Array.from({ length: 24 }, (_, index) => copy('hourly', now - (40 + index) * HOUR))
    expect(backupDue([...damaged, ...sound], { now, timeZone: LONDON, lastTriedAt: null })).toBe('monthly')
    const leaving = backupsToRemove([...damaged, ...sound], now)
    expect(leaving).toHaveLength(27)
    expect(leaving.every(({ isSound }) => !isSound)).toBe(true)
  })

  it('keeps new copies when the clock was a year ahead for a day', () => {
    const ahead = runPlan(at('2027-12-01T00:00:00Z'), at('2027-12-02T00:00:00Z')).standing
    const now = at('2026-12-01T12:00:00Z')
    const standing = [...ahead, copy('hourly', now)]
    const leaving = [
      ...backupsToRemove(standing, now),
      ...backupsToRemove([...standing, copy('hourly', now - HOUR), copy('hourly', now - 2 * HOUR)], now),
    ]
    expect(leaving.length).toBeGreaterThan(0)
    expect(leaving.every(({ startedAt }) => startedAt > now)).toBe(true)
  })

  it('leaves those made by hand and before an upgrade to their own count', () => {
    const now = at('2026-12-01T12:00:00Z')
    const many = (kind: BackupKind, count: number) => Array.from({ length: count }, (_, index) => copy(kind, now - index * 24 * HOUR))
    const leaving = backupsToRemove([...many('by hand', 12), ...many('before an upgrade', 6)], now)
    expect(leaving.map(({ kind }) => kind)).toEqual(['by hand', 'by hand', 'before an upgrade'])
    expect(leaving.every(({ startedAt }) => startedAt <= now - 5 * 24 * HOUR)).toBe(true)
  })
})

describe('the proof', () => {
  it('is due once each local day, over the clock change too', () => {
    const midnight = at('2026-10-25T23:00:00Z') + HOUR
    const parts = (now: number) => ({ now, timeZone: LONDON })
    expect(isProofDue(null, parts(midnight))).toBe(true)
    expect(isProofDue(midnight - MINUTE, parts(midnight))).toBe(true)
    expect(isProofDue(at('2026-10-24T23:05:00Z'), parts(at('2026-10-25T23:55:00Z')))).toBe(false)
  })
})

describe('the room for a copy', () => {
  it('leaves 100 MiB and a tenth of the copy to the records', () => {
    const MIB = 1024 * 1024
    expect(missingRoom({ sizeBytes: 100 * MIB, freeBytes: 210 * MIB })).toBe(0)
    expect(missingRoom({ sizeBytes: 100 * MIB, freeBytes: 209 * MIB })).toBe(MIB)
  })
})
