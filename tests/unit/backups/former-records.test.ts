import { expect, it } from 'vitest'
import { formerRecords } from '@/lib/backups/former-records'

const [records, wal] = ['kilnward.sqlite', 'kilnward.sqlite-wal']
const where = { folder: '/data', aside: '/data/set-aside-x' }

it('says what is where, and never that all was moved when it was not', () => {
  expect(formerRecords({ moved: [], left: [], ...where })).toBe('')
  expect(formerRecords({ moved: [], left: [records, wal], ...where })).toBe(
    'The records of before lie in /data as they were: nothing of them was moved.',
  )
  expect(formerRecords({ moved: [records, wal], left: [], ...where })).toBe('The records of before lie in /data/set-aside-x, all of them.')
  expect(formerRecords({ moved: [records], left: [wal], ...where })).toBe(
    'Of the records of before, kilnward.sqlite lies in /data/set-aside-x, and kilnward.sqlite-wal still in /data. They belong together: move what lies in /data/set-aside-x back before anything opens them.',
  )
})
