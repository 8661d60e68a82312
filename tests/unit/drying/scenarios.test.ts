import { describe, expect, it } from 'vitest'
import { callCoat, windowReadings } from '@/lib/drying/coat-call'
import { dampFlag } from '@/lib/drying/flags'
import { moistureRatio } from '@/lib/drying/moisture'
import { placeFactor } from '@/lib/drying/place-factor'
import { placeSpans } from '@/lib/drying/place-spans'
import { roomSegments } from '@/lib/drying/room-segments'
import { doseOverSpans, instantWhenDose } from '@/lib/drying/tree-dose'
import type { CoatForClock, DryingSpan, FanHours, RoomReading } from '@/lib/drying/types'
import { DOSE_TOLERANCE, EARLY, HUMID_NIGHT, LATE, MOISTURE_TOLERANCE, TIME_TOLERANCE_H } from '@/tests/factories/worked-days'
import { buildCoat, buildCurve, buildReading, buildSpan, hour, hoursAfterStart, SEA_LEVEL_PA, START } from './build-readings'

// Worked days of our own, at sea level. The expected numbers were computed twice, by prefix sums and by a fine quadrature
// in another language. Tolerances: dose 0.2 %, moisture ratio 0.002, time 1 min.

const relativeError = (actual: number, expected: number) => Math.abs(actual / expected - 1)
const error = (actual: number, expected: number) => Math.abs(actual - expected)

/** A time of day, on the evening of the dip or the morning after, in hours after 18:00. */
const clock = (hours: number, minutes: number) => ((hours + 6) % 24) + minutes / 60

function callAt(hours: number, readings: readonly RoomReading[], speedMps: number, coat: CoatForClock) {
  const now = hour(hours)
  const spans: DryingSpan[] = [buildSpan(roomSegments(readings, { now }), placeFactor(speedMps, SEA_LEVEL_PA))]
  return callCoat({ coat, spans, now, readings: windowReadings(readings, coat.clockStartsAt, now) })
}

describe('a steady room, 24 degC and 40 %, in the fan path', () => {
  const readings = Array.from({ length: 11 }, (_, index) => buildReading(index / 2, 24, 40))

  it('is dry at 1.873 h, 2.580 h and 3.555 h', () => {
    const call = callAt(5, readings, 1.5, buildCoat())
    expect(error(hoursAfterStart(call.earliestAt), 1.873)).toBeLessThan(TIME_TOLERANCE_H)
    expect(error(hoursAfterStart(call.likelyAt), 2.58)).toBeLessThan(TIME_TOLERANCE_H)
    expect(error(hoursAfterStart(call.safeAt), 3.555)).toBeLessThan(TIME_TOLERANCE_H)
    expect(call).toMatchObject({ isLikelyDry: true, isSafeDry: true, isUnknown: false, guardReachedAt: call.likelyAt })
  })

  it.each([
    { hours: 1, dose: 1.55, moisture: 0.4441 },
    { hours: 2, dose: 3.1005, moisture: 0.1755 },
  ])('has taken $dose reference hours after $hours h', ({ hours, dose, moisture }) => {
    const call = callAt(hours, readings, 1.5, buildCoat())
    expect(relativeError(call.dose.likely, dose)).toBeLessThan(DOSE_TOLERANCE)
    expect(error(call.moistureRatio, moisture)).toBeLessThan(MOISTURE_TOLERANCE)
    expect(call.isLikelyDry).toBe(false)
  })
})

