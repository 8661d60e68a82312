import { Fold } from '@/app/(office)/room/_components/fold'
import { roughDuration } from '@/lib/format/duration'
import { formatDate } from '@/lib/format/local-time'
import { formatTemperature, wholeNumber, type TempUnit } from '@/lib/format/units'
import type { BandHours } from '@/lib/room/out-of-band'
import { RANGE_NAMES } from '@/lib/room/range'
import type { RoomPage } from '@/lib/room/room-contract'

/** Under this nobody would notice. */
const LEAST_MS = 150_000

const duration = (ms: number) => (ms < LEAST_MS ? 'none' : roughDuration(ms))

/** How long each room lay outside the foundry's band, and how long nobody read it. */
export function BandFold({ page, sensorId, tempUnit }: { page: RoomPage; sensorId: number; tempUnit: TempUnit }) {
  const { bandTable, band, timeZone, range } = page
  const shown = bandTable.rooms.find((room) => room.sensorId === sensorId)
  const heads = [
    'Today',
    `Since ${formatDate(bandTable.monday, timeZone)}`,
    ...(bandTable.hasRange ? [upperFirst(RANGE_NAMES[range])] : []),
  ]
  return (
    <Fold title="Hours out of band" line={lineOf(shown)}>
      <p className="text-soot">
        Band: {formatTemperature(band.lowTempC, tempUnit)} to {formatTemperature(band.highTempC, tempUnit)}, {wholeNumber(band.lowRhPct)} to{' '}
        {wholeNumber(band.highRhPct)} % RH. Each bar is the time that has gone by.
      </p>
      <ul className="band-rooms">
        {bandTable.rooms.map((room) => (
          <li key={room.sensorId}>
            <h3>{room.sensorName}</h3>
            <div className="band-spans">
              {[room.today, room.week, ...(bandTable.hasRange ? [room.range] : [])].map((hours, index) => (
                <div key={heads[index]} className="band-span">
                  <h4>{heads[index]}</h4>
                  {hours === null ? <p className="text-soot">never read</p> : <Bars hours={hours} />}
                </div>
              ))}
            </div>
          </li>
        ))}
      </ul>
    </Fold>
  )
}

function Bars({ hours }: { hours: BandHours }) {
  const rows = [
    { name: 'Temperature out', ms: hours.outOfTempMs, look: 'wax' },
    { name: 'Humidity out', ms: hours.outOfRhMs, look: 'wet' },
    { name: 'No readings', ms: hours.unreadMs, look: 'open' },
  ]
  return (
    <dl className="band-bars">
      {rows.map(({ name, ms, look }) => (
        <div key={name}>
          <dt>{name}</dt>
          <dd>
            <span className="band-bar" aria-hidden="true">
              <span
                data-look={look}
                style={{ width: `${hours.elapsedMs === 0 ? 0 : Math.min(100, (ms / hours.elapsedMs) * 100).toFixed(2)}%` }}
              />
            </span>
            <span className="num">{duration(ms)}</span>
          </dd>
        </div>
      ))}
      <p className="text-soot">of {roughDuration(hours.elapsedMs)}</p>
    </dl>
  )
}

function lineOf(room: RoomPage['bandTable']['rooms'][number] | undefined): string {
  if (!room || room.today === null || room.week === null) return 'not read yet'
  return `${room.sensorName}: today ${outWords(room.today)}; this week ${outWords(room.week)}`
}

function outWords({ outOfTempMs, outOfRhMs, unreadMs }: BandHours): string {
  const parts = [
    { name: 'temperature', ms: outOfTempMs },
    { name: 'humidity', ms: outOfRhMs },
    { name: 'no readings', ms: unreadMs },
  ].filter(({ ms }) => ms >= LEAST_MS)
  return parts.length === 0 ? 'none' : parts.map(({ name, ms }) => `${name} ${roughDuration(ms)}`).join(', ')
}

const upperFirst = (words: string) => words.replace(/^./, (first) => first.toUpperCase())
