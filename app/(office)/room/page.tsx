import type { Metadata } from 'next'
import Link from 'next/link'
import { Icon } from '@/app/_components/icons'
import { KeyLink } from '@/app/_components/key'
import { EmptyState } from '@/app/(office)/_components/empty-state'
import { KeepFresh } from '@/app/(office)/_components/keep-fresh'
import { BandFold } from '@/app/(office)/room/_components/band-fold'
import { CoatWhatIf } from '@/app/(office)/room/_components/coat-what-if'
import { RangeLinks, roomHref } from '@/app/(office)/room/_components/range-links'
import { RoomWhatIf } from '@/app/(office)/room/_components/room-what-if'
import { AirFolds } from '@/app/(office)/room/_components/air-folds'
import type { Frame } from '@/app/(office)/room/_components/chart-frame'
import { DriedFold } from '@/app/(office)/room/_components/dried-coats'
import { EffectTable } from '@/app/(office)/room/_components/effect-table'
import { FansNow } from '@/app/(office)/room/_components/fans-now'
import { Fold } from '@/app/(office)/room/_components/fold'
import { PointTable } from '@/app/(office)/room/_components/point-table'
import { ReadingForm } from '@/app/(office)/room/_components/reading-form'
import { Ribbon } from '@/app/(office)/room/_components/ribbon'
import { RangeForm } from '@/app/(office)/room/_components/range-form'
import { systemClock } from '@/lib/core/clock'
import { localDay } from '@/lib/format/local-time'
import { TIMES_NOT_CALIBRATED } from '@/lib/format/time-pair'
import { formatPercent, formatPressure, formatShare, formatTemperature, wholeNumber, type TempUnit } from '@/lib/format/units'
import { readingAge } from '@/lib/floor/strip'
import { may } from '@/lib/members/roles'
import { loadRoomPage } from '@/lib/queries/room'
import type { QueueRoom } from '@/lib/queue/contract'
import { RANGE_NAMES, rangeOf, type RoomRange } from '@/lib/room/range'
import { PULL_WORDS } from '@/lib/room/drying-pull'
import type { RoomPage } from '@/lib/room/room-contract'
import { isBatteryLow } from '@/lib/room/sensor-warnings'
import { roughDuration } from '@/lib/format/duration'
import type { ShiftSpeed } from '@/lib/room/shift-speeds'
import { requireMemberPage } from '@/lib/server/auth'
import './room.css'
import './sensor-note.css'

export const metadata: Metadata = { title: 'Room' }

/** More rows than this stand in a fold: what loses most is at the head. */
const FIRST_ROWS = 10

const RANGE_POINTS: Record<RoomRange, string> = { '48h': 'hour by hour', '14d': 'hour by hour', '1y': 'day by day' }
const RANGE_KEYS: Record<RoomRange, string> = { '48h': 'These 48 hours', '14d': 'These 14 days', '1y': 'This year' }