describe('a dehumidifier that trips after an hour and a half', () => {
  const dry = [0, 0.5, 1, 1.5].map((hours) => buildReading(hours, 21, 50))
  const damp = [1.6, ...Array.from({ length: 25 }, (_, index) => 2 + index / 2)].map((hours) => buildReading(hours, 20, 70))
  const readings = [...dry, ...damp]
  const coat = buildCoat({ needReferenceHours: 2.5 })

  it.each([
    { hours: 1.5, dose: 1.1925 },
    { hours: 3, dose: 1.8749 },
    { hours: 6, dose: 3.2046 },
  ])('has given $dose reference hours after $hours h', ({ hours, dose }) => {
    expect(
      relativeError(doseOverSpans([buildSpan(buildCurve(readings), placeFactor(0.5, SEA_LEVEL_PA))], START, hour(hours)).likely, dose),
    ).toBeLessThan(DOSE_TOLERANCE)
  })

  it('is likely dry at 4.410 h and safe at 6.541 h', () => {
    const call = callAt(14, readings, 0.5, coat)
    expect(error(hoursAfterStart(call.likelyAt), 4.41)).toBeLessThan(TIME_TOLERANCE_H)
    expect(error(hoursAfterStart(call.safeAt), 6.541)).toBeLessThan(TIME_TOLERANCE_H)
  })

  it('is not dry where a fixed three-hour timer would have called it', () => {
    const call = callAt(3, readings, 0.5, coat)
    expect(error(call.moistureRatio, 0.1868)).toBeLessThan(MOISTURE_TOLERANCE)
    expect(call.isLikelyDry).toBe(false)
  })
})

describe('a humid night on the rack, 18:00 to noon', () => {
  const readings = HUMID_NIGHT.map((air) => buildReading(...air))
  const span = buildSpan(buildCurve(readings), placeFactor(0.5, SEA_LEVEL_PA))

  it('has the room factors of the table', () => {
    const expected = [
      1.0288, 0.9467, 0.846, 0.7186, 0.6, 0.5155, 0.4345, 0.3746, 0.3171, 0.2785, 0.2412, 0.2247, 0.2617, 0.4163, 0.6778, 0.9373, 1.1056,
      1.17, 1.2366,
    ]
    for (const [index, factor] of expected.entries()) expect(Math.abs(readings[index]!.roomFactor - factor)).toBeLessThan(3e-4)
  })

  it.each([
    { name: '24:00', hours: 6, dose: 3.4647 },
    { name: '08:00', hours: 14, dose: 5.5875 },
    { name: '12:00', hours: 18, dose: 8.9026 },
  ])('has given $dose reference hours by $name', ({ hours, dose }) => {
    expect(relativeError(doseOverSpans([span], START, hour(hours)).likely, dose)).toBeLessThan(DOSE_TOLERANCE)
  })

  it('has a coat of need 4 dry at 22:34, 01:46 and 07:51', () => {
    const call = callAt(18, readings, 0.5, buildCoat())
    expect(error(hoursAfterStart(call.earliestAt), clock(22, 34))).toBeLessThan(TIME_TOLERANCE_H)
    expect(error(hoursAfterStart(call.likelyAt), clock(1, 46))).toBeLessThan(TIME_TOLERANCE_H)
    expect(error(hoursAfterStart(call.safeAt), clock(7, 51))).toBeLessThan(TIME_TOLERANCE_H)
  })

  it('is damp at 01:46, so touch or weight must confirm', () => {
    expect(dampFlag(readings, hour(clock(1, 46)))).toMatchObject({ code: 'damp', relHumidityPct: 78 })
    expect(dampFlag(readings, hour(clock(22, 34)))).toBeNull()
  })

  it('has a recess that needs 6 dry at 08:41 and safe at 11:33', () => {
    const coat = buildCoat({ needReferenceHours: 6, recessClass: 'deep recess', guard: 'safe' })
    const morning = callAt(14, readings, 0.5, coat)
    expect(error(morning.moistureRatio, 0.1189)).toBeLessThan(MOISTURE_TOLERANCE)
    expect(morning).toMatchObject({ isLikelyDry: false, guardReachedAt: null })
    const noon = callAt(18, readings, 0.5, coat)
    expect(error(hoursAfterStart(noon.likelyAt), clock(8, 41))).toBeLessThan(TIME_TOLERANCE_H)
    expect(error(hoursAfterStart(noon.safeAt), clock(11, 33))).toBeLessThan(TIME_TOLERANCE_H)
    expect(noon.guardReachedAt).toBe(noon.safeAt)
  })

  it('has a coat dipped at 20:30 dry at 08:24', () => {
    const dippedAt = hour(clock(20, 30))
    expect(relativeError(doseOverSpans([span], dippedAt, hour(14)).likely, 3.7661)).toBeLessThan(DOSE_TOLERANCE)
    expect(error(hoursAfterStart(instantWhenDose([span], dippedAt, 4, 'likely')), clock(8, 24))).toBeLessThan(TIME_TOLERANCE_H)
  })
})

