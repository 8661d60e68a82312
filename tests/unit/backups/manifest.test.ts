import { expect, it } from 'vitest'
import { backupFileName, backupManifest, differingCounts } from '@/lib/backups/manifest'

const AT = Date.parse('2026-12-01T14:33:20Z')

it('names a copy so that names sort by time and hold no character that a disk refuses', () => {
  expect(backupFileName('before an upgrade', AT)).toBe('kilnward-2026-12-01T14-33-20Z-before-an-upgrade.sqlite')
  const names = [backupFileName('monthly', AT), backupFileName('hourly', AT + 3_600_000), backupFileName('daily', AT + 86_400_000)]
  expect(names.toSorted()).toEqual(names)
})

it('takes no name that leads out of the folder', () => {
  const sound = {
    fileName: backupFileName('hourly', AT),
    kind: 'hourly',
    startedAt: AT,
    finishedAt: AT,
    timeZone: null,
    sizeBytes: 1,
    sha256: 'a'.repeat(64),
    migrations: [],
    counts: {},
  }
  expect(backupManifest.safeParse(sound).success).toBe(true)
  expect(backupManifest.safeParse({ ...sound, fileName: '../kilnward.sqlite' }).success).toBe(false)
})

it('says which tables hold other rows than were written down', () => {
  expect(differingCounts({ coats: 4, trees: 1 }, { coats: 4, trees: 1 })).toEqual([])
  expect(differingCounts({ coats: 4, trees: 1 }, { coats: 3, works: 2 })).toEqual([
    'coats: 3 rows, 4 were written down',
    'trees: no rows, 1 were written down',
    'works: 2 rows, none were written down',
  ])
})
