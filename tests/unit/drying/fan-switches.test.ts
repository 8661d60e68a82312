import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { fanOverrides, nextTimetableSwitch, type TimetableStretch } from '@/lib/drying/fan-timetable'
import { fanFactors, placeFactor } from '@/lib/drying/place-factor'
import { placeSpans } from '@/lib/drying/place-spans'
import { doseOverSpans } from '@/lib/drying/tree-dose'
import type { FanHours, FanState, FanSwitch, Instant } from '@/lib/drying/types'
import { buildCurve, buildFactor, HOUR_MS, SEA_LEVEL_PA } from './build-readings'

const MINUTE_MS = 60_000
const ON = placeFactor(1.5, SEA_LEVEL_PA)
const OFF = placeFactor(0.1, SEA_LEVEL_PA)
const everyDay = (onMinute: number, offMinute: number): FanHours[] =>
  [1, 2, 3, 4, 5, 6, 7].map((weekday) => ({ weekday, onMinute, offMinute }))
/** 07:00 to 18:00. */
const DAILY = everyDay(420, 1080)
const always = (fanHours: readonly FanHours[]): TimetableStretch[] => [{ from: 0, to: Infinity, fanHours }]
const said = (...words: [Instant, FanState][]): FanSwitch[] => words.map(([at, state]) => ({ at, state }))

/** Tuesday 13 October 2026. */
const at = (hour: number, minute = 0) => Date.UTC(2026, 9, 13, hour, minute)

function spansOf(switches: FanSwitch[], { from = at(12), to = at(36), fanHours = DAILY, timeZone = 'UTC' } = {}) {
  const place = { airSpeedFansOnMps: 1.5, airSpeedFansOffMps: 0.1, fanDuty: 1, fanHours }
  const overrides = fanOverrides(switches, always(fanHours), timeZone)
  return placeSpans({ from, to, place, overrides, pressurePa: SEA_LEVEL_PA, timeZone })
}
const readable = (spans: ReturnType<typeof spansOf>) =>
  spans.map(({ from, to, placeFactor: factor }) => [
    new Date(from).toISOString().slice(8, 16),
    new Date(to).toISOString().slice(8, 16),
    factor === ON ? 'on' : 'off',
  ])

describe('fans that swing or cycle', () => {
  it('average the factor, not the speed: 2 m/s for 30 % of the time, else 0.1 m/s', () => {
    // By hand: 0.3 x 1.28995 + 0.7 x 0.52136. The mean speed, 0.67 m/s, would give 0.873.
    const swinging = { airSpeedFansOnMps: 2, airSpeedFansOffMps: 0.1, fanDuty: 0.3, fanHours: [] }
    expect(fanFactors(swinging, 101_325).on).toBeCloseTo(0.75194, 4)
  })

  it('lie between the two air speeds, and never over the factor of the mean speed', () => {
    const speed = fc.double({ min: 0.1, max: 20, noNaN: true })
    fc.assert(
      fc.property(speed, speed, fc.double({ min: 0, max: 1, noNaN: true }), (airSpeedFansOnMps, airSpeedFansOffMps, fanDuty) => {
        const { on, off } = fanFactors({ airSpeedFansOnMps, airSpeedFansOffMps, fanDuty, fanHours: [] }, SEA_LEVEL_PA)
        const blown = placeFactor(airSpeedFansOnMps, SEA_LEVEL_PA)
        expect(off).toBe(placeFactor(airSpeedFansOffMps, SEA_LEVEL_PA))
        expect(on).toBeCloseTo(fanDuty * blown + (1 - fanDuty) * off, 12)
        const mean = Math.min(20, fanDuty * airSpeedFansOnMps + (1 - fanDuty) * airSpeedFansOffMps)
        expect(on).toBeLessThanOrEqual(placeFactor(mean, SEA_LEVEL_PA) + 1e-9)
      }),
    )
  })

  it.each([-0.01, 1.01, Number.NaN])('have no duty of %d', (fanDuty) => {
    expect(() => fanFactors({ airSpeedFansOnMps: 1, airSpeedFansOffMps: 0.1, fanDuty, fanHours: [] }, SEA_LEVEL_PA)).toThrow(RangeError)
  })

  it('swing only while they are on', () => {
    const place = { airSpeedFansOnMps: 2, airSpeedFansOffMps: 0.1, fanDuty: 0.3, fanHours: DAILY }
    const spans = placeSpans({ from: at(12), to: at(24), place, overrides: [], pressurePa: SEA_LEVEL_PA, timeZone: 'UTC' })
    const { on, off } = fanFactors(place, SEA_LEVEL_PA)
    expect(spans.map((span) => span.placeFactor)).toEqual([on, off])
  })
})