describe('readings that are missing, then come late', () => {
  const early = EARLY.map((air) => buildReading(...air))
  const late = LATE.map((air) => buildReading(...air))
  const coat = buildCoat({ needReferenceHours: 3.5 })

  it('credits a gap low, bounds it both ways and is likely dry at 4.65 h', () => {
    const call = callAt(5, early, 1, coat)
    expect(relativeError(call.dose.likely, 3.762)).toBeLessThan(DOSE_TOLERANCE)
    expect(relativeError(call.dose.low, 2.505)).toBeLessThan(DOSE_TOLERANCE)
    expect(relativeError(call.dose.high, 4.846)).toBeLessThan(DOSE_TOLERANCE)
    expect(error(call.moistureRatio, 0.0827)).toBeLessThan(MOISTURE_TOLERANCE)
    expect(error(hoursAfterStart(call.likelyAt), 4.65)).toBeLessThan(TIME_TOLERANCE_H)
  })

  it('credits the late batch in full and is likely dry at 3.840 h', () => {
    const call = callAt(5, [...early, ...late], 1, coat)
    expect(relativeError(call.dose.likely, 4.3563)).toBeLessThan(DOSE_TOLERANCE)
    expect(call.dose.low).toBe(call.dose.likely)
    expect(call.dose.high).toBe(call.dose.likely)
    expect(error(call.moistureRatio, 0.0534)).toBeLessThan(MOISTURE_TOLERANCE)
    expect(error(hoursAfterStart(call.likelyAt), 3.84)).toBeLessThan(TIME_TOLERANCE_H)
  })

  it('has two gaps where only one row of the batch arrives', () => {
    expect(relativeError(callAt(5, [...early, late[2]!], 1, coat).dose.likely, 4.0436)).toBeLessThan(DOSE_TOLERANCE)
  })
})

const everyDay = (onMinute: number, offMinute: number): FanHours[] =>
  [1, 2, 3, 4, 5, 6, 7].map((weekday) => ({ weekday, onMinute, offMinute }))

describe('fans that go off for the night, 18 degC and 75 %, need 4.0, dipped 17:30', () => {
  const dippedAt = hour(-0.5)
  const readings = Array.from({ length: 40 }, (_, index) => buildReading(-0.5 + index / 2, 18, 75))
  const curve = buildCurve(readings)
  const spansWith = (fanHours: FanHours[]): DryingSpan[] =>
    placeSpans({
      from: dippedAt,
      to: hour(18),
      place: { airSpeedFansOnMps: 1.5, airSpeedFansOffMps: 0.1, fanDuty: 1, fanHours },
      overrides: [],
      pressurePa: SEA_LEVEL_PA,
      timeZone: 'UTC',
    }).map((span) => Object.assign(span, { curve }))

  it('is dry at 01:27 with the fans left on', () => {
    expect(error(hoursAfterStart(instantWhenDose(spansWith(everyDay(0, 1440)), dippedAt, 4, 'likely')), clock(1, 27))).toBeLessThan(
      TIME_TOLERANCE_H,
    )
  })

  it('has 3.17 reference hours at 07:30 and is dry at 09:09 with the fans off from 17:30 to 07:30', () => {
    const spans = spansWith(everyDay(7 * 60 + 30, 17 * 60 + 30))
    expect(relativeError(doseOverSpans(spans, dippedAt, hour(clock(7, 30))).likely, 3.17)).toBeLessThan(DOSE_TOLERANCE)
    expect(error(hoursAfterStart(instantWhenDose(spans, dippedAt, 4, 'likely')), clock(9, 9))).toBeLessThan(TIME_TOLERANCE_H)
  })

  it('is the moisture target exactly at the need', () => {
    expect(moistureRatio(4, 4, 0.1)).toBeCloseTo(0.1, 12)
  })
})