export default async function RoomPageView({ searchParams }: PageProps<'/room'>) {
  const member = await requireMemberPage('see', '/room')
  const { sensor, range: rangeWord } = await searchParams
  const sensorId = typeof sensor === 'string' && /^\d{1,9}$/.test(sensor) ? Number(sensor) : null
  const tempUnit = member.units.temp
  const page = await loadRoomPage({ sensorId, range: rangeOf(rangeWord), tempUnit, clock: systemClock })
  const { now, timeZone, room, rows, things, headline, range } = page

  if (room === null) {
    return (
      <>
        <div className="page-head">
          <h1>{headline.title}</h1>
        </div>
        <EmptyState
          title="No sensor, no hygrometer"
          action={
            may(member.role, 'sensors') ? (
              <KeyLink href="/settings/sensors" tone="go" icon="plus">
                Add a sensor
              </KeyLink>
            ) : undefined
          }
        >
          What tonight takes from each tree, how fast the room dries, and its temperature and humidity will stand here. {headline.line}
        </EmptyState>
      </>
    )
  }

  const frame: Frame = { range, from: page.from, to: page.to, now, timeZone, closed: page.closed }
  const longestMs = Math.max(3_600_000, ...rows.map((row) => row.lostMs ?? 0))
  const table = { longestMs, dryerPct: page.dryerPct, now, timeZone }
  const csv = `/api/v1/rooms/${room.sensorId}/climate.csv`
  const drawn = new URLSearchParams({
    ...(range === '48h' ? {} : { range }),
    ...(tempUnit === 'degF' ? { temp: tempUnit } : {}),
  }).toString()

  return (
    <>
      <KeepFresh />
      <div className="page-head room-head">
        <h1>{headline.title}</h1>
        <p>
          {headline.line}
          {page.dryerPct !== null && (
            <b className="text-verdigris-ink">
              {' '}
              Air dried to {page.dryerPct} % gives {roughDuration(page.wonBackMs)} back.
            </b>
          )}
        </p>
      </div>

      {page.placesNow.length > 0 && <FansNow places={page.placesNow} maySwitch={may(member.role, 'fans')} now={now} timeZone={timeZone} />}

      <section className="plate">
        <header>
          <h2>What it does to each tree</h2>
          {rows.some((row) => row.tree.isUncalibrated) && (
            <p>
              {may(member.role, 'calibrate') ? (
                <Link className="underline underline-offset-4" href="/calibration" prefetch={false}>
                  {TIMES_NOT_CALIBRATED}
                </Link>
              ) : (
                TIMES_NOT_CALIBRATED
              )}
            </p>
          )}
          <p className="effect-key">
            <span>
              <i className="key-lost" aria-hidden="true" /> hours lost against the recipe’s room, at the tree’s own place
            </span>
            {page.dryerPct !== null && (
              <span>
                <i className="key-won" aria-hidden="true" /> of these, won back by the dryer
              </span>
            )}
          </p>
        </header>
        {rows.length === 0 ? (
          <p className="plate-body text-soot">No coat is drying. The next dip will stand here with its times.</p>
        ) : (
          <div className="scroll-x">
            <EffectTable rows={rows.slice(0, FIRST_ROWS)} {...table} />
            {rows.length > FIRST_ROWS && (
              <details className="fold">
                <summary>{rows.length - FIRST_ROWS} more, which lose less or have no reading</summary>
                <EffectTable rows={rows.slice(FIRST_ROWS)} {...table} />
              </details>
            )}
          </div>
        )}
        {things.length > 0 && (
          <ol className="things">
            {things.map((thing, index) => (
              <li key={thing.title}>
                <span className="num thing-number" aria-hidden="true">
                  {index + 1}
                </span>
                <div>
                  <h3>{thing.title}</h3>
                  <p>{thing.text}</p>
                </div>
              </li>
            ))}
          </ol>
        )}
      </section>

      {page.rooms.length > 1 && (
        <nav className="room-picker" aria-label="Whose air is drawn">
          {page.rooms.map((other) => (
            <Link
              key={other.sensorId}
              className="group-link"
              href={roomHref(other.sensorId, range)}
              prefetch={false}
              scroll={false}
              aria-current={other.sensorId === room.sensorId ? 'true' : undefined}
            >
              {other.sensorName} <span className="num">{other.isStale ? 'silent' : formatPercent(other.speedPct)}</span>
            </Link>
          ))}
        </nav>
      )}

      <section className="plate">
        <header>
          <h2>What if</h2>
          <p>Another air for {room.sensorName} from now on: what it does to every tree. Nothing is changed by it.</p>
        </header>
        <div className="plate-body">
          <RoomWhatIf
            key={room.sensorId}
            sensorId={room.sensorId}
            air={{
              airTempC: room.airTempC ?? 21,
              relHumidityPct: Math.round(room.relHumidityPct ?? 50),
              airSpeedMps: page.places[0]?.airSpeedMps ?? 1,
            }}
            places={page.places}
            closesAt={page.closesAt}
            opensAt={page.opensAt}
            now={now}
            timeZone={timeZone}
            tempUnit={tempUnit}
          />
        </div>
      </section>

      <section className="plate">
        <header>
          <h2>Fast and slow, {RANGE_NAMES[range]}</h2>
          <p>
            {room.sensorName}. Thick dries fast, thin and lined dries slowly; recipe speed is {formatTemperature(21, tempUnit)}, 50 % RH,
            1.0 m/s
            {range === '48h' && '; pale edge: how far the forecast may be off'}
            {range !== '1y' && '; shaded: closed'}
            {range === '14d' && '; one point an hour'}
            {range === '1y' && '; one point a day, its mean'}
          </p>
          <RangeLinks sensorId={room.sensorId} range={range} />
        </header>
        <div className="plate-body">
          {page.points.length === 0 ? (
            <p className="text-soot">{room.sensorName} has not been read yet.</p>
          ) : (
            <Ribbon frame={frame} points={page.points} nowPct={room.isStale ? null : room.speedPct} />
          )}
        </div>
      </section>

      <section className="plate folds">
        {page.points.length > 0 && <AirFolds page={page} room={room} frame={frame} tempUnit={tempUnit} />}
        <Fold title="Sensors" line={<SensorsLine rooms={page.rooms} now={now} timeZone={timeZone} />}>
          <SensorList rooms={page.rooms} notes={page.notes} now={now} timeZone={timeZone} tempUnit={tempUnit} />
          {may(member.role, 'sensors') && (
            <p className="fold-key">
              <KeyLink href={`/room/upload?sensor=${room.sensorId}`}>Readings from a file</KeyLink>
            </p>
          )}
          {may(member.role, 'read') && (
            <>
              <h3 className="fold-title">Type a reading</h3>
              <ReadingForm
                sensors={page.rooms.map((other) => ({ id: other.sensorId, name: other.sensorName }))}
                chosenId={(page.rooms.find((other) => other.isTypedOnly) ?? room).sensorId}
                tempUnit={tempUnit}
              />
            </>
          )}
        </Fold>
        {page.shiftSpeeds.length > 0 && (
          <Fold title="Speed by shift" line={page.shiftSpeeds.map(shiftWords).join(', ')}>
            <ul className="shift-speeds">
              {page.shiftSpeeds.map((shift) => (
                <li key={shift.from}>
                  <span>{shift.name}</span>
                  <span className="shift-bar" aria-hidden="true">
                    <span style={{ width: `${Math.min(100, (shift.speed ?? 0) * 80).toFixed(1)}%` }} data-when={shift.when} />
                  </span>
                  <span className="num">{shift.speed === null ? 'not known' : formatShare(shift.speed)}</span>
                  <span className="text-soot">
                    {shift.when === 'forecast' ? 'forecast' : shift.when === 'now' ? 'with its forecast' : ''}
                  </span>
                </li>
              ))}
            </ul>
          </Fold>
        )}
        <BandFold page={page} sensorId={room.sensorId} tempUnit={tempUnit} />
        <DriedFold page={page} />
        <Fold title="One coat by itself" line="dipped now, in a steady air of your own: how long it would take">
          <CoatWhatIf
            start={{
              airTempC: room.airTempC ?? 21,
              relHumidityPct: Math.round(room.relHumidityPct ?? 50),
              airSpeedMps: page.places[0]?.airSpeedMps ?? 1,
              referenceHours: 4,
              isFaceCoat: false,
            }}
            room={{
              pressurePa: page.pressurePa,
              airTempNowC: room.isStale ? null : room.airTempC,
              coolestCoat1C: page.coolestCoat1C,
            }}
            tempUnit={tempUnit}
            places={page.places}
          />
        </Fold>
        <Fold title="As a table, as a file" line={`what is drawn here, ${RANGE_POINTS[range]}; or up to 31 days`}>
          <div className="file-keys">
            <a className="key" href={drawn === '' ? csv : `${csv}?${drawn}`} download>
              <Icon name="down" />
              {RANGE_KEYS[range]}
            </a>
            <RangeForm action={csv} tempUnit={tempUnit} today={localDay(now, timeZone)} />
          </div>
          <PointTable points={page.points} now={now} timeZone={timeZone} tempUnit={tempUnit} />
        </Fold>
      </section>
    </>
  )
}

