import { holdsUntil, LONGEST_INTERVAL_MS } from '@/lib/drying/room-segments'
import type { Air, RoomReading } from '@/lib/drying/types'

/** The room that a foundry wants, degC and %, both ends inside. */
export type Band = { lowTempC: number; highTempC: number; lowRhPct: number; highRhPct: number }

/** How long a room was outside its band, and how long nobody read it, milliseconds. */
export type BandHours = { elapsedMs: number; outOfTempMs: number; outOfRhMs: number; unreadMs: number }

const isOutOfTemp = ({ airTempC }: Air, band: Band): boolean => airTempC < band.lowTempC || airTempC > band.highTempC
const isOutOfRh = ({ relHumidityPct }: Air, band: Band): boolean => relHumidityPct < band.lowRhPct || relHumidityPct > band.highRhPct

/**
 * The newest hours, of which the hourly table does not tell all yet, by their readings: each speaks until the next one, or for as long
 * as it holds.
 *
 * @param readings in order, with the nearest one before `from`.
 */
export function bandByReadings(readings: readonly RoomReading[], band: Band, { from, to }: { from: number; to: number }): BandHours {
  const past = readings.filter((reading) => reading.measuredAt <= to)
  let readMs = 0
  let outOfTempMs = 0
  let outOfRhMs = 0
  for (const [index, reading] of past.entries()) {
    const start = Math.max(from, reading.measuredAt)
    const ms = Math.max(0, Math.min(to, speaksUntil(reading, past[index + 1])) - start)
    readMs += ms
    if (isOutOfTemp(reading, band)) outOfTempMs += ms
    if (isOutOfRh(reading, band)) outOfRhMs += ms
  }
  return { elapsedMs: to - from, outOfTempMs, outOfRhMs, unreadMs: to - from - readMs }
}

function speaksUntil(reading: RoomReading, next: RoomReading | undefined): number {
  if (next === undefined) return holdsUntil(reading)
  if (reading.source === 'typed') return Math.min(holdsUntil(reading), next.measuredAt)
  // Nobody knows what was in a longer gap.
  return next.measuredAt - reading.measuredAt > LONGEST_INTERVAL_MS ? reading.measuredAt : next.measuredAt
}

/** Two stretches of time together. */
export const addBandHours = (one: BandHours, other: BandHours): BandHours => ({
  elapsedMs: one.elapsedMs + other.elapsedMs,
  outOfTempMs: one.outOfTempMs + other.outOfTempMs,
  outOfRhMs: one.outOfRhMs + other.outOfRhMs,
  unreadMs: one.unreadMs + other.unreadMs,
})
