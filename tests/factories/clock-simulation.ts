import { millisecondsInDay, millisecondsInHour, millisecondsInMinute } from 'date-fns/constants'
import { demoAirAt } from '@/lib/demo/climate'
import { seededRandom, type Random } from '@/lib/demo/random'
import { hourDoses, hourStartOf } from '@/lib/drying/dose-hours'
import {
  learnFromCoat,
  observeMoisture,
  observeSurface,
  observeVerdict,
  priorOf,
  sharedBefore,
  surfaceCooling,
  thetaPosterior,
  withoutPrior,
  type Observation,
  type Theta,
} from '@/lib/drying/evidence'
import { forecastSegments } from '@/lib/drying/forecast'
import { moistureRatio } from '@/lib/drying/moisture'
import { DEFAULT_SIGMA, needBand } from '@/lib/drying/need'
import { placeFactor } from '@/lib/drying/place-factor'
import { roomFactor, wetBulbDepressionK } from '@/lib/drying/room-factor'
import { roomSegments } from '@/lib/drying/room-segments'
import { doseOverSpans, instantWhenDose } from '@/lib/drying/tree-dose'
import type { Air, DryingSpan, Instant, RoomCurve, RoomReading } from '@/lib/drying/types'

// A foundry that was never there: what the clock says of its coats, against when they are truly dry. The truth is drawn from what the
// clock assumes, so this shows how much its evidence and its learning win if the assumptions hold; that they do, only a real room shows.

const PRESSURE_PA = 101_325
/** Monday 4 January 2027, 00:00 UTC. */
const START = Date.UTC(2027, 0, 4)
const DAYS = 60
const STEP_MS = 30 * millisecondsInMinute
const HISTORY_DAYS = 14
const HORIZON_HOURS = 96

const ROOMS = 4
const SHELLS = 50
const NEEDS = [4, 4.16]
const TARGET = 0.1
const TIMER_HOURS = 4
const AIR_SPEEDS_MPS = [0.5, 1, 1.5]

/** ln scale: the recipe's own error, and what lies between its coats, of which half the variance is the tree's. */
const RECIPE_ERROR = 0.2
const COAT_SCATTER = 0.15
const HALF_SCATTER = COAT_SCATTER / Math.SQRT2

/** Errors of the measurements. */
const MOISTURE_ERROR = 0.03
const TOUCH_ERROR = 0.15
const SURFACE_ERROR_K = 0.5
const CRITICAL_MOISTURE = 0.45

const gauss = (random: Random): number => Math.sqrt(-2 * Math.log(1 - random())) * Math.cos(2 * Math.PI * random())

type Room = { airAt: (at: Instant) => Air; curve: RoomCurve; forecastAt: (hour: Instant) => RoomCurve }

/** The demo foundry's room over the days: humid nights, a dehumidifier by day but not on Sundays, a front now and then. */
function makeRoom(seed: number): Room {
  const climate = { seed, startsAt: START, timeZone: 'UTC' }
  const readings: RoomReading[] = []
  for (let at = START; at <= START + DAYS * millisecondsInDay; at += STEP_MS) {
    const air = demoAirAt(climate, 'shell room', at)
    readings.push({ ...air, measuredAt: at, source: 'sensor', roomFactor: roomFactor(air, PRESSURE_PA) })
  }
  const curve = roomSegments(readings, { now: readings.at(-1)!.measuredAt })
  const hours = hourDoses(curve, START, START + DAYS * millisecondsInDay)
  const forecasts = new Map<Instant, RoomCurve>()
  return {
    curve,
    airAt: (at) => readings[Math.round((at - START) / STEP_MS)]!,
    forecastAt: (now) => {
      const known = forecasts.get(now)
      if (known) return known
      const index = (now - START) / millisecondsInHour
      const forecast = forecastSegments({
        hours: hours.slice(Math.max(0, index - HISTORY_DAYS * 24), index),
        lastRoomFactor: readings[index * 2]!.roomFactor,
        now,
        timeZone: 'UTC',
        horizonHours: HORIZON_HOURS,
      })
      forecasts.set(now, forecast)
      return forecast
    },
  }
}

type Told = { earliestAt: Instant | null; likelyAt: Instant | null; safeAt: Instant | null }

