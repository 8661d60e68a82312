import { roughDuration } from '@/lib/format/duration'
import { formatMoment } from '@/lib/format/local-time'
import { nameList } from '@/lib/format/name-list'
import { formatKelvin, formatTemperature, oneDecimal, wholeNumber, type TempUnit } from '@/lib/format/units'
import type { RoomWhatIf, RoomWhatIfAnswer, SharedHarm, Slot } from '@/lib/room/room-what-if-contract'

/** All trees together have to win this much before a machine is worth it. */
const LEAST_GAIN_MS = 30 * 60_000

/** What was turned, and how the room is now. */
export type Turned = {
  choice: RoomWhatIf
  relHumidityNowPct: number | null
  /** By id. */
  placeNames: ReadonlyMap<string, string>
}

type Words = { tempUnit: TempUnit; timeZone: string }

/** Whether anything was turned at all. */
export const isTurned = ({ airTempC, relHumidityPct, airSpeedMps, fansOnAt }: RoomWhatIf): boolean =>
  airTempC !== undefined || relHumidityPct !== undefined || airSpeedMps !== undefined || (fansOnAt?.length ?? 0) > 0

/** What was turned, as the head of a sentence: 'Dehumidifier to 45 %, fans left on at Rack A'. */
function turnedWords({ choice, relHumidityNowPct, placeNames }: Turned, tempUnit: TempUnit): string {
  const { airTempC, relHumidityPct, airSpeedMps, fansOnAt = [] } = choice
  const parts = [
    relHumidityPct === undefined
      ? null
      : `${relHumidityNowPct !== null && relHumidityPct < relHumidityNowPct ? 'dehumidifier to' : 'humidity at'} ${wholeNumber(relHumidityPct)} %`,
    airTempC === undefined ? null : `air at ${formatTemperature(airTempC, tempUnit)}`,
    airSpeedMps === undefined ? null : `${oneDecimal(airSpeedMps)} m/s at the trees`,
    fansOnAt.length === 0 ? null : `fans left on at ${nameList(fansOnAt.map((id) => placeNames.get(id) ?? ''))}`,
  ].filter((part) => part !== null)
  return parts.join(', ').replace(/^./, (first) => first.toUpperCase())
}

const gained = (count: { before: number; after: number } | null): number => (count === null ? 0 : count.after - count.before)

/**
 * An air as a proposal: 'Dehumidifier to 45 %: 6 more trees dry before closing (18:00).' Null where it wins nothing, makes any
 * count smaller, or breaks a limit of chill, swing or heat for any shell in the room: such an air is never proposed.
 */
export function proposalWords(turned: Turned, answer: RoomWhatIfAnswer, { tempUnit, timeZone }: Words): string | null {
  const { beforeClosing, beforeOpening, closesAt, opensAt, soonerMs, now } = answer
  if (!isTurned(turned.choice) || answer.harms.length > 0 || soonerMs < 0) return null
  if (gained(beforeClosing) < 0 || gained(beforeOpening) < 0) return null
  const head = turnedWords(turned, tempUnit)
  const more = (count: number) => `${head}: ${count} more ${count === 1 ? 'tree' : 'trees'} dry before`
  if (closesAt !== null && gained(beforeClosing) > 0) {
    return `${more(gained(beforeClosing))} closing (${formatMoment(closesAt, now, timeZone)}).`
  }
  if (gained(beforeOpening) > 0) return `${more(gained(beforeOpening))} the next opening (${formatMoment(opensAt, now, timeZone)}).`
  return soonerMs >= LEAST_GAIN_MS ? `${head}: ${roughDuration(soonerMs)} won, all trees together.` : null
}

/** What an air would do to the wax, and the remedy. */
export function harmWords({ harm, tags }: SharedHarm, unit: TempUnit): string {
  const trees = nameList(tags)
  switch (harm.code) {
    case 'chill':
      return `Chill, ${trees}: the wet bulb lies ${formatKelvin(harm.wetBulbGapK, unit)} under the air, limit ${formatKelvin(harm.limitK, unit)}. The wax shrinks under the coat. More humidity.`
    case 'too fast':
      return `Too fast, ${trees}: ${wholeNumber(harm.speed * 100)} % of recipe speed, limit ${wholeNumber(harm.limit * 100)} %. A face coat cracks or lifts. Less air, or more humidity.`
    case 'swing':
      return `Swing, ${trees}: ${formatKelvin(Math.abs(harm.deviationK), unit)} ${harm.deviationK > 0 ? 'above' : 'below'} the room at the dip, limit ${formatKelvin(harm.limitK, unit)}. Wax moves under a wet face coat and lifts it.`
    case 'heat':
      return harm.measure === 'room'
        ? `Heat, ${trees}: ${formatTemperature(harm.value, unit)}, limit ${formatTemperature(harm.limit, unit)}. Wax grows and cracks the shell.`
        : `Heat, ${trees}: ${formatKelvin(harm.value, unit)} above the room at coat 1, limit ${formatKelvin(harm.limit, unit)}. Wax grows and cracks the shell.`
    case 'too dry':
      return `Too dry, ${trees}: face coats are not dried under ${wholeNumber(harm.limitPct)} % RH.`
  }
}

/** Whether a tree is ready in time, as a word of the list. */
export const SLOT_WORDS: Record<Slot, string> = {
  closing: 'before closing',
  opening: 'before opening',
  later: 'later',
  'not in sight': 'not in sight',
}
