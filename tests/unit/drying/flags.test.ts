import { describe, expect, it } from 'vitest'
import {
  chillFlag,
  dampFlag,
  dampInStoreFlag,
  DEFAULT_FLAG_LIMITS,
  heatFlag,
  isOverdue,
  staleFlag,
  swingFlag,
  type SwingInput,
} from '@/lib/drying/flags'
import { placeFactor } from '@/lib/drying/place-factor'
import { DEFAULT_LONGEST_WAIT_HOURS } from '@/lib/drying/recipe-defaults'
import { roomFactor, wetBulbDepressionK } from '@/lib/drying/room-factor'
import { buildReading, hour, SEA_LEVEL_PA, START } from './build-readings'

const atHumidity = (hours: number, relHumidityPct: number) => buildReading(hours, 18, relHumidityPct)
const atTemp = (hours: number, airTempC: number) => buildReading(hours, airTempC, 50)

const damp = (from: number, to: number) => Array.from({ length: to - from + 1 }, (_, index) => atHumidity(from + index, 80))

describe('dampFlag', () => {
  it('is up when every reading of the hour before the call lies above 75 %', () => {
    const readings = [atHumidity(0, 60), atHumidity(1, 76), atHumidity(1.5, 80), atHumidity(2, 78)]
    expect(dampFlag(readings, hour(2))).toEqual({ code: 'damp', relHumidityPct: 76, limitPct: 75 })
  })

  it('is down when one of them does not, or lies on the limit', () => {
    expect(dampFlag([atHumidity(1, 90), atHumidity(1.5, 75), atHumidity(2, 90)], hour(2))).toBeNull()
  })

  it('does not count readings after the call', () => {
    expect(dampFlag([atHumidity(1, 90), atHumidity(2.1, 50)], hour(2))).not.toBeNull()
  })

  it('goes by a typed reading for as long as it holds, and by nothing after that', () => {
    const typed = [buildReading(0, 18, 80, 'typed')]
    expect(dampFlag(typed, hour(11))).toMatchObject({ relHumidityPct: 80 })
    expect(dampFlag(typed, hour(13))).toBeNull()
    expect(dampFlag([atHumidity(0, 80)], hour(2))).toBeNull()
    expect(dampFlag([], hour(2))).toBeNull()
  })

  it('takes the limit of the foundry', () => {
    expect(dampFlag([atHumidity(1.5, 70)], hour(2), { ...DEFAULT_FLAG_LIMITS, dampPct: 65 })).toMatchObject({ limitPct: 65 })
  })
})

describe('dampInStoreFlag', () => {
  it('is up after 12 h above 75 % on end, and stays up', () => {
    const readings = [atHumidity(0, 60), ...damp(1, 13), atHumidity(14, 50), atHumidity(15, 50)]
    expect(dampInStoreFlag(readings, START, hour(12.9))).toBeNull()
    expect(dampInStoreFlag(readings, START, hour(13))).toEqual({ code: 'damp in store', relHumidityPct: 80, limitPct: 75, since: hour(1) })
    expect(dampInStoreFlag(readings, START, hour(40))).toMatchObject({ since: hour(1) })
  })

  it('is down when a dry reading breaks it up, or when it was damp before the last call only', () => {
    expect(dampInStoreFlag([...damp(0, 8), atHumidity(8.5, 70), ...damp(9, 18)], START, hour(18))).toBeNull()
    expect(dampInStoreFlag(damp(0, 20), hour(15), hour(20))).toBeNull()
    expect(dampInStoreFlag([], START, hour(20))).toBeNull()
  })

  it('does not take the silence of a dead sensor for damp', () => {
    expect(dampInStoreFlag(damp(0, 11), START, hour(40))).toBeNull()
  })
})

const inRoom = (coatNumber: number, airTempC: number, relHumidityPct: number, airSpeedMps: number) =>
  chillFlag({
    coatNumber,
    wetBulbDepressionK: wetBulbDepressionK({ airTempC, relHumidityPct }, SEA_LEVEL_PA),
    roomFactor: roomFactor({ airTempC, relHumidityPct }, SEA_LEVEL_PA),
    placeFactor: placeFactor(airSpeedMps, SEA_LEVEL_PA),
  })

describe('chillFlag', () => {
  it.each([1, 2])('warns coat %d above 8 K and stops it above 10 K', (coatNumber) => {
    expect(inRoom(coatNumber, 21, 40, 0.1)).toBeNull() // 7.87 K
    expect(inRoom(coatNumber, 24, 35, 0.1)).toMatchObject({ code: 'chill', level: 'warn', measure: 'depression', limit: 8 }) // 9.41 K
    expect(inRoom(coatNumber, 25, 25, 0.1)).toMatchObject({ level: 'stop', measure: 'depression', limit: 10 }) // 11.5 K
  })

  it('warns coats 1 and 2 of a drying speed above 1.4', () => {
    // Room factor about 1.21 at 7.73 K, place factor 1.29.
    expect(inRoom(1, 24, 45, 2)).toMatchObject({ level: 'warn', measure: 'speed', limit: 1.4 })
    expect(inRoom(1, 24, 45, 1)).toBeNull()
    expect(inRoom(3, 24, 45, 2)).toBeNull()
  })

  it('warns later coats above 12 K only, and never stops them', () => {
    expect(inRoom(3, 25, 25, 3)).toBeNull() // 11.5 K
    expect(inRoom(3, 30, 25, 0.5)).toMatchObject({ level: 'warn', limit: 12 }) // 13.7 K
  })
})

