import Link from 'next/link'
import { Icon } from '@/app/_components/icons'
import { formatDuration, formatReadAge } from '@/lib/format/duration'
import { formatPercent, formatPressure, formatTemperature, type Units } from '@/lib/format/units'
import type { SensorRow } from '@/lib/queries/sensor-list'
import { sensorWarnings } from '@/lib/room/sensor-warnings'
import '@/app/(office)/settings/sensors/sensors.css'

/** The moment and manner in which this member reads the page. */
export type SensorReader = { now: number; timeZone: string; units: Units }

/** What is to be looked at with a sensor; nothing where all is well. */
export function SensorWarnings({ sensor, reading }: { sensor: SensorRow; reading: SensorReader }) {
  const state = { ...sensor, newestAt: sensor.newest?.measuredAt ?? null, placeCount: sensor.places.length }
  const warnings = sensorWarnings(state, reading)
  if (warnings.length === 0) return null
  return (
    <ul className="sensor-warnings">
      {warnings.map((warning) => (
        <li key={warning}>
          <Icon name="warning" /> {warning}
        </li>
      ))}
    </ul>
  )
}

/** What is known of a sensor, and what it serves. */
export function SensorWords({ sensor, reading: { now, units } }: { sensor: SensorRow; reading: SensorReader }) {
  const { newest, places, batteryPct, batteryAt } = sensor
  return (
    <dl className="facts">
      <div>
        <dt>Newest reading</dt>
        <dd>
          {newest === null
            ? 'none yet'
            : `${formatTemperature(newest.airTempC, units.temp)}, ${formatPercent(newest.relHumidityPct)}, ${formatReadAge(newest.measuredAt, now)}`}
        </dd>
      </div>
      {newest !== null && newest.pressurePa !== null && (
        <div>
          <dt>Barometer</dt>
          <dd>{formatPressure(newest.pressurePa)}, in place of the altitude</dd>
        </div>
      )}
      {batteryPct !== null && (
        <div>
          <dt>Battery</dt>
          <dd>
            {formatPercent(batteryPct)}
            {batteryAt !== null && now - batteryAt > 3_600_000 && `, told ${formatDuration(now - batteryAt)} ago`}
          </dd>
        </div>
      )}
      <div>
        <dt>Serves</dt>
        <dd className="sensor-places">
          {places.length === 0
            ? 'no place: nothing dries by it'
            : places.map((name, index) => (
                <span key={name}>
                  {index > 0 && ', '}
                  <Link href="/settings/places" prefetch={false}>
                    {name}
                  </Link>
                </span>
              ))}
        </dd>
      </div>
    </dl>
  )
}
