import { TZDate } from '@date-fns/tz'
import { millisecondsInDay, millisecondsInHour, millisecondsInMinute } from 'date-fns/constants'
import { unitOf } from '@/lib/demo/random'
import type { Air } from '@/lib/drying/types'

/** The air of the demo foundry: the shell room with its dehumidifier, and the net loft above it, which gets less of it. */
export const DEMO_AIRS = ['shell room', 'net loft'] as const
export type DemoAir = (typeof DEMO_AIRS)[number]

export type DemoClimate = {
  seed: number
  /** First reading of the history: the fronts are counted from here, so that the feed goes on where the past ends. */
  startsAt: number
  timeZone: string
}

/** Moist air off the sea comes through this long after the start, and again every eleven days. */
const FIRST_FRONT_MS = 6.4 * millisecondsInDay
const FRONT_EVERY_MS = 11 * millisecondsInDay
const FRONT_HALF_WIDTH_MS = 20 * millisecondsInHour

/** What the dehumidifier brings each air to, and how fully. */
const DRIED: Record<DemoAir, { targetPct: number; share: number; warmerC: number }> = {
  'shell room': { targetPct: 53.5, share: 1, warmerC: 0 },
  'net loft': { targetPct: 58, share: 0.9, warmerC: 0.6 },
}

/** Local hours in which the dehumidifier runs, by weekday from Monday. It is off on Sundays. */
const DEHUMIDIFIER_HOURS: Record<number, readonly [on: number, off: number] | undefined> = {
  1: [6, 18],
  2: [6, 18],
  3: [6, 18],
  4: [6, 18],
  5: [6, 18],
  6: [7, 13],
}
const TAKES_HOLD_HOURS = 1.5
const WEARS_OFF_HOURS = 4

/**
 * The air of the demo foundry at an instant: warm afternoons, humid coastal nights to 80-85 % RH, 50-58 % while the
 * dehumidifier runs, and a front now and then. A pure function, so that history and live feed are one process.
 *
 * Units: degC and % RH as a logger sends them, to one decimal; `at` in epoch milliseconds.
 * @source made up.
 */
export function demoAirAt(climate: DemoClimate, air: DemoAir, at: number): Air {
  const sensor = DEMO_AIRS.indexOf(air)
  const { targetPct, share, warmerC } = DRIED[air]
  // By the sun, so that a clock change moves nothing but people and their machines.
  const sunHour = ((at + sunOffsetMs(climate.timeZone)) / millisecondsInHour) % 24
  const front = frontAt(climate, at)
  const dayDrift = slowNoise(climate.seed, 1, at, 31 * millisecondsInHour)
  const hourDrift = slowNoise(climate.seed, 2 + sensor, at, 2.3 * millisecondsInHour)
  const jitter = unitOf(climate.seed, 10 + sensor, Math.floor(at / 60_000)) - 0.5

  const naturalPct = 71.8 + 9.8 * Math.cos(((sunHour - 4.5) / 24) * 2 * Math.PI) + 1.6 * dayDrift + 5 * front
  const driedPct = targetPct + 2 * hourDrift + 9 * front
  const dried = share * dehumidifiedAt(climate.timeZone, at)
  const relHumidityPct = naturalPct + (driedPct - naturalPct) * dried + 0.7 * hourDrift + 0.6 * jitter

  const airTempC =
    19.7 + warmerC + Math.cos(((sunHour - 15) / 24) * 2 * Math.PI) + 0.5 * dayDrift + 0.15 * hourDrift + 0.6 * front + 0.08 * jitter
  return { airTempC: round(airTempC), relHumidityPct: round(Math.min(relHumidityPct, 88)) }
}

const sunOffsets = new Map<string, number>()
const ANY_YEAR = 2026

/** How far a zone's sun is ahead of Greenwich's, to the hour of its clocks in winter. */
function sunOffsetMs(timeZone: string): number {
  const known = sunOffsets.get(timeZone)
  if (known !== undefined) return known
  const offsets = [0, 6].map((month) => -new TZDate(ANY_YEAR, month, 1, timeZone).getTimezoneOffset() * millisecondsInMinute)
  const offset = Math.min(...offsets)
  sunOffsets.set(timeZone, offset)
  return offset
}

const round = (value: number) => Math.round(value * 10) / 10

/** 0 to 1: how much of a front there is. */
function frontAt({ startsAt }: DemoClimate, at: number): number {
  const sinceFirst = at - startsAt - FIRST_FRONT_MS
  const nearest = Math.max(0, Math.round(sinceFirst / FRONT_EVERY_MS)) * FRONT_EVERY_MS
  const distance = Math.abs(sinceFirst - nearest) / FRONT_HALF_WIDTH_MS
  return distance >= 1 ? 0 : 0.5 + 0.5 * Math.cos(distance * Math.PI)
}

/** 0 to 1: how far the dehumidifier has the room in hand. It takes hold quickly and wears off slowly. */
function dehumidifiedAt(timeZone: string, at: number): number {
  const local = new TZDate(at, timeZone)
  const hours = DEHUMIDIFIER_HOURS[local.getDay() || 7]
  if (!hours) return 0
  const hour = local.getHours() + local.getMinutes() / 60 + local.getSeconds() / 3600
  return Math.min(smooth((hour - hours[0]) / TAKES_HOLD_HOURS), 1 - smooth((hour - hours[1]) / WEARS_OFF_HOURS))
}

const smooth = (share: number) => {
  const inside = Math.min(1, Math.max(0, share))
  return inside * inside * (3 - 2 * inside)
}

/** Noise from -1 to 1 that runs smoothly from one value to the next, a new one every `period`. */
function slowNoise(seed: number, channel: number, at: number, period: number): number {
  const step = Math.floor(at / period)
  const valueOf = (index: number) => 2 * unitOf(seed, channel, index) - 1
  return valueOf(step) + (valueOf(step + 1) - valueOf(step)) * smooth(at / period - step)
}
