import { millisecondsInDay, millisecondsInMinute } from 'date-fns/constants'
import { dewPointC, stationPressurePa, vaporPressureDeficitPa } from '@/lib/drying/air'
import { callCoat, windowReadings } from '@/lib/drying/coat-call'
import { LONGEST_DAYS, type EstimateAnswer, type EstimateFlag, type EstimateInput } from '@/lib/drying/estimate-contract'
import { chillFlag, dampFlag, heatFlag, staleFlag, swingFlag } from '@/lib/drying/flags'
import { moistureRatio } from '@/lib/drying/moisture'
import { needReferenceHours } from '@/lib/drying/need'
import { placeFactor } from '@/lib/drying/place-factor'
import type { PlaceSpan } from '@/lib/drying/place-spans'
import { cutCurve, rateAt } from '@/lib/drying/room-curve'
import { roomFactor, wetBulbDepressionK } from '@/lib/drying/room-factor'
import { holdsUntil, onePerInstant, roomSegments } from '@/lib/drying/room-segments'
import { doseOverSpans } from '@/lib/drying/tree-dose'
import type { CoatCall, DryingSpan, Instant, RoomCurve, RoomReading } from '@/lib/drying/types'

/** A constant air is taken as a reading every so often, so that it goes the way of all readings. */
const CONSTANT_STEP_MS = 30 * millisecondsInMinute
const CONSTANT_DAYS = 14

/**
 * What the drying clock makes of one coat in a given air, by the very functions that serve the trees on the floor: need, dose,
 * moisture and the three times at which it is dry, with what is wrong with the air.
 *
 * Shape: a checked body in, the answer of the door out. Units: reference hours, shares, epoch milliseconds.
 *
 * @throws {RangeError} on air or pressure that the schema would have refused.
 * @source our own model; see callCoat, roomFactor and placeFactor.
 */
export function estimate(input: EstimateInput): EstimateAnswer {
  const pressurePa = input.pressurePa ?? stationPressurePa(input.altitudeM ?? 0)
  const start = input.dippedAt + input.drainSeconds * 1000
  const until = Math.max(start, input.until ?? defaultUntil(input))
  const readings = readingsOf(input, { start, until, pressurePa })
  const curve = roomSegments(readings, { now: until })
  const places = placesOf(input, pressurePa)
  const spans = places.map((place): DryingSpan => Object.assign(place, { curve }))
  const { need } = input
  const call = callCoat({
    coat: {
      number: input.coatNumber,
      kind: 'backup',
      clockStartsAt: start,
      roughMinutes: 0,
      needReferenceHours: needReferenceHours({
        recipeReferenceHours: need.referenceHours,
        recipeStucco: need.recipeStucco,
        usedStucco: need.usedStucco ?? need.recipeStucco,
        spacing: need.spacing,
        recessClass: need.recessClass,
        moistureRatioBelow: need.moistureRatioBelow,
        treeTheta: need.theta,
      }),
      moistureTarget: need.moistureTarget,
      guard: 'likely',
      recessClass: need.recessClass,
      airTempAtDipC: null,
      baseSigma: need.baseSigma,
    },
    spans,
    now: until,
    readings: windowReadings(readings, start, until),
  })
  const instants = input.at.length > 0 ? input.at : [until]
  const first = airAtStart(readings, start)
  return {
    need: { ...call.need, sigma: call.sigma },
    creditedFrom: call.creditedFrom,
    until,
    points: instants.map((at) => pointAt(at, { call, spans, curve, places, moistureTarget: need.moistureTarget })),
    dry: { earliestAt: call.earliestAt, likelyAt: call.likelyAt, safeAt: call.safeAt },
    isUnknown: call.isUnknown,
    needsConfirmation: call.needsConfirmation,
    air: first && {
      airTempC: first.airTempC,
      relHumidityPct: first.relHumidityPct,
      wetBulbGapK: wetBulbDepressionK(first, pressurePa),
      dewPointC: dewPointC(first),
      vaporPressureDeficitPa: vaporPressureDeficitPa(first),
    },
    flags: flagsOf({
      input,
      readings,
      curve,
      places,
      call,
      start,
      until,
      pressurePa,
      airTempAtDipC: input.airTempAtDipC ?? first?.airTempC,
    }),
  }
}

