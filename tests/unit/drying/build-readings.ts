import { roomFactor } from '@/lib/drying/room-factor'
import { roomSegments } from '@/lib/drying/room-segments'
import type { CoatForClock, DryingSpan, Instant, ReadingSource, RoomCurve, RoomReading } from '@/lib/drying/types'

export const SEA_LEVEL_PA = 101_325
export const MINUTE_MS = 60_000
export const HOUR_MS = 3_600_000

/** 18:00 UTC on 1 September 2026: the zero of every made-up day here. */
export const START: Instant = Date.UTC(2026, 8, 1, 18)

/** The instant so many hours after START. */
export const hour = (hours: number): Instant => Math.round(START + hours * HOUR_MS)

/** Hours after START of an instant; NaN for none, so that a comparison fails. */
export const hoursAfterStart = (at: Instant | null): number => (at === null ? NaN : (at - START) / HOUR_MS)

/** A reading of the room, its factor worked out at sea level. */
export function buildReading(hours: number, airTempC: number, relHumidityPct: number, source: ReadingSource = 'sensor'): RoomReading {
  const factor = roomFactor({ airTempC, relHumidityPct }, SEA_LEVEL_PA)
  return { measuredAt: hour(hours), airTempC, relHumidityPct, roomFactor: factor, source }
}

/** A reading with a factor of its own choosing; the air is made up. */
export function buildFactor(measuredAt: Instant, factor: number, source: ReadingSource = 'sensor'): RoomReading {
  return { measuredAt, airTempC: 21, relHumidityPct: 50, roomFactor: factor, source }
}

export function buildCurve(readings: readonly RoomReading[]): RoomCurve {
  return roomSegments(readings, { now: Math.max(...readings.map((reading) => reading.measuredAt)) })
}

export function buildSpan(curve: RoomCurve, placeFactor: number, overrides: Partial<DryingSpan> = {}): DryingSpan {
  return { from: START, to: Infinity, placeFactor, curve, ...overrides }
}

export function buildCoat(overrides: Partial<CoatForClock> = {}): CoatForClock {
  return {
    number: 3,
    kind: 'backup',
    clockStartsAt: START,
    roughMinutes: 0,
    needReferenceHours: 4,
    moistureTarget: 0.1,
    guard: 'likely',
    recessClass: 'none',
    airTempAtDipC: 21,
    ...overrides,
  }
}
