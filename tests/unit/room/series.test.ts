import { describe, expect, it } from 'vitest'
import { hourStartOf } from '@/lib/drying/dose-hours'
import { forecastHours } from '@/lib/drying/forecast'
import { buildClimate, readingsForFlags } from '@/lib/room/climate'
import { dryingPull, pullWord } from '@/lib/room/drying-pull'
import { localInstant, readingForm } from '@/lib/room/reading-form'
import { linedStretches, ribbonRuns } from '@/lib/room/ribbon'
import { chartLines, exactFrom, roomSeries, type RoomPoint } from '@/lib/room/series'
import { closedStretches, meanSpeed, shiftSpeeds } from '@/lib/room/shift-speeds'
import { dialledTemp, flagWords, onDial, shownTemp, stepped, tempDial, whatIfBody, whatIfPair } from '@/lib/room/coat-what-if'
import { shiftsFrom } from '@/lib/schedule/shifts'
import { estimateOf } from '@/tests/unit/drying/build-estimate'
import { estimateInput } from '@/lib/drying/estimate-contract'
import {
  buildContext,
  buildDerived,
  buildHour,
  buildPlaceFacts,
  buildRoom,
  buildRoomReading,
  HOUR,
  MINUTE,
  NOW,
  RECIPE_AIR,
  TIME_ZONE,
  WEEK,
  type Air,
} from './build-room'
import { readingsBehind } from '@/lib/trees/spans'

const WHERE = { now: NOW, timeZone: TIME_ZONE, pressurePa: 101_325 }
const DAMP: Air = { airTempC: 19, relHumidityPct: 80 }

describe('hours of which a neighbour only was read', () => {
  const hourStart = hourStartOf(NOW) - 5 * HOUR
  // The hour after the refined one is known by its first reading only; its mean is far damper than that.
  const climate = buildClimate(
    {
      sensorId: 1,
      hours: [buildHour(hourStart, RECIPE_AIR), buildHour(hourStart + HOUR, DAMP)],
      readings: [buildRoomReading(hourStart + 10 * MINUTE, RECIPE_AIR), buildRoomReading(hourStart + HOUR + 1, RECIPE_AIR)],
      refinedHours: [hourStart],
      newest: null,
    },
    { now: NOW, timeZone: TIME_ZONE },
  )

  it('count for the flags by their mean, beside the neighbour', () => {
    const humidities = readingsForFlags(climate, hourStart, NOW).map((reading) => reading.relHumidityPct)
    expect(humidities.toSorted((a, b) => a - b)).toEqual([50, 50, 80])
  })

  it('count for the evidence by their rows, and the refined ones by their readings', () => {
    const context = buildContext({ climates: [climate], places: [buildPlaceFacts('Rack')] })
    const behind = readingsBehind(context, [{ placeId: 'Rack', since: hourStart - HOUR }], hourStart + MINUTE, NOW)
    // One reading of the refined hour, the twelve of the other by its row: its neighbour is one of them.
    expect(behind).toMatchObject({ sensorCount: 13, typedCount: 0, firstInWindowAt: hourStart + 10 * MINUTE })
  })
})

describe('the forecast of a figure', () => {
  const hours = Array.from({ length: 10 }, (_, day) => ({ hourStart: hourStartOf(NOW) - (day + 1) * 24 * HOUR, value: 10 + day }))

  it('is the median of the same hours, between the tenth and the ninetieth of a hundred', () => {
    const [first] = forecastHours((row) => row.value, { hours, now: NOW, timeZone: TIME_ZONE, last: 0, horizonHours: 1 })
    expect(first).toEqual({ from: NOW, to: NOW + HOUR, likely: 14.5, low: 10.9, high: 18.1 })
  })

  it('takes the newest value where nothing else is known, and is none where that is not either', () => {
    const ask = (last: number | null) =>
      forecastHours((row: (typeof hours)[number]) => row.value, { hours: [], now: NOW, timeZone: TIME_ZONE, last, horizonHours: 2 })
    expect(ask(7).map((hour) => hour.likely)).toEqual([7, 7])
    expect(ask(null)).toEqual([])
  })
})