function defaultUntil(input: EstimateInput): Instant {
  if (input.climate.constant) return Math.max(input.dippedAt + CONSTANT_DAYS * millisecondsInDay, ...input.at)
  const newest = (input.climate.readings ?? []).reduce((latest, row) => Math.max(latest, row.at), input.dippedAt)
  return Math.min(Math.max(newest, ...input.at), input.dippedAt + LONGEST_DAYS * millisecondsInDay)
}

function readingsOf(
  { climate }: EstimateInput,
  { start, until, pressurePa }: { start: Instant; until: Instant; pressurePa: number },
): RoomReading[] {
  if (climate.constant) {
    const steady = { ...climate.constant, roomFactor: roomFactor(climate.constant, pressurePa), source: 'sensor' as const }
    const readings: RoomReading[] = []
    for (let measuredAt = start; measuredAt < until; measuredAt += CONSTANT_STEP_MS) readings.push({ ...steady, measuredAt })
    return [...readings, { ...steady, measuredAt: until }]
  }
  const rows = climate.readings ?? []
  return onePerInstant(
    rows.map(({ at, airTempC, relHumidityPct, source }) => {
      const air = { airTempC, relHumidityPct }
      return { ...air, measuredAt: at, source, roomFactor: roomFactor(air, pressurePa) }
    }),
  ).filter((reading) => reading.measuredAt <= until)
}

function placesOf({ airSpeedMps, airSpeeds, dippedAt }: EstimateInput, pressurePa: number): PlaceSpan[] {
  const stretches = airSpeeds ?? [{ from: dippedAt, airSpeedMps: airSpeedMps ?? 0 }]
  return stretches.map((stretch, index) => ({
    from: stretch.from,
    to: stretches[index + 1]?.from ?? Infinity,
    placeFactor: placeFactor(stretch.airSpeedMps, pressurePa),
  }))
}

/** The reading that speaks for the clock's start: the last one before it while it holds, else the first one after. */
function airAtStart(readings: readonly RoomReading[], start: Instant): RoomReading | null {
  const before = readings.findLast((reading) => reading.measuredAt <= start)
  if (before && holdsUntil(before) >= start) return before
  return readings.find((reading) => reading.measuredAt > start) ?? null
}

const placeFactorAt = (places: readonly PlaceSpan[], at: Instant): number =>
  (places.findLast((place) => place.from <= at) ?? places[0])?.placeFactor ?? 1

type PointContext = { call: CoatCall; spans: readonly DryingSpan[]; curve: RoomCurve; places: readonly PlaceSpan[]; moistureTarget: number }

function pointAt(at: Instant, { call, spans, curve, places, moistureTarget }: PointContext): EstimateAnswer['points'][number] {
  const dose = doseOverSpans(spans, call.creditedFrom, at)
  // The end of the last stretch still belongs to it.
  const segment = cutCurve(curve, at - 1, at + 1).at(-1)
  const factor = segment ? rateAt(segment, 'likely', Math.min(at, segment.to)) : null
  const atPlace = placeFactorAt(places, at)
  return {
    at,
    dose,
    moistureRatio: {
      likely: moistureRatio(dose.likely, call.need.likely, moistureTarget),
      low: moistureRatio(dose.high, call.need.low, moistureTarget),
      high: moistureRatio(dose.low, call.need.high, moistureTarget),
    },
    roomFactor: factor,
    placeFactor: atPlace,
    speed: factor === null ? null : factor * atPlace,
  }
}

