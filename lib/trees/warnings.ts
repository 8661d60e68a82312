import { millisecondsInHour } from 'date-fns/constants'
import { chillFlag, dampFlag, heatFlag, isOverdue, swingFlag } from '@/lib/drying/flags'
import { wetBulbDepressionK } from '@/lib/drying/room-factor'
import { formatKelvin, formatTemperature, type TempUnit } from '@/lib/format/units'
import type { Warning } from '@/lib/queue/contract'
import type { RoomClimate } from '@/lib/room/climate'
import { dampInStore, type Assessment } from '@/lib/trees/assess'
import { readingsAround, type FloorContext } from '@/lib/trees/spans'
import { saidWords } from '@/lib/trees/word'

const one = (value: number) => value.toFixed(1)
/** A sentence that holds temperatures, in both units. */
const inBoth = (sentence: (unit: TempUnit) => string) => ({ text: sentence('degC'), textInDegF: sentence('degF') })
const whole = (value: number) => String(Math.round(value))

/**
 * What a person should know of a tree before the next act, each with its own sentence and the shell room's remedy.
 * Nothing here forbids anything: the log records what has happened.
 */
export function treeWarnings(assessment: Assessment, context: FloorContext, { willMissPour }: { willMissPour: boolean }): Warning[] {
  const { facts } = assessment
  if (facts.scrappedAt !== null || facts.releasedAt !== null) return []
  const place = context.places.get(facts.stays.at(-1)?.placeId ?? '')
  const climate = place && context.climates.get(place.sensorId)
  return [
    ...beforeDip(assessment),
    ...(climate ? ofTheAir(assessment, climate, context) : []),
    ...ofTheWait(assessment, context),
    ...(willMissPour ? [{ code: 'pour at risk', level: 'warn', text: 'It will miss its pour date as things stand.' } as const] : []),
  ]
}

function beforeDip({ facts, state, call, newest, isLastOn, dippableSince }: Assessment): Warning[] {
  const warnings: Warning[] = []
  if (facts.hold) warnings.push({ code: 'held', level: 'stop', text: `Held by ${facts.hold.by}: ${facts.hold.reason}` })
  if (newest === null) {
    if (facts.intakePassedAt === null) warnings.push({ code: 'intake open', level: 'warn', text: 'The wax has not passed intake yet.' })
    return warnings
  }
  if (call === null) return warnings
  const targetPct = whole(newest.moistureTarget * 100)
  // Somebody who felt it has confirmed it for the next dip; before a release the missing air still counts.
  if (call.isUnknown && (dippableSince === null || isLastOn)) {
    warnings.push({
      code: 'unknown',
      level: 'warn',
      text: 'No reading tells how the air was: confirm by touch, weight or temperature before the next act.',
    })
  } else if (dippableSince === null && !isLastOn) {
    warnings.push({
      code: 'still wet',
      level: 'warn',
      text: `Coat ${newest.number} is still wet: ${whole(call.moistureRatio * 100)} % of its water left. Dip at ${targetPct} % or less. A coat dipped wet can lift off the wax.`,
    })
  }
  if (call.needsConfirmation && call.isLikelyDry) {
    warnings.push({
      code: 'confirm first',
      level: 'warn',
      text: 'One typed reading stands behind this call: likely dry, confirm by touch or read the hygrometer again.',
    })
  }
  if (facts.word?.verdict === 'dry' && call.guardReachedAt === null && !isLastOn) {
    const left = call.isUnknown ? 'the clock knows nothing of it' : `by the clock ${whole(call.moistureRatio * 100)} % of its water is left`
    warnings.push({ code: 'said dry', level: 'warn', text: `${saidWords(facts.word)}; ${left}.` })
  }
  if (facts.word?.verdict === 'not yet' && state !== 'wet' && state !== 'drying') {
    warnings.push({ code: 'said not yet', level: 'warn', text: `${saidWords(facts.word)}.` })
  }
  return warnings
}