/** What the clock says at a whole hour, by what it believes of the coat. */
function tell({ room, factor, dippedAt, need }: Coat, now: Instant, theta: Theta): Told {
  const spans: DryingSpan[] = [
    { from: dippedAt, to: now, placeFactor: factor, curve: room.curve },
    { from: now, to: Infinity, placeFactor: factor, curve: room.forecastAt(now) },
  ]
  const { low, likely, high } = needBand(need * Math.exp(theta.mean), theta.sd)
  const when = (amount: number) => instantWhenDose(spans, dippedAt, amount, 'likely')
  return { earliestAt: when(low), likelyAt: when(likely), safeAt: when(high) }
}

type Coat = { room: Room; factor: number; dippedAt: Instant; need: number; trueNeed: number; dryAt: Instant }

function doseAt({ room, factor, dippedAt }: Coat, at: Instant): number {
  return doseOverSpans([{ from: dippedAt, to: Infinity, placeFactor: factor, curve: room.curve }], dippedAt, at).likely
}

/** One look at a coat, by one of the three ways, at a whole hour while it dries. */
function look(coat: Coat, at: Instant, random: Random): Observation | null {
  const dose = doseAt(coat, at)
  const seen = { dose, need: coat.need, moistureTarget: TARGET }
  const left = moistureRatio(dose, coat.trueNeed, TARGET)
  const way = Math.floor(random() * 3)
  if (way === 0) return observeMoisture(seen, Math.min(0.98, Math.max(0.02, left + MOISTURE_ERROR * gauss(random))))
  if (way === 1) return observeVerdict(seen, Math.log(dose / coat.trueNeed) + TOUCH_ERROR * gauss(random) > 0 ? 'dry' : 'not yet')
  const air = coat.room.airAt(at)
  const cooledK = Math.min(1, left / CRITICAL_MOISTURE) * wetBulbDepressionK(air, PRESSURE_PA)
  return observeSurface(seen, surfaceCooling(air.airTempC - cooledK + SURFACE_ERROR_K * gauss(random), air, PRESSURE_PA))
}

/** How far off and how often inside: the errors of the likely time in minutes, and whether the true time lay from earliest to safe. */
export type Score = { errors: number[]; inside: boolean[] }

const WAYS = ['timer', 'timer by experience', 'untrained', 'with evidence', 'after learning', 'after learning, with evidence'] as const
export type Way = (typeof WAYS)[number]

export type Simulation = Record<Way, Score>

const rooms = new Map<number, Room>()

/**
 * One foundry: fifty shells of two coats in a changing room. Each coat is looked at twice while it dries. The first half of the shells
 * teaches the recipe; all ways are scored on the coats of the second half.
 */