type FlagContext = {
  input: EstimateInput
  readings: readonly RoomReading[]
  curve: RoomCurve
  places: readonly PlaceSpan[]
  call: CoatCall
  start: Instant
  until: Instant
  pressurePa: number
  airTempAtDipC: number | undefined
}

function flagsOf({ input, readings, curve, places, call, start, until, pressurePa, airTempAtDipC }: FlagContext): EstimateFlag[] {
  const { coatNumber, airTempAtCoat1C = null } = input
  const flags: EstimateFlag[] = []
  const wetUntil = call.likelyAt ?? until
  const whileWet = readings.filter((reading) => reading.measuredAt <= wetUntil && holdsUntil(reading) >= start)

  for (const at of ['likely', 'safe'] as const) {
    const dryAt = at === 'likely' ? call.likelyAt : call.safeAt
    const damp = dryAt === null ? null : dampFlag(readings, dryAt)
    if (damp?.code === 'damp') flags.push({ code: 'damp', at, relHumidityPct: damp.relHumidityPct, limitPct: damp.limitPct })
  }

  const speedPartsOf = (reading: RoomReading) => ({
    roomFactor: reading.roomFactor,
    placeFactor: placeFactorAt(places, Math.max(reading.measuredAt, start)),
  })
  const speedOf = (reading: RoomReading) => speedPartsOf(reading).roomFactor * speedPartsOf(reading).placeFactor
  const widestGapK = highest(whileWet, (reading) => wetBulbDepressionK(reading, pressurePa))?.value ?? 0
  const fastest = highest(whileWet, speedOf)
  const hottest = highest(whileWet, (reading) => reading.airTempC)
  // The two measures of chill one by one: where both are crossed the rule itself names the depression only.
  const chill = chillFlag({ coatNumber, wetBulbDepressionK: widestGapK, roomFactor: 0, placeFactor: 0 })
  if (chill?.code === 'chill') flags.push({ code: 'chill', level: chill.level, wetBulbGapK: chill.value, limitK: chill.limit })
  const tooFast = fastest && chillFlag({ coatNumber, wetBulbDepressionK: 0, ...speedPartsOf(fastest.reading) })
  if (tooFast?.code === 'chill') flags.push({ code: 'too fast', speed: tooFast.value, limit: tooFast.limit })

  const swing = swingFlag(
    { coatNumber, isWet: true, dippedAt: input.dippedAt, airTempAtDipC: airTempAtDipC ?? null },
    readings.filter((reading) => reading.measuredAt <= wetUntil),
    wetUntil,
  )
  if (swing?.code === 'swing') flags.push({ code: 'swing', deviationK: swing.deviationK, limitK: swing.limitK, since: swing.since })
  const heat = hottest && heatFlag({ airTempC: hottest.value, airTempAtCoat1C, hasWax: true })
  if (heat?.code === 'heat') flags.push({ code: 'heat', measure: heat.measure, value: heat.value, limit: heat.limit })

  const gaps = cutCurve(curve, call.creditedFrom, Math.min(until, call.safeAt ?? until)).filter((segment) => segment.kind === 'gap')
  const gapMs = gaps.reduce((sum, segment) => sum + (segment.to - segment.from), 0)
  if (gapMs > 0) flags.push({ code: 'gap', minutes: gapMs / millisecondsInMinute })

  const stale = staleFlag(readings.at(-1) ?? null, until)
  if (stale?.code === 'stale') flags.push({ code: 'stale', minutes: stale.minutes, limitMinutes: stale.limitMinutes })
  return flags
}

function highest(
  readings: readonly RoomReading[],
  valueOf: (reading: RoomReading) => number,
): { reading: RoomReading; value: number } | null {
  let top: { reading: RoomReading; value: number } | null = null
  for (const reading of readings) {
    const value = valueOf(reading)
    if (top === null || value > top.value) top = { reading, value }
  }
  return top
}
