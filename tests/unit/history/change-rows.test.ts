import { describe, expect, it } from 'vitest'
import { SI_UNITS } from '@/lib/format/units'
import { changeRows, fieldWords } from '@/lib/history/change-rows'

const PLACE = '018f7d1e-7c00-7000-8000-000000000002'
const context = {
  now: Date.parse('2026-10-13T09:00:00Z'),
  timeZone: 'Europe/London',
  units: SI_UNITS,
  names: new Map([[PLACE, 'Fan rack']]),
}
const rows = (before: Record<string, unknown>, after: Record<string, unknown>, units = SI_UNITS) =>
  changeRows(before, after, { ...context, units })

describe('changeRows', () => {
  it('names only what differs', () => {
    expect(rows({ name: 'Rack A', airSpeedFansOnMps: 1.2 }, { name: 'Rack A', airSpeedFansOnMps: 1.4 })).toEqual([
      { field: 'air speed fans on', before: '1.2\u00A0m/s', after: '1.4\u00A0m/s' },
    ])
  })

  it.each([
    ['waxMassKg', 2.4, '2.4\u00A0kg', '5.3\u00A0lb'],
    ['bandLowTempC', 20, '20.0\u00A0°C', '68.0\u00A0°F'],
    ['sectionMm', 40, '40\u00A0mm', '1.6\u00A0in'],
  ])('%s is read in the units of the reader', (name, value, si, other) => {
    expect(rows({}, { [name]: value })[0]?.after).toBe(si)
    expect(rows({}, { [name]: value }, { temp: 'degF', mass: 'lb', length: 'inch' })[0]?.after).toBe(other)
  })

  it.each([
    ['opensMinute', 425, '07:05'],
    ['drainSeconds', 45, '45\u00A0s'],
    ['longestWaitHours', 72, '72\u00A0h'],
    ['bandHighRhPct', 58, '58\u00A0%'],
    ['altitudeM', 0.1 + 0.2, '0.3\u00A0m'],
    // British Summer Time.
    ['intakePassedAt', Date.parse('2026-10-13T08:30:00Z'), '09:30'],
    ['pourDate', '2026-10-16', 'Fri 16 Oct'],
    ['isPrewet', true, 'yes'],
    ['isPrewet', false, 'no'],
    ['note', '', '–'],
    ['note', null, '–'],
    ['placeId', PLACE, 'Fan rack'],
    ['placeId', PLACE.replace('2', '9'), 'one that is gone'],
    ['moistureTarget', 0.05, '0.05'],
  ])('%s %s reads %s', (name, value, words) => {
    expect(rows({ [name]: 'other' }, { [name]: value })[0]?.after).toBe(words)
  })

  it('takes lists apart, and says what was not there', () => {
    const [before, after] = [{ coats: [{ drainSeconds: 45 }] }, { coats: [{ drainSeconds: 60 }, { drainSeconds: 90 }] }]
    expect(rows(before, after)).toEqual([
      { field: 'coats 1, drain', before: '45\u00A0s', after: '60\u00A0s' },
      { field: 'coats 2, drain', before: null, after: '90\u00A0s' },
    ])
  })

  it('stays short, whatever a line holds', () => {
    expect(rows({}, { list: Array.from({ length: 500 }, (_, index) => index) })).toHaveLength(60)
  })
})

it.each([
  ['isWaxAtRoomTemp', 'wax at room temp'],
  ['areVentsAndCorePinsIn', 'vents and core pins in'],
  ['recipeVersionId', 'recipe version'],
  ['issue', 'issue'],
  ['C', 'c'],
])('%s in words is %s', (name, words) => {
  expect(fieldWords(name)).toBe(words)
})
