/** An air at so many hours after the start of a worked day, degC and % RH. */
export type WorkedAir = readonly [hours: number, airTempC: number, relHumidityPct: number]

/**
 * Worked days of our own, at sea level, in the form of the estimate door. Constructed cases, recomputed independently: by prefix
 * sums and by a fine quadrature in another language. Tolerances: dose 0.2 %, moisture ratio 0.002, time 1 min.
 */
export type WorkedDay = {
  name: string
  airs: readonly WorkedAir[] | { constant: { airTempC: number; relHumidityPct: number } }
  airSpeedMps: number
  need: { referenceHours: number; recessClass?: string }
  /** Hours after the start at which the readings end. */
  until: number
  dippedAt?: number
  doses: readonly { hours: number; likely: number; low?: number; high?: number; moistureRatio?: number }[]
  /** Hours after the start. */
  dry: { earliest?: number; likely?: number; safe?: number }
}

export const DOSE_TOLERANCE = 0.002
export const MOISTURE_TOLERANCE = 0.002
export const TIME_TOLERANCE_H = 1 / 60

const NIGHT: readonly (readonly [airTempC: number, relHumidityPct: number])[] = [
  [22, 50],
  [21.5, 53],
  [21, 57],
  [20, 62],
  [19, 67],
  [18.5, 71],
  [18, 75],
  [17.5, 78],
  [17, 81],
  [16.5, 83],
  [16, 85],
  [16, 86],
  [16.5, 84],
  [18, 76],
  [20, 64],
  [22, 54],
  [23, 48],
  [23.5, 46],
  [24, 44],
]
/** A humid night on the rack, 18:00 to noon, hour by hour. */
export const HUMID_NIGHT: readonly WorkedAir[] = NIGHT.map(([airTempC, relHumidityPct], index) => [index, airTempC, relHumidityPct])

const STEP: readonly WorkedAir[] = [
  ...[0, 0.5, 1, 1.5].map((hours): WorkedAir => [hours, 21, 50]),
  ...[1.6, ...Array.from({ length: 25 }, (_, index) => 2 + index / 2)].map((hours): WorkedAir => [hours, 20, 70]),
]

/** Readings with a gap of three and a half hours, and those that come late into it. */
export const EARLY: readonly WorkedAir[] = [
  [0, 21, 50],
  [0.5, 21.2, 49],
  [4, 20, 62],
  [4.5, 20, 61],
  [5, 20.2, 60],
]
export const LATE: readonly WorkedAir[] = [
  [1, 21.2, 49],
  [1.5, 21, 51],
  [2, 20.8, 54],
  [2.5, 20.6, 56],
  [3, 20.4, 58],
  [3.5, 20.2, 60],
]

/** 18:00 is the start: a time of that evening or the morning after, in hours after it. */
const clock = (hours: number, minutes: number) => ((hours + 6) % 24) + minutes / 60

export const WORKED_DAYS: readonly WorkedDay[] = [
  {
    name: 'a steady room, 24 degC and 40 %, in the fan path',
    airs: { constant: { airTempC: 24, relHumidityPct: 40 } },
    airSpeedMps: 1.5,
    need: { referenceHours: 4 },
    until: 5,
    doses: [
      { hours: 1, likely: 1.55, moistureRatio: 0.4441 },
      { hours: 2, likely: 3.1005, moistureRatio: 0.1755 },
    ],
    dry: { earliest: 1.873, likely: 2.58, safe: 3.555 },
  },
  {
    name: 'a dehumidifier that trips after an hour and a half',
    airs: STEP,
    airSpeedMps: 0.5,
    need: { referenceHours: 2.5 },
    until: 14,
    doses: [
      { hours: 1.5, likely: 1.1925 },
      { hours: 3, likely: 1.8749, moistureRatio: 0.1868 },
      { hours: 6, likely: 3.2046 },
    ],
    dry: { likely: 4.41, safe: 6.541 },
  },
  {
    name: 'a humid night on the rack',
    airs: HUMID_NIGHT,
    airSpeedMps: 0.5,
    need: { referenceHours: 4 },
    until: 18,
    doses: [
      { hours: 6, likely: 3.4647 },
      { hours: 14, likely: 5.5875 },
      { hours: 18, likely: 8.9026 },
    ],
    dry: { earliest: clock(22, 34), likely: clock(1, 46), safe: clock(7, 51) },
  },
  {
    name: 'the same night on a deep recess, need 6',
    airs: HUMID_NIGHT,
    airSpeedMps: 0.5,
    need: { referenceHours: 6 / 1.6, recessClass: 'deep recess' },
    until: 18,
    doses: [{ hours: 14, likely: 5.5875, moistureRatio: 0.1189 }],
    dry: { likely: clock(8, 41), safe: clock(11, 33) },
  },
  {
    name: 'the same night on a coat dipped at 20:30',
    airs: HUMID_NIGHT,
    airSpeedMps: 0.5,
    need: { referenceHours: 4 },
    until: 18,
    dippedAt: clock(20, 30),
    doses: [{ hours: 14, likely: 3.7661 }],
    dry: { likely: clock(8, 24) },
  },
  {
    name: 'readings that are missing',
    airs: EARLY,
    airSpeedMps: 1,
    need: { referenceHours: 3.5 },
    until: 5,
    doses: [{ hours: 5, likely: 3.762, low: 2.505, high: 4.846, moistureRatio: 0.0827 }],
    dry: { likely: 4.65 },
  },
  {
    name: 'the same day once its readings have come, late and last',
    airs: [...EARLY, ...LATE],
    airSpeedMps: 1,
    need: { referenceHours: 3.5 },
    until: 5,
    doses: [{ hours: 5, likely: 4.3563, low: 4.3563, high: 4.3563, moistureRatio: 0.0534 }],
    dry: { likely: 3.84 },
  },
  {
    name: 'the same day with one of the late readings only',
    airs: [...EARLY, LATE[2]!],
    airSpeedMps: 1,
    need: { referenceHours: 3.5 },
    until: 5,
    doses: [{ hours: 5, likely: 4.0436 }],
    dry: {},
  },
]

/** 18:00 UTC on 1 September 2026. */
export const WORKED_START = Date.UTC(2026, 8, 1, 18)
const at = (hours: number) => Math.round(WORKED_START + hours * 3_600_000)

/** The body that asks the estimate door for a worked day. */
export function workedBody({ airs, airSpeedMps, need, until, dippedAt = 0, doses }: WorkedDay): Record<string, unknown> {
  const isConstant = 'constant' in airs
  return {
    climate: isConstant
      ? airs
      : {
          readings: airs.map(([hours, airTempC, relHumidityPct]) => ({ at: new Date(at(hours)).toISOString(), airTempC, relHumidityPct })),
        },
    airSpeedMps,
    altitudeM: 0,
    need,
    dippedAt: at(dippedAt),
    until: at(until),
    at: doses.map((dose) => at(dose.hours)),
  }
}