describe("a person's word on the fans", () => {
  it('holds from the touch to the next switch of the timetable', () => {
    expect(readable(spansOf(said([at(14, 10), 'off'])))).toEqual([
      ['13T12:00', '13T14:10', 'on'],
      ['13T14:10', '14T07:00', 'off'],
      ['14T07:00', '14T12:00', 'on'],
    ])
  })

  it('holds across midnight', () => {
    expect(readable(spansOf(said([at(20), 'on'])))).toEqual([
      ['13T12:00', '13T18:00', 'on'],
      ['13T18:00', '13T20:00', 'off'],
      ['13T20:00', '14T12:00', 'on'],
    ])
    expect(nextTimetableSwitch(always(DAILY), at(20), 'UTC')).toBe(at(31))
  })

  it('is undone by a second touch, to the millisecond', () => {
    const plain = readable(spansOf([]))
    const off = said([at(14, 10), 'off'])
    for (const back of ['on', 'timetable'] as const) {
      expect(readable(spansOf([...off, { at: at(14, 30), state: back }]))).toEqual([
        ['13T12:00', '13T14:10', 'on'],
        ['13T14:10', '13T14:30', 'off'],
        ['13T14:30', '13T18:00', 'on'],
        ...plain.slice(1),
      ])
      expect(readable(spansOf([...off, { at: at(14, 10), state: back }]))).toEqual(plain)
    }
  })

  it('counts for as long as it stood, twice in one minute too', () => {
    const spans = spansOf(said([at(14) + 5000, 'off'], [at(14) + 12_000, 'on'], [at(14) + 40_000, 'off'], [at(14) + 41_000, 'timetable']))
    expect(spans.slice(0, 5).map(({ to }) => to - at(14))).toEqual([5000, 12_000, 40_000, 41_000, 4 * HOUR_MS])
  })

  it('holds until it is taken back where there is no timetable, or one that never switches', () => {
    for (const fanHours of [[], everyDay(0, 1440)]) {
      const [, second] = spansOf(said([at(14), fanHours.length === 0 ? 'on' : 'off']), { fanHours, to: at(24 * 40) })
      expect([second?.from, second?.to]).toEqual([at(14), at(24 * 40)])
      expect(nextTimetableSwitch(always(fanHours), at(14), 'UTC')).toBeNull()
    }
  })

  it('stands still where it was said long before', () => {
    expect(readable(spansOf(said([at(-24 * 300), 'on']), { fanHours: [] }))).toEqual([['13T12:00', '14T12:00', 'on']])
  })

  it('ends where the timetable itself is changed into another state, and not where only the rest of it changes', () => {
    const changed = (later: readonly FanHours[]): TimetableStretch[] => [
      { from: 0, to: at(16), fanHours: DAILY },
      { from: at(16), to: Infinity, fanHours: later },
    ]
    const ends = (later: readonly FanHours[]) => fanOverrides(said([at(14), 'off']), changed(later), 'UTC')[0]?.to
    expect(ends(DAILY)).toBe(at(18))
    expect(ends(everyDay(420, 1200))).toBe(at(20))
    expect(ends([])).toBe(at(16))
  })

  it.each([
    { name: 'forward in Berlin', timeZone: 'Europe/Berlin', touch: Date.UTC(2026, 2, 28, 20), until: Date.UTC(2026, 2, 29, 5) },
    { name: 'back in Berlin', timeZone: 'Europe/Berlin', touch: Date.UTC(2026, 9, 24, 20), until: Date.UTC(2026, 9, 25, 6) },
    { name: 'forward in New York', timeZone: 'America/New_York', touch: Date.UTC(2026, 2, 8, 3), until: Date.UTC(2026, 2, 8, 11) },
    { name: 'back in New York', timeZone: 'America/New_York', touch: Date.UTC(2026, 10, 1, 2), until: Date.UTC(2026, 10, 1, 12) },
  ])('holds until 07:00 by the wall clock when the clocks go $name', ({ timeZone, touch, until }) => {
    const [override] = fanOverrides(said([touch, 'on']), always(DAILY), timeZone)
    expect(override).toEqual({ from: touch, to: until, isOn: true })
  })

  it('leaves fans on all night on through the hour that comes twice', () => {
    const timetable = everyDay(0, 1440)
    expect(nextTimetableSwitch(always(timetable), Date.UTC(2026, 9, 24, 12), 'Europe/Berlin')).toBeNull()
    expect(nextTimetableSwitch(always(timetable), Date.UTC(2026, 2, 28, 12), 'Europe/Berlin')).toBeNull()
  })
})