describe('the points of the charts', () => {
  const climate = buildRoom(() => RECIPE_AIR)
  const readings = climate.exact.filter((reading) => reading.measuredAt >= exactFrom(NOW))

  it('are hours, then readings, then now, then the forecast, in order', () => {
    const points = roomSeries(climate, readings, WHERE)
    expect(points.map((point) => point.kind).filter((kind, index, kinds) => kind !== kinds[index - 1])).toEqual([
      'hour',
      'reading',
      'now',
      'forecast',
    ])
    for (const [index, point] of points.entries()) expect(point.at).toBeGreaterThanOrEqual(points[index - 1]?.at ?? 0)
    expect(points[0]!.at).toBeGreaterThanOrEqual(NOW - 24 * HOUR)
    expect(points.at(-1)!.at).toBeLessThanOrEqual(NOW + 24 * HOUR)
  })

  it('stay few, however often a sensor speaks', () => {
    const often = Array.from({ length: 7200 }, (_, second) => buildRoomReading(NOW - second * 1000, RECIPE_AIR)).toReversed()
    expect(roomSeries(climate, often, WHERE).length).toBeLessThan(100)
  })

  it('have no now where the sensor is silent', () => {
    const silent = buildRoom(() => RECIPE_AIR, { silentHours: 5 })
    const points = roomSeries(silent, [], WHERE)
    expect(points.some((point) => point.kind === 'now')).toBe(false)
    expect(Math.max(...points.filter((point) => point.kind === 'hour').map((point) => point.at))).toBeLessThan(NOW - 5 * HOUR)
  })
})

const point = (hoursFromNow: number, speed: number | null, overrides: Partial<RoomPoint> = {}): RoomPoint => ({
  at: NOW + hoursFromNow * HOUR,
  kind: hoursFromNow > 0 ? 'forecast' : 'hour',
  airTempC: null,
  relHumidityPct: null,
  wetBulbGapK: null,
  speed: speed === null ? null : { likely: speed, low: speed, high: speed },
  dewPointC: null,
  vaporPressureDeficitPa: null,
  isGap: false,
  isTyped: false,
  readMinutes: null,
  ...overrides,
})

describe('the lines of a chart', () => {
  it('break where nothing was read for long, and where the forecast begins', () => {
    const points = [point(-6, 1), point(-5, 1), point(-2, 1), point(-1, 1), point(0.5, 1), point(1.5, 1)]
    expect(chartLines(points, (each) => each.speed).map((line) => [line.isForecast, line.points.length])).toEqual([
      [false, 2],
      [false, 2],
      [true, 2],
    ])
  })

  it('join from one typed reading to the next while it holds, and not from an hour for which one only held', () => {
    const airTempC = { likely: 20, low: 20, high: 20 }
    const read = [point(-10, 1, { isTyped: true, airTempC }), point(-1, 1, { isTyped: true, airTempC })]
    expect(chartLines(read, (each) => each.airTempC)).toHaveLength(1)
    const held = [point(-10, 1, { isTyped: true }), point(-1, 1, { isTyped: true, airTempC })]
    expect(chartLines(held, (each) => each.speed)).toHaveLength(2)
  })

  it('begin the forecast at now', () => {
    const points = [point(-0.5, 0.9), point(0, 0.8, { kind: 'now' }), point(0.5, 0.7)]
    expect(chartLines(points, (each) => each.speed)[1]).toMatchObject({
      isForecast: true,
      points: [{ at: NOW, likely: 0.8 }, { likely: 0.7 }],
    })
  })
})

describe('the words of the ribbon', () => {
  const hourly = (speeds: (number | null)[], from: number) => speeds.map((speed, index) => point(from + 0.5 + index, speed))
  const words = (points: RoomPoint[]) =>
    ribbonRuns(points, NOW).map((run) => `${run.word} ${Math.round(run.speed * 100)}${run.isForecast ? ' forecast' : ''}`)

  it('are good, slow and very slow by their share of the recipe’s speed', () => {
    expect([1.1, 0.85, 0.84, 0.7, 0.69].map((roomFactor) => pullWord({ roomFactor, wetBulbGapK: 6 }))).toEqual([
      'Good',
      'Good',
      'Slow',
      'Slow',
      'Very slow',
    ])
    expect(pullWord({ roomFactor: 1.2, wetBulbGapK: 8.1 })).toBe('Too dry for face coats')
    expect(dryingPull({ roomFactor: 1.41, wetBulbGapK: 7 })).toBe('too dry for face coats')
  })

  it('run until the word changes, and part at now', () => {
    expect(words([...hourly([0.9, 0.9, 0.9, 0.9, 0.6, 0.6, 0.6, 0.6], -8), ...hourly([0.6, 0.6, 0.6, 0.6], 0)])).toEqual([
      'Good 90',
      'Very slow 60',
      'Very slow 60 forecast',
    ])
  })

  it('pass over a short while of another word', () => {
    expect(words(hourly([0.9, 0.9, 0.9, 0.9, 0.8, 0.9, 0.9, 0.9], -8))).toEqual(['Good 89'])
  })

  it('are none where nothing is known, and start anew behind it', () => {
    expect(words(hourly([0.9, 0.9, 0.9, null, null, null, 0.9, 0.9], -8))).toEqual(['Good 90', 'Good 90'])
  })

  it('line what dries at under 70 %', () => {
    expect(linedStretches(hourly([0.9, 0.69, 0.5, 0.7], -4), NOW)).toEqual([{ from: NOW - 3 * HOUR, to: NOW - HOUR }])
  })
})

