import { describe, expect, it } from 'vitest'
import { dayPoint, type ClimateSpan } from '@/lib/room/climate-days'
import { bandByReadings } from '@/lib/room/out-of-band'
import { lastDays, rangeEnds, rangeOf, rangeTicks, todayAndMonday, yearOfDays } from '@/lib/room/range'
import { ribbonRuns } from '@/lib/room/ribbon'
import { chartLines } from '@/lib/room/series'
import { buildRoomReading, HOUR, MINUTE, NOW, TIME_ZONE } from './build-room'

const BAND = { lowTempC: 20, highTempC: 23, lowRhPct: 45, highRhPct: 58 }

describe('local days', () => {
  it('are 23 hours in spring, 25 in autumn, and today ends now', () => {
    const hours = (now: string, count: number) => lastDays(Date.parse(now), TIME_ZONE, count).map(({ from, to }) => (to - from) / HOUR)
    expect(hours('2026-03-30T11:00:00Z', 3)).toEqual([24, 23, 12])
    expect(hours('2026-10-26T12:00:00Z', 3)).toEqual([24, 25, 12])
  })

  it('touch each other over a whole year, wherever the foundry is', () => {
    for (const timeZone of [TIME_ZONE, 'America/New_York', 'Asia/Kolkata', 'Australia/Lord_Howe', 'America/Santiago']) {
      const days = yearOfDays(NOW, timeZone)
      expect(days).toHaveLength(366)
      for (const [index, day] of days.entries()) expect(day.from).toBe(days[index - 1]?.to ?? day.from)
      expect(days.at(-1)!.to).toBe(NOW)
    }
  })

  it('know today and Monday, on a Sunday with a clock change too', () => {
    const sunday = Date.parse('2026-10-25T20:00:00Z')
    expect(todayAndMonday(sunday, TIME_ZONE)).toEqual({
      today: Date.parse('2026-10-24T23:00:00Z'),
      monday: Date.parse('2026-10-18T23:00:00Z'),
    })
    expect(todayAndMonday(Date.parse('2026-10-26T09:00:00Z'), TIME_ZONE)).toEqual({
      today: Date.parse('2026-10-26T00:00:00Z'),
      monday: Date.parse('2026-10-26T00:00:00Z'),
    })
  })
})

describe('a range', () => {
  it.each([
    ['14d', '14d'],
    ['1y', '1y'],
    ['48h', '48h'],
    ['2y', '48h'],
    [undefined, '48h'],
    [['14d'], '48h'],
  ])('%o is %s', (word, range) => {
    expect(rangeOf(word)).toBe(range)
  })

  it('has a mark at each local midnight of a fortnight, and at each month of a year', () => {
    const fortnight = rangeTicks('14d', rangeEnds('14d', NOW, TIME_ZONE), TIME_ZONE)
    expect(fortnight.map((tick) => tick.words)).toEqual([
      'Wed 30',
      'Thu 1',
      'Fri 2',
      'Sat 3',
      'Sun 4',
      'Mon 5',
      'Tue 6',
      'Wed 7',
      'Thu 8',
      'Fri 9',
      'Sat 10',
      'Sun 11',
      'Mon 12',
      'Tue 13',
    ])
    const year = rangeTicks('1y', rangeEnds('1y', NOW, TIME_ZONE), TIME_ZONE)
    expect(year.map((tick) => tick.words)).toEqual([
      'Nov',
      'Dec',
      'Jan 2026',
      'Feb',
      'Mar',
      'Apr',
      'May',
      'Jun',
      'Jul',
      'Aug',
      'Sep',
      'Oct',
    ])
    // On a phone a few are enough.
    expect([fortnight, year].map((ticks) => ticks.filter((tick) => tick.isMajor).length)).toEqual([4, 4])
  })
})

