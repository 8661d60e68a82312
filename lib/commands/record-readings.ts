import { QueryTypes } from 'sequelize'
import { rewriteHours } from '@/lib/commands/rewrite-hours'
import { writeReadings } from '@/lib/commands/write-readings'
import type { Clock } from '@/lib/core/clock'
import { stationPressurePa } from '@/lib/drying/air'
import type { Air, ReadingSource } from '@/lib/drying/types'
import { loadKnownReadings, type KnownReading } from '@/lib/queries/known-readings'
import { FLAT_REACH_MS, isWithinRange, JUMP_WITHIN_MS, readingMarks, standsBefore, type SetAsideReason } from '@/lib/room/reading-marks'
import { windowsAround } from '@/lib/room/windows'
import { database, Foundry, inTransaction, SensorOffset } from '@/models'

/** So many rows at once: a dip that is logged meanwhile waits for one such piece only. */
const ROWS_AT_ONCE = 400

type Row = Air & {
  measuredAt: number
  /** Of a barometer beside it, 50,000 to 110,000; without one the foundry's altitude stands for it. */
  pressurePa?: number | undefined
}

export type ReadingsInput = {
  sensorId: number
  source: ReadingSource
  /** The member who typed it; null from a sensor. */
  enteredBy: string | null
  /** In any order, known or new, each value a number: what is no air of a room is set aside here. */
  rows: readonly Row[]
}

/**
 * What became of the rows: added and repeated are all of them. `marked` counts those that are kept and count for nothing in the clock,
 * whether they are new or known, and `marks` says for each row why.
 */
export type ReadingsOutcome = { added: number; repeated: number; marked: number; marks: readonly (SetAsideReason | null)[] }

/**
 * Stores readings of one sensor, sets aside what cannot be the air of the room, and rewrites the hours they touch.
 *
 * The same rows give the same readings and hours in whatever order, pieces and number of times they come: of two rows of one instant
 * `standsBefore` decides, and whether one counts follows from the rows around it. A long batch is written in several transactions,
 * each whole in itself, so one that breaks off is simply sent again.
 */
export async function recordReadings(
  { sensorId, source, enteredBy, rows }: ReadingsInput,
  { clock }: { clock: Clock },
): Promise<ReadingsOutcome> {
  const ordered = rows.toSorted((one, other) => one.measuredAt - other.measuredAt)
  let added = 0
  for (let first = 0; first < ordered.length; first += ROWS_AT_ONCE) {
    const piece = ordered.slice(first, first + ROWS_AT_ONCE)
    added += await inTransaction(async () => {
      const foundry = await Foundry.findByPk(1, { rejectOnEmpty: true })
      const altitudePressurePa = stationPressurePa(foundry.altitudeM)
      const received = { source, enteredBy, altitudePressurePa, receivedAt: clock.now() }
      const told = piece.map(({ measuredAt, airTempC, relHumidityPct, pressurePa = null }): Told => ({
        measuredAt,
        airTempC,
        relHumidityPct,
        pressurePa,
        ...received,
      }))
      const within = await addWithinRange(sensorId, told.filter(isWithinRange), {
        pressurePa: altitudePressurePa,
        now: received.receivedAt,
      })
      return within + (await addOutOfRange(sensorId, oneForEachInstant(told.filter((row) => !isWithinRange(row)))))
    })
  }
  const marks = await marksOf(sensorId, rows)
  return { added, repeated: rows.length - added, marked: marks.filter((mark) => mark !== null).length, marks }
}

type Told = Omit<KnownReading, 'setAside'>
/** `isChanged`: by this batch. `stood`: how it was kept before; undefined where its instant was not known. */
type Entry = { reading: Told; isChanged: boolean; stood: KnownReading['setAside'] | undefined }

function oneForEachInstant(rows: readonly Told[]): Told[] {
  const standing = new Map<number, Told>()
  for (const row of rows) {
    const known = standing.get(row.measuredAt)
    if (!known || standsBefore(known, row)) standing.set(row.measuredAt, row)
  }
  return [...standing.values()]
}

/** @returns how many instants were not known. */
async function addWithinRange(sensorId: number, rows: readonly Told[], how: { pressurePa: number; now: number }): Promise<number> {
  if (rows.length === 0) return 0
  const offsets = await SensorOffset.findAll({ where: { sensorId } })
  let added = 0
  const standing = oneForEachInstant(rows)
  // A reading can mark its neighbours, and whatever has stood still for the hours after it.
  for (const { from, to } of windowsAround(
    standing.map(({ measuredAt }) => measuredAt),
    { before: JUMP_WITHIN_MS, after: FLAT_REACH_MS },
  )) {
    const known = await loadKnownReadings(sensorId, from - JUMP_WITHIN_MS - FLAT_REACH_MS, to + JUMP_WITHIN_MS)
    const entries = new Map(
      known.map(({ setAside: stood, ...reading }): [number, Entry] => [reading.measuredAt, { reading, isChanged: false, stood }]),
    )
    for (const row of standing) {
      if (row.measuredAt < from || row.measuredAt > to) continue
      const entry = entries.get(row.measuredAt)
      if (!entry) {
        entries.set(row.measuredAt, { reading: row, isChanged: true, stood: undefined })
        added += 1
      } else if (standsBefore(entry.reading, row)) entries.set(row.measuredAt, { ...entry, reading: row, isChanged: true })
    }
    await settle(sensorId, { entries: [...entries.values()], from, to }, { ...how, offsets })
  }
  return added
}

type Neighbourhood = { entries: readonly Entry[]; from: number; to: number }