describe('speed by shift', () => {
  const shifts = shiftsFrom(NOW - 4 * 24 * HOUR, WEEK, TIME_ZONE)

  it('names days, nights and the closed days between', () => {
    const monday = Date.parse('2026-10-12T10:00:00Z')
    const speeds = shiftSpeeds(buildRoom(() => RECIPE_AIR, { now: monday }).curve, shifts, {
      from: monday - 24 * HOUR,
      to: monday + 12 * HOUR,
      now: monday,
      timeZone: TIME_ZONE,
    })
    expect(speeds.map((shift) => [shift.name, shift.when])).toEqual([
      ['closed Fri 17:00 to Mon 07:00', 'past'],
      ['Mon day', 'now'],
      ['Mon night', 'forecast'],
    ])
    for (const { speed } of speeds) expect(speed).toBeCloseTo(1, 2)
  })

  it('goes on to the next opening over a closure longer than the shifts that are looked up', () => {
    const closures = [{ firstDay: '2026-10-14', lastDay: '2026-11-06' }]
    const calendar = { ...WEEK, closures }
    const opening = shiftsFrom(NOW, calendar, TIME_ZONE)[1]!.opensAt
    expect(opening).toBe(Date.parse('2026-11-09T07:00:00Z'))
    const before = shiftsFrom(NOW - 4 * 24 * HOUR, calendar, TIME_ZONE)
    expect(before.at(-1)!.closesAt).toBeLessThan(opening)
    const speeds = shiftSpeeds(buildRoom(() => RECIPE_AIR).curve, before, { from: NOW - 24 * HOUR, to: opening, ...WHERE })
    expect(speeds.at(-2)).toMatchObject({ name: 'Tue day', when: 'now' })
    expect(speeds.at(-1)).toMatchObject({ name: 'closed Tue 17:00 to Mon 07:00', to: opening, when: 'forecast' })
  })

  it('is that of the closure too, in the middle of a long one', () => {
    const calendar = { ...WEEK, closures: [{ firstDay: '2026-10-01', lastDay: '2026-11-06' }] }
    const around = shiftsFrom(NOW - 4 * 24 * HOUR, calendar, TIME_ZONE)
    const to = around[0]!.opensAt
    expect(shiftSpeeds(buildRoom(() => RECIPE_AIR).curve, around, { from: NOW - 24 * HOUR, to, ...WHERE })).toMatchObject([
      { name: 'closed until Mon 07:00', from: NOW - 24 * HOUR, to, when: 'now' },
    ])
  })

  it('is not known where under half of the time is', () => {
    const { curve } = buildRoom(() => RECIPE_AIR, { days: 1 })
    expect(meanSpeed(curve, NOW - 60 * HOUR, NOW - 56 * HOUR)).toBeNull()
    expect(meanSpeed(curve, NOW - 4 * HOUR, NOW)).toBeCloseTo(1, 2)
  })

  it('shades the closed time, holidays too', () => {
    const closures = [{ firstDay: '2026-10-14', lastDay: '2026-10-14' }]
    const open = shiftsFrom(NOW - 4 * 24 * HOUR, { ...WEEK, closures }, TIME_ZONE)
    expect(closedStretches(open, NOW - 24 * HOUR, NOW + 24 * HOUR)).toEqual([
      { from: Date.parse('2026-10-12T16:00:00Z'), to: Date.parse('2026-10-13T06:00:00Z') },
      { from: Date.parse('2026-10-13T16:00:00Z'), to: NOW + 24 * HOUR },
    ])
  })
})