const day = (index: number, overrides: Partial<ClimateSpan> = {}): ClimateSpan => ({
  from: NOW + (index - 1) * 24 * HOUR,
  to: NOW + index * 24 * HOUR,
  dose: { likely: 18, low: 18, high: 18 },
  coveredMinutes: 24 * 60,
  gapMinutes: 0,
  hasTyped: false,
  readingCount: 288,
  typedCount: 0,
  meanAirTempC: 21,
  minAirTempC: 18,
  maxAirTempC: 25,
  meanRelHumidityPct: 50,
  minRelHumidityPct: 40,
  maxRelHumidityPct: 70,
  outOfTempMinutes: 0,
  outOfRhMinutes: 0,
  ...overrides,
})

describe('a day as a point', () => {
  it('has its mean between its least and its most, and its speed by the time that was read', () => {
    const point = dayPoint(day(0, { coveredMinutes: 20 * 60, gapMinutes: 120 }), 101_325)
    expect(point).toMatchObject({
      kind: 'day',
      at: NOW - 12 * HOUR,
      airTempC: { likely: 21, low: 18, high: 25 },
      relHumidityPct: { likely: 50, low: 40, high: 70 },
      speed: { likely: 0.9 },
      isGap: true,
      readMinutes: 18 * 60,
    })
    expect(point.wetBulbGapK!.likely).toBeCloseTo(6.3954, 3)
  })

  it('says nothing where nothing was read, and the line stays open there', () => {
    const silent = { coveredMinutes: 0, meanAirTempC: null, minAirTempC: null, maxAirTempC: null, meanRelHumidityPct: null }
    const points = [-4, -3, -2, -1, 0].map((index) => dayPoint(day(index, index === -2 ? silent : {}), 101_325))
    expect(points[2]).toMatchObject({ airTempC: null, relHumidityPct: null, wetBulbGapK: null, speed: null })
    for (const valueOf of ['airTempC', 'speed'] as const) {
      expect(chartLines(points, (point) => point[valueOf]).map((line) => line.points.length)).toEqual([2, 2])
    }
  })

  it('stands for its whole day on the ribbon', () => {
    const points = [-2, -1, 0].map((index) => dayPoint(day(index), 101_325))
    expect(ribbonRuns(points, NOW, 24 * HOUR)).toMatchObject([{ word: 'Slow', speed: 0.75, isForecast: false }])
    const [run] = ribbonRuns(points, NOW, 24 * HOUR)
    expect((run!.to - run!.from) / HOUR).toBeCloseTo(72.5, 5)
  })
})

describe('the newest hours by their readings', () => {
  const IN = { airTempC: 21, relHumidityPct: 50 }
  const COLD = { airTempC: 19.9, relHumidityPct: 58.1 }
  const minutes = (readings: [minute: number, air: typeof IN, source?: 'sensor' | 'typed'][], to = 60) => {
    const made = readings.map(([minute, air, source]) => buildRoomReading(NOW + minute * MINUTE, air, source))
    const hours = bandByReadings(made, BAND, { from: NOW, to: NOW + to * MINUTE })
    return [hours.outOfTempMs, hours.outOfRhMs, hours.unreadMs].map((ms) => ms / MINUTE)
  }

  it.each<[string, Parameters<typeof minutes>, number[]]>([
    [
      'each until the next',
      [
        [
          [-5, IN],
          [10, COLD],
          [40, IN],
        ],
      ],
      [30, 30, 0],
    ],
    ['the newest for half an hour', [[[0, COLD]]], [30, 30, 30]],
    ['a typed one for twelve hours', [[[-60, COLD, 'typed']]], [60, 60, 0]],
    [
      'nothing in a gap of over an hour',
      [
        [
          [-20, COLD],
          [50, COLD],
        ],
      ],
      [10, 10, 50],
    ],
    [
      'one on the edge of the band is inside',
      [
        [
          [0, { airTempC: 20, relHumidityPct: 58 }],
          [55, IN],
        ],
      ],
      [0, 0, 0],
    ],
    [
      'none later than now',
      [
        [
          [0, IN],
          [25, COLD],
        ],
        20,
      ],
      [0, 0, 0],
    ],
    ['none at all', [[]], [0, 0, 60]],
  ])('%s', (_what, given, expected) => {
    expect(minutes(...given)).toEqual(expected)
  })
})