function ofTheAir(assessment: Assessment, climate: RoomClimate, context: FloorContext): Warning[] {
  const { facts, newest, call, isLastOn, dippableSince, next } = assessment
  const warnings: Warning[] = []
  const air = climate.isStale ? null : climate.newest
  const depressionK = air ? wetBulbDepressionK(air, context.pressurePa) : null
  const placeFactor =
    context.placeSpans.get(facts.stays.at(-1)?.placeId ?? '')?.find((span) => span.from <= context.now && span.to > context.now)
      ?.placeFactor ?? 1
  if (newest && call && air && depressionK !== null && dippableSince === null) {
    const chill = chillFlag({ coatNumber: newest.number, wetBulbDepressionK: depressionK, roomFactor: air.roomFactor, placeFactor })
    if (chill?.code === 'chill') {
      const { measure, value, limit } = chill
      const why = (unit: TempUnit) =>
        measure === 'depression'
          ? `the wet bulb lies ${formatKelvin(value, unit)} under the room, limit ${formatKelvin(limit, unit)}`
          : `it dries at ${one(value)} times the reference speed, limit ${one(limit)}`
      warnings.push({
        code: 'chill',
        level: chill.level,
        ...inBoth((unit) => `Coat ${newest.number} chills the wax: ${why(unit)}. Raise the humidity or take air off the tree.`),
      })
    }
    const readings = readingsAround(context, facts.stays, newest.dippedAt, context.now)
    const swing = swingFlag(
      { coatNumber: newest.number, isWet: true, dippedAt: newest.dippedAt, airTempAtDipC: newest.airTempC },
      readings,
      context.now,
    )
    if (swing?.code === 'swing') {
      warnings.push({
        code: 'swing',
        level: 'warn',
        ...inBoth(
          (unit) =>
            `The room has moved ${formatKelvin(Math.abs(swing.deviationK), unit)} ${swing.deviationK > 0 ? 'up' : 'down'} since the dip, limit ${formatKelvin(swing.limitK, unit)}: coat ${newest.number} can lift. Hold the temperature.`,
        ),
      })
    }
  }
  if (air) {
    const heat = heatFlag({ airTempC: air.airTempC, airTempAtCoat1C: facts.coats[0]?.airTempC ?? null, hasWax: true })
    if (heat?.code === 'heat') {
      const { measure, value, limit } = heat
      const sentence = (unit: TempUnit) =>
        measure === 'room'
          ? `The room is at ${formatTemperature(value, unit)}, limit ${formatTemperature(limit, unit)}: wax grows and cracks the shell. Cool the room.`
          : `The room is ${formatKelvin(value, unit)} warmer than at coat 1, limit ${formatKelvin(limit, unit)}: wax grows and cracks the shell. Cool the room.`
      warnings.push({ code: 'heat', level: 'warn', ...inBoth(sentence) })
    }
    const mayTakeFace = next?.kind === 'face' && (newest === null || dippableSince !== null)
    const tooDry =
      mayTakeFace && depressionK !== null
        ? chillFlag({ coatNumber: next.number, wetBulbDepressionK: depressionK, roomFactor: air.roomFactor, placeFactor })
        : null
    if (tooDry) {
      warnings.push({
        code: 'too dry for face',
        level: 'warn',
        text: 'The air here is too dry or too fast for a face coat: it can crack or lift. Raise the humidity or choose a calmer place.',
      })
    }
  }
  const dryAt = isLastOn ? call?.safeAt : call?.guardReachedAt
  if (call && dryAt && dryAt <= context.now) {
    const damp = dampFlag(readingsAround(context, facts.stays, dryAt - millisecondsInHour, dryAt), dryAt)
    if (damp?.code === 'damp') {
      warnings.push({
        code: 'damp room',
        level: 'warn',
        text: `Dry by the clock, room damp (${whole(damp.relHumidityPct)} % RH, limit ${damp.limitPct} %): confirm by touch, weight or temperature.`,
      })
    }
    const stored = isLastOn ? dampInStore(facts, call, context) : null
    if (stored?.code === 'damp in store') {
      warnings.push({
        code: 'damp in store',
        level: 'warn',
        text: 'Dried out, but the room has been damp for 12 h since: weigh, warm or confirm it before release.',
      })
    }
  }
  return warnings
}

function ofTheWait({ newest, isLastOn, dippableSince }: Assessment, context: FloorContext): Warning[] {
  if (newest === null || isLastOn) return []
  const { longestWaitHours } = newest
  const hours = (context.now - newest.dippedAt) / millisecondsInHour
  if (!isOverdue(hours, longestWaitHours)) return []
  const text =
    dippableSince === null
      ? `Coat ${newest.number} has hung ${whole(hours)} h, longest wait ${whole(longestWaitHours)} h, and is not dry yet: look at the air on this tree.`
      : `Coat ${newest.number} has hung ${whole(hours)} h, longest wait ${whole(longestWaitHours)} h: over-dry coats powder and lift. Look it over before the dip.`
  return [{ code: 'overdue', level: 'warn', text }]
}