describe('the form of a typed reading', () => {
  const read = (unit: 'degC' | 'degF', overrides: object = {}) =>
    readingForm(unit, TIME_ZONE).safeParse({
      operationId: '0b9f3a52-6c1d-4a57-9f0e-2f8f5f4f7a11',
      sensorId: '2',
      airTempC: '20,5',
      relHumidityPct: '55',
      measuredAt: '',
      ...overrides,
    })

  it('takes a decimal comma, the unit of whoever types, and no time for now', () => {
    expect(read('degC').data).toEqual({
      operationId: '0b9f3a52-6c1d-4a57-9f0e-2f8f5f4f7a11',
      sensorId: 2,
      airTempC: 20.5,
      relHumidityPct: 55,
      measuredAt: undefined,
    })
    expect(read('degF', { airTempC: '68' }).data?.airTempC).toBe(20)
  })

  it('reads the time by the foundry’s clock, summer and winter', () => {
    expect(read('degC', { measuredAt: '2026-10-13T15:10' }).data?.measuredAt).toBe(Date.parse('2026-10-13T14:10:00Z'))
    expect(localInstant('2026-12-13T15:10', TIME_ZONE)).toBe(Date.parse('2026-12-13T15:10:00Z'))
    expect(localInstant('yesterday', TIME_ZONE)).toBeNull()
  })

  it.each([
    [{ airTempC: '70' }, 'degC', 'airTempC', 'A shell room is between −10 and 60 °C.'],
    [{ airTempC: '150' }, 'degF', 'airTempC', 'A shell room is between 14 and 140 °F.'],
    [{ airTempC: 'warm' }, 'degC', 'airTempC', 'Temperature is a number.'],
    [{ relHumidityPct: '140' }, 'degC', 'relHumidityPct', 'Humidity cannot be over 105 %.'],
    [{ relHumidityPct: '' }, 'degC', 'relHumidityPct', 'Humidity is a number.'],
    [{ sensorId: '' }, 'degC', 'sensorId', 'Choose what was read.'],
    [{ measuredAt: 'noon' }, 'degC', 'measuredAt', 'Give day and time, or leave it empty for now.'],
  ] as const)('refuses %o in %s beside its field', (overrides, unit, path, message) => {
    const issue = read(unit, overrides).error?.issues[0]
    expect([issue?.path.join('.'), issue?.message]).toEqual([path, message])
  })
})

describe('the dials of the what-if', () => {
  it('step in the shown unit and stop at their ends', () => {
    const dial = tempDial('degC')
    expect([stepped(21, dial, 1), stepped(35, dial, 1), stepped(10, dial, -1)]).toEqual([21.5, 35, 10])
    expect(onDial(21.37, dial)).toBe(21.5)
    expect(shownTemp(21.37, 'degF')).toBe(70)
    expect(shownTemp(dialledTemp(71, 'degF'), 'degF')).toBe(71)
  })

  it('ask the door for a coat in the air that is dialled', () => {
    const body = whatIfBody(
      { airTempC: 24, relHumidityPct: 40, airSpeedMps: 1.5, referenceHours: 4, isFaceCoat: true },
      { pressurePa: 101_325, airTempNowC: 21, coolestCoat1C: 20 },
      NOW,
    )
    expect(estimateInput.safeParse(body).error).toBeUndefined()
    expect(body).toMatchObject({ coatNumber: 1, airTempAtDipC: 21, airTempAtCoat1C: 20 })
  })

  it('say a pair of lengths, and when it takes longer than anybody looks ahead', () => {
    const base = { dippedAt: NOW, climate: { constant: { airTempC: 24, relHumidityPct: 40 } }, airSpeedMps: 1.5 }
    expect(whatIfPair(estimateOf(base), NOW)).toEqual({ likely: '2\u00A0h 34\u00A0min', safe: '3\u00A0h 33\u00A0min' })
    expect(whatIfPair(estimateOf({ ...base, climate: { constant: { airTempC: 20, relHumidityPct: 100 } } }), NOW)).toEqual({
      likely: 'over a fortnight',
      safe: 'over a fortnight',
    })
  })

  it('warn in words, in the unit of the reader', () => {
    const words = (overrides: object, unit: 'degC' | 'degF' = 'degC') =>
      estimateOf({ dippedAt: NOW, ...overrides }).flags.map((flag) => flagWords(flag, unit).replaceAll('\u00A0', ' '))
    expect(words({ climate: { constant: { airTempC: 27, relHumidityPct: 60 } } })).toEqual([
      'Heat: 27.0 °C, limit 26.0 °C. Wax grows and cracks the shell.',
    ])
    expect(words({ climate: { constant: { airTempC: 27, relHumidityPct: 60 } } }, 'degF')[0]).toContain('80.6 °F, limit 78.8 °F')
    expect(words({ coatNumber: 1, airTempAtDipC: 18 })).toEqual([
      'Swing: 3.0 K above the room as it is, limit 2.5 K. Wax moves under a wet face coat and lifts it.',
    ])
    expect(words({ coatNumber: 1, climate: { constant: { airTempC: 24, relHumidityPct: 30 } }, airSpeedMps: 0 })[0]).toMatch(
      /^Do not dry a coat in this: the wet bulb lies 10\.\d K under the room/,
    )
  })
})

it('trees of a test room are derived as the floor derives them', () => {
  const context = buildContext()
  expect(buildDerived(context, { hoursAgo: 1 }).state).toBe('wet')
})
