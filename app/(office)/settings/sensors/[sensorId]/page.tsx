import type { Metadata } from 'next'
import Link from 'next/link'
import { notFound } from 'next/navigation'
import { DemoMark } from '@/app/_components/demo-mark'
import { Plate } from '@/app/_components/plate'
import { FoundryNav } from '@/app/(office)/_components/foundry-nav'
import { KeepFresh } from '@/app/(office)/_components/keep-fresh'
import { ActForm } from '@/app/(office)/settings/_components/act-form'
import { SensorWarnings, SensorWords } from '@/app/(office)/settings/sensors/_components/sensor-words'
import { DeviceForm } from '@/app/(office)/settings/sensors/[sensorId]/_components/device-form'
import { OffsetForm } from '@/app/(office)/settings/sensors/[sensorId]/_components/offset-form'
import { removeOffsetAction } from '@/app/(office)/settings/sensors/actions'
import '@/app/(office)/settings/settings.css'
import { systemClock } from '@/lib/core/clock'
import { env } from '@/lib/core/env'
import { formatMoment } from '@/lib/format/local-time'
import { formatTemperature, oneDecimal, type TempUnit } from '@/lib/format/units'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { loadSensorDetail, type DeviceLine, type MarkedReading, type OffsetLine } from '@/lib/queries/sensor-detail'
import { REASON_SENTENCES } from '@/lib/room/reading-marks'
import { offsetAt, offsetWords } from '@/lib/room/sensor-offsets'
import { requireMemberPage } from '@/lib/server/auth'

export const metadata: Metadata = { title: 'Sensor' }

/** The others stand in a fold. */
const FIRST_MARKED = 10

type When = (at: number) => string

/** One sensor: what is to be looked at, its offsets, its devices, and what it sent that does not count. */
export default async function SensorPage({ params }: PageProps<'/settings/sensors/[sensorId]'>) {
  const { sensorId } = await params
  if (!/^\d{1,9}$/.test(sensorId)) notFound()
  const member = await requireMemberPage('sensors', `/settings/sensors/${sensorId}`)
  const [detail, { timeZone }] = await Promise.all([loadSensorDetail(Number(sensorId), { clock: systemClock }), loadFoundry()])
  if (!detail) notFound()
  const { sensor, marked, offsets, devices } = detail
  const now = systemClock.now()
  const { temp } = member.units
  const when: When = (at) => formatMoment(at, now, timeZone)
  const reading = { now, timeZone, units: member.units }
  const isInUse = sensor.retiredAt === null
  return (
    <>
      <FoundryNav role={member.role} />
      <KeepFresh />
      <div className="page-head">
        <div className="sensor-page-head">
          <h1>
            {sensor.name} {sensor.isDemo && <DemoMark />}
          </h1>
          <p>
            <Link href="/settings/sensors" prefetch={false}>
              All sensors
            </Link>
            {!isInUse && '. Retired.'}
          </p>
        </div>
      </div>
      <div className="sensor-page">
        <Plate title="Now">
          <SensorWarnings sensor={sensor} reading={reading} />
          <SensorWords sensor={sensor} reading={reading} />
        </Plate>
        <Plate title="Offset" line="what is added to each reading before it counts">
          <p>
            <b>Added now: {offsetWords(offsetAt(offsets, now) ?? { airTempOffsetK: 0, relHumidityOffsetPct: 0 }, temp)}.</b>{' '}
            {sensor.isCorrecting && 'Readings that were there already are being corrected; it takes some minutes.'}
          </p>
          <p>
            Hang the sensor for some hours beside a reference that you trust, out of draughts; or shut it into a box with a jar of wet table
            salt, over which the air comes to about 75 % RH. Enter what the reference says less what the sensor shows. What the device said
            is kept. Common practice.
          </p>
          {isInUse && <OffsetForm sensorId={sensor.id} tempUnit={temp} />}
          <OffsetLines offsets={offsets} tempUnit={temp} when={when} />
        </Plate>
        <Plate title="Device" line="which one hangs under this name">
          <DeviceLines devices={devices} when={when} />
          {isInUse && <DeviceForm sensor={sensor} address={new URL('/api/v1/readings', env().NEXTAUTH_URL).href} />}
        </Plate>
        <Plate title="Marked readings" line="kept as they came, and counted for nothing">
          <MarkedLines marked={marked} count={sensor.markedCount} tempUnit={temp} when={when} />
        </Plate>
      </div>
    </>
  )
}

function OffsetLines({ offsets, tempUnit, when }: { offsets: readonly OffsetLine[]; tempUnit: TempUnit; when: When }) {
  if (offsets.length === 0) return null
  return (
    <ul className="sensor-lines">
      {offsets.map((offset) => (
        <li key={offset.id}>
          <span>
            From {when(offset.since)}: <b>{offsetWords(offset, tempUnit)}</b>
            {offset.note !== '' && `. ${offset.note}`}
            {offset.by !== null && `. ${offset.by}, ${when(offset.enteredAt)}`}
          </span>
          <ActForm isHeldKey action={removeOffsetAction.bind(null, offset.id)} label={`Take away the offset from ${when(offset.since)}`}>
            Hold to take it away
          </ActForm>
        </li>
      ))}
    </ul>
  )
}

function DeviceLines({ devices, when }: { devices: readonly DeviceLine[]; when: When }) {
  if (devices.length === 0) return <p>The first one. When another takes over, its serial number and the day stand here.</p>
  return (
    <ul className="sensor-lines">
      {devices.map((device) => (
        <li key={device.id}>
          <span>
            Since {when(device.since)}: <b>{device.serial === '' ? 'no serial number' : device.serial}</b>
            {device.note !== '' && `. ${device.note}`}
            {device.by !== null && `. ${device.by}`}
          </span>
        </li>
      ))}
    </ul>
  )
}

function MarkedLines({
  marked,
  count,
  tempUnit,
  when,
}: {
  marked: readonly MarkedReading[]
  count: number
  tempUnit: TempUnit
  when: When
}) {
  if (marked.length === 0) {
    return (
      <p>
        None. Air that no room has, a jump that is gone with the next reading, and a sensor that does not move for 6 hours would stand here.
      </p>
    )
  }
  const [first, rest] = [marked.slice(0, FIRST_MARKED), marked.slice(FIRST_MARKED)]
  return (
    <>
      <p>In the last 24 h: {count}.</p>
      <MarkedList marked={first} tempUnit={tempUnit} when={when} />
      {rest.length > 0 && (
        <details>
          <summary>{rest.length} before these</summary>
          <MarkedList marked={rest} tempUnit={tempUnit} when={when} />
        </details>
      )}
    </>
  )
}

function MarkedList({ marked, tempUnit, when }: { marked: readonly MarkedReading[]; tempUnit: TempUnit; when: When }) {
  return (
    <ul className="marked-readings">
      {marked.map(({ measuredAt, reason, airTempC, relHumidityPct, source }) => (
        <li key={`${measuredAt} ${reason}`}>
          <span className="num">{when(measuredAt)}</span>
          <span className="num">
            {formatTemperature(airTempC, tempUnit)}, {oneDecimal(relHumidityPct)} % RH
          </span>
          <span>
            {REASON_SENTENCES[reason]}
            {source === 'typed' && ' Typed.'}
          </span>
        </li>
      ))}
    </ul>
  )
}
