import { describe, expect, it } from 'vitest'
import { readMoment } from '@/lib/uploads/read-moment'
import { readRow } from '@/lib/uploads/read-row'
import { uploadSettings, type RowOrder, type UploadSettings } from '@/lib/uploads/upload-settings'
import { inOrder, instantsOf } from '@/lib/uploads/wall-clock'

const wall = (text: string) => Date.parse(`${text}Z`)
const iso = (at: number | undefined) => new Date(at ?? Number.NaN).toISOString()

// Clock changes after the IANA time zone database.
describe('wall clocks', () => {
  it.each([
    ['Europe/Berlin', '2026-07-01T12:00', ['2026-07-01T10:00:00.000Z']],
    ['Europe/Berlin', '2026-10-25T02:30', ['2026-10-25T00:30:00.000Z', '2026-10-25T01:30:00.000Z']],
    ['Europe/Berlin', '2026-10-25T03:00', ['2026-10-25T02:00:00.000Z']],
    ['Europe/Berlin', '2026-10-25T01:59', ['2026-10-24T23:59:00.000Z']],
    ['Europe/Berlin', '2026-03-29T02:30', []],
    ['Europe/Berlin', '2026-03-29T03:00', ['2026-03-29T01:00:00.000Z']],
    ['America/New_York', '2026-11-01T01:15', ['2026-11-01T05:15:00.000Z', '2026-11-01T06:15:00.000Z']],
    // Half an hour only.
    ['Australia/Lord_Howe', '2026-04-05T01:45', ['2026-04-04T14:45:00.000Z', '2026-04-04T15:15:00.000Z']],
    ['Asia/Kolkata', '2026-10-25T02:30', ['2026-10-24T21:00:00.000Z']],
    ['UTC', '2026-10-25T02:30', ['2026-10-25T02:30:00.000Z']],
  ])('%s, %s', (timeZone, text, expected) => {
    expect(instantsOf(wall(text), timeZone).map(iso)).toEqual(expected)
  })

  it('the first row of a file in the repeated hour means the earlier hour, or the later where the newest row comes first', () => {
    expect(inOrder([10, 70], null, 'oldest first')).toBe(10)
    expect(inOrder([10, 70], null, 'newest first')).toBe(70)
  })
})

const SETTINGS: UploadSettings = {
  encoding: 'utf-8',
  delimiter: ',',
  hasDecimalComma: false,
  linesBefore: 0,
  dateColumn: 0,
  clockColumn: null,
  dateForm: 'ymd',
  zone: 'foundry',
  tempColumn: 1,
  tempUnit: 'degC',
  humidityColumn: 2,
  pressureColumn: null,
  pressureUnit: 'hPa',
}

function readAll(times: readonly string[], order: RowOrder): (string | null)[] {
  let lastAt: number | null = null
  return times.map((time) => {
    const { row, reason } = readRow([time, '21', '50'], {
      settings: SETTINGS,
      timeZone: 'Europe/Berlin',
      order,
      lastAt,
      now: Date.UTC(2027, 0, 1),
    })
    lastAt = row?.measuredAt ?? lastAt
    return row ? iso(row.measuredAt).slice(11, 16) : reason
  })
}

describe('rows over a clock change', () => {
  const LOCAL = ['01:30', '02:00', '02:30', '02:00', '02:30', '03:00'].map((clock) => `2026-10-25 ${clock}`)
  const UTC = ['23:30', '00:00', '00:30', '01:00', '01:30', '02:00']

  it('the hour that is lived twice is told apart by the order of the rows, either way', () => {
    expect(readAll(LOCAL, 'oldest first')).toEqual(UTC)
    expect(readAll(LOCAL.toReversed(), 'newest first')).toEqual(UTC.toReversed())
  })

  it('the hour that is skipped is refused', () => {
    expect(readAll(['2026-03-29 01:55', '2026-03-29 02:05', '2026-03-29 03:00'], 'oldest first')).toEqual([
      '00:55',
      'The time ‘2026-03-29 02:05’ did not exist: the clocks were set forward.',
      '01:00',
    ])
  })
})

describe('written times', () => {
  it.each([
    ['13/10/2026 2:05 PM', null, 'dmy', '2026-10-13T14:05:00.000Z', null],
    ['13/10/2026 12:05 a.m.', null, 'dmy', '2026-10-13T00:05:00.000Z', null],
    ['10-13-26 12:05:09 pm', null, 'mdy', '2026-10-13T12:05:09.000Z', null],
    ['2026.10.13', '14.05.30', 'ymd', '2026-10-13T14:05:30.000Z', null],
    ['Tue 13 Oct 2026, 14:05', null, 'mdy', '2026-10-13T14:05:00.000Z', null],
    ['Oct 13, 2026 2:05 PM', null, 'dmy', '2026-10-13T14:05:00.000Z', null],
    ['20261013T140530Z', null, 'ymd', '2026-10-13T14:05:30.000Z', 0],
    ['20261013', '1405', 'ymd', '2026-10-13T14:05:00.000Z', null],
    ['2026-10-13 14:05:30,250', null, 'ymd', '2026-10-13T14:05:30.250Z', null],
    ['2026-10-13T14:05:00-0330', null, 'ymd', '2026-10-13T14:05:00.000Z', -210],
    ['2026-10-13 14:05 UTC', null, 'ymd', '2026-10-13T14:05:00.000Z', 0],
    ['13. 10. 2026 14:05', null, 'dmy', '2026-10-13T14:05:00.000Z', null],
    ['2026-10-13 24:00', null, 'ymd', '2026-10-14T00:00:00.000Z', null],
    ['1791896700', null, 'epoch s', '2026-10-13T13:05:00.000Z', 0],
    ['1791896700000', null, 'epoch ms', '2026-10-13T13:05:00.000Z', 0],
  ] as const)('%s %s as %s', (date, clock, form, expected, offset) => {
    const moment = readMoment(date, clock, form)
    expect(iso(moment?.wallMs)).toBe(expected)
    expect(moment?.offsetMinutes).toBe(offset)
  })

  it.each([
    ['31/02/2026 14:05', 'dmy'],
    ['13/10/2026 14:05', 'mdy'],
    ['13/10/2026', 'dmy'],
    ['13/10/2026 25:00', 'dmy'],
    ['13/10/2026 13:05 PM', 'dmy'],
    ['13/10/2026 14:60', 'dmy'],
    ['2026-10-13 14:05', 'dmy'],
    ['21.4', 'dmy'],
    ['', 'ymd'],
    ['1791896700', 'epoch ms'],
    ['12', 'epoch s'],
  ] as const)('not %s as %s', (date, form) => {
    expect(readMoment(date, null, form)).toBeNull()
  })
})

describe('settings of an upload', () => {
  it('no column is two things', () => {
    const parsed = uploadSettings.safeParse({ ...SETTINGS, humidityColumn: 1, pressureColumn: 0 })
    expect(parsed.error?.issues.map(({ path, message }) => [path.join('.'), message])).toEqual([
      ['humidityColumn', 'This column is the temperature already.'],
      ['pressureColumn', 'This column is the time already.'],
    ])
  })

  it.each(['+01:00', '-09:30', 'UTC', 'rows', 'foundry'])('takes the zone %s', (zone) => {
    expect(uploadSettings.safeParse({ ...SETTINGS, zone }).success).toBe(true)
  })

  it.each(['+19:00', 'Europe/Berlin', '+1', ''])('refuses the zone %s', (zone) => {
    expect(uploadSettings.safeParse({ ...SETTINGS, zone }).success).toBe(false)
  })
})