describe('a dose with switches of the fans', () => {
  const start = Date.UTC(2026, 9, 23)
  const days = 4
  const curve = buildCurve(
    Array.from({ length: days * 48 + 1 }, (_, index) => buildFactor(start + (index * HOUR_MS) / 2, 0.3 + ((index * 7) % 11) / 10)),
  )
  const state = fc.constantFrom<FanState>('on', 'off', 'timetable')
  const instant = fc.integer({ min: start, max: start + days * 24 * HOUR_MS })
  const switchList = fc
    .array(fc.tuple(instant, state), { maxLength: 12 })
    .map((words) => said(...words.toSorted(([one], [other]) => one - other)))
  const zone = fc.constantFrom('UTC', 'Europe/Berlin', 'America/New_York')
  const spansWith = (switches: FanSwitch[], timeZone: string, from: number, to: number) =>
    spansOf(switches, { from, to, timeZone }).map((span) => Object.assign(span, { curve }))

  it('adds up over any moment in between', () => {
    fc.assert(
      fc.property(switchList, zone, fc.tuple(instant, instant, instant), (switches, timeZone, three) => {
        const [from, middle, to] = three.toSorted((one, other) => one - other) as [number, number, number]
        const dose = (a: number, b: number) => doseOverSpans(spansWith(switches, timeZone, a, b), a, b).likely
        expect(dose(from, middle) + dose(middle, to)).toBeCloseTo(dose(from, to), 9)
      }),
    )
  })

  it('is split exactly at the switch', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 10 * HOUR_MS }), (after) => {
        const from = start + 8 * HOUR_MS
        const touch = from + Math.min(after, 9 * HOUR_MS)
        const to = start + 20 * HOUR_MS
        const room = (a: number, b: number) => doseOverSpans([{ from: a, to: b, placeFactor: 1, curve }], a, b).likely
        const dose = doseOverSpans(spansWith(said([touch, 'off']), 'UTC', from, to), from, to).likely
        expect(dose).toBeCloseTo(ON * room(from, touch) + OFF * room(touch, to), 9)
      }),
    )
  })

  it('is that of whoever spoke last at each moment, found minute by minute', () => {
    fc.assert(
      fc.property(switchList, zone, (switches, timeZone) => {
        const to = start + days * 24 * HOUR_MS
        const spans = spansOf(switches, { from: start, to, timeZone })
        const plain = spansOf([], { from: start, to, timeZone })
        const factorAt = (list: typeof spans, moment: number) => list.find((span) => span.from <= moment && moment < span.to)?.placeFactor
        const edges = plain.slice(1).map((span) => span.from)
        for (let moment = start; moment < to; moment += 17 * MINUTE_MS) {
          const last = switches.findLast((word) => word.at <= moment)
          const stands = last && last.state !== 'timetable' && !edges.some((edge) => edge > last.at && edge <= moment)
          const expected = stands ? (last.state === 'on' ? ON : OFF) : factorAt(plain, moment)
          expect(factorAt(spans, moment)).toBe(expected)
        }
      }),
      { numRuns: 40 },
    )
  })
})