describe('swingFlag', () => {
  const coat: SwingInput = { coatNumber: 1, isWet: true, dippedAt: START, airTempAtDipC: 21 }
  const warm = [0, 1, 2, 3].map((step) => atTemp(1 + step / 12, 23.6 + step / 10))

  it('is up after 10 min more than 2.5 K from the temperature at the dip', () => {
    expect(swingFlag(coat, warm, hour(1 + 9 / 60))).toBeNull()
    const flag = swingFlag(coat, warm, hour(1 + 10 / 60))
    expect(flag).toMatchObject({ code: 'swing', limitK: 2.5, since: hour(1) })
    expect(flag).toHaveProperty('deviationK', expect.closeTo(2.8, 9))
  })

  it('is up for a room that falls, and keeps the sign', () => {
    const cold = [0, 1, 2].map((step) => atTemp(1 + step / 12, 18))
    expect(swingFlag(coat, cold, hour(1.5))).toMatchObject({ deviationK: -3 })
  })

  it('is down when the room comes back within 10 min', () => {
    expect(swingFlag(coat, [atTemp(1, 24), atTemp(1.1, 22), atTemp(1.2, 24), atTemp(1.3, 22)], hour(2))).toBeNull()
  })

  it('has a strict level', () => {
    const readings = [atTemp(1, 23), atTemp(1.25, 23)]
    expect(swingFlag(coat, readings, hour(1.25))).toBeNull()
    expect(swingFlag({ ...coat, limitK: DEFAULT_FLAG_LIMITS.strictSwingK }, readings, hour(1.25))).toMatchObject({ limitK: 1.7 })
  })

  it.each<{ name: string; input: SwingInput }>([
    { name: 'coat 3', input: { ...coat, coatNumber: 3 } },
    { name: 'a coat that is no longer wet', input: { ...coat, isWet: false } },
    { name: 'a coat dipped at an unknown temperature', input: { ...coat, airTempAtDipC: null } },
    { name: 'a coat dipped after it', input: { ...coat, dippedAt: hour(2) } },
  ])('is down for $name', ({ input }) => {
    expect(swingFlag(input, warm, hour(2.5))).toBeNull()
  })
})

describe('heatFlag', () => {
  it.each([
    { airTempC: 26, airTempAtCoat1C: 23, hasWax: true, flag: null },
    { airTempC: 26.1, airTempAtCoat1C: null, hasWax: true, flag: { code: 'heat', measure: 'room', value: 26.1, limit: 26 } },
    { airTempC: 25, airTempAtCoat1C: 21.5, hasWax: true, flag: { code: 'heat', measure: 'above coat 1', value: 3.5, limit: 3 } },
    { airTempC: 25, airTempAtCoat1C: null, hasWax: true, flag: null },
    { airTempC: 30, airTempAtCoat1C: 20, hasWax: false, flag: null },
  ])('is $flag at $airTempC degC, coat 1 at $airTempAtCoat1C, wax $hasWax', ({ flag, ...input }) => {
    expect(heatFlag(input)).toEqual(flag)
  })
})

describe('staleFlag', () => {
  it('is up 30 min after a sensor reading and 12 h after a typed one', () => {
    const sensor = { measuredAt: START, source: 'sensor' } as const
    const typed = { measuredAt: START, source: 'typed' } as const
    expect(staleFlag(sensor, hour(0.5))).toBeNull()
    expect(staleFlag(sensor, hour(0.75))).toEqual({ code: 'stale', source: 'sensor', minutes: 45, limitMinutes: 30 })
    expect(staleFlag(typed, hour(12))).toBeNull()
    expect(staleFlag(typed, hour(13))).toEqual({ code: 'stale', source: 'typed', minutes: 780, limitMinutes: 720 })
    expect(staleFlag(null, START)).toBeNull()
  })
})

describe('isOverdue', () => {
  it.each([
    { kind: 'face' as const, hours: 24, overdue: false },
    { kind: 'face' as const, hours: 24.1, overdue: true },
    { kind: 'backup' as const, hours: 72, overdue: false },
    { kind: 'backup' as const, hours: 72.1, overdue: true },
  ])('is $overdue for a $kind coat after $hours h', ({ kind, hours, overdue }) => {
    expect(isOverdue(hours, DEFAULT_LONGEST_WAIT_HOURS[kind])).toBe(overdue)
  })
})