/** Puts each reading of [from, to] where its mark says, and works out anew the hours in which what counts has changed. */
async function settle(
  sensorId: number,
  { entries, from, to }: Neighbourhood,
  { now, ...how }: { offsets: readonly SensorOffset[]; pressurePa: number; now: number },
): Promise<void> {
  const ordered = entries.toSorted((one, other) => one.reading.measuredAt - other.reading.measuredAt)
  const marks = readingMarks(ordered.map(({ reading }) => reading))
  const toSettle = ordered
    .map((entry, index) => ({ ...entry, mark: marks[index] ?? null }))
    .filter(({ reading }) => reading.measuredAt >= from && reading.measuredAt <= to)
    .filter(({ isChanged, stood, mark }) => isChanged || stood !== mark)
  const leaves = toSettle.filter(({ stood }) => stood !== undefined)
  await remove('readings', sensorId, leaves.filter(({ stood, mark }) => stood === null && mark !== null).map(instantOf))
  await remove('set_aside_readings', sensorId, leaves.filter(({ stood }) => stood !== null).map(instantOf))
  await writeReadings(
    sensorId,
    toSettle.filter(({ mark }) => mark === null).map(({ reading }) => reading),
    how,
  )
  await setAside(
    sensorId,
    toSettle.flatMap(({ reading, mark }) => (mark === null ? [] : [{ ...reading, reason: mark }])),
  )
  await rewriteHours(sensorId, toSettle.filter(({ stood, mark }) => stood === null || mark === null).map(instantOf), now)
}

const instantOf = ({ reading }: Entry) => reading.measuredAt

async function remove(table: 'readings' | 'set_aside_readings', sensorId: number, instants: readonly number[]): Promise<void> {
  if (instants.length === 0) return
  await database.query(
    `DELETE FROM ${table} WHERE sensor_id = :sensorId AND measured_at IN (SELECT value FROM json_each(:instants))
      ${table === 'set_aside_readings' ? "AND reason <> 'out of range'" : ''}`,
    { type: QueryTypes.DELETE, replacements: { sensorId, instants: JSON.stringify(instants) } },
  )
}

async function setAside(sensorId: number, rows: readonly (Told & { reason: SetAsideReason })[]): Promise<void> {
  if (rows.length === 0) return
  const values = rows.map((row) => [
    row.measuredAt,
    row.reason,
    row.airTempC,
    row.relHumidityPct,
    row.pressurePa,
    row.altitudePressurePa,
    row.source,
    row.enteredBy,
    row.receivedAt,
  ])
  await database.query(
    `INSERT INTO set_aside_readings (sensor_id, measured_at, reason, air_temp_c, rel_humidity_pct, pressure_pa, altitude_pressure_pa, source, entered_by, received_at)
     SELECT :sensorId, value ->> 0, value ->> 1, value ->> 2, value ->> 3, value ->> 4, value ->> 5, value ->> 6, value ->> 7, value ->> 8
       FROM json_each(:values) WHERE true
     ON CONFLICT (sensor_id, measured_at, reason) DO UPDATE SET
       air_temp_c = excluded.air_temp_c, rel_humidity_pct = excluded.rel_humidity_pct, pressure_pa = excluded.pressure_pa,
       altitude_pressure_pa = excluded.altitude_pressure_pa, source = excluded.source, entered_by = excluded.entered_by, received_at = excluded.received_at`,
    { type: QueryTypes.INSERT, replacements: { sensorId, values: JSON.stringify(values) } },
  )
}

/** @returns how many of them were not known. */
async function addOutOfRange(sensorId: number, rows: readonly Told[]): Promise<number> {
  if (rows.length === 0) return 0
  const known = new Map((await loadOutOfRange(sensorId, rows)).map((reading) => [reading.measuredAt, reading]))
  const standing = rows.filter((row) => {
    const before = known.get(row.measuredAt)
    return !before || standsBefore(before, row)
  })
  await setAside(
    sensorId,
    standing.map((row) => ({ ...row, reason: 'out of range' as const })),
  )
  return rows.filter(({ measuredAt }) => !known.has(measuredAt)).length
}

type OutOfRange = Air & { measuredAt: number; source: ReadingSource; pressurePa: number | null }

function loadOutOfRange(sensorId: number, rows: readonly { measuredAt: number }[]): Promise<OutOfRange[]> {
  return database.query<OutOfRange>(
    `SELECT measured_at AS measuredAt, air_temp_c AS airTempC, rel_humidity_pct AS relHumidityPct, source, pressure_pa AS pressurePa
       FROM set_aside_readings
      WHERE sensor_id = :sensorId AND measured_at IN (SELECT value FROM json_each(:instants)) AND reason = 'out of range'`,
    { type: QueryTypes.SELECT, replacements: { sensorId, instants: JSON.stringify(rows.map(({ measuredAt }) => measuredAt)) } },
  )
}

/** Why each row does not count, as things stand now; null where it does. */
async function marksOf(sensorId: number, rows: readonly Row[]): Promise<(SetAsideReason | null)[]> {
  if (rows.length === 0) return []
  const marked = await database.query<{ measuredAt: number; reason: 'jump' | 'flat' }>(
    `SELECT measured_at AS measuredAt, reason FROM set_aside_readings
      WHERE sensor_id = :sensorId AND measured_at IN (SELECT value FROM json_each(:instants)) AND reason <> 'out of range'`,
    { type: QueryTypes.SELECT, replacements: { sensorId, instants: JSON.stringify(rows.map(({ measuredAt }) => measuredAt)) } },
  )
  const reasonAt = new Map(marked.map(({ measuredAt, reason }) => [measuredAt, reason]))
  return rows.map((row) => (isWithinRange(row) ? (reasonAt.get(row.measuredAt) ?? null) : 'out of range'))
}