function shiftWords({ name, speed, when }: ShiftSpeed): string {
  return `${name} ${speed === null ? 'not known' : formatShare(speed)}${when === 'forecast' ? ' forecast' : ''}`
}

function SensorsLine({ rooms, now, timeZone }: { rooms: readonly QueueRoom[]; now: number; timeZone: string }) {
  const silent = rooms.filter((room) => room.isStale || room.measuredAt === null)
  const good = rooms.filter((room) => !silent.includes(room))
  return (
    <>
      {good.length > 0 && <>{good.map((room) => room.sensorName).join(', ')} good</>}
      {silent.map((room) => (
        <b key={room.sensorId} className="text-ochre-ink">
          {' '}
          <Icon name="warning" /> {room.sensorName}: {readingAge(room, now, timeZone)}
        </b>
      ))}
    </>
  )
}

function SensorList({
  rooms,
  notes,
  now,
  timeZone,
  tempUnit,
}: {
  rooms: readonly QueueRoom[]
  notes: RoomPage['notes']
  now: number
  timeZone: string
  tempUnit: TempUnit
}) {
  return (
    <ul className="sensor-list">
      {rooms.map((room) => (
        <li key={room.sensorId}>
          <b>{room.sensorName}</b>
          <span>
            {room.airTempC === null
              ? 'no reading yet'
              : `${formatTemperature(room.airTempC, tempUnit)}, ${wholeNumber(room.relHumidityPct ?? 0)} % RH, ${readingAge(room, now, timeZone)}`}
          </span>
          <span className={room.pull === 'not known' ? 'text-ochre-ink' : ''}>
            {room.pull === 'not known' ? 'its trees are unknown' : `${PULL_WORDS[room.pull]}, ${formatPercent(room.speedPct)}`}
          </span>
          <span className="text-soot">{room.isTypedOnly ? 'read by people' : room.source === 'typed' ? 'last one typed' : 'logger'}</span>
          <SensorNoteWords note={notes.find(({ sensorId }) => sensorId === room.sensorId)} />
        </li>
      ))}
    </ul>
  )
}

function SensorNoteWords({ note }: { note: RoomPage['notes'][number] | undefined }) {
  if (!note || (note.pressurePa === null && note.batteryPct === null)) return null
  const isLow = isBatteryLow(note.batteryPct)
  return (
    <span className="sensor-note">
      {note.pressurePa !== null && <span>barometer {formatPressure(note.pressurePa)}</span>}
      {note.batteryPct !== null && (
        <span className={isLow ? 'text-ochre-ink' : 'text-soot'}>
          {isLow && <Icon name="warning" />} battery {formatPercent(note.batteryPct)}
          {isLow && ': change it'}
        </span>
      )}
    </span>
  )
}