export function simulateFoundry(seed: number): Simulation {
  const random = seededRandom(seed)
  // A few rooms serve all foundries: making one costs more than drying fifty shells in it.
  const room = rooms.get(seed % ROOMS) ?? makeRoom(seed % ROOMS)
  rooms.set(seed % ROOMS, room)
  const recipe = RECIPE_ERROR * gauss(random)
  const scores = Object.fromEntries(WAYS.map((way): [Way, Score] => [way, { errors: [], inside: [] }])) as Simulation
  const outcomes: Theta[] = []
  const took: number[] = []
  let learned: Theta = { mean: 0, sd: DEFAULT_SIGMA }

  for (let shell = 0; shell < SHELLS; shell += 1) {
    const isScored = shell >= SHELLS / 2
    if (shell === SHELLS / 2) learned = learnRecipe(outcomes)
    const tree = HALF_SCATTER * gauss(random)
    const factor = placeFactor(AIR_SPEEDS_MPS[Math.floor(random() * AIR_SPEEDS_MPS.length)]!, PRESSURE_PA)
    // Dipped in working hours, after a fortnight of readings, the shells one after the other.
    let dippedAt =
      START + Math.floor(15 + (shell / SHELLS) * (DAYS - 25)) * millisecondsInDay + (7 + Math.floor(random() * 10)) * millisecondsInHour
    let shared = sharedBefore(DEFAULT_SIGMA)
    let sharedLearned = { ...sharedBefore(learned.sd), mean: learned.mean }
    for (const need of NEEDS) {
      const trueNeed = need * Math.exp(recipe + tree + HALF_SCATTER * gauss(random))
      const dryAt = instantWhenDose(
        [{ from: dippedAt, to: Infinity, placeFactor: factor, curve: room.curve }],
        dippedAt,
        trueNeed,
        'likely',
      )!
      const coat: Coat = { room, factor, dippedAt, need, trueNeed, dryAt }
      const looks = [0.3 + 0.4 * random(), 0.6 + 0.5 * random()].map((share) => {
        const due = instantWhenDose(
          [{ from: dippedAt, to: Infinity, placeFactor: factor, curve: room.curve }],
          dippedAt,
          share * need,
          'likely',
        )!
        return Math.max(hourStartOf(due), dippedAt + millisecondsInHour)
      })
      const seen = looks.flatMap((at) => look(coat, at, random) ?? [])
      const last = Math.max(...looks)
      const prior = priorOf(shared)
      const posterior = thetaPosterior(prior, seen)
      shared = learnFromCoat(shared, prior, posterior)
      if (isScored) {
        const priorLearned = priorOf(sharedLearned)
        const posteriorLearned = thetaPosterior(priorLearned, seen)
        sharedLearned = learnFromCoat(sharedLearned, priorLearned, posteriorLearned)
        score(scores.timer, dryAt, after(dippedAt, TIMER_HOURS * millisecondsInHour))
        score(scores['timer by experience'], dryAt, after(dippedAt, medianOf(took)))
        score(scores.untrained, dryAt, tell(coat, dippedAt, { mean: 0, sd: DEFAULT_SIGMA }))
        score(scores['with evidence'], dryAt, tell(coat, last, posterior))
        score(scores['after learning'], dryAt, tell(coat, dippedAt, learned))
        score(scores['after learning, with evidence'], dryAt, tell(coat, last, posteriorLearned))
      } else {
        const before = { mean: 0, sd: DEFAULT_SIGMA }
        const outcome = withoutPrior(before, thetaPosterior(before, seen))
        if (outcome) outcomes.push(outcome)
        took.push(dryAt - dippedAt)
      }
      // The next coat goes on the day after it is dry, whatever anybody says.
      dippedAt = hourStartOf(dryAt) + millisecondsInDay
    }
  }
  return scores
}

/** A timer says one time and no band. */
const after = (dippedAt: Instant, ms: number): Told => ({ earliestAt: null, likelyAt: dippedAt + ms, safeAt: null })

const medianOf = (values: readonly number[]): number => values.toSorted((a, b) => a - b)[values.length >> 1]!

/** The proposal of a recipe: each finished coat counts with its own variance and the scatter between coats, precisions add. */
function learnRecipe(outcomes: readonly Theta[]): Theta {
  let [precision, sum] = [1 / RECIPE_ERROR ** 2, 0]
  for (const { mean, sd } of outcomes) {
    const weight = 1 / (sd ** 2 + COAT_SCATTER ** 2)
    precision += weight
    sum += weight * mean
  }
  return { mean: sum / precision, sd: Math.sqrt(1 / precision + COAT_SCATTER ** 2) }
}

function score({ errors, inside }: Score, dryAt: Instant, { earliestAt, likelyAt, safeAt }: Told): void {
  errors.push(likelyAt === null ? Infinity : Math.abs(likelyAt - dryAt) / millisecondsInMinute)
  inside.push((earliestAt ?? Infinity) <= dryAt && dryAt <= (safeAt ?? Infinity))
}

/** Means over foundries: the median error of the likely time in minutes, and the share of coats dry between earliest and safe, percent. */
export function figuresOf(simulations: readonly Simulation[]): Record<Way, { medianErrorMinutes: number; insidePct: number }> {
  const mean = (values: readonly number[]) => values.reduce((sum, value) => sum + value, 0) / values.length
  return Object.fromEntries(
    WAYS.map((way) => [
      way,
      {
        medianErrorMinutes: mean(simulations.map((each) => medianOf(each[way].errors))),
        insidePct: mean(simulations.map((each) => 100 * mean(each[way].inside.map(Number)))),
      },
    ]),
  ) as Record<Way, { medianErrorMinutes: number; insidePct: number }>
}
